import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit, type ChipEdit, makeEdit } from '../../solver/chip/edit.ts';

/**
 * The chip with what was done to it in this window: every edit with the one that takes it back. Without
 * limit; what was done before this window opened is the host's to take back.
 */
export interface Document {
  readonly chip: Chip;
  readonly done: readonly Step[];
  readonly undone: readonly Step[];
}

export interface Step {
  readonly edit: ChipEdit;
  readonly inverse: ChipEdit;
}

export const openDocument = (chip: Chip): Document => ({ chip, done: [], undone: [] });

/** The document after an edit. Throws `Problem` where the edit makes no chip. */
export function done({ chip, done: before }: Document, edit: ChipEdit): Document {
  const next = makeEdit(chip, edit);
  return { chip: next.chip, done: [...before, { edit, inverse: next.inverse }], undone: [] };
}

/** The document with its last edit taken back, and the edit that did so; null where there is none. */
export function undo(document: Document): { readonly document: Document; readonly edit: ChipEdit } | null {
  const step = document.done.at(-1);
  if (!step) return null;
  return {
    edit: step.inverse,
    document: {
      chip: applyEdit(document.chip, step.inverse),
      done: document.done.slice(0, -1),
      undone: [...document.undone, step],
    },
  };
}

export function redo(document: Document): { readonly document: Document; readonly edit: ChipEdit } | null {
  const step = document.undone.at(-1);
  if (!step) return null;
  return {
    edit: step.edit,
    document: {
      chip: applyEdit(document.chip, step.edit),
      done: [...document.done, step],
      undone: document.undone.slice(0, -1),
    },
  };
}
