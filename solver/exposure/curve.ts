import type { History } from './laws.ts';

/** Stress (Pa) that is bearable for a time (s): points of rising time and falling stress, straight in logarithms. */
export type StressCurve = readonly (readonly [time: number, stress: number])[];

/**
 * Time for which a stress is bearable: Infinity below the curve's last point (what is borne for that long is
 * taken as borne for good), null above its first, of which the curve says nothing.
 */
export function bearableTime(curve: StressCurve, stress: number): number | null {
  const last = curve.length - 1;
  if (stress > curve[0][1]) return null;
  if (stress < curve[last][1]) return Number.POSITIVE_INFINITY;
  let i = last;
  while (i > 0 && curve[i][1] < stress) i -= 1;
  const [time, at] = curve[i];
  if (i === last || at === stress) return time;
  const [later, lower] = curve[i + 1];
  const share = Math.log(at / stress) / Math.log(at / lower);
  return time * (later / time) ** share;
}

/** How much of what a curve allows a path uses up. */
export interface CurveUse {
  /** Largest ratio of the time spent at a stress or above it to the time for which that stress is bearable. */
  readonly use: number;
  /** The stress of that ratio, Pa. */
  readonly stress: number;
  /** Time above the curve's first point (its stress not known to be bearable at all), s. */
  readonly beyond: number;
}

/** Independent of how the path is cut: only the time spent at each stress or above it counts. */
export function curveUse(curve: StressCurve, { stress, time }: History): CurveUse {
  const order = Array.from(stress.keys()).sort((a, b) => stress[b] - stress[a]);
  let use = 0;
  let worst = 0;
  let beyond = 0;
  let above = 0;
  for (let k = 0; k < order.length; k += 1) {
    const tau = stress[order[k]];
    above += time[order[k]];
    // Equal stresses count together.
    if (k + 1 < order.length && stress[order[k + 1]] === tau) continue;
    const allowed = bearableTime(curve, tau);
    if (allowed === null) beyond = above;
    const ratio = above / (allowed ?? curve[0][0]);
    if (ratio > use) {
      use = ratio;
      worst = tau;
    }
  }
  return { use, stress: worst, beyond };
}
