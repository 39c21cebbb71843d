import type { CellShape } from './shape.ts';

/**
 * A port's hole in the roof is a face at its rim, with one pressure all round and over the depth. What
 * that leaves out is the turn from the layer into the hole, of the order of the entry loss of a
 * pipe, 3/2 mu Q / a^3 (Weissberg 1962, Phys. Fluids 5, 1033, half of Sampson's orifice; from memory).
 * A resistance R in series at face i changes p Y p by at most R Y_ii of itself: that share is returned, the
 * largest over the faces with an arc, 0 where there is none.
 */
export function rimError(shape: CellShape, portMatrix: Float64Array): number {
  const { loops, faces } = shape;
  const radius = new Float64Array(faces).fill(Number.POSITIVE_INFINITY);
  for (const loop of loops)
    loop.forEach((edge, i) => {
      if (edge.tag === 0 || edge.bulge === 0) return;
      const next = loop[(i + 1) % loop.length];
      const chord = Math.hypot(next.x - edge.x, next.y - edge.y);
      const here = chord / (2 * Math.abs(Math.sin(2 * Math.atan(edge.bulge))));
      radius[edge.tag - 1] = Math.min(radius[edge.tag - 1], here);
    });
  let most = 0;
  for (let i = 0; i < faces; i += 1)
    most = Math.max(most, (1.5 / radius[i] ** 3) * portMatrix[i * faces + i]);
  return most;
}
