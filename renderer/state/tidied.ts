import { collector, tidying } from '../solving/tidy.ts';
import type { Desk } from './desk.ts';

/** When the page has nothing to do, a while from now. */
const idly = (work: () => void, ms: number): void => {
  setTimeout(() => requestIdleCallback(work), ms);
};

/**
 * Gives back what reading and drawing a large chip took, once it stands there answered. Not after every edit: it
 * takes the page a tenth of a second, which nobody notices who has just opened something.
 */
export function tidiedWhenOpened(
  desk: Pick<Desk, 'project' | 'solver'>,
  after = idly,
  collect = collector(),
): void {
  const tidy = tidying(() => true, after, collect);
  const { solved } = desk.solver;
  solved.subscribe(() => {
    const { chip, busy } = solved.get();
    const document = desk.project.get()?.document;
    if (chip && !busy && document?.done.length === 0 && document.undone.length === 0)
      tidy.later(chip.channels.length);
  });
}
