import type { Edge, Shape } from '../mesh/mesh.ts';
import type { Profile } from '../section/profile.ts';

/**
 * A piece of the plan to be solved in three dimensions: the outline, extruded to its depth, with cut
 * faces where it meets channels or ports. Plan coordinates are plain numbers in any one unit.
 */
export interface CellShape {
  /**
   * Outer boundary counter-clockwise first, posts clockwise. Tag 0 is wall, tag k >= 1 is face k.
   * A face may consist of several edges of its tag that follow one another; a cut through a channel is
   * one straight edge square to its walls, the rim of a port's hole is one or more arcs (a whole hole
   * inside the outline is a clockwise loop whose edges all bear the face's tag). Fillets are arcs.
   */
  readonly loops: Shape;
  /** In the unit of the coordinates. */
  readonly depth: number;
  /** Faces are numbered 1..faces; each has at least one edge. */
  readonly faces: number;
  /**
   * Cross-section of the layer; the outline is the mask's. The points of a measured polygon are in
   * the unit of the coordinates here, not in metres.
   */
  readonly profile: Profile;
}

/** Half of the least turn to the right (fluid angle above 180 degrees) that counts as a sharp corner, as a sine: 0.2 degrees of turn. */
const SHARP = Math.sin((0.1 * Math.PI) / 180);

/** Unit tangent at an edge's start or end: its chord turned by half the sweep. */
export function edgeTangent(edge: Edge, next: Edge, end: boolean): [number, number] {
  const length = Math.hypot(next.x - edge.x, next.y - edge.y);
  const half = 2 * Math.atan(edge.bulge) * (end ? 1 : -1);
  const c = Math.cos(half);
  const s = Math.sin(half);
  const dx = (next.x - edge.x) / length;
  const dy = (next.y - edge.y) / length;
  return [dx * c - dy * s, dx * s + dy * c];
}

/**
 * Re-entrant corners without a fillet between two wall edges, as [x, y, fluid angle in radians].
 * Wall shear is unbounded there, so a cell that has any has no peak. A turn below 0.2 degrees counts
 * as smooth: its exponent of growth, 2 turn / pi, adds less than 2 % per decade of distance.
 */
export function sharpCorners(loops: Shape): [number, number, number][] {
  const found: [number, number, number][] = [];
  for (const loop of loops) {
    const n = loop.length;
    for (let i = 0; i < n; i += 1) {
      const before = loop[(i + n - 1) % n]!;
      const here = loop[i]!;
      const next = loop[(i + 1) % n]!;
      if (before.tag !== 0 || here.tag !== 0) continue;
      const a = edgeTangent(before, here, true);
      const b = edgeTangent(here, next, false);
      const turn = Math.atan2(a[0] * b[1] - a[1] * b[0], a[0] * b[0] + a[1] * b[1]);
      if (Math.sin(turn / 2) < -SHARP) found.push([here.x, here.y, Math.PI - turn]);
    }
  }
  return found;
}
