import { BOUNDS } from './bounds.ts';
import type { ChipEdit } from './edit.ts';
import type { Change } from './edit-draft.ts';
import { LISTS } from './schema-check.ts';
import { TOP } from './schema-chip.ts';
import { PART } from './schema-data-parts.ts';
import { at, Fault, faultToProblem } from './schema-fault.ts';
import { readId, readKeys, readList, readText } from './schema-fields.ts';
import { parseWith } from './schema-parse.ts';

const EDIT_KEYS = new Set(['label', 'changes']);
const EDIT_NEEDS = { label: '"widen 3 channels"', changes: '[]' };

const word = <const T extends string>(value: unknown, words: readonly T[]): T => {
  const found = words.find((one) => one === value);
  if (found !== undefined) return found;
  throw new Fault('quantity', `takes one of ${words.join(', ')}.`, 'Write one of them.');
};

const CHANGE_KEYS = {
  put: ['kind', 'list', 'id', 'part'],
  insert: ['kind', 'list', 'index', 'part'],
  remove: ['kind', 'list', 'id'],
  rename: ['kind', 'list', 'id', 'to'],
  set: ['kind', 'key', 'value'],
} as const;
const KINDS = Object.keys(CHANGE_KEYS) as Change['kind'][];
const KNOWN = Object.fromEntries(KINDS.map((kind) => [kind, new Set<string>(CHANGE_KEYS[kind])]));
const NEEDED = Object.fromEntries(
  KINDS.map((kind) => [kind, Object.fromEntries(CHANGE_KEYS[kind].map((key) => [key, 'its value']))]),
);

function readChange(value: unknown): Change {
  const named = value !== null && typeof value === 'object' ? (value as { kind?: unknown }).kind : undefined;
  const kind = at(['kind'], () => word(named, KINDS));
  const raw = readKeys(value, KNOWN[kind]!, NEEDED[kind]!);
  if (kind === 'set') {
    const key = at(['key'], () => word(raw.key, Object.keys(TOP) as (keyof typeof TOP)[]));
    return { kind, key, value: at(['value'], () => parseWith<unknown>(TOP[key], raw.value)) } as Change;
  }
  const list = at(['list'], () => word(raw.list, LISTS));
  const part = (): unknown => at(['part'], () => parseWith<unknown>(PART[list], raw.part));
  if (kind === 'insert') {
    if (!Number.isInteger(raw.index) || (raw.index as number) < 0) {
      throw new Fault('range', 'takes a place in the list.', 'Give a whole number from 0.', ['index']);
    }
    return { kind, list, index: raw.index, part: part() } as Change;
  }
  const id = at(['id'], () => readId(raw.id));
  if (kind === 'put') return { kind, list, id, part: part() } as Change;
  return kind === 'remove' ? { kind, list, id } : { kind, list, id, to: at(['to'], () => readId(raw.to)) };
}

/** An edit that came from outside (over the wire, from a project file), or a `Problem`. */
export function readEdit(value: unknown): ChipEdit {
  try {
    const raw = readKeys(value, EDIT_KEYS, EDIT_NEEDS);
    return {
      label: at(['label'], () => readText(raw.label, BOUNDS.label)),
      changes: at(['changes'], () =>
        readList(raw.changes, BOUNDS.changes).map((change, i) => at([i], () => readChange(change))),
      ),
    };
  } catch (error) {
    if (error instanceof Fault) throw faultToProblem(error, value, 'The edit');
    throw error;
  }
}
