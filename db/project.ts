import type { Chip } from '../solver/chip/chip.ts';
import { applyEdit, type ChipEdit, makeEdit } from '../solver/chip/edit.ts';
import { readEdit } from '../solver/chip/edit-read.ts';
import type { Result } from '../solver/chip/result.ts';
import { readChip } from '../solver/chip/schema-chip.ts';
import { Problem } from '../solver/problem/problem.ts';
import type { Content } from './check/content.ts';
import { Damage } from './check/damage.ts';
import { editBetween } from './chip/between.ts';
import { chipHash } from './chip/parts.ts';
import { type Folded, fold } from './journal/fold.ts';
import {
  append,
  Chain,
  changesOf,
  NO_BODY,
  packChanges,
  readStep,
  type Step,
  stepOf,
} from './journal/journal.ts';
import type { Mark, Stacks } from './journal/stacks.ts';
import { type CellEntry, Cells } from './kept/cells.ts';
import { findResult, keepResult } from './kept/results.ts';
import { deleteTrial, freezeTrial, getTrial, listTrials, renameTrial, type Trial } from './kept/trials.ts';
import { findView, type KeptView, keepView } from './kept/view.ts';
import type { Store } from './store/store.ts';
import { projectProblem } from './words.ts';

/** Where the project stands after a step. */
export interface Position {
  readonly seq: number;
  readonly undo: string | null;
  readonly redo: string | null;
}

/** An undo or redo that was done, as the edit that does the same to a chip. */
export interface Moved extends Position {
  readonly edit: ChipEdit;
}

/**
 * The content of one open project file. Every step is kept (one commit, flushed to the disk) before
 * the method returns; a method that throws a `Problem` has changed nothing.
 */
export class Project {
  readonly path: string;
  readonly readOnly: boolean;
  readonly #store: Store;
  readonly #stacks: Stacks;
  readonly #cells: Cells;
  #chip: Chip;
  #seq: number;
  #hash: Uint8Array;
  #folded: Folded;
  readonly #openedAt: Chip;
  /** The last step was reported as failed: whether it is in the file is to be looked up before the next. */
  #unsure = false;

  constructor(store: Store, path: string, content: Content, readOnly: boolean) {
    this.path = path;
    this.readOnly = readOnly;
    this.#store = store;
    this.#stacks = content.stacks;
    this.#cells = new Cells(store, !readOnly);
    this.#chip = content.chip;
    this.#openedAt = content.chip;
    this.#seq = content.seq;
    this.#hash = content.hash;
    this.#folded = { chip: content.folded, seq: content.foldedSeq, base: content.base };
  }

  get chip(): Chip {
    return this.#chip;
  }

  get position(): Position {
    return {
      seq: this.#seq,
      undo: this.#stacks.done.at(-1)?.label ?? null,
      redo: this.#stacks.undone.at(-1)?.label ?? null,
    };
  }

  /** Whether anything is not folded into the chip's own rows yet. */
  get isFolded(): boolean {
    return this.#folded.seq === this.#seq;
  }

  /** Makes one edit, made at position `seq`. */
  edit(edit: ChipEdit, seq: number): Position {
    return this.#do(() => {
      if (seq !== this.#seq)
        throw new Problem(
          'project',
          'The chip has changed since this edit was begun.',
          edit.label,
          'Do it again on the chip as it stands.',
        );
      const checked = readEdit(edit);
      const { chip, inverse } = makeEdit(this.#chip, checked);
      const body = packChanges({ forward: checked.changes, backward: inverse.changes });
      this.#append({ kind: 'edit', of: null, label: checked.label, body });
      this.#chip = chip;
      return this.position;
    });
  }

  undo(): Moved {
    return this.#move('undo');
  }

  redo(): Moved {
    return this.#move('redo');
  }

  /** The last things done, newest first; what is undone comes before what is done. */
  history(limit: number): (Mark & { readonly undone: boolean })[] {
    const undone = this.#stacks.undone.map((mark) => ({ ...mark, undone: true }));
    const done = this.#stacks.done.slice(-limit).map((mark) => ({ ...mark, undone: false }));
    return [...undone, ...done.reverse()].slice(0, limit);
  }

