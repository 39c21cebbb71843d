import type { Chip } from '../../solver/chip/chip.ts';
import { type ChipEdit, makeEdit } from '../../solver/chip/edit.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { boxOfParts, findPart, refOfPart } from '../edits/parts.ts';
import { toEdit } from '../edits/to-edit.ts';
import { tidy } from '../geometry/path.ts';
import type { Live, Solved } from '../solving/solver.ts';
import type { PartValue } from '../tools/tool.ts';
import type { Desk } from './desk.ts';
import { useStore } from './store.ts';
import type { Workbench } from './workbench.ts';

/** Beyond this many channels the answer would come too late to be one to what the hand does. */
const MOST_CHANNELS = 5000;

/**
 * Times the chip: what is larger is a figure half typed, "50 m" of "50 mm", and would keep the answer to the
 * whole one waiting.
 */
const FAR = 4;

/** The chip as it would be with what a tool shows, and the edit that would make it; null where it makes none. */
export function wouldBe(
  chip: Chip,
  parts: readonly PartValue[],
): { readonly edit: ChipEdit; readonly chip: Chip; readonly drawn: string | null } | null {
  if (parts.length === 0 || chip.channels.length > MOST_CHANNELS) return null;
  const box = boxOfParts(parts)!;
  const most = FAR * Math.max(chip.outline.width, chip.outline.height);
  if (box.right - box.left > most || box.top - box.bottom > most) return null;
  const put = parts.map((part): PartValue => {
    if (part.kind !== 'channel') return part;
    const path = tidy(part.value.path) as typeof part.value.path;
    return { kind: 'channel', value: { ...part.value, path } };
  });
  try {
    const edit = toEdit(chip, { label: 'as it would be', put });
    const last = put.at(-1)!;
    const drawn = last.kind === 'channel' && !findPart(chip, refOfPart(last)) ? last.value.id : null;
    return { edit, chip: makeEdit(chip, edit).chip, drawn };
  } catch (error) {
    // there it could not stay; the hand goes on
    if (error instanceof Problem) return null;
    throw error;
  }
}

/** Once a frame, asks what would come of what the hand is about to do: at its first move, and at the end of a frame that had more. */
export function followHand(desk: Desk, bench: Workbench): () => void {
  let asked = false;
  let due = false;
  const ask = (): void => {
    const chip = desk.chip();
    desk.solver.drag(chip && wouldBe(chip, bench.preview().parts ?? []));
  };
  const ended = (): void => {
    asked = false;
    if (!due) return;
    due = false;
    ask();
  };
  return bench.hand.subscribe(() => {
    due = asked;
    if (asked) return;
    asked = true;
    ask();
    requestAnimationFrame(ended);
  });
}

/** What is shown as the answer: that to what is dragged while something is, else the newest. */
export interface Answer extends Omit<Live, 'chip'> {
  readonly chip: Chip | null;
  readonly graphChip: Chip | null;
  readonly busy: boolean;
  /** To preview accuracy, for the eye alone. */
  readonly preview: boolean;
}

export const shownAnswer = (live: Live | null, solved: Solved): Answer =>
  live
    ? { ...live, graphChip: live.graph && live.chip, busy: true, preview: true }
    : { ...solved, preview: false };

export function useAnswer(desk: Desk): Answer {
  return shownAnswer(useStore(desk.solver.live), useStore(desk.solver.solved));
}

/** What is told of the chip, for what does not say whether a newer answer is on its way. */
export function useResult(desk: Desk): Pick<Answer, 'chip' | 'result' | 'problem' | 'graph'> {
  const live = useStore(desk.solver.live);
  const chip = useStore(desk.solver.solved, (solved) => solved.chip);
  const result = useStore(desk.solver.solved, (solved) => solved.result);
  const problem = useStore(desk.solver.solved, (solved) => solved.problem);
  const graph = useStore(desk.solver.solved, (solved) => solved.graph);
  return live ?? { chip, result, problem, graph };
}
