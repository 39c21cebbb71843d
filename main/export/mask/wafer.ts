import { Problem } from '../../../solver/problem/problem.ts';
import type { WaferOptions } from '../../contract/mask.ts';
import type { Box } from './shapes.ts';

/** A rectangle of chips at the array's pitch; (x, y) is the centre of its lower left chip. */
export interface WaferBlock {
  readonly x: number;
  readonly y: number;
  readonly columns: number;
  readonly rows: number;
}

/** Chips on a wafer whose centre is (0, 0); nm. */
export interface WaferLayout {
  readonly diameter: number;
  readonly edge: number;
  readonly pitch: readonly [number, number];
  readonly blocks: readonly WaferBlock[];
  readonly centres: readonly (readonly [number, number])[];
}

const MOST_CHIPS = 10_000;

export const mm = (nm: number): string => `${Number((nm / 1e6).toFixed(3))} mm`;

/**
 * As many chips as lie wholly within the wafer less its edge ring, on a grid symmetric to its centre:
 * with a chip or the space between two in the centre, whichever holds more. `field` is all that is drawn
 * of one chip, `centre` its point of reference; chips may lie as close as `pitch` has it.
 */
export function waferLayout(
  field: Box,
  centre: readonly [number, number],
  { diameter, edge }: WaferOptions,
  pitch: readonly [number, number],
): WaferLayout {
  const size = [field.x1 - field.x0, field.y1 - field.y0] as const;
  const radius = diameter / 2 - edge;
  const area = Math.PI * Math.max(0, radius) ** 2;
  if (area / (pitch[0] * pitch[1]) > MOST_CHIPS) {
    throw new Problem(
      'too-many',
      `More than ${MOST_CHIPS} chips would lie on the wafer.`,
      'wafer',
      'Give a larger pitch or a smaller wafer.',
    );
  }
  // how far the drawing reaches from a chip's centre
  const low = [field.x0 - centre[0], field.y0 - centre[1]] as const;
  const high = [field.x1 - centre[0], field.y1 - centre[1]] as const;
  const middle = [(low[0] + high[0]) / 2, (low[1] + high[1]) / 2] as const;
  let best: [number, number][] = [];
  for (const shiftX of [0, 0.5]) {
    for (const shiftY of [0, 0.5]) {
      const found: [number, number][] = [];
      const across = Math.ceil(radius / pitch[0]) + 1;
      const up = Math.ceil(radius / pitch[1]) + 1;
      for (let j = -up; j <= up; j++) {
        for (let i = -across; i <= across; i++) {
          const x = Math.round((i + shiftX) * pitch[0] - middle[0]);
          const y = Math.round((j + shiftY) * pitch[1] - middle[1]);
          const farX = Math.max(Math.abs(x + low[0]), Math.abs(x + high[0]));
          const farY = Math.max(Math.abs(y + low[1]), Math.abs(y + high[1]));
          if (Math.hypot(farX, farY) <= radius) found.push([x, y]);
        }
      }
      if (found.length > best.length) best = found;
    }
  }
  if (best.length === 0) {
    throw new Problem(
      'range',
      `One chip with its marks and lane takes ${mm(size[0])} × ${mm(size[1])}: it does not fit on a wafer of ${mm(diameter)} with an edge of ${mm(edge)}.`,
      'wafer',
      'Take a larger wafer, a smaller edge, or leave marks or lane out.',
    );
  }
  return { diameter, edge, pitch, blocks: blocksOf(best, pitch), centres: best };
}

/** Rows of chips, equal neighbours taken together. */
function blocksOf(
  centres: readonly (readonly [number, number])[],
  pitch: readonly [number, number],
): WaferBlock[] {
  const rows = new Map<number, number[]>();
  for (const [x, y] of centres) rows.set(y, [...(rows.get(y) ?? []), x]);
  const blocks: { x: number; y: number; columns: number; rows: number }[] = [];
  for (const [y, xs] of [...rows].sort((a, b) => a[0] - b[0])) {
    const x = Math.min(...xs);
    const last = blocks[blocks.length - 1];
    if (last && last.x === x && last.columns === xs.length && y === last.y + last.rows * pitch[1])
      last.rows += 1;
    else blocks.push({ x, y, columns: xs.length, rows: 1 });
  }
  return blocks;
}
