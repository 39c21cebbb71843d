import { expect, test } from 'vitest';
import { canonical } from '../../solver/cell/canonical.ts';
import { divergence, gather, gradient, spread } from '../../solver/cell/coupling.ts';
import { type DepthModes, depthModes } from '../../solver/cell/depth.ts';
import { diagonaliseTogether } from '../../solver/cell/diagonalise.ts';
import { analysePlane, factorPlane } from '../../solver/cell/factors.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import { assemblePlane, type Plane } from '../../solver/cell/plane.ts';
import { multiply } from '../../solver/sparse/multiply.ts';
import { solve } from '../../solver/sparse/solve.ts';
import { verify } from '../verify/row.ts';
import { tee } from './shapes.ts';

const HALF = 0.5;

/** Pressure mass matrix by full rows, one block of one mode. */
function massRows(plane: Plane): Float64Array {
  const n = plane.mesh.vertexCount;
  const out = new Float64Array(n * n);
  const unit = new Float64Array(n);
  const y = new Float64Array(n);
  for (let i = 0; i < n; i += 1) {
    unit.fill(0);
    unit[i] = 1;
    multiply({ ...plane.pressure, value: plane.pressureMass }, unit, y);
    out.set(y, i * n);
  }
  return out;
}

/** Least eigenvalue of M^-1 B A^-1 B^T: the square of the inf-sup constant in the norm of A. */
function infSup(plane: Plane, depth: DepthModes): number {
  const corners = plane.mesh.vertexCount;
  const N = depth.count;
  const across = depth.acrossLambda.length;
  const pressures = depth.coupling.length / N;
  const size = corners * pressures;
  const factors = factorPlane(plane, analysePlane(plane), depth, HALF);
  const schur = new Float64Array(size * size);
  const mass = new Float64Array(size * size);
  const one = massRows(plane);
  const p = new Float64Array(corners);
  const y = new Float64Array(corners);
  const u = new Float64Array(2 * plane.count);
  const w = new Float64Array(plane.count);
  for (let i = 0; i < corners; i += 1) {
    p.fill(0);
    p[i] = 1;
    const add = (a: (j: number) => number): void => {
      for (let j = 0; j < pressures; j += 1)
        for (let l = 0; l < pressures; l += 1)
          for (let v = 0; v < corners; v += 1)
            schur[(j * corners + i) * size + l * corners + v]! += a(j) * a(l) * y[v]!;
    };
    for (let k = 0; k < N; k += 1) {
      gradient(plane, p, 1, u);
      solve(factors.inPlane[k]!, u, 2);
      divergence(plane, u, 1, 1, y);
      add((j) => depth.coupling[j * N + k]!);
    }
    for (let m = 0; m < across; m += 1) {
      spread(plane, p, 1, w);
      solve(factors.across[m]!, w, 1);
      gather(plane, w, 1, 1, y);
      add((j) => depth.acrossCoupling[j * across + m]! / HALF);
    }
    for (let j = 0; j < pressures; j += 1)
      for (let v = 0; v < corners; v += 1)
        mass[(j * corners + i) * size + j * corners + v] = one[i * corners + v]!;
  }
  return diagonaliseTogether(schur, mass, size).lambda[0]!;
}

