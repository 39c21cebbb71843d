import type { Chip } from '../../solver/chip/chip.ts';
import { sha256Of } from '../store/hash.ts';
import { canonical } from './canonical.ts';

/** The lists of a chip and what one member of each is called in the file. */
export const LISTS = {
  layer: 'layers',
  channel: 'channels',
  chamber: 'chambers',
  via: 'vias',
  port: 'ports',
  target: 'targets',
  limit: 'limits',
  'keep-out': 'keepOuts',
} as const satisfies Record<string, keyof Chip>;
export type ListKind = keyof typeof LISTS;
export type PartKind = 'head' | ListKind;
export const LIST_KINDS = Object.keys(LISTS) as ListKind[];

/** A list of a chip by its kind, empty where there is none. */
export const listOf = (chip: Chip | null, kind: ListKind): readonly object[] => chip?.[LISTS[kind]] ?? NONE;
const NONE: readonly object[] = [];

/** What is left of a chip without its lists. */
export type Head = Pick<
  Chip,
  'name' | 'note' | 'lengthUnit' | 'outline' | 'fluid' | 'process' | 'accepted' | 'rating' | 'assay'
>;

export interface Part {
  readonly kind: PartKind;
  readonly place: number;
  readonly body: string;
  readonly hash: Uint8Array;
}

export function headOf(chip: Chip): Head {
  const { name, note, lengthUnit, outline, fluid, process, accepted, rating, assay } = chip;
  return {
    name,
    note,
    lengthUnit,
    outline,
    fluid,
    ...(process && { process }),
    ...(accepted && { accepted }),
    ...(rating && { rating }),
    ...(assay && { assay }),
  };
}

/** Things drawn are never changed, only replaced, so what was written of one stays true. */
const written = new WeakMap<object, { readonly body: string; readonly hash: Uint8Array }>();

/** Notes how a thing drawn stands in the file that it was read from. */
export function rememberPart(value: object, body: string, hash: Uint8Array): void {
  written.set(value, { body, hash });
}

export function partOf(kind: PartKind, place: number, value: object): Part {
  let text = written.get(value);
  if (!text) {
    const body = canonical(value);
    text = { body, hash: partHash(kind, body) };
    written.set(value, text);
  }
  return { kind, place, ...text };
}

export function partHash(kind: string, body: string): Uint8Array {
  return sha256Of(kind, body);
}

/** Every part of a chip, in the order of the file. */
export function* partsOf(chip: Chip): Generator<Part> {
  yield partOf('head', 0, headOf(chip));
  for (const kind of LIST_KINDS) {
    const list = listOf(chip, kind);
    for (let place = 0; place < list.length; place += 1) yield partOf(kind, place, list[place]!);
  }
}

/** SHA-256 over the hashes of the parts in order: the same for two chips that are alike to the byte. */
export function chipDigest(hashes: Iterable<Uint8Array>): Uint8Array {
  return sha256Of(Buffer.concat([...hashes]));
}

export function chipHash(chip: Chip): Uint8Array {
  return chipDigest(Array.from(partsOf(chip), (part) => part.hash));
}

/** Parts that differ between two chips, the head always: rows to write, and (kind, first place) from which rows are gone. */
export function differences(
  before: Chip | null,
  after: Chip,
): { readonly write: Part[]; readonly gone: { readonly kind: ListKind; readonly from: number }[] } {
  const write: Part[] = [];
  const gone: { kind: ListKind; from: number }[] = [];
  write.push(partOf('head', 0, headOf(after)));
  for (const kind of LIST_KINDS) {
    const old = listOf(before, kind);
    const list = listOf(after, kind);
    if (old === list) continue;
    for (let place = 0; place < list.length; place += 1) {
      if (old[place] !== list[place]) write.push(partOf(kind, place, list[place]!));
    }
    if (old.length > list.length) gone.push({ kind, from: list.length });
  }
  return { write, gone };
}
