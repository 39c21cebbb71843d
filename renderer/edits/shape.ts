import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { boxOf, nearestOnPath, offsetPath, pathLength, tidy } from '../geometry/path.ts';
import { add, same, turned, whole, type Xy } from '../geometry/vector.ts';
import type { Ref } from '../state/ref.ts';
import { type Alteration, freshId, type PartValue, takenIds } from '../tools/tool.ts';
import { counted } from '../words/figure.ts';
import { boxOfParts, findParts, movedBy, nameParts, placesOf, refOfPart } from './parts.ts';

/** A change of shape, or one sentence why it cannot be made. */
export type Shaping = Alteration | string;

const NONE = 'Choose a part first.';

/** The selection turned about its middle, degrees counter-clockwise. */
export function turn(chip: Chip, refs: readonly Ref[], degrees: number): Shaping {
  const parts = findParts(chip, refs);
  const box = boxOfParts(parts);
  if (!box) return NONE;
  // a whole middle keeps quarter turns exact
  const middle = whole([(box.left + box.right) / 2, (box.bottom + box.top) / 2]);
  return {
    label: `turn ${nameParts(parts, counted)} by ${inDegrees(degrees)}`,
    put: parts.map((part) => movedBy(part, (p) => turned(p, middle, degrees))),
  };
}

/** As it was typed, to six digits. */
const inDegrees = (degrees: number): string => `${String(Number(degrees.toPrecision(6))).replace('-', '−')}°`;

/** The selection mirrored about the upright or the level line through its middle. */
export function mirror(chip: Chip, refs: readonly Ref[], line: 'upright' | 'level'): Shaping {
  const parts = findParts(chip, refs);
  const box = boxOfParts(parts);
  if (!box) return NONE;
  const x = box.left + box.right;
  const y = box.bottom + box.top;
  return {
    label: `mirror ${nameParts(parts, counted)}`,
    put: parts.map((part) =>
      movedBy(part, (p) => (line === 'upright' ? [x - p[0], p[1]] : [p[0], y - p[1]])),
    ),
  };
}

export type Edge = 'left' | 'right' | 'top' | 'bottom' | 'middle across' | 'middle up';

/** Each part moved so that its edge or middle lies on that of the whole selection. */
export function align(chip: Chip, refs: readonly Ref[], edge: Edge): Shaping {
  const parts = findParts(chip, refs);
  const all = boxOfParts(parts);
  if (!all || parts.length < 2) return 'Choose at least two parts to align.';
  return {
    label: `align ${nameParts(parts, counted)}`,
    put: parts.map((part) => {
      const box = boxOf(placesOf(part))!;
      const by: Xy =
        edge === 'left'
          ? [all.left - box.left, 0]
          : edge === 'right'
            ? [all.right - box.right, 0]
            : edge === 'top'
              ? [0, all.top - box.top]
              : edge === 'bottom'
                ? [0, all.bottom - box.bottom]
                : edge === 'middle across'
                  ? [0, (all.bottom + all.top - box.bottom - box.top) / 2]
                  : [(all.left + all.right - box.left - box.right) / 2, 0];
      return movedBy(part, (p) => add(p, by));
    }),
  };
}

/** Copies of the selection at a pitch, `count` in all with the first. */
export function array(chip: Chip, refs: readonly Ref[], count: number, pitch: Xy): Shaping {
  const parts = findParts(chip, refs);
  if (parts.length === 0) return NONE;
  if (!Number.isInteger(count) || count < 2 || count > 1000) return 'An array has from 2 to 1000 members.';
  if (pitch[0] === 0 && pitch[1] === 0) return 'The pitch must not be nought.';
  const taken = takenIds(chip);
  const put: PartValue[] = [];
  for (let n = 1; n < count; n += 1)
    for (const part of parts) {
      const moved = movedBy(part, (p) => add(p, [n * pitch[0], n * pitch[1]]));
      put.push(renamed(moved, copyId(part.value.id, taken)));
    }
  return { label: `array of ${nameParts(parts, counted)}`, put };
}

export const renamed = (part: PartValue, id: string): PartValue =>
  ({ kind: part.kind, value: { ...part.value, id } }) as PartValue;

/** "well 3" of "well 2": the stem with the first free number; enters it into `taken`. */
export function copyId(id: string, taken: Set<string>): string {
  const stem = id.replace(/ ?\d+$/, '') || id;
  for (let n = 2; ; n += 1) {
    const next = `${stem} ${n}`.slice(-64);
    if (!taken.has(next)) {
      taken.add(next);
      return next;
    }
  }
}

