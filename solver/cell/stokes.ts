import { solve } from '../sparse/solve.ts';
import { arrays } from './arrays.ts';
import { divergence, gather, gradient, spread } from './coupling.ts';
import type { DepthModes } from './depth.ts';
import type { StokesFactors } from './factors.ts';
import type { Plane } from './plane.ts';

/** Velocity and pressure, mode by mode of the diagonal basis, layouts as in coupling.ts. */
export interface StokesFields {
  readonly patterns: number;
  readonly inPlane: Float64Array[];
  readonly across: Float64Array[];
  readonly pressure: Float64Array[];
  readonly iterations: number;
  /** Of each pattern before the first iteration: square of the preconditioned residual, power f A^-1 f. */
  readonly begun: Float64Array;
  readonly free: Float64Array;
  /** Largest residual of mass conservation over the patterns, as `solveStokes` measures it. */
  readonly residual: number;
}

/** Right sides, mode by mode, layouts as in coupling.ts. */
export interface StokesLoads {
  readonly patterns: number;
  /** N: on the in-plane velocity of each mode. */
  readonly inPlane: readonly Float64Array[];
  /** On each mode across; none where absent. */
  readonly across?: readonly Float64Array[];
  /** Of each pressure mode: what the divergence is to be; zero where absent. */
  readonly divergence?: readonly Float64Array[];
}

/** Where the pressure iteration may begin: pressures of a like problem, and its `StokesFields.free`. */
export interface StokesGuess {
  /** As `StokesFields.pressure`; modes that are absent count as zero. */
  readonly pressure: readonly Float64Array[];
  readonly free: Float64Array;
}

/** Unit pressure on one face after the other, which drives mode k by its mean over the depth. */
export function faceDrives(depth: DepthModes, loads: readonly Float64Array[]): StokesLoads {
  const size = loads.length > 0 ? loads[0].length : 0;
  const inPlane = arrays(depth.count, size * loads.length);
  for (let k = 0; k < depth.count; k += 1)
    for (let c = 0; c < loads.length; c += 1)
      for (let i = 0; i < size; i += 1) inPlane[k][c * size + i] = depth.coupling[k] * loads[c][i];
  return { patterns: loads.length, inPlane };
}

/**
 * Stokes flow between plates at s = +-1 for loads f, g and divergence d:
 *   (K + lambda_k / H^2 M) u_k - sum over j of C_jk B^T p_j = f_k
 *   (K + lambda'_m / H^2 M) w_m - sum over j of E_jm / H M^T p_j = g_m
 *   sum over k of C_jk B u_k + sum over m of E_jm / H M w_m = d_j
 * by conjugate gradients on the pressure Schur complement, all patterns side by side, preconditioned
 * as by Cahouet and Chabard 1988 (Int. J. Numer. Methods Fluids 8, 869): inverse mass, and for the
 * pressure's mean over the depth the inverse Laplacian besides.
 *
 * @param tolerance of the residual, see `largest` below
 * @param from a solution of the same problem to go on from
 * @param guess where to begin otherwise; for face drives
 */
