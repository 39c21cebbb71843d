import type { Chip } from '../chip/chip.ts';
import { metres } from '../chip/units.ts';
import type { Measured } from './measured.ts';

export interface Average {
  /** m */
  readonly value: number;
  /** ±, m */
  readonly uncertainty: number;
}

type One = Pick<Measured, 'value' | 'uncertainty'>;

/**
 * What several measurements leave open of their mean: what they state (kept whole, because an instrument that reads
 * high does so every time), and twice the standard error of how they scatter about what was fitted to them.
 */
function openOf(list: readonly One[], residuals: readonly number[], fitted: number): number {
  const stated = list.reduce((sum, { uncertainty }) => sum + (uncertainty ?? 0) ** 2, 0) / list.length;
  const free = list.length - fitted;
  const scatter = free > 0 ? residuals.reduce((sum, r) => sum + r * r, 0) / free : 0;
  return Math.sqrt(stated + (4 * scatter) / list.length);
}

/** The plain mean. */
export function averaged(list: readonly One[]): Average {
  const value = list.reduce((sum, one) => sum + one.value, 0) / list.length;
  return {
    value,
    uncertainty: openOf(
      list,
      list.map((one) => one.value - value),
      1,
    ),
  };
}

/**
 * The one size with the same resistance as sizes measured along a channel, resistance ~ size^power. Each stands for
 * the stretch nearest to it where all places are known, else all for alike.
 *
 * @param length of the channel, in the unit of `s`
 */
export function evenly(
  list: readonly (One & { readonly s: number | null })[],
  length: number,
  power: number,
): Average {
  const sorted = [...list].sort((a, b) => (a.s ?? 0) - (b.s ?? 0));
  const placed = sorted.every(({ s }) => s !== null);
  const middle = (i: number): number =>
    i < 0 ? 0 : i + 1 >= sorted.length ? length : (sorted[i].s! + sorted[i + 1].s!) / 2;
  const weights = sorted.map((_, i) => (placed ? middle(i) - middle(i - 1) : 1));
  const whole = weights.reduce((sum, w) => sum + w, 0);
  const mean = sorted.reduce((sum, one, i) => sum + (weights[i] / whole) * one.value ** power, 0);
  const value = mean ** (1 / power);
  // Where every place stands for its own stretch, scatter is no doubt about the mean.
  const residuals = sorted.map((one) => (placed ? 0 : one.value - value));
  return { value, uncertainty: openOf(sorted, residuals, 1) };
}

/** The straight line of least squares over s from 0 to 1. */
export function fitLine(list: readonly (One & { readonly s: number })[]): {
  at(s: number): number;
  readonly uncertainty: number;
} {
  const n = list.length;
  const s0 = list.reduce((sum, { s }) => sum + s, 0) / n;
  const v0 = list.reduce((sum, { value }) => sum + value, 0) / n;
  const spread = list.reduce((sum, { s }) => sum + (s - s0) ** 2, 0);
  const slope = list.reduce((sum, { s, value }) => sum + (s - s0) * (value - v0), 0) / spread;
  const at = (s: number): number => v0 + slope * (s - s0);
  return {
    at,
    uncertainty: openOf(
      list,
      list.map(({ s, value }) => value - at(s)),
      2,
    ),
  };
}

/**
 * The plane of least squares through values at places; null where fewer than three are given, or all (nearly) lie on
 * one line, where a tilt across it is anyone's guess.
 */
export function fitPlane(list: readonly Measured[]): {
  at(place: readonly [number, number]): number;
  /** Difference between the highest and the lowest corner of the chip, m. */
  tilt(chip: Chip): number;
  readonly uncertainty: number;
} | null {
  const n = list.length;
  if (n < 3) return null;
  const mean = (value: (one: Measured) => number): number =>
    list.reduce((sum, one) => sum + value(one), 0) / n;
  const [x0, y0, v0] = [mean(({ at }) => at![0]), mean(({ at }) => at![1]), mean(({ value }) => value)];
  let [xx, xy, yy, xv, yv] = [0, 0, 0, 0, 0];
  for (const { at, value } of list) {
    const [dx, dy, dv] = [at![0] - x0, at![1] - y0, value - v0];
    xx += dx * dx;
    xy += dx * dy;
    yy += dy * dy;
    xv += dx * dv;
    yv += dy * dv;
  }
  const det = xx * yy - xy * xy;
  // The places' spread across their longest line must be a twentieth of that along it.
  if (!(det > (xx + yy) ** 2 / 400)) return null;
  const bx = (xv * yy - yv * xy) / det;
  const by = (yv * xx - xv * xy) / det;
  const at = ([x, y]: readonly [number, number]): number => v0 + bx * (x - x0) + by * (y - y0);
  return {
    at,
    tilt: ({ outline }) => Math.abs(bx) * metres(outline.width) + Math.abs(by) * metres(outline.height),
    uncertainty: openOf(
      list,
      list.map((one) => one.value - at(one.at!)),
      3,
    ),
  };
}