  /** Goes back to the chip as it was when the project was opened, as one step. */
  revert(): Moved {
    const edit = editBetween(this.#chip, this.#openedAt, 'go back to how it was at opening');
    if (edit.changes.length === 0)
      throw new Problem('project', 'Nothing has changed since the project was opened.', '', 'Go on editing.');
    return { ...this.edit(edit, this.#seq), edit };
  }

  listTrials(): Trial[] {
    return this.#do(() => listTrials(this.#store), false);
  }

  /** @param chip in place of the project's own: another that belongs to it, such as the made one */
  freezeTrial(name: string, seq: number, result: Result | null, chip: Chip = this.#chip): Trial {
    if (seq !== this.#seq)
      throw new Problem('project', 'The chip has changed since.', name, 'Freeze it again as it stands.');
    return this.#do(() => freezeTrial(this.#store, name, chip, result, Date.now()));
  }

  renameTrial(id: number, name: string): Trial {
    return this.#do(() => renameTrial(this.#store, id, name));
  }

  deleteTrial(id: number): void {
    this.#do(() => deleteTrial(this.#store, id));
  }

  getTrial(id: number): { trial: Trial; chip: Chip; result: Result | null } {
    return this.#do(() => {
      const found = getTrial(this.#store, id);
      return { ...found, chip: readChip(found.chip) };
    }, false);
  }

  /** Keeps a result of the chip at `seq`; false where the chip has moved on. */
  keepResult(seq: number, settings: string, result: Result): boolean {
    if (seq !== this.#seq || this.readOnly) return false;
    this.#do(() => keepResult(this.#store, chipHash(this.#chip), settings, result, Date.now()));
    return true;
  }

  findResult(settings: string): Result | null {
    return this.#do(() => findResult(this.#store, chipHash(this.#chip), settings), false);
  }

  getCells(keys: readonly string[]): CellEntry[] {
    return this.#do(() => this.#cells.get(keys), false);
  }

  putCells(entries: readonly CellEntry[]): void {
    if (!this.readOnly) this.#do(() => this.#cells.put(entries));
  }

  /** What the page remembers of the view (locks): of the file, and not of the chip. */
  get view(): KeptView {
    return this.#do(() => findView(this.#store), false);
  }

  keepView(view: KeptView): void {
    this.#do(() => keepView(this.#store, view));
  }

  /** Folds the steps into the chip's own rows and the log into the file, so that the bare file is whole. */
  settle(): void {
    if (this.readOnly || !this.#store.isOpen) return;
    this.#do(() => {
      if (!this.isFolded) {
        this.#folded = fold(this.#store, this.#folded, {
          chip: this.#chip,
          seq: this.#seq,
          hash: this.#hash,
        });
      }
      this.#store.pragma('wal_checkpoint(TRUNCATE)');
    });
  }

  /** Writes a whole copy of the file as it stands. */
  async backup(path: string): Promise<void> {
    await this.#store.backup(path);
  }

  stopBackup(): void {
    this.#store.stopBackup();
  }

  get isOpen(): boolean {
    return this.#store.isOpen;
  }

  /** Settles and closes. What cannot be settled stays in the log, which the next opening reads; it is not lost. */
  close(): void {
    try {
      this.settle();
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
    } finally {
      this.#store.close();
    }
  }

  #move(kind: 'undo' | 'redo'): Moved {
    return this.#do(() => {
      const mark = (kind === 'undo' ? this.#stacks.done : this.#stacks.undone).at(-1);
      if (!mark) throw new Problem('project', `There is nothing to ${kind}.`, '', 'Go on editing.');
      const { forward, backward } = changesOf(readStep(this.#store, mark.seq));
      const edit = readEdit({ label: mark.label, changes: kind === 'undo' ? backward : forward });
      const chip = applyEdit(this.#chip, edit);
      this.#append({ kind, of: mark.seq, label: mark.label, body: NO_BODY });
      this.#chip = chip;
      return { ...this.position, edit };
    });
  }

  #append(step: Omit<Step, 'seq' | 'made' | 'hash'>): void {
    const next = { ...step, seq: this.#seq + 1, made: Date.now() };
    this.#unsure = true;
    const written = append(this.#store, this.#hash, next);
    this.#unsure = false;
    this.#seq = written.seq;
    this.#hash = written.hash;
    this.#stacks.take(written);
  }

  /** Takes in a step that was reported as failed although it is in the file. */
  #catchUp(): void {
    const chain = new Chain({ seq: this.#seq, hash: this.#hash });
    for (const row of this.#store.all('SELECT * FROM journal WHERE seq > ? ORDER BY seq', this.#seq)) {
      const step = stepOf(row);
      if (!step || !chain.takes(step)) throw new Damage(['the record of edits was altered']);
      const { forward, backward } = changesOf(step.of === null ? step : readStep(this.#store, step.of));
      const changes = step.kind === 'undo' ? backward : forward;
      this.#chip = applyEdit(this.#chip, readEdit({ label: step.label, changes }));
      this.#stacks.take(step);
      this.#seq = step.seq;
      this.#hash = step.hash;
    }
    this.#unsure = false;
  }

  /** Runs `work`; a failure is told in a person's words. */
  #do<T>(work: () => T, writes = true): T {
    if (writes && this.readOnly)
      throw new Problem(
        'project',
        'This project is open for reading only.',
        this.path,
        'Save it under another name to work on it.',
      );
    try {
      if (writes && this.#unsure) this.#catchUp();
      return work();
    } catch (error) {
      throw projectProblem(error, this.path);
    }
  }
}
