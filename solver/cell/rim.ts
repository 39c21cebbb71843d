import type { CellSolution } from './cell.ts';
import type { CellShape } from './shape.ts';

/**
 * A port's hole in the roof is solved as a face at its rim, with one pressure all round and over the
 * depth. What that leaves out, the turn from the layer into the hole, is added as a resistance in series,
 *   3/2 / a^3 + 0.55 (1 - exp(-(a/h)^2)) 12 / (h^2 w),   per viscosity,
 * a the hole's radius, h the depth, w the width that the flow arrives over (the rim's length, at most the
 * hole's diameter). First term: entry of a pipe much narrower than the layer is deep (half of Sampson's
 * orifice; Weissberg 1962, Phys. Fluids 5, 1033, from memory). Second: entry of a layer much shallower than the
 * hole is wide, about half a depth of channel; its constants were fitted to tetrahedra for a/h of
 * 0.5 to 3 and channels 1.3 to 4 times as wide as the hole, and met them within a sixth of the sum.
 */
const ENTRY = 1.5;
const LAYER = 0.55 * 12;
/** Share of what is added that is not trusted: about twice what the tetrahedra differed by. */
const DOUBT = 0.3;

/** Resistance in series at each face, per viscosity; 0 where there is no hole. In the shape's unit. */
export function holeResistances({ loops, faces, depth }: CellShape): Float64Array {
  const radius = new Float64Array(faces).fill(Number.POSITIVE_INFINITY);
  const rim = new Float64Array(faces);
  for (const loop of loops)
    loop.forEach((edge, i) => {
      if (edge.tag === 0 || edge.bulge === 0) return;
      const next = loop[(i + 1) % loop.length];
      const chord = Math.hypot(next.x - edge.x, next.y - edge.y);
      const half = 2 * Math.atan(Math.abs(edge.bulge));
      const here = chord / (2 * Math.sin(half));
      radius[edge.tag - 1] = Math.min(radius[edge.tag - 1], here);
      rim[edge.tag - 1] += 2 * half * here;
    });
  return radius.map((a, face) => {
    if (a === Number.POSITIVE_INFINITY) return 0;
    const layer = 1 - Math.exp(-((a / depth) ** 2));
    return ENTRY / a ** 3 + (LAYER * layer) / (depth ** 2 * Math.min(rim[face], 2 * a));
  });
}

/** A port matrix with resistances in series at its faces. */
export function inSeries(matrix: Float64Array, resistances: Float64Array): Float64Array {
  const n = resistances.length;
  const out = matrix.slice();
  for (let k = 0; k < n; k += 1) {
    const r = resistances[k];
    if (r === 0) continue;
    const column = Float64Array.from({ length: n }, (_, i) => out[i * n + k]);
    const factor = r / (1 + r * column[k]);
    for (let i = 0; i < n; i += 1)
      for (let j = 0; j < n; j += 1) out[i * n + j] -= factor * column[i] * column[j];
  }
  return out;
}

/**
 * Bound of the relative error of p Y p that the resistances bring, Y with them: a resistance in series at
 * face i takes at most its share R Y_ii of the power.
 */
export function seriesError(matrix: Float64Array, resistances: Float64Array): number {
  const n = resistances.length;
  let most = 0;
  for (let i = 0; i < n; i += 1) most = Math.max(most, DOUBT * resistances[i] * matrix[i * n + i]);
  return most;
}

/** Pressures at the rims of holes, where the fields begin, for those in the network beyond them. */
export function rimPressures(
  { faces, portMatrix, inner, holes }: CellSolution,
  pressures: ArrayLike<number>,
): ArrayLike<number> {
  if (inner === portMatrix) return pressures;
  const out = new Float64Array(faces);
  for (let i = 0; i < faces; i += 1) {
    let flow = 0;
    for (let j = 0; j < faces; j += 1) flow += portMatrix[i * faces + j] * pressures[j];
    out[i] = pressures[i] - holes[i] * flow;
  }
  return out;
}
