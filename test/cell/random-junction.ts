import type { CellShape } from '../../solver/cell/shape.ts';
import { type Arm, star } from './shapes.ts';

/** Numbers in [0, 1) from a seed (mulberry32, public domain). */
export function numbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/**
 * A junction of 2 to 6 arms 20 degrees apart at least, widths over a decade, depth 0.05 to 5 of the widest
 * arm, sharp (3 in 10) or with fillets of 0.02 to 0.5 of the narrowest.
 */
export function randomJunction(seed: number): CellShape {
  const next = numbers(seed);
  const count = 2 + Math.floor(next() * 5);
  const least = 20;
  let gaps: number[];
  do {
    const shares = Array.from({ length: count }, next);
    const sum = shares.reduce((a, b) => a + b, 0);
    gaps = shares.map((share) => least + ((360 - count * least) * share) / sum);
  } while (count > 2 && Math.max(...gaps) > 240);
  let angle = next() * 360;
  const arms: Arm[] = gaps.map((gap) => {
    const arm = { angle, width: 10 ** -next() };
    angle += gap;
    return arm;
  });
  const widest = Math.max(...arms.map(({ width }) => width));
  const narrowest = Math.min(...arms.map(({ width }) => width));
  const depth = widest * 10 ** (Math.log10(0.05) + 2 * next());
  const fillet = next() < 0.3 ? 0 : (0.02 + 0.48 * next()) * narrowest;
  return star(arms, depth, fillet);
}

/** A junction as drawn on chips: 3 or 4 arms 60 degrees apart at least, widths within a factor of 2, depth 0.2 to 1, fillets. */
export function plausibleJunction(seed: number): CellShape {
  const next = numbers(7919 + seed);
  const count = 3 + Math.floor(2 * next());
  const least = 60;
  const shares = Array.from({ length: count }, next);
  const sum = shares.reduce((a, b) => a + b, 0);
  let angle = 0;
  const arms = shares.map((share) => {
    const arm: Arm = { angle, width: 0.5 + 0.5 * next() };
    angle += least + ((360 - count * least) * share) / sum;
    return arm;
  });
  return star(arms, 0.2 + 0.8 * next(), 0.05 + 0.15 * next());
}
