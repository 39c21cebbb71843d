/**
 * Lengths below which two things on the plan are at the same place, in nm. Coordinates are whole
 * nanometres up to 1e9, so differences carry at most 1e-7 nm of rounding in doubles and every
 * distance computed here is good to 1e-6 nm: one nanometre decides safely, and no process resolves it.
 */
export const TOUCH = 1;
