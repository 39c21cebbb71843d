import { FINDING_KINDS } from '../../solver/checks/kinds.ts';

/** Kinds of findings that say something about making the chip. */
export const BUILD_KINDS: ReadonlySet<string> = new Set(
  Object.entries(FINDING_KINDS).flatMap(([kind, { of }]) => (of === 'made' ? [kind] : [])),
);

/** Kinds about what stands behind the ports (report/pumps.ts, report/drift.ts); all others are about trust. */
export const PUMP_KINDS: ReadonlySet<string> = new Set([
  'pump-pressure',
  'pump-flow',
  'runs-out',
  'runs-dry',
  'burst',
]);
