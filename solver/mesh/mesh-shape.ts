import { Problem } from '../problem/problem.ts';
import { type Boundary, cutBoundary, tooFine } from './boundary.ts';
import { checkShape } from './check-shape.ts';
import { crossingPlace } from './crossing.ts';
import type { EdgeWish } from './edge-wish.ts';
import type { Mesh, Shape } from './mesh.ts';
import { canonicalPose } from './pose.ts';
import { quadraticMesh, turnOver } from './quadratic.ts';
import { leastJacobian } from './quality.ts';
import { isBad, refine } from './refine.ts';
import { fullSizing, type Sizing } from './sizing.ts';
import { smooth } from './smooth.ts';
import { type Triangulation, triangulateBoundary } from './triangulation.ts';

const SMOOTHING_PASSES = 3;
/** Boundary pieces that stand in the way of good triangles are cut, this many times at most. */
const ROUNDS = 5;
/** Curved triangles below this share of their straight Jacobian are cut finer. */
const LEAST_JACOBIAN = 0.3;

/**
 * Meshes a plan shape or a cross-section with quadratic triangles: graded by `sizing`, no angle below
 * about 20° but in the shape's own sharp corners, mid-edge nodes on arcs. The same shape gives the same
 * mesh bit by bit, and a turned, mirrored, moved or scaled copy (sizes scaled alike) gives the turned,
 * mirrored, moved or scaled mesh. `where` is named by a `Problem`: an outline that encloses nothing,
 * crosses or touches itself, or is too fine.
 */
export function meshShape(shape: Shape, sizing: Sizing, where = ''): Mesh {
  if (!(sizing.size > 0)) throw new RangeError(`mesh size ${sizing.size}`);
  const checked = checkShape(shape, where);
  const pose = canonicalPose(checked, fullSizing(sizing));
  const wishes: EdgeWish[] = [];
  for (let round = 0; ; round += 1) {
    const boundary = cutBoundary(pose.shape, pose.sizing, wishes);
    const triangulation = triangulateBoundary(boundary);
    if (!triangulation) throw crossing(boundary, pose.back, where);
    const blocking = refine(triangulation, pose.sizing);
    if (triangulation.triangleCount > pose.sizing.maxTriangles) throw tooFine(pose.sizing.maxTriangles);
    smooth(triangulation, SMOOTHING_PASSES);
    const { mesh, vertexNode } = quadraticMesh(triangulation, boundary);
    const cuts = piecesToCut(triangulation, boundary, mesh, blocking);
    if (cuts.size > 0 && round < ROUNDS) {
      for (const piece of cuts) wishes.push(halved(boundary, piece));
      continue;
    }
    for (let t = 0; t < mesh.triangles.length; t += 6) {
      if (leastJacobian(mesh, t) <= 0) throw tooThin(where);
    }
    pose.back(mesh.x, mesh.y, mesh.nodeCount);
    if (pose.mirrored) turnOver(mesh);
    // Corners of the shape lie where the caller put them, to the last bit.
    let corner = 0;
    for (const loop of pose.vertexOf) {
      for (const [l, v] of loop) {
        const node = vertexNode[boundary.first[corner]];
        mesh.x[node] = checked[l][v].x;
        mesh.y[node] = checked[l][v].y;
        corner += 1;
      }
    }
    return mesh;
  }
}

function piecesToCut(
  triangulation: Triangulation,
  boundary: Boundary,
  mesh: Mesh,
  blocking: ReadonlySet<number>,
): Set<number> {
  const cuts = new Set<number>();
  const { vertex, twin, boundaryCount } = triangulation;
  let bad = 0;
  for (let t = 0; t < triangulation.triangleCount; t += 1) {
    if (!isBad(triangulation, t)) continue;
    bad += 1;
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      if (twin[e] < 0) cuts.add(-1 - twin[e]);
      else if (vertex[e] < boundaryCount) blocking.has(vertex[e]) && cuts.add(vertex[e]);
    }
  }
  if (bad > 0) for (const piece of blocking) cuts.add(piece);
  // A curved triangle that bends too far: its arc piece is cut.
  const piece = new Map<number, number>();
  for (let i = 0; i < boundary.count; i += 1) {
    if (boundary.curves[boundary.edge[i]].sweep !== 0) piece.set(mesh.boundary[3 * i + 2], i);
  }
  if (piece.size > 0) {
    for (let t = 0; t < mesh.triangles.length; t += 6) {
      for (let i = 3; i < 6; i += 1) {
        const found = piece.get(mesh.triangles[t + i]);
        if (found !== undefined && leastJacobian(mesh, t) < LEAST_JACOBIAN) cuts.add(found);
      }
    }
  }
  return cuts;
}

function halved(boundary: Boundary, piece: number): EdgeWish {
  const edge = boundary.edge[piece];
  const from = boundary.from[piece];
  const to = boundary.to[piece];
  return { edge, t: (from + to) / 2, size: 0.55 * (to - from) * boundary.curves[edge].length };
}

function crossing(
  boundary: Boundary,
  back: (x: Float64Array, y: Float64Array, count: number) => void,
  where: string,
): Problem {
  const place = crossingPlace(boundary);
  const remedy = 'Redraw the outline so that it goes round the fluid once.';
  if (!place) {
    return new Problem('shape', 'The outline touches itself, or its holes lie outside it.', where, remedy);
  }
  const x = Float64Array.of(place[0]);
  const y = Float64Array.of(place[1]);
  back(x, y, 1);
  const at = `(${x[0].toPrecision(6)}, ${y[0].toPrecision(6)})`;
  return new Problem('shape', `The outline crosses or touches itself at ${at}.`, where, remedy);
}

function tooThin(where: string): Problem {
  return new Problem(
    'shape',
    'The shape has a part too thin to be meshed.',
    where,
    'Widen or remove parts that are far thinner than the rest.',
  );
}
