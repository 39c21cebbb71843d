import type { Channel, Chip, Nm } from '../../solver/chip/chip.ts';
import type { Box } from '../geometry/path.ts';
import { pathLength, tidy } from '../geometry/path.ts';
import type { Xy } from '../geometry/vector.ts';
import { lengthFigure } from '../words/figure.ts';
import { type Maker, type Making, NOTHING } from './made.ts';

/**
 * A serpentine along a box: in at the middle of its left side, out at the middle of its right, legs up and
 * down between. With n legs of height a, box width w and corners rounded to r,
 *   length = w + n a - 2 (n + 1) (2 - pi/2) r.
 */
export interface SerpentineWishes {
  readonly layer: string;
  /** Length along the centreline, nm. */
  readonly length: Nm;
  readonly box: Box;
  readonly width: Nm;
  /** Least wall between neighbouring legs, nm. */
  readonly gap: Nm;
  readonly bendRadius: Nm;
  /** True: the box is crossed from bottom to top, with legs to the sides. */
  readonly upright: boolean;
}

/** Length that one rounded quarter turn takes off its two tangents, per radius. */
const TURN = 2 - Math.PI / 2;

export interface SerpentineReach {
  readonly least: Nm;
  readonly most: Nm;
  /** Most legs that fit. */
  readonly legs: number;
}

const inner = (wishes: Pick<SerpentineWishes, 'box' | 'upright'>): { w: number; h: number } => {
  const { box, upright } = wishes;
  const across = box.right - box.left;
  const high = box.top - box.bottom;
  return upright ? { w: high, h: across } : { w: across, h: high };
};

/** Lengths that a box can hold. */
export function serpentineReach(wishes: Omit<SerpentineWishes, 'length'>): SerpentineReach {
  const { w, h } = inner(wishes);
  const pitch = Math.max(wishes.width + wishes.gap, 2 * wishes.bendRadius);
  const legs = Math.floor(w / pitch) - 2;
  const amplitude = h - wishes.width;
  if (legs < 1 || amplitude <= 0) return { least: w, most: w, legs: 0 };
  const turns = 2 * (legs + 1) * TURN * wishes.bendRadius;
  return { least: w, most: Math.floor(w + legs * amplitude - turns), legs };
}

function build(name: string, wishes: SerpentineWishes, legs: number): Channel {
  const { w } = inner(wishes);
  const { box, length, bendRadius, upright } = wishes;
  const middle = upright ? (box.left + box.right) / 2 : (box.bottom + box.top) / 2;
  const start = upright ? box.bottom : box.left;
  const amplitude = legs === 0 ? 0 : (length - w + 2 * (legs + 1) * TURN * bendRadius) / legs;
  const place = (along: number, side: number): Xy => {
    const a = Math.round(start + along);
    const b = Math.round(middle + side);
    return upright ? [b, a] : [a, b];
  };
  const points: Xy[] = [place(0, 0)];
  const pitch = w / (legs + 2);
  let side = 0;
  for (let i = 0; i <= legs; i += 1) {
    const x = (i + 1) * pitch;
    points.push(place(x, side));
    side = i === legs ? 0 : i % 2 === 0 ? amplitude / 2 : -amplitude / 2;
    points.push(place(x, side));
  }
  points.push(place(w, 0));
  const path = legs === 0 ? [points[0]!, points.at(-1)!] : tidy(points);
  return {
    id: name,
    layer: wishes.layer,
    path: path as Channel['path'],
    width: [wishes.width, wishes.width],
    bendRadius: legs === 0 ? 0 : bendRadius,
  };
}

function make(name: string, wishes: SerpentineWishes): Making {
  const { w, h } = inner(wishes);
  const { length, width, bendRadius } = wishes;
  if (!(w > 0 && h > 0)) return { refusal: 'The box has no size; draw it from one corner to the other.' };
  if (h < width) return { refusal: `The box is ${lengthFigure(h)} high, less than the channel is wide.` };
  const reach = serpentineReach(wishes);
  const exact = Math.abs(length - w) <= 1;
  if (length < w - 1)
    return {
      refusal: `The box alone is ${lengthFigure(w)} long; ask for at least that, or draw a shorter box.`,
    };
  if (length > reach.most + 1 && !exact)
    return {
      refusal: `At most ${lengthFigure(reach.most)} fits into this box; make the box larger or the gap smaller.`,
    };
  if (exact) return { made: { ...NOTHING, channels: [build(name, wishes, 0)] } };
  for (let legs = 1; legs <= reach.legs; legs += 1) {
    const amplitude = (length - w + 2 * (legs + 1) * TURN * bendRadius) / legs;
    // two corners share each half leg, so that even the first needs room for its radii
    if (amplitude + width <= h + 1 && amplitude / 2 >= 2 * bendRadius)
      return { made: { ...NOTHING, channels: [build(name, wishes, legs)] } };
  }
  return {
    refusal: `No number of legs gives ${lengthFigure(length)} with this bend radius; make the radius smaller.`,
  };
}

/** What a drawn serpentine does not show of the wishes for it: the box may be higher, the walls may be thinner. */
export interface SerpentineRoom {
  /** Least wall, nm. */
  readonly wall?: Nm;
  /** Of the box, across the way of the serpentine, nm. */
  readonly high?: Nm;
}

/** The wishes of a serpentine as it is drawn, in the room that was wished for it; else walls as wide as itself may be left. */
export function readSerpentine(chip: Chip, name: string, room: SerpentineRoom = {}): SerpentineWishes | null {
  const channel = chip.channels.find((part) => part.id === name);
  if (!channel || channel.path.length < 6 || channel.width[0] !== channel.width[1]) return null;
  const { path, bendRadius } = channel;
  const first = path[0]!;
  const last = path.at(-1)!;
  const upright = first[0] === last[0];
  if (!upright && first[1] !== last[1]) return null;
  const legs = (path.length - 4) / 2;
  if (!Number.isInteger(legs)) return null;
  const sides = path.map((p) => Math.abs(upright ? p[0] - first[0] : p[1] - first[1]));
  const half = Math.max(...sides);
  const [from, to] = upright ? [first[1], last[1]] : [first[0], last[0]];
  if (to <= from) return null;
  const middle = upright ? first[0] : first[1];
  const high = Math.max(half + channel.width[0] / 2, (room.high ?? 0) / 2);
  const box: Box = upright
    ? { left: middle - high, right: middle + high, bottom: from, top: to }
    : { left: from, right: to, bottom: middle - high, top: middle + high };
  const wishes: SerpentineWishes = {
    layer: channel.layer,
    length: Math.round(pathLength(path, bendRadius)),
    box,
    width: channel.width[0],
    gap: Math.max(
      1,
      Math.min(room.wall ?? channel.width[0], Math.floor((to - from) / (legs + 2)) - channel.width[0]),
    ),
    bendRadius,
    upright,
  };
  const again = build(name, wishes, legs);
  const near = again.path.length === path.length && again.path.every((p, i) => close(p, path[i]!));
  return near ? wishes : null;
}

/** Lengths are whole nanometres while amplitudes need not be: a few nm of rounding per point. */
const close = (a: Xy, b: Xy): boolean => Math.abs(a[0] - b[0]) <= 4 && Math.abs(a[1] - b[1]) <= 4;

export const serpentine: Maker<SerpentineWishes> = {
  kind: 'serpentine',
  make,
  read: (chip, name) => readSerpentine(chip, name),
};
