import type { Shape } from '../../../solver/mesh/mesh.ts';
import { polygon, rectangle } from './shapes.ts';

/**
 * Pairs of alignment marks that measure how far one drawing lies off another in two axes. Each pair is
 * two graduated scales of slightly different pitch (the vernier principle) face to face, one across and
 * one up, and a cross in a window for the first rough setting. The first drawing of a pair holds the
 * scales of the wider pitch and the cross; the second the others.
 *
 * Teeth stand at n (pitch + step) on the first and at n pitch on the second. Where the second drawing
 * lies off by d, the teeth that line up are those with n (pitch + step) = n pitch + d, so d = n step: the
 * number of the tooth that lines up, counted right (or up) from the long one in the middle, times the step.
 */

/** Teeth on each side of the middle one. */
const TEETH = 5;
/** In units of line width. */
const PITCH = 4;
const STEP = 1 / TEETH;
const TOOTH = 8;
const MIDDLE = 10;
const SPINE = 2;
/** Half the gap between the tips of the two scales. */
const FACE = 0.25;
const CROSS = 8;

/** Room that one pair takes, in units of line width. */
export const MARK_WIDTH = 48;
export const MARK_HEIGHT = 76;
/** From the lane, and on a wafer from the next chip, to the marks, in units of line width. */
export const MARK_GAP = 12;

/** Offset of one tooth, in the unit's own length. */
export const markStep = (unit: number): number => unit * STEP;
/** Largest offset that the scales measure. */
export const markRange = (unit: number): number => unit * STEP * TEETH;

export type MarkSide = 'first' | 'second';

/** One drawing's half of the pair centred at (x, y); `unit` is the line width, nm. */
export function markHalf(side: MarkSide, x: number, y: number, unit: number): Shape[] {
  const across = comb(side).map(([u, v]): [number, number] => [u, v + 24]);
  const up = comb(side).map(([u, v]): [number, number] => [-(v + 10), u - 12]);
  const shapes: Shape[] = [];
  const put = (points: readonly (readonly [number, number])[]): void => {
    shapes.push([polygon(points.map(([u, v]) => [x + u * unit, y + v * unit] as const))]);
  };
  put(across);
  put(up);
  const [cx, cy] = [14, -12];
  if (side === 'first') {
    const [a, h] = [CROSS, 1];
    put(
      [
        [-h, -a],
        [h, -a],
        [h, -h],
        [a, -h],
        [a, h],
        [h, h],
        [h, a],
        [-h, a],
        [-h, h],
        [-a, h],
        [-a, -h],
        [-h, -h],
      ].map(([u, v]) => [cx + u!, cy + v!] as const),
    );
  } else {
    for (const [sx, sy] of [
      [-1, -1],
      [1, -1],
      [1, 1],
      [-1, 1],
    ] as const) {
      const [u0, u1] = [cx + sx * 2, cx + sx * CROSS];
      const [v0, v1] = [cy + sy * 2, cy + sy * CROSS];
      const box = [Math.min(u0, u1), Math.min(v0, v1), Math.max(u0, u1), Math.max(v0, v1)] as const;
      shapes.push([rectangle(x + box[0] * unit, y + box[1] * unit, x + box[2] * unit, y + box[3] * unit)]);
    }
  }
  return shapes;
}

/** A scale along u with its teeth toward v = 0, in units, counter-clockwise: the first above, the second below. */
function comb(side: MarkSide): [number, number][] {
  const pitch = PITCH + (side === 'first' ? STEP : 0);
  const reach = TEETH * pitch + 0.5;
  const teeth: [number, number][] = [];
  for (let n = -TEETH; n <= TEETH; n++) {
    const back = n === 0 ? MIDDLE : TOOTH;
    teeth.push([n * pitch, back]);
  }
  // the spine runs behind the shorter teeth; the middle one is told apart by standing out behind it
  const top = TOOTH + SPINE;
  const points: [number, number][] = [];
  for (const [at] of teeth) {
    points.push([at - 0.5, FACE], [at + 0.5, FACE]);
    if (at < TEETH * pitch) points.push([at + 0.5, TOOTH], [at + pitch - 0.5, TOOTH]);
  }
  points.push([reach, top], [0.5, top], [0.5, top + MIDDLE - TOOTH], [-0.5, top + MIDDLE - TOOTH]);
  points.push([-0.5, top], [-reach, top]);
  return side === 'first' ? points : points.map(([u, v]): [number, number] => [u, -v]).reverse();
}

/** How the marks are read, in one sentence for the mask. */
export function markLegend(unit: number): string {
  const step = markStep(unit) / 1000;
  return (
    `Alignment: the teeth that line up, counted from the middle (long) tooth, times ${step} µm is how far the ` +
    'second layer lies off the first: right on the scale across, up on the scale upright.'
  );
}
