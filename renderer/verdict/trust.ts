import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { Result } from '../../solver/chip/result.ts';
import { capital, counted, figure, number } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';
import { type Answer, type Evidence, placeRef, strong, unsolved } from './answer.ts';
import { BUILD_KINDS, PUMP_KINDS } from './finding-kinds.ts';

const QUESTION = 'Can I trust it?';

/** Relative error that the solver states for its worst part: what is said where no band is known. */
export function statedError(result: Result): number {
  let worst = 0;
  // a junction that counts as ideal has no error of its own: that it is ideal is said instead
  for (const cell of result.cells) if (cell.accuracy < 1) worst = Math.max(worst, cell.accuracy);
  for (const channel of result.channels)
    for (const piece of channel.pieces) worst = Math.max(worst, piece.accuracy ?? 0);
  return worst;
}

export function highestReynolds(result: Result): { readonly value: number; readonly where: string } | null {
  let best: { value: number; where: string } | null = null;
  for (const channel of result.channels)
    for (const [i, piece] of channel.pieces.entries())
      if (piece.reynolds !== null && (!best || piece.reynolds > best.value))
        best = { value: piece.reynolds, where: `${channel.id}#${i + 1}` };
  return best;
}

/** Names of what is solved in space, as they are told: a via joins channels, a port's hole ends them. */
const PLACES = [
  ['junction', ['junction', 'via']],
  ['chamber', ['chamber']],
  ['bend', ['bend']],
  ['step', ['step']],
  ['hole', ['port']],
] as const;

/** "one junction", "14 junctions, bends and holes": what was solved in space; "" where nothing was. */
function solvedPlaces({ cells }: Result): string {
  const solved = cells.filter(({ accuracy }) => accuracy < 1);
  const met = new Set(solved.map(({ kind }) => kind));
  const names = PLACES.flatMap(([name, kinds]) => (kinds.some((kind) => met.has(kind)) ? [name] : []));
  const [first = 'junction', ...others] = names;
  if (solved.length === 0) return '';
  const last = others.pop();
  const listed = [counted(solved.length, first), ...others.map((name) => `${name}s`)].join(', ');
  return last === undefined ? listed : `${listed} and ${last}s`;
}

/** The stated error, what is still taken as ideal, and the Reynolds number that creeping flow rests on. */
export function trustAnswer(evidence: Evidence): Answer {
  const { result, chip } = evidence;
  if (!result) return unsolved(QUESTION, evidence);
  const { bands } = result;
  const error = bands?.share ?? statedError(result);
  const reynolds = highestReynolds(result);
  const doubts = result.findings.filter(
    ({ kind, severity, accepted }) =>
      severity !== 'note' && accepted === undefined && !BUILD_KINDS.has(kind) && !PUMP_KINDS.has(kind),
  );
  const flow: string = reynolds
    ? `Re at most ${number(reynolds.value, reynolds.value < 0.1 ? 1 : 2)}.`
    : 'nothing flows.';
  const culprit = doubts[0] ? placeRef(doubts[0].where, chip) : reynolds && placeRef(reynolds.where, chip);
  const solved = solvedPlaces(result);
  const { waiting = 0, preview = false } = evidence;
  if (preview)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: [
        waiting > 0
          ? 'Roughly, while it is dragged: some junctions are still ideal. '
          : 'Roughly, while it is dragged: junctions are solved within ',
        ...(waiting > 0 ? [] : [strong(percent(PREVIEW_ACCURACY.flow)), '. ']),
        capital(flow),
      ],
      margin: null,
      culprit: null,
    };
  const [first] = doubts;
  if (first)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: [
        first.severity === 'stop' ? 'Not yet: ' : 'With care: ',
        spoken(first.says).replace(/\.$/, ''),
        doubts.length > 1 ? `, and ${counted(doubts.length - 1, 'more doubt')}.` : '.',
      ],
      margin: error > 0 ? band(error) : null,
      culprit,
    };
  if (waiting > 0)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: [
        `${capital(counted(waiting, 'junction is', 'junctions are'))} being solved; ideal until then. `,
        capital(flow),
      ],
      margin: null,
      culprit,
    };
  if (result.junctions !== 'solved')
    return {
      question: QUESTION,
      standing: 'unknown',
      says: [
        result.junctions === 'ideal'
          ? 'Roughly: junctions are taken as ideal'
          : 'Nearly: some junctions are still ideal',
        ...(bands ? [', splits may be off by ', strong(percent(bands.share))] : []),
        solved ? `, ${solved} solved; ` : '; ',
        flow,
      ],
      margin: null,
      culprit,
    };
  return {
    question: QUESTION,
    standing: 'yes',
    says: [
      // where every flow is imposed there is nothing that a split could be off by
      ...(bands && error === 0
        ? ['Splits follow from the drives, wall shear within ', strong(percent(bands.shear))]
        : [
            bands ? 'Splits within ' : 'Within ',
            strong(percent(error)),
            bands ? `, wall shear within ${percent(bands.shear)}` : '',
          ]),
      solved ? `: ${solved} solved, ` : ': ',
      flow,
    ],
    margin: band(bands && error === 0 ? bands.shear : error),
    culprit,
  };
}

const percent = (share: number): string => figure(share, 'share', { digits: 2, unit: '%' });

const band = (error: number) =>
  ({
    kind: 'band',
    half: Math.min(1, Math.max(0.04, error / 0.02)),
    label: percent(error),
  }) as const;
