import type { Limit } from '../../solver/chip/chip.ts';
import type { LimitResult, Result } from '../../solver/chip/result.ts';
import type { Kind } from '../../solver/chip/units.ts';
import { plusMinus, shearBandAt } from '../words/band.ts';
import { counted, figure } from '../words/figure.ts';
import { type Answer, type Evidence, type Margin, placeName, placeRef, strong, unsolved } from './answer.ts';

const QUESTION = 'Do the cells survive?';

/** The highest wall shear anywhere and where, or null where none is known. */
export function peakShear(result: Result): { readonly shear: number; readonly where: string } | null {
  let best: { shear: number; where: string } | null = null;
  const offer = (shear: number | null, where: string): void => {
    if (shear !== null && (!best || shear > best.shear)) best = { shear, where };
  };
  for (const { id, pieces } of result.channels)
    for (const [i, piece] of pieces.entries()) offer(piece.peakWallShear, `${id}#${i + 1}`);
  for (const cell of result.cells) offer(cell.peakWallShear, cell.id);
  return best;
}

/** What the number of a limit is: a stress, a share of a floor, a share of cells damaged, or a ratio. */
export function limitKind(limit: Limit | undefined): Kind {
  if (!limit || 'shear' in limit) return 'stress';
  return 'curve' in limit ? 'number' : 'share';
}

/** The limits against the worst that cells meet. */
export function cellsAnswer(evidence: Evidence): Answer {
  const { result, chip } = evidence;
  if (!result) return unsolved(QUESTION, evidence);
  if (chip.limits.length === 0) return noLimit(result, evidence);
  const limits = chip.limits.map((limit) => ({
    limit,
    kind: limitKind(limit),
    judged: result.limits.find((entry) => entry.name === limit.name),
  }));
  const missed = limits.filter(({ judged }) => judged?.met === false);
  const open = limits.find(({ judged }) => judged?.met !== true && judged?.met !== false);
  const worst = (missed.length > 0 ? missed : limits).reduce((a, b) =>
    strain(b.judged, b.limit) > strain(a.judged, a.limit) ? b : a,
  );
  const { judged, kind, limit } = missed.length === 0 && open ? open : worst;
  const margin = judged ? bar(judged, kind) : null;
  const where = judged?.where ?? '';
  const culprit = placeRef(where, chip);
  const bound = judged?.limit ?? null;
  if (missed.length > 0) {
    const others = missed.length - 1;
    return {
      question: QUESTION,
      standing: 'no',
      says: [
        'No: ',
        strong(figure(judged!.worst, kind, { digits: 3 })),
        `${plusMinus(judged!.band)} in ${placeName(where)}; ${limit.name}: ${'floor' in limit ? 'at least' : 'at most'} ${figure(bound, kind, { digits: 3 })}`,
        others > 0 ? `, and ${counted(others, 'more limit', 'more limits')} missed.` : '.',
      ],
      margin,
      culprit,
    };
  }
  if (open)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: [`Not known: ${limit.name} could not be judged${where ? ` in ${placeName(where)}` : ''}.`],
      margin: null,
      culprit,
    };
  return {
    question: QUESTION,
    standing: 'yes',
    says: [
      `Yes: ${'floor' in limit ? 'at least' : 'at most'} `,
      strong(figure(judged!.worst, kind, { digits: 3 })),
      `${plusMinus(judged!.band)} in ${placeName(where)}; ${limit.name} ${'floor' in limit ? 'need' : 'bear'} ${figure(bound, kind, { digits: 3 })}.`,
    ],
    margin,
    culprit,
  };
}

function noLimit(result: Result, { chip }: Evidence): Answer {
  const peak = peakShear(result);
  return {
    question: QUESTION,
    standing: 'not asked',
    says: peak
      ? [
          'No limit is given; the highest wall shear is ',
          strong(figure(peak.shear, 'stress', { digits: 3 })),
          `${plusMinus(shearBandAt(result, peak.where))}, in ${placeName(peak.where)}.`,
        ]
      : ['No limit is given.'],
    margin: null,
    culprit: peak ? placeRef(peak.where, chip) : null,
  };
}

/** How near a limit is to being missed; above 1 it is. */
function strain(judged: LimitResult | undefined, limit: Limit): number {
  if (judged?.worst == null || judged.limit == null) return -1;
  return 'floor' in limit ? judged.limit / judged.worst : judged.worst / judged.limit;
}

function bar({ limit, worst, met }: LimitResult, kind: Kind): Margin | null {
  if (limit === null || worst === null || !(limit > 0)) return null;
  const end = Math.max(limit, worst) * (worst > limit ? 1 : 1.25);
  return {
    kind: 'bar',
    filled: worst / end,
    limit: limit / end,
    over: met === false,
    labels: [
      { at: 0, text: '0' },
      { at: limit / end, text: figure(limit, kind, { digits: 3 }) },
    ],
  };
}
