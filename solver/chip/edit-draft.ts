import type { Chip } from './chip.ts';
import { borne, renamed } from './edit-rename.ts';
import { LISTS, type ListName, type PartOf, partsOf } from './schema-check.ts';
import type { TopKey, TopOf } from './schema-chip.ts';
import { Fault, quoted } from './schema-fault.ts';

/** One change: of a part that bears an id, or of a key of the chip that is set whole. */
export type Change =
  /** Puts `part` in the place of the one that bears `id`. References to an id that changes are left as they are. */
  | {
      [L in ListName]: {
        readonly kind: 'put';
        readonly list: L;
        readonly id: string;
        readonly part: PartOf[L];
      };
    }[ListName]
  /** Puts a new part before the one at `index`; the list's length puts it last. */
  | {
      [L in ListName]: {
        readonly kind: 'insert';
        readonly list: L;
        readonly index: number;
        readonly part: PartOf[L];
      };
    }[ListName]
  | { readonly kind: 'remove'; readonly list: ListName; readonly id: string }
  /** Gives a part another id and carries every reference to it. */
  | { readonly kind: 'rename'; readonly list: ListName; readonly id: string; readonly to: string }
  | { [K in TopKey]: { readonly kind: 'set'; readonly key: K; readonly value: TopOf[K] } }[TopKey];

/** Changes of one sort in one list, or one change of another sort; `start` is the place of the first in the edit. */
export interface Run {
  readonly start: number;
  readonly changes: readonly Change[];
}

type Part = PartOf[ListName];
type Only<K extends Change['kind']> = Extract<Change, { readonly kind: K }>;

/** In longer runs ids are looked up in a map, in shorter ones by going through the list. */
const FEW = 8;

/** A chip under change: lists are copied when first touched, parts never. */
export class EditDraft {
  #chip: Chip;
  /** Parts that were put in and must be looked at by themselves. */
  readonly fresh = new Set<object>();
  /** Indices of parts that took the place of others of the same id; null as soon as anything else happened. */
  #replaced: Map<ListName, Set<number>> | null = new Map();

  constructor(chip: Chip) {
    this.#chip = chip;
  }

  get chip(): Chip {
    return this.#chip;
  }

  get replaced(): Map<ListName, number[]> | null {
    return this.#replaced && new Map([...this.#replaced].map(([list, indices]) => [list, [...indices]]));
  }

  /** Makes the changes of a run and returns those that undo them, in the order to make them in. */
  apply({ start, changes }: Run): Change[] {
    const [first] = changes as [Change, ...Change[]];
    switch (first.kind) {
      case 'put':
        return this.#put(changes as Only<'put'>[], start);
      case 'insert':
        return this.#insert(changes as Only<'insert'>[], start);
      case 'remove':
        return this.#remove(changes as Only<'remove'>[], start);
      case 'rename':
        return this.#rename(first, start);
      case 'set': {
        const { key } = first;
        const back = { kind: 'set', key, value: this.#chip[key] ?? null } as Change;
        const { [key]: _old, ...others } = this.#chip;
        this.#chip = (first.value === null ? others : { ...this.#chip, [key]: first.value }) as Chip;
        if (typeof first.value === 'object' && first.value !== null) this.fresh.add(first.value);
        this.#replaced = null;
        return [back];
      }
    }
  }

  #parts(list: ListName): readonly Part[] {
    return partsOf(this.#chip, list);
  }

  /** Puts another list in its place; a chip has no empty list of keep-outs. */
  #take(list: ListName, parts: readonly Part[]): void {
    const { keepOuts: _, ...others } = this.#chip;
    this.#chip = list === 'keepOuts' && parts.length === 0 ? others : { ...this.#chip, [list]: parts };
  }

