import type { CellShape } from '../../solver/cell/shape.ts';
import type { Edge } from '../../solver/mesh/mesh.ts';

export interface Arm {
  /** Direction from the middle, degrees. */
  readonly angle: number;
  readonly width: number;
}

/**
 * Straight arms that meet in the origin, each cut square `legs` of its width beyond the last corner (or
 * fillet) on its walls. Arms are faces 1, 2, ... in the order given, which must be counter-clockwise.
 */
export function star(arms: readonly Arm[], depth: number, fillet = 0, legs = 1): CellShape {
  const n = arms.length;
  const direction = arms.map(({ angle }) => [
    Math.cos((angle * Math.PI) / 180),
    Math.sin((angle * Math.PI) / 180),
  ]);
  // Corner between arm i (its left wall) and the next one counter-clockwise (its right wall).
  const corners = arms.map((arm, i) => {
    const [ax, ay] = direction[i]!;
    const next = (i + 1) % n;
    const [bx, by] = direction[next]!;
    const cross = ax * by - ay * bx;
    const p = [(-ay * arm.width) / 2, (ax * arm.width) / 2] as const;
    const q = [(by * arms[next]!.width) / 2, (-bx * arms[next]!.width) / 2] as const;
    // One straight wall, or a step square to both.
    if (Math.abs(cross) < 1e-9) return { a: p, b: q, ta: 0, tb: 0, cross };
    const ta = ((q[0] - p[0]) * by - (q[1] - p[1]) * bx) / cross;
    const tb = ((q[0] - p[0]) * ay - (q[1] - p[1]) * ax) / cross;
    const at = [p[0] + ta * ax, p[1] + ta * ay] as const;
    return { a: at, b: at, ta, tb, cross };
  });
  const loop: Edge[] = [];
  const cuts = arms.map((arm, i) => {
    const left = corners[i]!;
    const right = corners[(i + n - 1) % n]!;
    const reach = (c: (typeof corners)[number], along: number): number =>
      along + (c.cross > 1e-9 ? cut(c, fillet) : 0);
    return Math.max(reach(left, left.ta), reach(right, right.tb), 0) + legs * arm.width;
  });
  arms.forEach((arm, i) => {
    const [dx, dy] = direction[i]!;
    const half = arm.width / 2;
    const out = cuts[i]!;
    loop.push({ x: out * dx + half * dy, y: out * dy - half * dx, bulge: 0, tag: i + 1 });
    loop.push({ x: out * dx - half * dy, y: out * dy + half * dx, bulge: 0, tag: 0 });
    const corner = corners[i]!;
    const [bx, by] = direction[(i + 1) % n]!;
    if (fillet > 0 && corner.cross > 1e-9) {
      const t = cut(corner, fillet);
      const sweep = Math.PI - Math.atan2(corner.cross, dx * bx + dy * by);
      loop.push({ x: corner.a[0] + t * dx, y: corner.a[1] + t * dy, bulge: -Math.tan(sweep / 4), tag: 0 });
      loop.push({ x: corner.a[0] + t * bx, y: corner.a[1] + t * by, bulge: 0, tag: 0 });
    } else {
      loop.push({ x: corner.a[0], y: corner.a[1], bulge: 0, tag: 0 });
      if (Math.hypot(corner.a[0] - corner.b[0], corner.a[1] - corner.b[1]) > 1e-12)
        loop.push({ x: corner.b[0], y: corner.b[1], bulge: 0, tag: 0 });
    }
  });
  return {
    loops: [loop.filter((edge, i) => !straightOn(loop, edge, i))],
    depth,
    faces: n,
    profile: { kind: 'rectangle' },
  };

  /** From a re-entrant corner to where its fillet touches the walls: radius / tan(half the angle between the arms). */
  function cut(c: (typeof corners)[number], radius: number): number {
    const k = corners.indexOf(c);
    const [ax, ay] = direction[k]!;
    const [bx, by] = direction[(k + 1) % n]!;
    const gap = Math.atan2(c.cross, ax * bx + ay * by);
    return radius / Math.tan(gap / 2);
  }
}

/** A vertex in the middle of one straight wall. */
function straightOn(loop: readonly Edge[], edge: Edge, i: number): boolean {
  const before = loop[(i + loop.length - 1) % loop.length]!;
  const next = loop[(i + 1) % loop.length]!;
  if (before.tag !== 0 || edge.tag !== 0 || before.bulge !== 0 || edge.bulge !== 0) return false;
  const cross = (edge.x - before.x) * (next.y - edge.y) - (edge.y - before.y) * (next.x - edge.x);
  return Math.abs(cross) < 1e-12;
}

/** Bend, T and cross of arms one wide. */
export const bend = (depth: number, fillet = 0, legs = 1): CellShape =>
  star(
    [
      { angle: 0, width: 1 },
      { angle: 90, width: 1 },
    ],
    depth,
    fillet,
    legs,
  );
export const tee = (depth: number, fillet = 0, legs = 1): CellShape =>
  star(
    [
      { angle: 0, width: 1 },
      { angle: 180, width: 1 },
      { angle: 270, width: 1 },
    ],
    depth,
    fillet,
    legs,
  );
export const crossing = (depth: number, fillet = 0, legs = 1): CellShape =>
  star(
    [0, 90, 180, 270].map((angle) => ({ angle, width: 1 })),
    depth,
    fillet,
    legs,
  );
