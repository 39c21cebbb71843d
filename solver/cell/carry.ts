import type { Mesh } from '../mesh/mesh.ts';
import { locate, locatorOf, type Place } from './locate.ts';

/**
 * Linear pressures of one mesh at the corners of another mesh of the same shape; beyond an arc's chord
 * the nearest corner's.
 *
 * @param pressure mode by mode, each `patterns` times `from.vertexCount` values
 */
export function carryPressure(
  from: Mesh,
  pressure: readonly Float64Array[],
  patterns: number,
  to: Mesh,
): Float64Array[] {
  const locator = locatorOf(from);
  const place: Place = { triangle: -1, la: 0, lb: 0 };
  const out = pressure.map(() => new Float64Array(patterns * to.vertexCount));
  for (let v = 0; v < to.vertexCount; v += 1) {
    const inside = locate(locator, to.x[v], to.y[v], place);
    const t = 6 * place.triangle;
    const [a, b, c] = inside
      ? [from.triangles[t], from.triangles[t + 1], from.triangles[t + 2]]
      : [nearest(from, to.x[v], to.y[v]), 0, 0];
    const [la, lb] = inside ? [place.la, place.lb] : [1, 0];
    const lc = 1 - la - lb;
    for (const [j, values] of pressure.entries())
      for (let p = 0; p < patterns; p += 1) {
        const at = p * from.vertexCount;
        out[j][p * to.vertexCount + v] = la * values[at + a] + lb * values[at + b] + lc * values[at + c];
      }
  }
  return out;
}

function nearest(mesh: Mesh, x: number, y: number): number {
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let v = 0; v < mesh.vertexCount; v += 1) {
    const distance = (mesh.x[v] - x) ** 2 + (mesh.y[v] - y) ** 2;
    if (distance < least) {
      least = distance;
      best = v;
    }
  }
  return best;
}
