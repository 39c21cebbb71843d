import type { Chip } from '../../solver/chip/chip.ts';
import { type ChipEdit, makeEdit } from '../../solver/chip/edit.ts';
import type { Outcome } from '../solving/messages.ts';
import type { Answer, Standing } from '../verdict/answer.ts';
import { peakShear } from '../verdict/cells.ts';
import { verdicts } from '../verdict/verdicts.ts';
import { shearBandAt } from '../words/band.ts';

export interface SweptAnswers {
  /** Worst deviation from a target, as a share; null without targets. */
  readonly off: number | null;
  /** Pa */
  readonly shear: number | null;
  /** How far they may be off, in the same terms; absent where it was not solved. */
  readonly bands?: { readonly off: number; readonly shear: number; readonly pressure: number };
  /** Highest less lowest port pressure, Pa. */
  readonly pressure: number | null;
}

/** One variant of a sweep. */
export interface Swept {
  /** SI, of what is swept. */
  readonly x: number;
  readonly outcome: Outcome;
  /** The five answers in their order. */
  readonly answers: readonly Answer[];
}

export function allAnswers(chip: Chip, edit: ChipEdit, outcome: Outcome): readonly Answer[] {
  return verdicts({
    chip: makeEdit(chip, edit).chip,
    result: outcome.ok ? outcome.result : null,
    trouble: outcome.ok ? '' : outcome.problem.what,
  });
}

/**
 * How an answer stands over a sweep, in words: "yes throughout", "no from 4 to 8 µL/min", "no up to 3 µL/min
 * and from 9 µL/min".
 */
export function standingWords(
  points: readonly { readonly x: number; readonly standing: Standing }[],
  says: (x: number) => string,
): string {
  const [first] = points;
  if (!first) return '';
  if (points.every(({ standing }) => standing === first.standing))
    return `${WORDS[first.standing]} throughout`;
  // the worst there is tells most
  const worst: Standing = points.some(({ standing }) => standing === 'no') ? 'no' : 'unknown';
  const runs: { from: number; to: number }[] = [];
  points.forEach(({ standing }, i) => {
    if (standing !== worst) return;
    const last = runs.at(-1);
    if (last && last.to === i - 1) last.to = i;
    else runs.push({ from: i, to: i });
  });
  const end = points.length - 1;
  const words = runs.map(({ from, to }) => {
    if (from === 0) return `up to ${says(points[to]!.x)}`;
    if (to === end) return `from ${says(points[from]!.x)}`;
    return from === to
      ? `at ${says(points[from]!.x)}`
      : `from ${says(points[from]!.x)} to ${says(points[to]!.x)}`;
  });
  return runs.length === 0 ? 'it changes' : `${WORDS[worst]} ${words.join(' and ')}`;
}

const WORDS: Readonly<Record<Standing, string>> = {
  yes: 'yes',
  no: 'no',
  unknown: 'not known',
  'not asked': 'not asked',
};

/** The answers of one variant as numbers. */
export function answersOf(outcome: Outcome): SweptAnswers {
  if (!outcome.ok) return { off: null, shear: null, pressure: null };
  const { result } = outcome;
  const offs = result.targets.flatMap((target) =>
    target.got === null ? [] : [Math.abs(target.got / target.wanted - 1)],
  );
  const pressures = result.ports.map((port) => port.pressure);
  const peak = peakShear(result);
  const drop = pressures.length > 1 ? Math.max(...pressures) - Math.min(...pressures) : null;
  return {
    off: offs.length > 0 ? Math.max(...offs) : null,
    shear: peak?.shear ?? null,
    pressure: drop,
    bands: {
      off: Math.max(0, ...result.targets.map(({ got, wanted, band = 0 }) => ((got ?? 0) / wanted) * band)),
      shear: peak ? peak.shear * (shearBandAt(result, peak.where) ?? 0) : 0,
      pressure: (drop ?? 0) * (result.bands?.pressure ?? 0),
    },
  };
}