/** A parallel copy of each channel, `by` nm to its left. */
export function offset(chip: Chip, refs: readonly Ref[], by: number): Shaping {
  const parts = findParts(chip, refs).filter((part) => part.kind === 'channel');
  if (parts.length === 0) return 'Choose a channel to offset.';
  const taken = takenIds(chip);
  return {
    label: `offset ${nameParts(parts, counted)}`,
    put: parts.map(({ value }) => ({
      kind: 'channel',
      value: {
        ...value,
        id: copyId(value.id, taken),
        path: tidy(offsetPath(value.path, by).map(whole)) as Channel['path'],
      },
    })),
  };
}

/** A channel cut in two at the place nearest to `at`, or in its middle. */
export function split(chip: Chip, refs: readonly Ref[], at?: Xy): Shaping {
  const [part, ...more] = findParts(chip, refs).filter((found) => found.kind === 'channel');
  if (!part || more.length > 0 || part.kind !== 'channel') return 'Choose one channel to split.';
  const { value } = part;
  const total = pathLength(value.path);
  const along = at ? nearestOnPath(at, value.path).along : total / 2;
  if (along < 1 || along > total - 1) return 'There it ends already; choose a place along the channel.';
  const first: Xy[] = [];
  const second: Xy[] = [];
  let before = 0;
  value.path.forEach((p, i) => {
    if (i > 0) {
      const a = value.path[i - 1]!;
      const length = Math.hypot(p[0] - a[0], p[1] - a[1]);
      if (before < along && before + length >= along) {
        const t = (along - before) / length;
        const cut = whole([a[0] + t * (p[0] - a[0]), a[1] + t * (p[1] - a[1])]);
        first.push(cut);
        second.push(cut);
      }
      before += length;
    }
    if (before < along) first.push(p);
    else if (!second.some((q) => same(q, p))) second.push(p);
  });
  const middle = Math.round(value.width[0] + ((value.width[1] - value.width[0]) * along) / total);
  const id = copyId(value.id, takenIds(chip));
  return {
    label: `split ${value.id}`,
    put: [
      {
        kind: 'channel',
        value: { ...value, path: tidy(first) as Channel['path'], width: [value.width[0], middle] },
      },
      {
        kind: 'channel',
        value: { ...value, id, path: tidy(second) as Channel['path'], width: [middle, value.width[1]] },
      },
    ],
  };
}

/** Channels that share ends made one, in a chain from the first. */
export function join(chip: Chip, refs: readonly Ref[]): Shaping {
  const channels = findParts(chip, refs).flatMap((part) => (part.kind === 'channel' ? [part.value] : []));
  const [first, ...others] = channels;
  if (!first || others.length === 0) return 'Choose two or more channels that meet end to end.';
  if (others.some((other) => other.layer !== first.layer)) return 'They lie on different layers.';
  let path: readonly Xy[] = first.path;
  let width: readonly [number, number] = first.width;
  const left = [...others];
  while (left.length > 0) {
    const i = left.findIndex(({ path: p }) =>
      [p[0]!, p.at(-1)!].some((end) => same(end, path[0]!) || same(end, path.at(-1)!)),
    );
    if (i < 0) return 'They do not meet end to end; move their ends onto one another first.';
    const [next] = left.splice(i, 1);
    let p: readonly Xy[] = next!.path;
    let w = next!.width;
    const atEnd = [p[0]!, p.at(-1)!].some((end) => same(end, path.at(-1)!));
    if (same(p.at(-1)!, atEnd ? path.at(-1)! : path[0]!) === atEnd) {
      p = [...p].reverse();
      w = [w[1], w[0]];
    }
    path = atEnd ? [...path, ...p.slice(1)] : [...p.slice(0, -1), ...path];
    width = atEnd ? [width[0], w[1]] : [w[0], width[1]];
  }
  return {
    label: `join ${counted(channels.length, 'channel')}`,
    drop: others.map((other) => `channel:${other.id}`),
    put: [{ kind: 'channel', value: { ...first, path: tidy(path) as Channel['path'], width } }],
  };
}

/** The selection taken away. */
export function remove(chip: Chip, refs: readonly Ref[]): Shaping {
  const parts = findParts(chip, refs);
  if (parts.length === 0) return NONE;
  return { label: `delete ${nameParts(parts, counted)}`, drop: parts.map(refOfPart) };
}

/** One width for all channels that are chosen. */
export function widen(chip: Chip, refs: readonly Ref[], width: number): Shaping {
  const parts = findParts(chip, refs).filter((part) => part.kind === 'channel');
  if (parts.length === 0) return 'Choose a channel first.';
  return {
    label: `set the width of ${nameParts(parts, counted)}`,
    put: parts.map(
      ({ value }) => ({ kind: 'channel', value: { ...value, width: [width, width] } }) as PartValue,
    ),
  };
}

/** An id for a new part, for those who make more than one at once. */
export const nextId = (chip: Chip, stem: string): string => freshId(chip, stem);
