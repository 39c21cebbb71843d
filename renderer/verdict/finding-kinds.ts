/** Kinds of findings that say something about making the chip; all others are about trusting the numbers. */
export const BUILD_KINDS: ReadonlySet<string> = new Set(['least-width', 'least-gap', 'near-miss']);
