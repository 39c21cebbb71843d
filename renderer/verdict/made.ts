import type { Chip } from '../../solver/chip/chip.ts';
import { counted, lengthFigure } from '../words/figure.ts';
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

/** What the checks of buildability found; without any, the narrowest feature and that no process is given. */
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
  const stops = found.filter((finding) => finding.severity !== 'note');
  const [first] = stops;
  if (first)
    return {
      question: QUESTION,
      standing: stops.some((finding) => finding.severity === 'stop') ? 'no' : 'unknown',
      says: [
        first.severity === 'stop' ? 'No: ' : 'Doubtful: ',
        first.says.replace(/\.$/, ''),
        stops.length > 1 ? `, and ${counted(stops.length - 1, 'more finding', 'more findings')}.` : '.',
      ],
      margin: null,
      culprit: placeRef(first.where, chip),
    };
  return {
    question: QUESTION,
    standing: 'not asked',
    says: [
      'The narrowest channel is ',
      strong(lengthFigure(least.width, { digits: 3 })),
      `, ${least.id}; what the process holds is not given.`,
    ],
    margin: null,
    culprit: `channel:${least.id}`,
  };
}
