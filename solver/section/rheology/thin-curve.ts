import type { ShearModel } from '../../fluid/spec.ts';
import { Problem } from '../../problem/problem.ts';
import { closed, mirrored, type PerimeterCurve, type Point, perimeterCurve } from '../perimeter-curve.ts';
import type { Profile } from '../profile.ts';
import type { Place } from '../section.ts';
import { shapeOf } from '../solved-unit.ts';
import { toMetres } from '../unit-section.ts';
import { STILL, wallEdges, wallTurns } from '../wall-curve.ts';
import { type SectionElements, sectionElements } from './elements.ts';
import { solveSection } from './newton.ts';
import { quarterRectangle, WALL } from './rectangle-mesh.ts';
import { coordinate, scaledFluid, smallestRate, stressAt } from './scaled.ts';
import { shapeElements, withFlat } from './shape-elements.ts';
import { STEP } from './shape-table.ts';
import { wallStress } from './wall-stress.ts';
import { yieldStressOf } from './yield-stress.ts';

/** Cells over the half depth of a rectangle, as the tables of flows have them. */
const ACROSS = 8;

/**
 * Wall shear stress once round a section through which a shear-thinning fluid flows, from its own solved
 * flow (no other fluid's curve, scaled): it balances the driving force, so that its mean is `meanStress`.
 *
 * @param width mask width and depth, m
 * @param meanStress mean over the wall, Pa, above nothing
 * @returns as `perimeterCurve` does, with `shear` in Pa; null where a yield stress holds the fluid
 * @throws Problem 'not-converged'
 */
export function thinPerimeterCurve(
  shear: ShearModel,
  profile: Profile,
  width: number,
  depth: number,
  meanStress: number,
  where = '',
): PerimeterCurve | null {
  const fluid = scaledFluid(shear);
  const stress = meanStress / fluid.stress;
  if (profile.kind === 'circle') {
    const round = perimeterCurve(profile, width, depth, where);
    return { ...round, shear: round.shear.map(() => meanStress) };
  }
  if (profile.kind === 'rectangle') {
    // a quarter of unit half depth; one that is deeper than wide lies on its side
    const half = Math.min(width, depth) / 2;
    const wide = width >= depth;
    const mesh = quarterRectangle(Math.max(width, depth) / 2 / half, ACROSS);
    const elements = sectionElements(mesh, (tag) => tag === WALL);
    const far = mesh.x.reduce((most, x) => Math.max(most, x));
    // from the middle of the side over the corner to the middle of the lid
    const way = (node: number): number => (mesh.x[node]! === far ? mesh.y[node]! : 1 + far - mesh.x[node]!);
    const nodes = Array.from(elements.wall.keys())
      .filter((node) => elements.wall[node])
      .sort((a, b) => way(a) - way(b));
    const corner = nodes.filter((node) => mesh.x[node] === far && mesh.y[node] === 1);
    const values = solvedStress(elements, fluid.model, stress, 4, corner);
    if (!values) return null;
    const quarter = nodes.map((node): Point => {
      const [x, y] = [mesh.x[node]! * half, mesh.y[node]! * half];
      return { at: wide ? [x, y] : [y, x], shear: Math.max(0, values[node]!) * fluid.stress };
    });
    const upper = wide ? quarter : quarter.reverse();
    const lower = upper.slice(1).map(({ at, shear: own }): Point => ({ at: [at[0], -at[1]], shear: own }));
    const right = [...lower.reverse(), ...upper];
    return mirrored(right.map(({ at, shear: own }) => ({ at: [at[0], at[1] + depth / 2], shear: own })));
  }
  const shape = withFlat(shapeOf(profile, width, depth, where));
  const elements = shapeElements(shape, where);
  const edges = wallEdges(elements.mesh);
  const values = solvedStress(
    elements,
    fluid.model,
    stress,
    shape.symmetric ? 2 : 1,
    corners(elements, edges, shape.symmetric),
  );
  if (!values) return null;
  const points = along(elements, edges, values, fluid.stress, (at) => toMetres(shape, at));
  return shape.symmetric ? mirrored(points) : closed(points.slice(0, -1));
}

/** Nodes of the wall's convex corners. */
function corners({ mesh }: SectionElements, edges: Int32Array, open: boolean): number[] {
  const turns = wallTurns(mesh, edges);
  const out: number[] = [];
  edges.forEach((edge, k) => {
    // where a mirror line ends the wall there is no corner
    if (turns[k]! > STILL && !(open && k === edges.length - 1)) out.push(mesh.boundary[3 * edge + 1]!);
  });
  return out;
}

/** Corners and middles of the wall's edges in their order, with their stress. */
function along(
  { mesh }: SectionElements,
  edges: Int32Array,
  values: Float64Array,
  unit: number,
  place: (at: Place) => Place,
): Point[] {
  const points: Point[] = [];
  const push = (node: number): void => {
    points.push({ at: place([mesh.x[node]!, mesh.y[node]!]), shear: Math.max(0, values[node]!) * unit });
  };
  for (const [k, edge] of edges.entries()) {
    const [a, b, middle] = mesh.boundary.subarray(3 * edge, 3 * edge + 3);
    if (k === 0) push(a!);
    push(middle!);
    push(b!);
  }
  return points;
}

/**
 * Stress (scaled) at the wall's nodes under a mean wall stress; null below the stress at which the section
 * starts to flow. Where it is not found at once it is come to in steps of the fluid's own coordinate.
 */
function solvedStress(
  elements: SectionElements,
  model: ShearModel,
  stress: number,
  copies: number,
  convex: readonly number[],
): Float64Array | null {
  const { area, perimeter, mesh } = elements;
  const yieldStress = model.kind === 'casson' ? yieldStressOf(elements, copies) : 0;
  if (!(stress > yieldStress)) return null;
  const velocity = new Float64Array(mesh.nodeCount);
  const newtonian = { kind: 'power-law', consistency: 1, index: 1 } as const;
  solveSection(elements, newtonian, (stress * perimeter) / area, 0, velocity);
  const solve = (at: number): void => {
    solveSection(elements, model, (at * perimeter) / area, smallestRate(model, at, yieldStress), velocity);
  };
  const start = velocity.slice();
  try {
    solve(stress);
  } catch (error) {
    if (!(error instanceof Problem) || model.kind === 'power-law') throw error;
    velocity.set(start);
    // from where the fluid is nearly Newtonian: the far end of a yield stress, the rest of a thinning one
    const end = coordinate(model, stress, yieldStress);
    const first = model.kind === 'casson' ? Math.max(end, 4 * Math.LN10) : Math.min(end, -2 * Math.LN10);
    const steps = Math.max(1, Math.ceil(Math.abs(end - first) / STEP));
    for (let i = 0; i < steps; i += 1)
      solve(stressAt(model, first + ((end - first) * i) / steps, yieldStress));
    solve(stress);
  }
  // where a yield stress holds the fluid in a corner, the wall there may still bear some of it
  const still = new Uint8Array(mesh.nodeCount);
  if (model.kind !== 'casson') for (const node of convex) still[node] = 1;
  return wallStress(
    elements,
    model,
    (stress * perimeter) / area,
    smallestRate(model, stress, yieldStress),
    velocity,
    still,
  );
}
