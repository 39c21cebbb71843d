import type { Making } from '../chip/result.ts';
import type { Source } from './sources.ts';

/** Shares of a millionth are round-off, and of no use to anybody. */
const LEAST = 1e-6;

/**
 * What sources do together to a figure, each with its tolerance used up: all against one, and the root of the sum
 * of their squares, which is as likely to hold as the tolerances are (independent errors, to first order).
 *
 * @param by relative change by source s
 */
export function bandOf(by: (s: number) => number, sources: readonly Source[]): Making {
  let [worst, squares, most, chief] = [0, 0, 0, -1];
  for (let s = 0; s < sources.length; s += 1) {
    const size = Math.abs(by(s));
    worst += size;
    squares += size * size;
    if (size > most) {
      most = size;
      chief = s;
    }
  }
  if (worst < LEAST || chief < 0) return { worst: 0, likely: 0 };
  return {
    worst,
    likely: Math.sqrt(squares),
    chief: { ...sources[chief], part: (most * most) / squares },
  };
}

/** The larger of two, by what is likely. */
export const widerOf = (a: Making | null, b: Making | null): Making | null =>
  !a ? b : !b ? a : b.likely > a.likely ? b : a;
