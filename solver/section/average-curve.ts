import type { WallCurve } from './wall-curve.ts';

/**
 * The shear of a measured, closed wall averaged over a length `window` around each point: what single
 * measured points do to it is noise. The average is of the force ∫shear ds, so that it stays in balance.
 */
export function averageCurve(curve: WallCurve, window: number): WallCurve {
  const count = curve.s.length;
  const total = curve.to[curve.to.length - 1];
  // Two points per edge, half its length each: running sums up to the middle between points.
  const edge = new Float64Array(count + 1);
  const force = new Float64Array(count + 1);
  const doubt = new Float64Array(count + 1);
  for (let p = 0; p < count; p += 1) {
    const partner = p % 2 === 0 ? p + 1 : p - 1;
    const length = (Math.abs(curve.s[partner] - curve.s[p]) * Math.sqrt(3)) / 2;
    edge[p + 1] = edge[p] + length;
    force[p + 1] = force[p] + curve.shear[p] * length;
    doubt[p + 1] = doubt[p] + curve.doubt[p] * length;
  }
  const upTo = (sums: Float64Array, s: number): number => {
    const turns = Math.floor(s / total);
    const rest = s - turns * total;
    let [low, high] = [0, count];
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (edge[middle] <= rest) low = middle;
      else high = middle;
    }
    const t = Math.min(1, (rest - edge[low]) / (edge[low + 1] - edge[low]));
    return turns * sums[count] + sums[low] + t * (sums[low + 1] - sums[low]);
  };
  const average = (sums: Float64Array): Float64Array =>
    Float64Array.from(curve.s, (s) => (upTo(sums, s + window / 2) - upTo(sums, s - window / 2)) / window);
  return {
    ...curve,
    shear: average(force),
    doubt: average(doubt),
    start: Int32Array.of(0, count),
    from: Float64Array.of(0),
    to: Float64Array.of(total),
    ends: [['bend', 'bend']],
    endsAt: [[curve.endsAt[0][0], curve.endsAt[0][0]]],
  };
}