/** The same with velocity linear like pressure: mid-edge values are the means of the corners'. */
function equalOrder(plane: Plane, depth: DepthModes): number {
  const { mesh, unknown, count } = plane;
  const corners = mesh.vertexCount;
  const free: number[] = [];
  for (let v = 0; v < corners; v += 1) if (unknown[v]! >= 0) free.push(v);
  const ends = new Map<number, [number, number]>();
  for (let t = 0; t < mesh.triangles.length; t += 6)
    for (let i = 0; i < 3; i += 1)
      ends.set(mesh.triangles[t + 3 + i]!, [mesh.triangles[t + i]!, mesh.triangles[t + ((i + 1) % 3)]!]);
  /** Quadratic values of the linear function of each free corner. */
  const lift = (v: number): Float64Array => {
    const out = new Float64Array(count);
    if (unknown[v]! >= 0) out[unknown[v]!] = 1;
    for (const [mid, [a, b]] of ends)
      if ((a === v || b === v) && unknown[mid]! >= 0) out[unknown[mid]!] = 0.5;
    return out;
  };
  const shapes = free.map(lift);
  const n = free.length;
  const y = new Float64Array(count);
  const schur = new Float64Array(corners * corners);
  for (let k = 0; k < depth.count; k += 1) {
    const value = plane.stiffness.map((s, e) => s + (depth.inPlaneLambda[k]! / HALF ** 2) * plane.mass[e]!);
    const a = new Float64Array(n * n);
    shapes.forEach((shape, i) => {
      multiply({ ...plane.velocity, value }, shape, y);
      shapes.forEach((other, j) => {
        let sum = 0;
        for (let e = 0; e < count; e += 1) sum += other[e]! * y[e]!;
        a[i * n + j] = sum;
      });
    });
    // A^-1 = V V^T with V the basis of the pair (identity, A).
    const identity = new Float64Array(n * n);
    for (let i = 0; i < n; i += 1) identity[i * n + i] = 1;
    const { basis } = diagonaliseTogether(identity, a, n);
    const q = new Float64Array(corners);
    for (let column = 0; column < n; column += 1)
      for (let part = 0; part < 2; part += 1) {
        const u = new Float64Array(2 * count);
        shapes.forEach((shape, i) => {
          for (let e = 0; e < count; e += 1) u[part * count + e]! += basis[i * n + column]! * shape[e]!;
        });
        divergence(plane, u, 1, depth.coupling[k]!, q);
        for (let i = 0; i < corners; i += 1)
          for (let j = 0; j < corners; j += 1) schur[i * corners + j]! += q[i]! * q[j]!;
      }
  }
  return diagonaliseTogether(schur, massRows(plane), corners).lambda[0]!;
}

const planes = [2, 1.5, 1.1].map((coarseness) =>
  assemblePlane(planMesh(canonical(tee(1)).shape, coarseness, '', 1e4)),
);
const beta = new Map<string, number>();
const once = (key: string, make: () => number): number => {
  const known = beta.get(key) ?? make();
  beta.set(key, known);
  return known;
};
const stable = (mesh: number, modes: number): number =>
  once(`${mesh} ${modes}`, () => infSup(planes[mesh]!, depthModes(modes)));

const BREZZI = 'Brezzi and Fortin 1991, Mixed and Hybrid Finite Element Methods (from memory)';
for (const modes of [1, 2])
  verify(
    {
      quantity: 'change of the squared inf-sup constant from a mesh to one of about half the triangles',
      check: 'order',
      at: `T junction, depth/width 1, (${modes}, ${modes - 1}, ${modes}) modes`,
      source: BREZZI,
      tolerance: 0.1,
    },
    () => stable(1, modes) / stable(2, modes) - 1,
  );
verify(
  {
    quantity: 'change of the squared inf-sup constant from two to three depth modes',
    check: 'order',
    at: 'T junction, depth/width 1, coarsest mesh',
    source: BREZZI,
    tolerance: 0.1,
  },
  () => stable(0, 3) / stable(0, 2) - 1,
);

test('the inf-sup constant stays away from zero', () => {
  expect(stable(2, 2)).toBeGreaterThan(0.02);
});

test('more pressure modes than in-plane modes have a pressure that no velocity feels', () => {
  expect(Math.abs(infSup(planes[1]!, depthModes(1, 0, 2)))).toBeLessThan(1e-10);
});

test('velocity and pressure of equal order have spurious pressures', () => {
  expect(Math.abs(equalOrder(planes[1]!, depthModes(1)))).toBeLessThan(0.05 * stable(1, 1));
});
