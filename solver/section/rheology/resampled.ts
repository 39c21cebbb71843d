import type { Rising } from './inverse.ts';

/** Samples per decade: cubic interpolation with exact slopes is within 2e-5 for all models (checked). */
const PER_DECADE = 24;
const STEP = Math.LN10 / PER_DECADE;
const DECADES = 10;
const HALF = PER_DECADE * DECADES;

/**
 * The same rising function made quick: sampled where it is asked for, at fixed places of a logarithmic
 * scale, and interpolated between, so that no value depends on what was asked before.
 *
 * @param zero the function is zero up to here, and positive beyond
 * @param scale samples are taken within ten decades of it, measured from `zero`; beyond, the function itself
 */
export function resampled(of: Rising, zero: number, scale: number): Rising {
  const count = 2 * HALF + 1;
  const value = new Float64Array(count).fill(Number.NaN);
  const slope = new Float64Array(count);
  const base = Math.log(scale);
  const out2 = new Float64Array(2);
  const sample = (k: number): void => {
    const beyond = Math.exp(base + (k - HALF) * STEP);
    of(zero + beyond, out2);
    value[k] = Math.log(out2[0]);
    slope[k] = (beyond * out2[1]) / out2[0];
  };
  return (x, out) => {
    const beyond = x - zero;
    if (!(beyond > 0)) {
      of(x, out);
      return;
    }
    const at = (Math.log(beyond) - base) / STEP + HALF;
    if (!(at >= 0 && at < count - 1)) {
      of(x, out);
      return;
    }
    const k = Math.floor(at);
    if (Number.isNaN(value[k])) sample(k);
    if (Number.isNaN(value[k + 1])) sample(k + 1);
    const rise = value[k + 1] - value[k];
    const m0 = Math.min(slope[k] * STEP, 3 * rise);
    const m1 = Math.min(slope[k + 1] * STEP, 3 * rise);
    const s = at - k;
    const r = 1 - s;
    out[0] = Math.exp(value[k] + s * s * (3 - 2 * s) * rise + s * r * (r * m0 - s * m1));
    const perStep = 6 * s * r * rise + r * (1 - 3 * s) * m0 + s * (3 * s - 2) * m1;
    out[1] = (out[0] * perStep) / (STEP * beyond);
  };
}
