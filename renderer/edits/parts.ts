import type { Chip, Nm, Point } from '../../solver/chip/chip.ts';
import { type Box, boxOf } from '../geometry/path.ts';
import { add, whole, type Xy } from '../geometry/vector.ts';
import { PARTS, type Part, partOf, type Ref } from '../state/ref.ts';
import type { PartValue } from '../tools/tool.ts';

/** The list of the chip that holds each kind of part. */
export const LISTS = {
  channel: 'channels',
  chamber: 'chambers',
  via: 'vias',
  port: 'ports',
  'keep-out': 'keepOuts',
} as const satisfies Readonly<Record<Part, keyof Chip>>;

/** The parts of a kind, none where the chip has no such list. */
export const listOf = (chip: Chip, kind: Part): readonly PartValue['value'][] => chip[LISTS[kind]] ?? [];

/** The part a reference names, or null. */
export function findPart(chip: Chip, ref: Ref): PartValue | null {
  const part = partOf(ref);
  if (!part) return null;
  const value = listOf(chip, part.kind).find((entry) => entry.id === part.id);
  return value ? ({ kind: part.kind, value } as PartValue) : null;
}

/** The parts that references name, in the order of the chip; what is none is left out. */
export function findParts(chip: Chip, refs: readonly Ref[]): PartValue[] {
  const wanted = new Set(refs);
  const out: PartValue[] = [];
  for (const kind of PARTS)
    for (const value of listOf(chip, kind))
      if (wanted.has(`${kind}:${value.id}`)) out.push({ kind, value } as PartValue);
  return out;
}

export const refOfPart = ({ kind, value }: PartValue): Ref => `${kind}:${value.id}`;

/** Every place that draws a part: points of a path or outline, or its centre. */
export function placesOf(part: PartValue): readonly Point[] {
  if (part.kind === 'channel') return part.value.path;
  return part.kind === 'port' || part.kind === 'via' ? [part.value.at] : part.value.outline;
}

/** The part with each of its places sent through `move` and rounded to whole nm. */
export function movedBy(part: PartValue, move: (p: Xy, index: number) => Xy): PartValue {
  switch (part.kind) {
    case 'channel':
      return {
        kind: 'channel',
        value: { ...part.value, path: part.value.path.map((p, i) => whole(move(p, i))) },
      };
    case 'chamber':
      return {
        kind: 'chamber',
        value: { ...part.value, outline: part.value.outline.map((p, i) => whole(move(p, i))) },
      };
    case 'keep-out':
      return {
        kind: 'keep-out',
        value: { ...part.value, outline: part.value.outline.map((p, i) => whole(move(p, i))) },
      };
    case 'via':
      return { kind: 'via', value: { ...part.value, at: whole(move(part.value.at, 0)) } };
    default:
      return { kind: 'port', value: { ...part.value, at: whole(move(part.value.at, 0)) } };
  }
}

/** The box around some parts by their centrelines, outlines and centres; null of none. */
export const boxOfParts = (parts: readonly PartValue[]): Box | null => boxOf(parts.flatMap(placesOf));

/** "channel feed", "three channels", "five parts": how a label names a selection. */
export function nameParts(parts: readonly PartValue[], count: (n: number, one: string) => string): string {
  if (parts.length === 1) return parts[0]!.value.id;
  const kinds = new Set<Part>(parts.map((part) => part.kind));
  const [only] = kinds;
  return count(parts.length, kinds.size === 1 ? only! : 'part');
}

/**
 * Parts moved by a step, and the vertices of others that lay on a moved end or centre drawn along, so
 * that what was joined stays joined.
 */
export function moveJoined(chip: Chip, parts: readonly PartValue[], by: readonly [Nm, Nm]): PartValue[] {
  const moved = parts.map((part) => movedBy(part, (p) => add(p, by)));
  const places = new Set<string>();
  for (const part of parts) for (const [x, y] of placesOf(part)) places.add(`${x} ${y}`);
  return [...moved, ...drawAlong(chip, new Set(parts.map(refOfPart)), places, by)];
}

/** Other parts with a place among `places`, those places moved by a step. */
export function drawAlong(
  chip: Chip,
  without: ReadonlySet<Ref>,
  places: ReadonlySet<string>,
  by: readonly [Nm, Nm],
): PartValue[] {
  const out: PartValue[] = [];
  for (const kind of ['channel', 'via', 'port'] as const)
    for (const value of listOf(chip, kind)) {
      const part = { kind, value } as PartValue;
      if (without.has(refOfPart(part)) || !placesOf(part).some(([x, y]) => places.has(`${x} ${y}`))) continue;
      out.push(movedBy(part, (p) => (places.has(`${p[0]} ${p[1]}`) ? add(p, by) : p)));
    }
  return out;
}
