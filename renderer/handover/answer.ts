import type { Result } from '../../solver/chip/result.ts';
import { choosePlace } from '../commands/files.ts';
import type { Solved } from '../solving/solver.ts';
import type { Desk } from '../state/desk.ts';
import { counted } from '../words/figure.ts';

/** What is handed over is the answer to the chip as it stands, and nothing older. */

/** Why nothing can be handed over yet; '' where it can. */
export function whyNot({ chip: answered, result, problem, busy }: Solved, chip: unknown): string {
  if (problem && !busy) return problem.what;
  if (!result || answered !== chip) return 'The chip is being solved.';
  return '';
}

/** What the paper would say of junctions that are still being solved; '' where none are. */
export const waitingWords = ({ waiting }: Solved): string =>
  waiting === 0
    ? ''
    : `${counted(waiting, 'junction is', 'junctions are')} still being solved: written now, the note calls ${waiting === 1 ? 'it' : 'them'} ideal.`;

/** The result of the chip as it is kept, with the number of the last thing kept. */
export async function answer(desk: Desk): Promise<{ readonly seq: number; readonly result: Result }> {
  await desk.settled();
  const { chip, result } = desk.solver.solved.get();
  if (!result || chip !== desk.chip()) throw new Error('The chip is being solved; try again when it is.');
  return { seq: desk.position(), result };
}

/** A name that every system takes. */
export const fileName = (name: string): string => name.replace(/[\\/:*?"<>|]+/g, ' ').trim() || 'chip';

/** Asks where a file goes; null where the person thinks better of it. */
export const placeFor = (desk: Desk, what: string, name: string, extension: string): Promise<string | null> =>
  choosePlace(desk, {
    purpose: 'save',
    title: `Where the ${what} goes`,
    kind: what,
    extensions: [extension],
    suggest: `${fileName(name)}.${extension}`,
  });
