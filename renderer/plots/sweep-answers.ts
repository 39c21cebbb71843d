import type { Outcome } from '../solving/messages.ts';
import { peakShear } from '../verdict/cells.ts';

export interface SweptAnswers {
  /** Worst deviation from a target, as a share; null without targets. */
  readonly off: number | null;
  /** Pa */
  readonly shear: number | null;
  /** Highest less lowest port pressure, Pa. */
  readonly pressure: number | null;
}

/** The answers of one variant as numbers. */
export function answersOf(outcome: Outcome): SweptAnswers {
  if (!outcome.ok) return { off: null, shear: null, pressure: null };
  const { result } = outcome;
  const offs = result.targets.flatMap((target) =>
    target.got === null ? [] : [Math.abs(target.got / target.wanted - 1)],
  );
  const pressures = result.ports.map((port) => port.pressure);
  return {
    off: offs.length > 0 ? Math.max(...offs) : null,
    shear: peakShear(result)?.shear ?? null,
    pressure: pressures.length > 1 ? Math.max(...pressures) - Math.min(...pressures) : null,
  };
}
