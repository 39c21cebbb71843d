import type { DepthModes } from '../../solver/cell/depth.ts';
import { analysePlane, factorPlane } from '../../solver/cell/factors.ts';
import { assemblePlane, integrate, type Plane } from '../../solver/cell/plane.ts';
import { type StokesFields, solveStokes } from '../../solver/cell/stokes.ts';
import { quadratic, quadraticGradient, triangleWorkspace } from '../../solver/cell/triangle.ts';
import type { Mesh } from '../../solver/mesh/mesh.ts';

/** A flow known mode by mode, with the force that keeps it up; velocity is imposed on tag 0. */
export interface Known {
  velocity(k: number, x: number, y: number): readonly [number, number];
  across?(m: number, x: number, y: number): number;
  force?(k: number, x: number, y: number): readonly [number, number];
  acrossForce?(m: number, x: number, y: number): number;
}

export interface Solved {
  readonly plane: Plane;
  readonly flow: StokesFields;
  /** Per mode, nodes with the imposed values: x then y; across. */
  readonly inPlane: Float64Array[];
  readonly across: Float64Array[];
}

/** Plane Stokes flow as a single mode that feels no floor: K u - B^T p = f, B u = 0. */
export const PLANE: DepthModes = {
  count: 1,
  inPlaneLambda: Float64Array.of(0),
  acrossLambda: new Float64Array(0),
  inPlaneBasis: Float64Array.of(1),
  acrossBasis: new Float64Array(0),
  coupling: Float64Array.of(1),
  acrossCoupling: new Float64Array(0),
};

/** Seven-point rule, exact to degree five (Radon 1948): weight, L_a, L_b. */
const RULE: readonly (readonly [number, number, number])[] = (() => {
  const out: [number, number, number][] = [[0.225, 1 / 3, 1 / 3]];
  for (const sign of [-1, 1]) {
    const a = (6 + sign * Math.sqrt(15)) / 21;
    const weight = (155 + sign * Math.sqrt(15)) / 1200;
    out.push([weight, a, a], [weight, a, 1 - 2 * a], [weight, 1 - 2 * a, a]);
  }
  return out;
})();

const N = new Float64Array(6);
const DA = new Float64Array(6);
const DB = new Float64Array(6);

/** Calls `visit` at each quadrature point: weight, place, triangle; N, DX, DY are filled. */
export function eachPoint(
  mesh: Mesh,
  visit: (
    w: number,
    x: number,
    y: number,
    t: number,
    n: Float64Array,
    dx: Float64Array,
    dy: Float64Array,
  ) => void,
): void {
  const dx = new Float64Array(6);
  const dy = new Float64Array(6);
  for (let t = 0; t < mesh.triangles.length / 6; t += 1)
    for (const [weight, la, lb] of RULE) {
      quadratic(la, lb, N);
      quadraticGradient(la, lb, DA, DB);
      let [x, y, xa, xb, ya, yb] = [0, 0, 0, 0, 0, 0];
      for (let i = 0; i < 6; i += 1) {
        const node = mesh.triangles[6 * t + i]!;
        x += N[i]! * mesh.x[node]!;
        y += N[i]! * mesh.y[node]!;
        xa += DA[i]! * mesh.x[node]!;
        xb += DB[i]! * mesh.x[node]!;
        ya += DA[i]! * mesh.y[node]!;
        yb += DB[i]! * mesh.y[node]!;
      }
      const det = xa * yb - xb * ya;
      for (let i = 0; i < 6; i += 1) {
        dx[i] = (DA[i]! * yb - DB[i]! * ya) / det;
        dy[i] = (DB[i]! * xa - DA[i]! * xb) / det;
      }
      visit((weight * det) / 2, x, y, t, N, dx, dy);
    }
}

