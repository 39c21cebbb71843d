import type { StepKind } from './journal.ts';

/** What undo and redo need to know of a step; its changes stay in the file until wanted. */
export interface Mark {
  readonly seq: number;
  readonly label: string;
  readonly made: number;
}

/** What can be undone and done again, read off the steps in order. */
export class Stacks {
  readonly done: Mark[] = [];
  readonly undone: Mark[] = [];

  /** Takes the next step; false where it names an edit that is not the one to undo or do again. */
  take(step: { readonly kind: StepKind; readonly of: number | null } & Mark): boolean {
    switch (step.kind) {
      case 'start':
        return this.done.length === 0;
      case 'edit':
        this.done.push({ seq: step.seq, label: step.label, made: step.made });
        this.undone.length = 0;
        return true;
      case 'undo':
        return this.#move(this.done, this.undone, step.of);
      case 'redo':
        return this.#move(this.undone, this.done, step.of);
    }
  }

  #move(from: Mark[], to: Mark[], of: number | null): boolean {
    const mark = from.at(-1);
    if (!mark || mark.seq !== of) return false;
    from.pop();
    to.push(mark);
    return true;
  }
}
