import { FINDING_KINDS } from '../../solver/checks/kinds.ts';

/** Kinds of findings that say something about making the chip; all others are about trusting the numbers. */
export const BUILD_KINDS: ReadonlySet<string> = new Set(
  Object.entries(FINDING_KINDS).flatMap(([kind, { of }]) => (of === 'made' ? [kind] : [])),
);