/** Solves for the known flow from its boundary values and force. */
export function solveKnown(
  mesh: Mesh,
  depth: DepthModes,
  halfDepth: number,
  known: Known,
  tolerance = 1e-12,
): Solved {
  const plane = assemblePlane(mesh);
  const { unknown, count } = plane;
  const { nodeCount, vertexCount, triangles } = mesh;
  const modes = depth.count;
  const acrossModes = depth.acrossLambda.length;
  const pressures = depth.coupling.length / modes;
  const inPlane = Array.from({ length: modes }, () => new Float64Array(2 * nodeCount));
  const across = Array.from({ length: acrossModes }, () => new Float64Array(nodeCount));
  for (let i = 0; i < nodeCount; i += 1) {
    if (unknown[i]! >= 0) continue;
    inPlane.forEach((part, k) => {
      [part[i], part[nodeCount + i]] = known.velocity(k, mesh.x[i]!, mesh.y[i]!);
    });
    across.forEach((part, m) => {
      part[i] = known.across?.(m, mesh.x[i]!, mesh.y[i]!) ?? 0;
    });
  }
  const load = inPlane.map(() => new Float64Array(2 * count));
  const acrossLoad = across.map(() => new Float64Array(count));
  const divergence = Array.from({ length: pressures }, () => new Float64Array(vertexCount));
  eachPoint(mesh, (w, x, y, t, n) => {
    for (let i = 0; i < 6; i += 1) {
      const at = unknown[triangles[6 * t + i]!]!;
      if (at < 0) continue;
      load.forEach((part, k) => {
        const f = known.force?.(k, x, y);
        if (!f) return;
        part[at]! += w * n[i]! * f[0];
        part[count + at]! += w * n[i]! * f[1];
      });
      acrossLoad.forEach((part, m) => {
        part[at]! += w * n[i]! * (known.acrossForce?.(m, x, y) ?? 0);
      });
    }
  });
  // What the imposed values already do goes to the right side.
  const work = triangleWorkspace();
  const px = new Float64Array(6);
  const py = new Float64Array(6);
  for (let t = 0; t < triangles.length / 6; t += 1) {
    const nodes = triangles.subarray(6 * t, 6 * t + 6);
    if (!nodes.some((node) => unknown[node]! < 0)) continue;
    integrate(mesh, t, work, px, py);
    for (let j = 0; j < 6; j += 1) {
      const from = nodes[j]!;
      if (unknown[from]! >= 0) continue;
      for (let i = 0; i < 6; i += 1) {
        const to = unknown[nodes[i]!]!;
        if (to < 0) continue;
        const stiff = work.stiffness[6 * i + j]!;
        const mass = work.mass[6 * i + j]! / halfDepth ** 2;
        load.forEach((part, k) => {
          const a = stiff + depth.inPlaneLambda[k]! * mass;
          part[to]! -= a * inPlane[k]![from]!;
          part[count + to]! -= a * inPlane[k]![nodeCount + from]!;
        });
        acrossLoad.forEach((part, m) => {
          part[to]! -= (stiff + depth.acrossLambda[m]! * mass) * across[m]![from]!;
        });
      }
      for (let l = 0; l < 3; l += 1)
        divergence.forEach((part, q) => {
          for (let k = 0; k < modes; k += 1)
            part[nodes[l]!]! -=
              depth.coupling[q * modes + k]! *
              (work.gradX[6 * l + j]! * inPlane[k]![from]! +
                work.gradY[6 * l + j]! * inPlane[k]![nodeCount + from]!);
          for (let m = 0; m < acrossModes; m += 1)
            part[nodes[l]!]! -=
              (depth.acrossCoupling[q * acrossModes + m]! / halfDepth) *
              work.mixed[6 * l + j]! *
              across[m]![from]!;
        });
    }
  }
  const factors = factorPlane(plane, analysePlane(plane), depth, halfDepth);
  const loads = { patterns: 1, inPlane: load, across: acrossLoad, divergence };
  const flow = solveStokes(plane, depth, halfDepth, factors, loads, tolerance);
  for (let i = 0; i < nodeCount; i += 1) {
    const at = unknown[i]!;
    if (at < 0) continue;
    inPlane.forEach((part, k) => {
      part[i] = flow.inPlane[k]![at]!;
      part[nodeCount + i] = flow.inPlane[k]![count + at]!;
    });
    across.forEach((part, m) => {
      part[i] = flow.across[m]![at]!;
    });
  }
  return { plane, flow, inPlane, across };
}

/** Root of the summed squares of all modes' errors in the velocity, its plan gradient (by difference) and the pressure less its mean. */
export function errors(
  solved: Solved,
  known: Known & { pressure(j: number, x: number, y: number): number },
): { velocity: number; gradient: number; pressure: number } {
  const { plane, inPlane, across, flow } = solved;
  const { mesh } = plane;
  let velocity = 0;
  let gradient = 0;
  const step = 1e-5;
  const sum = flow.pressure.map(() => [0, 0, 0] as [number, number, number]);
  eachPoint(mesh, (w, x, y, t, n, dx, dy) => {
    const nodes = mesh.triangles.subarray(6 * t, 6 * t + 6);
    const add = (value: (x: number, y: number) => number, field: (node: number) => number): void => {
      let [at, gx, gy] = [0, 0, 0];
      for (let i = 0; i < 6; i += 1) {
        const v = field(nodes[i]!);
        at += n[i]! * v;
        gx += dx[i]! * v;
        gy += dy[i]! * v;
      }
      velocity += w * (at - value(x, y)) ** 2;
      gradient += w * (gx - (value(x + step, y) - value(x - step, y)) / (2 * step)) ** 2;
      gradient += w * (gy - (value(x, y + step) - value(x, y - step)) / (2 * step)) ** 2;
    };
    inPlane.forEach((part, k) => {
      add(
        (a, b) => known.velocity(k, a, b)[0],
        (node) => part[node]!,
      );
      add(
        (a, b) => known.velocity(k, a, b)[1],
        (node) => part[mesh.nodeCount + node]!,
      );
    });
    across.forEach(
      (part, m) =>
        void add(
          (a, b) => known.across?.(m, a, b) ?? 0,
          (node) => part[node]!,
        ),
    );
    // Linear functions from the quadratic ones: each corner with half of its two mids.
    const linear = [n[0]! + (n[3]! + n[5]!) / 2, n[1]! + (n[3]! + n[4]!) / 2, n[2]! + (n[4]! + n[5]!) / 2];
    flow.pressure.forEach((part, j) => {
      const p = linear[0]! * part[nodes[0]!]! + linear[1]! * part[nodes[1]!]! + linear[2]! * part[nodes[2]!]!;
      const miss = p - known.pressure(j, x, y);
      sum[j]![0] += w;
      sum[j]![1] += w * miss;
      sum[j]![2] += w * miss * miss;
    });
  });
  // Closed all round, only the mean over plan and depth is free.
  const pressure = sum.reduce(
    (total, [w, first, second], j) => total + second - (j === 0 ? (first * first) / w : 0),
    0,
  );
  return { velocity: Math.sqrt(velocity), gradient: Math.sqrt(gradient), pressure: Math.sqrt(pressure) };
}
