import type { ChipEdit } from '../../solver/chip/edit.ts';
import { sameBytes, sha256Of } from '../store/hash.ts';
import { pack, unpack } from '../store/pack.ts';
import type { Row, Store } from '../store/store.ts';

/** `start`: the chip the project began with. `undo` and `redo` name the edit that they take back or do again. */
export type StepKind = 'start' | 'edit' | 'undo' | 'redo';

export interface Step {
  readonly seq: number;
  readonly kind: StepKind;
  readonly of: number | null;
  /** Milliseconds since 1970. */
  readonly made: number;
  readonly label: string;
  /** Packed: of a start the chip, of an edit its changes and those that take it back, else nothing. */
  readonly body: Uint8Array;
  readonly hash: Uint8Array;
}

/** Changes of an edit, there and back. */
export interface StepChanges {
  readonly forward: ChipEdit['changes'];
  readonly backward: ChipEdit['changes'];
}

/** The same as a file has them: lists still to be checked. */
export interface FoundChanges {
  readonly forward: readonly unknown[];
  readonly backward: readonly unknown[];
}

export const NO_BODY = new Uint8Array(0);

export function stepHash(before: Uint8Array, step: Omit<Step, 'hash'>): Uint8Array {
  return sha256Of(before, step.seq, step.kind, step.of, step.made, step.label, step.body);
}

/**
 * Appends a step after the one whose hash is `before`: one row, one commit. Where the disk reports a
 * fault although the step is in the file, it counts as kept.
 */
export function append(store: Store, before: Uint8Array, step: Omit<Step, 'hash'>): Step {
  const hash = stepHash(before, step);
  try {
    insert(store, { ...step, hash });
  } catch (error) {
    if (!isKept(store, step.seq, hash)) throw error;
  }
  return { ...step, hash };
}

function isKept(store: Store, seq: number, hash: Uint8Array): boolean {
  try {
    return sameBytes(store.get('SELECT hash FROM journal WHERE seq = ?', seq)?.hash, hash);
  } catch {
    return false;
  }
}

function insert(store: Store, step: Step): void {
  store.run(
    'INSERT INTO journal (seq, kind, of, made, label, body, hash) VALUES (?, ?, ?, ?, ?, ?, ?)',
    step.seq,
    step.kind,
    step.of,
    step.made,
    step.label,
    step.body,
    step.hash,
  );
}

export function packChanges(changes: StepChanges): Uint8Array {
  return pack(changes);
}

/** The changes of an edit; throws where the body is no such thing. */
export function changesOf(step: Step): FoundChanges {
  const found = unpack(step.body) as Partial<FoundChanges> | null;
  if (!Array.isArray(found?.forward) || !Array.isArray(found.backward)) throw new Error('no changes');
  return { forward: found.forward, backward: found.backward };
}

export function readStep(store: Store, seq: number): Step {
  const row = store.get('SELECT * FROM journal WHERE seq = ?', seq);
  const step = row ? stepOf(row) : null;
  if (!step) throw new Error(`no step ${seq}`);
  return step;
}

/** A row as a step, null where it is none. */
export function stepOf(row: Row): Step | null {
  const { seq, kind, of, made, label, body, hash } = row;
  if (typeof seq !== 'number' || !Number.isSafeInteger(seq)) return null;
  if (kind !== 'start' && kind !== 'edit' && kind !== 'undo' && kind !== 'redo') return null;
  if (of !== null && typeof of !== 'number') return null;
  if (typeof made !== 'number' || typeof label !== 'string') return null;
  if (!(body instanceof Uint8Array) || !(hash instanceof Uint8Array)) return null;
  return { seq, kind, of, made, label, body, hash };
}

/** The chain of a journal from just after `base`, and where it breaks. */
export class Chain {
  #before: Uint8Array;
  #seq: number;

  constructor(base: { readonly seq: number; readonly hash: Uint8Array }) {
    this.#seq = base.seq;
    this.#before = base.hash;
  }

  /** Whether `step` is the next one, unaltered. */
  takes(step: Step): boolean {
    if (step.seq !== this.#seq + 1 || !sameBytes(step.hash, stepHash(this.#before, step))) return false;
    this.#seq = step.seq;
    this.#before = step.hash;
    return true;
  }

  get seq(): number {
    return this.#seq;
  }

  get hash(): Uint8Array {
    return this.#before;
  }
}
