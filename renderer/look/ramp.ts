import { hex, oklch } from './oklch.ts';
import type { Scheme } from './tokens.ts';

const clamp = (t: number): number => Math.min(1, Math.max(0, t));

/** Colour of an amount, t from 0 to 1; lightness alone orders it. */
export function amount(scheme: Scheme, t: number): string {
  const x = clamp(t);
  const bow = Math.sin(Math.PI * x);
  return hex(
    scheme === 'light'
      ? oklch(0.86 - 0.5 * x, 0.085 + 0.045 * bow, 100 + 175 * x ** 0.85)
      : oklch(0.42 + 0.5 * x, 0.075 + 0.055 * bow, 275 - 175 * x),
  );
}

const BELOW = 70;
const ABOVE = 275;

/**
 * Colour of a deviation, t from -1 (below) to 1 (above): ochre and indigo, away from a neutral middle,
 * darkening in light, lightening in dark.
 */
export function deviation(scheme: Scheme, t: number): string {
  const x = clamp(Math.abs(t));
  const hue = t < 0 ? BELOW : ABOVE;
  return hex(
    scheme === 'light' ? oklch(0.84 - 0.42 * x, 0.12 * x, hue) : oklch(0.46 + 0.42 * x, 0.12 * x, hue),
  );
}

/** Shades into which a ramp is cut for drawing: one path per shade. */
export const SHADES = 64;
const cuts = new Map<string, readonly string[]>();

/** A ramp cut into `SHADES` colours, in order. */
export function shades(scheme: Scheme, kind: 'amount' | 'deviation'): readonly string[] {
  const key = `${scheme} ${kind}`;
  let made = cuts.get(key);
  if (!made) {
    made = Array.from({ length: SHADES }, (_, i) => {
      const t = i / (SHADES - 1);
      return kind === 'amount' ? amount(scheme, t) : deviation(scheme, 2 * t - 1);
    });
    cuts.set(key, made);
  }
  return made;
}