  #finder(list: ListName, count: number): (id: string) => number {
    const parts = this.#parts(list);
    if (count <= FEW) return (id) => parts.findIndex((part) => part.id === id);
    const index = new Map(parts.map((part, i) => [part.id, i]));
    return (id) => index.get(id) ?? -1;
  }

  #absent(list: ListName, id: string, at: number): Fault {
    return new Fault(
      'reference',
      `names ${quoted(id)}, but ${list} has no such entry.`,
      'Make the edit on the chip as it stands.',
      ['changes', at, 'id'],
    );
  }

  #present(list: ListName, id: string, at: number): Fault {
    return new Fault(
      'duplicate',
      `brings ${quoted(id)} into ${list}, which has one already.`,
      'Give it another id.',
      ['changes', at],
    );
  }

  #put(changes: readonly Only<'put'>[], start: number): Change[] {
    const { list } = changes[0]!;
    const parts = [...this.#parts(list)];
    const find = this.#finder(list, changes.length);
    const moved = new Map<string, number>();
    const back: Change[] = [];
    changes.forEach((change, i) => {
      const { id, part } = change;
      const index = moved.get(id) ?? find(id);
      if (index < 0 || parts[index]!.id !== id) throw this.#absent(list, id, start + i);
      if (part.id !== id) {
        const other = moved.get(part.id) ?? find(part.id);
        if (other >= 0 && parts[other]!.id === part.id) throw this.#present(list, part.id, start + i);
        moved.set(part.id, index);
        this.#replaced = null;
      }
      back.push({ kind: 'put', list, id: part.id, part: parts[index]! } as Change);
      parts[index] = part;
      this.fresh.add(part);
      this.#note(list, index);
    });
    this.#take(list, parts);
    return back.reverse();
  }

  #note(list: ListName, index: number): void {
    // Another layer may not suit the channels that lie on it: all of them are looked at again.
    if (list === 'layers') this.#replaced = null;
    const noted = this.#replaced?.get(list);
    if (noted) noted.add(index);
    else this.#replaced?.set(list, new Set([index]));
  }

  #insert(changes: readonly Only<'insert'>[], start: number): Change[] {
    const { list } = changes[0]!;
    const old = this.#parts(list);
    const ids = new Set(old.map((part) => part.id));
    let rising = true;
    changes.forEach(({ index, part }, i) => {
      if (ids.has(part.id)) throw this.#present(list, part.id, start + i);
      if (!(Number.isInteger(index) && index >= 0 && index <= old.length + i)) {
        throw new Fault('range', `is no place in ${list}.`, 'Make the edit on the chip as it stands.', [
          'changes',
          start + i,
          'index',
        ]);
      }
      ids.add(part.id);
      this.fresh.add(part);
      if (i > 0 && index <= changes[i - 1]!.index) rising = false;
    });
    let parts: Part[];
    if (rising) {
      parts = [];
      let taken = 0;
      for (const { index, part } of changes) {
        while (parts.length < index) {
          parts.push(old[taken]!);
          taken += 1;
        }
        parts.push(part);
      }
      for (; taken < old.length; taken += 1) parts.push(old[taken]!);
    } else {
      parts = [...old];
      for (const { index, part } of changes) parts.splice(index, 0, part);
    }
    this.#replaced = null;
    this.#take(list, parts);
    return changes.map(({ part }) => ({ kind: 'remove', list, id: part.id }));
  }

  #remove(changes: readonly Only<'remove'>[], start: number): Change[] {
    const { list } = changes[0]!;
    const gone = new Map(changes.map(({ id }, i) => [id, i]));
    const back: Change[] = [];
    const parts = this.#parts(list).filter((part, index) => {
      if (!gone.delete(part.id)) return true;
      back.push({ kind: 'insert', list, index, part } as Change);
      return false;
    });
    const [missing] = gone;
    if (missing) throw this.#absent(list, missing[0], start + missing[1]);
    if (back.length < changes.length) {
      const again = changes.findIndex(({ id }, i) => changes.findIndex((other) => other.id === id) < i);
      throw this.#absent(list, changes[again]!.id, start + again);
    }
    this.#replaced = null;
    this.#take(list, parts);
    return back;
  }

  #rename({ list, id, to }: Only<'rename'>, start: number): Change[] {
    const index = this.#parts(list).findIndex((part) => part.id === id);
    if (index < 0) throw this.#absent(list, id, start);
    if (id === to) return [{ kind: 'rename', list, id: to, to: id }];
    const taken = list === 'layers' ? (['layers'] as const) : LISTS.filter((other) => other !== 'layers');
    for (const other of taken) {
      if (this.#parts(other).some((part) => part.id === to)) throw this.#present(other, to, start);
    }
    const before = this.#chip;
    // A limit of the layer would become one of the part that bears the name.
    const limited =
      list === 'layers' && !borne(before, id) && before.limits.some(({ where }) => where === id);
    if (limited && borne(before, to)) {
      throw this.#present(list, to, start);
    }
    // What already names `to` would follow the new owner back to the old id on undoing.
    if (renamed(before, list, to, id) !== before) throw this.#present(list, to, start);
    const parts = [...this.#parts(list)];
    parts[index] = { ...parts[index]!, id: to };
    this.#chip = renamed({ ...before, [list]: parts }, list, id, to);
    this.#replaced = null;
    return [{ kind: 'rename', list, id: to, to: id }];
  }
}
