import { PROCESSES } from '../../solver/checks/process.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { counted, lengthFigure } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';
import { type Answer, type Evidence, placeRef, strong } from './answer.ts';
import { BUILD_KINDS } from './finding-kinds.ts';

const QUESTION = 'Can it be made?';

/** The narrowest channel end, or null of none. */
export function narrowest(chip: Chip): { readonly width: number; readonly id: string } | null {
  let best: { width: number; id: string } | null = null;
  for (const { id, width } of chip.channels) {
    const least = Math.min(...width);
    if (!best || least < best.width) best = { width: least, id };
  }
  return best;
}

/** What the checks of buildability found and nobody accepted; without any, the narrowest channel and the process. */
export function madeAnswer({ chip, result }: Evidence): Answer {
  const least = narrowest(chip);
  if (!least)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: ['Nothing is drawn yet.'],
      margin: null,
      culprit: null,
    };
  const found = (result?.findings ?? []).filter((finding) => BUILD_KINDS.has(finding.kind));
  const open = found.filter(({ severity, accepted }) => severity !== 'note' && accepted === undefined);
  const taken = found.filter(({ severity, accepted }) => severity !== 'note' && accepted !== undefined);
  const stops = [...open].sort((a, b) => Number(b.severity === 'stop') - Number(a.severity === 'stop'));
  const [first] = stops;
  if (first)
    return {
      question: QUESTION,
      standing: stops.some((finding) => finding.severity === 'stop') ? 'no' : 'unknown',
      says: [
        first.severity === 'stop' ? 'No: ' : 'Doubtful: ',
        goneOn(spoken(first.says)).replace(/\.$/, ''),
        stops.length > 1 ? `, and ${counted(stops.length - 1, 'more finding', 'more findings')}.` : '.',
      ],
      margin: null,
      culprit: placeRef(first.where, chip),
    };
  if (chip.process && result)
    return {
      question: QUESTION,
      standing: 'yes',
      says: [
        `Yes, by ${PROCESSES[chip.process.kind].name}: the narrowest channel is `,
        strong(lengthFigure(least.width, { digits: 3 })),
        `, ${least.id}${taken.length > 0 ? `; ${counted(taken.length, 'finding')} accepted` : ''}.`,
      ],
      margin: null,
      culprit: `channel:${least.id}`,
    };
  return {
    question: QUESTION,
    standing: 'not asked',
    says: [
      'The narrowest channel is ',
      strong(lengthFigure(least.width, { digits: 3 })),
      `, ${least.id}; no process is given.`,
    ],
    margin: null,
    culprit: `channel:${least.id}`,
  };
}

/** A sentence as it goes on after a colon: names keep how they are written, articles do not. */
const goneOn = (sentence: string): string =>
  sentence.replace(/^(The|An?|In|At|Between)(?= )/, (word) => word.toLowerCase());
