import { type Axis, type Pair, pairOf, placeOn, pointOn, widthOn } from './pairs.ts';
import { type Knot, type Strip, type Strips, stripOn } from './strips.ts';
import type { Wall } from './walls.ts';

/** What rounding to whole nanometres may move a corner by, nm. */
const ROUNDING = 3;
/** Straight stretches shorter than this many widths are left to the triangles. */
const SHORTEST = 1;

/**
 * The strips of an outline that is one channel of even width with square ends: its walls face each other
 * one by one, on either side of the way from one end to the other, round bends and mitred corners. Null
 * where they do not; the triangles then tell what the area is.
 */
export function ribbonStrips(loops: readonly (readonly Wall[])[]): Strips | null {
  const [walls] = loops;
  if (loops.length !== 1 || walls.length < 6 || walls.length % 2 !== 0) return null;
  for (let cap = 0; cap < walls.length / 2; cap += 1) {
    const found = ribbonFrom(walls, cap);
    if (found) return found;
  }
  return null;
}

/** One stretch of a ribbon, its places in the order in which it is run through. */
interface Stretch {
  readonly axis: Axis;
  readonly from: number;
  readonly to: number;
}

function ribbonFrom(walls: readonly Wall[], cap: number): Strips | null {
  const n = walls.length;
  const [first, last] = [walls[cap], walls[cap + n / 2]];
  if (first.sweep !== 0 || last.sweep !== 0) return null;
  const width = lengthOf(first);
  if (Math.abs(lengthOf(last) - width) > ROUNDING) return null;
  const pairs: { right: Wall; left: Wall; pair: Pair }[] = [];
  for (let k = 1; k < n / 2; k += 1) {
    const [right, left] = [walls[cap + k], walls[(cap + n - k) % n]];
    const pair = pairOf(right, left);
    if (!pair || Math.abs(widthOn(pair.axis, pair.from) - width) > ROUNDING) return null;
    if (pair.axis.slope !== 0) return null;
    pairs.push({ right, left, pair });
  }
  const stretches: Stretch[] = pairs.map(({ right, pair: { axis, from, to } }) =>
    // Along a right wall that bends to the right the way goes clockwise.
    right.sweep < 0 ? { axis, from: to, to: from } : { axis, from, to },
  );
  for (let k = 0; k <= pairs.length; k += 1) {
    const corners = [pairs[k - 1] && cornersAt(pairs[k - 1], true), pairs[k] && cornersAt(pairs[k], false)];
    const at = (corners[0] ?? corners[1])!;
    const middle = [(at[0] + at[2]) / 2, (at[1] + at[3]) / 2] as const;
    const bent = corners[0] && corners[1] && straight(stretches[k - 1]) && straight(stretches[k]);
    for (const [i, place] of [
      [k - 1, 'to'],
      [k, 'from'],
    ] as const) {
      const stretch = stretches[i];
      if (!stretch) continue;
      const [a, b] = [placeOf(stretch, at[0], at[1]), placeOf(stretch, at[2], at[3])];
      const size = stretch.axis.kind === 'line' ? 1 : stretch.axis.radius;
      // Mitred corners lie on either side of where the centrelines meet; elsewhere the way is cut square.
      if (bent) {
        if (Math.abs(offAxis(stretch.axis, middle[0], middle[1])) > ROUNDING) return null;
      } else if (Math.max(Math.abs(a - stretch[place]), Math.abs(b - stretch[place])) * size > ROUNDING)
        return null;
    }
  }
  const strips: Strip[] = [];
  for (const { axis, from, to } of stretches) {
    const strip = stripOn(axis, Math.min(from, to), Math.max(from, to), width);
    if (!strip || (axis.kind === 'line' && strip.length < SHORTEST * width)) return null;
    strips.push(strip);
  }
  const knots: Knot[] = [];
  for (let k = 1; k < strips.length; k += 1) {
    // The end of a strip that stands at its lesser place is its first.
    const [out, into] = [stretches[k - 1], stretches[k]];
    const [before, after] = [out.to > out.from ? 1 : 0, into.to > into.from ? 0 : 1] as const;
    strips[k - 1].ends[before].knot = k - 1;
    strips[k].ends[after].knot = k - 1;
    knots.push({
      ends: [
        { strip: k - 1, end: before },
        { strip: k, end: after },
      ],
      area: 0,
    });
  }
  return { strips, knots };
}

const straight = ({ axis }: Stretch): boolean => axis.kind === 'line';

const lengthOf = ({ x0, y0, x1, y1 }: Wall): number => Math.hypot(x1 - x0, y1 - y0);

/** Right and left corner where a stretch ends, or where it begins: the walls run round the fluid. */
function cornersAt(
  { right, left }: { right: Wall; left: Wall },
  end: boolean,
): [number, number, number, number] {
  return end ? [right.x1, right.y1, left.x0, left.y0] : [right.x0, right.y0, left.x1, left.y1];
}

function placeOf({ axis, from, to }: Stretch, x: number, y: number): number {
  return placeOn(axis, x, y, (from + to) / 2);
}

function offAxis(axis: Axis, x: number, y: number): number {
  const [px, py] = pointOn(axis, placeOn(axis, x, y, 0));
  return Math.hypot(x - px, y - py);
}
