import { locate, locatorOf } from '../../solver/cell/locate.ts';
import { quadratic } from '../../solver/cell/triangle.ts';
import { verify } from '../verify/row.ts';
import { graded, gridMesh } from './grid-mesh.ts';
import { PLANE, type Solved, solveKnown } from './manufactured.ts';

/** Velocity of a solved plane flow at a point. */
function at(solved: Solved, x: number, y: number): [number, number] {
  const { mesh } = solved.plane;
  const place = { triangle: -1, la: 0, lb: 0 };
  if (!locate(locatorOf(mesh), x, y, place)) throw new Error(`(${x}, ${y}) is outside`);
  const n = new Float64Array(6);
  quadratic(place.la, place.lb, n);
  const out: [number, number] = [0, 0];
  for (let i = 0; i < 6; i += 1) {
    const node = mesh.triangles[6 * place.triangle + i]!;
    out[0] += n[i]! * solved.inPlane[0]![node]!;
    out[1] += n[i]! * solved.inPlane[0]![mesh.nodeCount + node]!;
  }
  return out;
}

let cavity: Solved | undefined;
function lidDriven(): Solved {
  if (!cavity) {
    const lines = graded(0, 1, 0.008, 0.06, 'ab');
    const mesh = gridMesh(lines, lines, () => 0);
    cavity = solveKnown(
      mesh,
      PLANE,
      1,
      { velocity: (_, x, y) => [y === 1 && x > 0 && x < 1 ? 1 : 0, 0] },
      1e-10,
    );
  }
  return cavity;
}
/** Stream function on the middle line: the integral of u from the floor up. */
function stream(y: number): number {
  const n = 400;
  let sum = 0;
  for (let i = 0; i < n; i += 1) sum += (at(lidDriven(), 0.5, ((i + 0.5) * y) / n)[0] * y) / n;
  return sum;
}

const GOURSAT =
  'rational Goursat representation (method of Brubeck and Trefethen 2022, SIAM J. Sci. Comput. 44, A1205), two resolutions agreeing to 1e-9; published 0.765 and -0.1001 (Shankar 1993, J. Fluid Mech. 250, 371, from memory)';
for (const [name, measure, value] of [
  ['u in the middle', () => at(lidDriven(), 0.5, 0.5)[0], -0.20519171],
  ['u at y = 0.2', () => at(lidDriven(), 0.5, 0.2)[0], -0.10213168],
  ['u at y = 0.4', () => at(lidDriven(), 0.5, 0.4)[0], -0.17979183],
  ['u at y = 0.6', () => at(lidDriven(), 0.5, 0.6)[0], -0.19702659],
  ['u at y = 0.8', () => at(lidDriven(), 0.5, 0.8)[0], 0.08984097],
  ['v at x = 0.1', () => at(lidDriven(), 0.1, 0.5)[1], 0.13566605],
  ['v at x = 0.3', () => at(lidDriven(), 0.3, 0.5)[1], 0.15869099],
  ['stream function at the vortex', () => stream(0.76502654), -0.10007627],
  ['stream function in the middle', () => stream(0.5), -0.05895116],
] as const)
  verify(
    {
      quantity: `lid-driven cavity, ${name}`,
      check: 'published',
      at: 'unit square, plane Stokes flow',
      source: GOURSAT,
      tolerance: 1e-3,
    },
    () => measure() / value - 1,
  );

// Wedge of 60 degrees, 1 long, driven by its lid: on the middle line the sideways velocity changes sign
// between eddies, which shrink towards the tip by fixed ratios.
let eddies: { zeros: number[]; speeds: number[] } | undefined;
function wedge(): { zeros: number[]; speeds: number[] } {
  if (eddies) return eddies;
  const angle = Math.PI / 3;
  const radii = [1];
  while (radii[0]! > 0.002) radii.unshift(radii[0]! / 1.12);
  const angles = graded(-0.5, 0.5, 0.05, 0.09, 'ab');
  const mesh = gridMesh(
    radii,
    angles,
    () => 0,
    () => true,
    (r, share) => [r * Math.cos(share * angle), r * Math.sin(share * angle)],
  );
  const lid = (x: number, y: number): boolean =>
    Math.hypot(x, y) > 1 - 0.007 && Math.abs(Math.atan2(y, x)) < 0.49 * angle;
  const solved = solveKnown(mesh, PLANE, 1, { velocity: (_, x, y) => (lid(x, y) ? [-y, x] : [0, 0]) }, 1e-14);
  const zeros: number[] = [];
  const speeds: number[] = [];
  let most = 0;
  let before = 0;
  for (let r = 0.97; r > 0.004; r *= 0.995) {
    const v = at(solved, r, 0)[1];
    if (before * v < 0) {
      zeros.push(r * (1 + (0.005 * Math.abs(v)) / (Math.abs(v) + Math.abs(before))));
      speeds.push(most);
      most = 0;
    }
    most = Math.max(most, Math.abs(v));
    before = v;
  }
  eddies = { zeros, speeds };
  return eddies;
}
const MOFFATT = 'Moffatt 1964, J. Fluid Mech. 18, 1; roots of sin 60 k = -k sin 60 degrees recomputed';
verify(
  {
    quantity: 'ratio of the distances of eddies in a wedge',
    check: 'published',
    at: '60 degrees',
    source: MOFFATT,
    tolerance: 0.02,
  },
  () => wedge().zeros[1]! / wedge().zeros[2]! / 4.9997169 - 1,
);
verify(
  {
    quantity: 'ratio of the speeds of eddies in a wedge',
    check: 'published',
    at: '60 degrees',
    source: MOFFATT,
    tolerance: 0.05,
  },
  () => wedge().speeds[2]! / wedge().speeds[3]! / 687.46309 - 1,
);
