import type { Chip } from './chip.ts';
import { type Change, EditDraft, type Run } from './edit-draft.ts';
import { checkChip, checkReplaced } from './schema-check.ts';
import { Fault, faultToProblem } from './schema-fault.ts';

export type { Change } from './edit-draft.ts';

/** One edit of the chip as plain data: a label that people read ("widen 3 channels") and what it changes, in order. */
export interface ChipEdit {
  readonly label: string;
  readonly changes: readonly Change[];
}

export interface Made {
  readonly chip: Chip;
  /** The edit that leads back: applied to `chip`, it gives a chip equal to the one before. */
  readonly inverse: ChipEdit;
}

/** Neighbouring changes of one sort in one list, done in one pass. */
function runsOf(changes: readonly Change[]): Run[] {
  const runs: { start: number; changes: Change[] }[] = [];
  changes.forEach((change, i) => {
    const last = runs.at(-1)?.changes[0];
    const same =
      last !== undefined &&
      last.kind === change.kind &&
      last.kind !== 'set' &&
      last.kind !== 'rename' &&
      'list' in change &&
      last.list === change.list &&
      'id' in last === 'id' in change;
    if (same) runs.at(-1)!.changes.push(change);
    else runs.push({ start: i, changes: [change] });
  });
  return runs;
}

/** Makes the changes on a draft and gathers, in the order to make them in, those that lead back. */
function draftOf(chip: Chip, edit: ChipEdit): { draft: EditDraft; inverse: ChipEdit } {
  const draft = new EditDraft(chip);
  try {
    const back = runsOf(edit.changes).map((run) => draft.apply(run));
    return { draft, inverse: { label: edit.label, changes: back.reverse().flat() } };
  } catch (error) {
    if (error instanceof Fault) throw faultToProblem(error, edit, 'The edit');
    throw error;
  }
}

/**
 * A chip with an edit made, sharing with the old one every part that did not change, and the edit that
 * undoes it. Throws a `Problem` where the edit does not fit the chip or would leave none that a
 * description can hold; nothing has changed then.
 */
export function makeEdit(chip: Chip, edit: ChipEdit): Made {
  const { draft, inverse } = draftOf(chip, edit);
  const next = draft.chip;
  try {
    if (draft.replaced) checkReplaced(next, draft.replaced);
    else checkChip(next, (part) => draft.fresh.has(part));
  } catch (error) {
    if (error instanceof Fault) throw faultToProblem(error, next, 'The chip');
    throw error;
  }
  return { chip: next, inverse };
}

/** The chip after an edit: `makeEdit` where the way back is not asked for. */
export const applyEdit = (chip: Chip, edit: ChipEdit): Chip => makeEdit(chip, edit).chip;

/** The edit that undoes `edit` once it was made on `chip`. */
export const invertEdit = (chip: Chip, edit: ChipEdit): ChipEdit => draftOf(chip, edit).inverse;
