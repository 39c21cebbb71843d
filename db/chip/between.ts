import type { Chip } from '../../solver/chip/chip.ts';
import type { Change, ChipEdit } from '../../solver/chip/edit.ts';
import { LISTS, type ListName, partsOf } from '../../solver/chip/schema-check.ts';

const KEYS = [
  'name',
  'note',
  'lengthUnit',
  'outline',
  'fluid',
  'targets',
  'limits',
  'process',
  'accepted',
  'rating',
  'assay',
] as const;

interface Part {
  readonly id: string;
}

/** The edit that leads from one chip to another: what they share is left alone. */
export function editBetween(from: Chip, to: Chip, label: string): ChipEdit {
  const changes: Change[] = [];
  for (const key of KEYS) {
    if (from[key] !== to[key]) changes.push({ kind: 'set', key, value: to[key] ?? null } as Change);
  }
  for (const list of LISTS) changes.push(...betweenLists(list, partsOf(from, list), partsOf(to, list)));
  return { label, changes };
}

function betweenLists(list: ListName, from: readonly Part[], to: readonly Part[]): Change[] {
  if (from === to) return [];
  let head = 0;
  while (head < from.length && head < to.length && from[head] === to[head]) head += 1;
  let tail = 0;
  const most = Math.min(from.length, to.length) - head;
  while (tail < most && from[from.length - 1 - tail] === to[to.length - 1 - tail]) tail += 1;
  const old = from.slice(head, from.length - tail);
  const parts = to.slice(head, to.length - tail);
  if (old.length === parts.length && old.every((part, index) => part.id === parts[index]!.id)) {
    const differing = parts.filter((part, index) => part !== old[index]);
    return differing.map((part) => ({ kind: 'put', list, id: part.id, part }) as Change);
  }
  return [
    ...old.map(({ id }): Change => ({ kind: 'remove', list, id })),
    ...parts.map((part, index) => ({ kind: 'insert', list, index: head + index, part }) as Change),
  ];
}