export function solveStokes(
  plane: Plane,
  depth: DepthModes,
  halfDepth: number,
  factors: StokesFactors,
  loads: StokesLoads,
  tolerance: number,
  from?: StokesFields,
  guess?: StokesGuess,
): StokesFields {
  const n = loads.patterns;
  const N = depth.count;
  const across = depth.acrossLambda.length;
  const pressures = depth.coupling.length / N;
  const corners = plane.mesh.vertexCount;
  const { count } = plane;
  const block = corners * n;
  const u = arrays(N, count * 2 * n);
  const w = arrays(across, count * n);
  const p = arrays(pressures, block);
  const r = arrays(pressures, block);
  const zAll = new Float64Array(pressures * block);
  const z = slices(zAll, pressures, block);
  const d = arrays(pressures, block);
  const s = arrays(pressures, block);
  /** A^-1 B^T d of every mode. */
  const du = arrays(N, count * 2 * n);
  const dw = arrays(across, count * n);
  const q = new Float64Array(block);

  const parts: Parts = { plane, depth, halfDepth, factors, patterns: n, q };

  const start = from?.pressure ?? guess?.pressure ?? [];
  for (let j = 0; j < pressures; j += 1) if (start[j]) p[j].set(start[j]);
  for (let k = 0; k < N; k += 1) {
    if (from) u[k].set(from.inPlane[k]);
    else {
      if (guess) pushAlong(parts, p, k, u[k]);
      axpy(1, loads.inPlane[k], u[k]);
      solve(factors.inPlane[k], u[k], 2 * n);
    }
  }
  for (let m = 0; m < across; m += 1) {
    if (from) w[m].set(from.across[m]);
    else if (loads.across || guess) {
      if (guess) pushAcross(parts, p, m, w[m]);
      if (loads.across) axpy(1, loads.across[m], w[m]);
      solve(factors.across[m], w[m], n);
    }
  }
  conserve(parts, u, w, -1, r);
  if (loads.divergence) for (let j = 0; j < pressures; j += 1) axpy(1, loads.divergence[j], r[j]);
  precondition(parts, r, zAll, z);
  for (let j = 0; j < pressures; j += 1) d[j].set(z[j]);
  const rz = dots(r, z, n);
  const begun = from?.begun ?? rz.slice();
  // Where the start is divergence-free but for rounding there is nothing to iterate on.
  const free = from?.free ?? guess?.free ?? dots(u, loads.inPlane, n);
  const acrossEnergy = dots(w, loads.across ?? [], n);
  const floor = new Float64Array(n);
  for (let c = 0; c < n; c += 1) floor[c] = 1e-28 * Math.abs(free[c] + acrossEnergy[c]);
  const alpha = new Float64Array(n);
  const beta = new Float64Array(n);
  /** Of face drives, whose residual is measured against their power. */
  const drives = loads.divergence ? null : loads.inPlane;
  let residual = largest(rz, floor, begun, free, drives && dots(u, drives, n));
  let iterations = from?.iterations ?? 0;
  while (residual > tolerance && iterations < MOST_ITERATIONS) {
    iterations += 1;
    for (let k = 0; k < N; k += 1) {
      pushAlong(parts, d, k, du[k]);
      solve(factors.inPlane[k], du[k], 2 * n);
    }
    for (let m = 0; m < across; m += 1) {
      pushAcross(parts, d, m, dw[m]);
      solve(factors.across[m], dw[m], n);
    }
    conserve(parts, du, dw, 1, s);
    const ds = dots(d, s, n);
    for (let c = 0; c < n; c += 1) alpha[c] = ds[c] > 0 ? rz[c] / ds[c] : 0;
    for (let j = 0; j < pressures; j += 1) {
      addEach(alpha, 1, d[j], p[j]);
      addEach(alpha, -1, s[j], r[j]);
    }
    for (let k = 0; k < N; k += 1) addEach(alpha, 1, du[k], u[k]);
    for (let m = 0; m < across; m += 1) addEach(alpha, 1, dw[m], w[m]);
    precondition(parts, r, zAll, z);
    const next = dots(r, z, n);
    for (let c = 0; c < n; c += 1) beta[c] = rz[c] > 0 ? next[c] / rz[c] : 0;
    rz.set(next);
    for (let j = 0; j < pressures; j += 1) turn(z[j], beta, d[j]);
    residual = largest(rz, floor, begun, free, drives && dots(u, drives, n));
  }
  return { patterns: n, inPlane: u, across: w, pressure: p, iterations, begun, free, residual };
}

/**
 * What the steps of one iteration share. They are functions of the module, not of the iteration: those
 * made anew for each junction are compiled anew for each, which takes longer than they run.
 */
interface Parts {
  readonly plane: Plane;
  readonly depth: DepthModes;
  readonly halfDepth: number;
  readonly factors: StokesFactors;
  readonly patterns: number;
  /** One pressure of every pattern, to write over. */
  readonly q: Float64Array;
}

function slices(all: Float64Array, count: number, size: number): Float64Array[] {
  const out: Float64Array[] = [];
  for (let j = 0; j < count; j += 1) out.push(all.subarray(j * size, (j + 1) * size));
  return out;
}

