import type { Mesh } from '../mesh/mesh.ts';
import { factorise } from '../sparse/factorise.ts';
import { solve } from '../sparse/solve.ts';
import type { ElementTable } from './element-table.ts';
import { type Stiffness, withFixed } from './stiffness.ts';

/**
 * Flow per unit G/µ through a meshed section, enclosed from both sides.
 *
 * Below: −∇²u = 1 with u = 0 on the wall, by quadratic elements; the flow ∫u is largest for the true
 * velocity, so that lower = ∫u_h. Above (Prager and Synge; Thomson's principle): every stress σ with
 * ∇·σ = −1 has ∫|σ|² at least the flow; σ = σ₀ + curl ψ with σ₀ = −(x, y)/2 and ψ in the same elements,
 * free on the wall, gives upper = min ∫|σ|². A line of symmetry must run through the origin, where σ₀ has
 * no part across it: there u is free and ψ zero. Both bounds hold for the meshed shape, up to the error
 * of integration in curved triangles.
 */
export interface PlaneFlow {
  /** Velocity at the nodes, per unit G/µ, m². */
  readonly u: Float64Array;
  /** ∫φ at the nodes, m². */
  readonly load: Float64Array;
  /** Stress function at the nodes, m². */
  readonly psi: Float64Array;
  /** Bounds of the conductance, m⁴ (of the meshed part of the section). */
  readonly lower: number;
  readonly upper: number;
}

/**
 * @param wall nodes on the wall (1) of nodeCount
 * @param symmetry nodes on a line of symmetry (1); none where the whole section is meshed
 */
export function planeFlow(
  mesh: Mesh,
  table: ElementTable,
  system: Stiffness,
  wall: Uint8Array,
  symmetry: Uint8Array,
): PlaneFlow {
  const { u, psi: curlLoad, square } = loads(mesh, table);
  const load = u.slice();
  const factor = factorise(system.symbolic, withFixed(system.pattern, system.element, wall));
  zero(u, wall);
  solve(factor, u);
  let lower = 0;
  for (let i = 0; i < u.length; i += 1) lower += u[i] * load[i];

  // ψ is free but for a constant where there is no line of symmetry.
  const held = symmetry.some((flag) => flag === 1) ? symmetry : firstOnly(mesh.nodeCount);
  const psi = curlLoad.slice();
  zero(psi, held);
  solve(factorise(system.symbolic, withFixed(system.pattern, system.element, held), factor), psi);
  let upper = square;
  for (let i = 0; i < psi.length; i += 1) upper -= psi[i] * curlLoad[i];
  return { u, load, psi, lower, upper };
}

function zero(values: Float64Array, where: Uint8Array): void {
  for (let i = 0; i < values.length; i += 1) if (where[i]) values[i] = 0;
}

function firstOnly(count: number): Uint8Array {
  const flags = new Uint8Array(count);
  flags[0] = 1;
  return flags;
}

/** ∫φ; ∫(x ∂φ/∂y − y ∂φ/∂x)/2; and ∫|σ₀|². */
function loads(mesh: Mesh, table: ElementTable) {
  const u = new Float64Array(mesh.nodeCount);
  const psi = new Float64Array(mesh.nodeCount);
  const { rule, weight, x, y, gx, gy, value, triangleCount } = table;
  let square = 0;
  for (let t = 0; t < triangleCount; t += 1) {
    for (let q = 0; q < rule.count; q += 1) {
      const p = t * rule.count + q;
      const w = weight[p];
      square += (w * (x[p] * x[p] + y[p] * y[p])) / 4;
      for (let i = 0; i < 6; i += 1) {
        const node = mesh.triangles[6 * t + i];
        u[node] += w * value[6 * q + i];
        psi[node] += (w / 2) * (x[p] * gy[6 * p + i] - y[p] * gx[6 * p + i]);
      }
    }
  }
  return { u, psi, square };
}
