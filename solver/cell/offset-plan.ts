import type { Edge, Shape } from '../mesh/mesh.ts';
import { edgeTangent } from './shape.ts';

/**
 * The plan with its walls (tag 0) moved outward by `distance`, inward where negative; faces stay in
 * their lines. Straight corners are mitred, arcs keep their centres. Null where an edge would turn round,
 * because it is shorter than what the move takes from it.
 */
export function offsetPlan(loops: Shape, distance: number): Edge[][] | null {
  const out: Edge[][] = [];
  for (const loop of loops) {
    const n = loop.length;
    const tangents = loop.map((edge, i) => {
      const next = loop[(i + 1) % n];
      return [edgeTangent(edge, next, false), edgeTangent(edge, next, true)] as const;
    });
    const moved = loop.map((edge, i) => {
      const [ax, ay] = tangents[(i + n - 1) % n][1];
      const [bx, by] = tangents[i][0];
      const da = loop[(i + n - 1) % n].tag === 0 ? distance : 0;
      const db = edge.tag === 0 ? distance : 0;
      // The fluid is on the left: outward is to the right, (ty, -tx).
      const cross = ax * by - ay * bx;
      if (Math.abs(cross) < 1e-6) {
        const d = (da + db) / 2;
        return { ...edge, x: edge.x + d * by, y: edge.y - d * bx };
      }
      // Shift along both tangents so that the distances to both lines are da and db.
      const alongA = db / cross;
      const alongB = -da / cross;
      return { ...edge, x: edge.x + alongA * ax + alongB * bx, y: edge.y + alongA * ay + alongB * by };
    });
    for (let i = 0; i < n; i += 1) {
      const [ax, ay] = [loop[(i + 1) % n].x - loop[i].x, loop[(i + 1) % n].y - loop[i].y];
      const [bx, by] = [moved[(i + 1) % n].x - moved[i].x, moved[(i + 1) % n].y - moved[i].y];
      if (ax * bx + ay * by <= 1e-3 * (ax * ax + ay * ay)) return null;
    }
    out.push(moved);
  }
  return out;
}