function conserve(
  { plane, depth, halfDepth, patterns, q }: Parts,
  inPlane: readonly Float64Array[],
  acrossPart: readonly Float64Array[],
  sign: number,
  out: readonly Float64Array[],
): void {
  const across = acrossPart.length;
  for (const part of out) part.fill(0);
  for (let k = 0; k < depth.count; k += 1) {
    divergence(plane, inPlane[k], patterns, sign, q);
    for (let j = 0; j < out.length; j += 1) axpy(depth.coupling[j * depth.count + k], q, out[j]);
  }
  for (let m = 0; m < across; m += 1) {
    gather(plane, acrossPart[m], patterns, sign / halfDepth, q);
    for (let j = 1; j < out.length; j += 1) axpy(depth.acrossCoupling[j * across + m], q, out[j]);
  }
}

/** Residuals r to z, whose parts lie one after the other in `all`. */
function precondition(
  { plane, factors, patterns, q }: Parts,
  r: readonly Float64Array[],
  all: Float64Array,
  z: readonly Float64Array[],
): void {
  const corners = plane.mesh.vertexCount;
  for (let j = 0; j < r.length; j += 1) z[j].set(r[j]);
  solve(factors.mass, all, r.length * patterns);
  q.set(r[0]);
  for (let v = 0; v < corners; v += 1)
    if (factors.onFace[v]) for (let c = 0; c < patterns; c += 1) q[c * corners + v] = 0;
  solve(factors.laplacian, q, patterns);
  axpy(factors.shallow, q, z[0]);
}

/** B^T of a pressure, on one mode. */
function pushAlong(
  { plane, depth, patterns, q }: Parts,
  pressure: readonly Float64Array[],
  k: number,
  out: Float64Array,
): void {
  q.fill(0);
  for (let j = 0; j < pressure.length; j += 1) axpy(depth.coupling[j * depth.count + k], pressure[j], q);
  gradient(plane, q, patterns, out);
}

function pushAcross(
  { plane, depth, halfDepth, patterns, q }: Parts,
  pressure: readonly Float64Array[],
  m: number,
  out: Float64Array,
): void {
  const across = depth.acrossLambda.length;
  q.fill(0);
  for (let j = 1; j < pressure.length; j += 1)
    axpy(depth.acrossCoupling[j * across + m] / halfDepth, pressure[j], q);
  spread(plane, q, patterns, out);
}

/**
 * Largest residual. For face drives f, whose `power` f u is given: a bound of (p, B u), by which power put in
 * and dissipated still differ, over the power itself: sqrt(p S p) <= sqrt(f A^-1 f), which far exceeds the
 * power where arms are long and shallow. For other loads relative to the start.
 */
function largest(
  rz: Float64Array,
  floor: Float64Array,
  begun: Float64Array,
  free: Float64Array,
  power: Float64Array | null,
): number {
  let most = 0;
  for (let c = 0; c < rz.length; c += 1)
    if (rz[c] > floor[c]) most = Math.max(most, power ? (rz[c] * free[c]) / power[c] ** 2 : rz[c] / begun[c]);
  return Math.sqrt(most);
}

/** A flow that takes more is not coming. */
const MOST_ITERATIONS = 500;

/** y += a x */
function axpy(a: number, x: Float64Array, y: Float64Array): void {
  for (let i = 0; i < x.length; i += 1) y[i] += a * x[i];
}

/** y += sign a_c x on each of the patterns c, which lie one after the other. */
function addEach(a: Float64Array, sign: number, x: Float64Array, y: Float64Array): void {
  const size = x.length / a.length;
  for (let c = 0; c < a.length; c += 1) {
    const factor = sign * a[c];
    for (let i = c * size; i < (c + 1) * size; i += 1) y[i] += factor * x[i];
  }
}

/** d = z + b_c d on each of the patterns. */
function turn(z: Float64Array, b: Float64Array, d: Float64Array): void {
  const size = z.length / b.length;
  for (let c = 0; c < b.length; c += 1) {
    const factor = b[c];
    for (let i = c * size; i < (c + 1) * size; i += 1) d[i] = z[i] + factor * d[i];
  }
}

/** Dot product of each pattern over all modes of `b`. */
function dots(a: readonly Float64Array[], b: readonly Float64Array[], n: number): Float64Array {
  const out = new Float64Array(n);
  for (let j = 0; j < b.length; j += 1) {
    const x = a[j];
    const y = b[j];
    const size = x.length / n;
    for (let c = 0; c < n; c += 1) {
      let sum = 0;
      for (let i = c * size; i < (c + 1) * size; i += 1) sum += x[i] * y[i];
      out[c] += sum;
    }
  }
  return out;
}
