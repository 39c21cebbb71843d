/**
 * Polynomials over the half depth, s = 0 at half depth and 1 at floor and lid, by symmetry even or
 * odd: in-plane velocity (1 - s^2) s^2k, velocity across the plan (1 - s^2) s^(2k+1), pressure s^2k.
 * Stiffness and mass over s are diagonalised together, so that in the new basis the velocity block of
 * Stokes flow falls apart into plane problems K + (lambda / H^2) M, one per mode.
 */
export interface DepthModes {
  /** N, number of in-plane and of pressure modes. */
  readonly count: number;
  /** N, N - 1: eigenvalues, integral of Phi'^2 ds for integral of Phi^2 ds = 1. */
  readonly inPlaneLambda: Float64Array;
  readonly acrossLambda: Float64Array;
  /** Coefficients of the eigenmodes: Phi_k = sum over l of value[l * N + k] (1 - s^2) s^2l. */
  readonly inPlaneBasis: Float64Array;
  /** (N-1) x (N-1) alike, on (1 - s^2) s^(2l+1). */
  readonly acrossBasis: Float64Array;
  /** N x N: pressure mode j (orthonormal Legendre) = sum over l of value[l * N + j] s^2l. */
  readonly pressureBasis: Float64Array;
  /** N x N: integral of psi_j Phi_k ds at [j * N + k]; the first row is the mean of each velocity mode. */
  readonly coupling: Float64Array;
  /** N x (N-1): integral of psi_j X_m' ds at [j * (N-1) + m]. */
  readonly acrossCoupling: Float64Array;
}

/** Integral over [0, 1] of a product of polynomials given by coefficients of 1, s, s^2, ... */
function integral(a: readonly number[], b: readonly number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1)
    for (let j = 0; j < b.length; j += 1) sum += (a[i] * b[j]) / (i + j + 1);
  return sum;
}

const derivative = (a: readonly number[]): number[] => a.slice(1).map((value, i) => value * (i + 1));

/** (1 - s^2) s^power by coefficients. */
function bubble(power: number): number[] {
  const a = new Array<number>(power + 3).fill(0);
  a[power] = 1;
  a[power + 2] = -1;
  return a;
}

/** Combination of `parts` by column k of the n x n matrix `basis`. */
function combine(parts: readonly (readonly number[])[], basis: Float64Array, k: number): number[] {
  const n = parts.length;
  const out = new Array<number>(Math.max(0, ...parts.map((part) => part.length))).fill(0);
  for (let l = 0; l < n; l += 1) {
    const part = parts[l];
    for (let i = 0; i < part.length; i += 1) out[i] = out[i] + basis[l * n + k] * part[i];
  }
  return out;
}

/**
 * Solves S v = lambda M v for symmetric S and positive definite M (n x n by rows): Cholesky of M, then
 * cyclic Jacobi rotations. Columns of the returned basis have v M v = 1, lambdas ascend.
 */
export function diagonaliseTogether(
  stiffness: Float64Array,
  mass: Float64Array,
  n: number,
): { lambda: Float64Array; basis: Float64Array } {
  const l = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j <= i; j += 1) {
      let sum = mass[i * n + j];
      for (let k = 0; k < j; k += 1) sum -= l[i * n + k] * l[j * n + k];
      l[i * n + j] = i === j ? Math.sqrt(sum) : sum / l[j * n + j];
    }
  // a = L^-1 S L^-T
  const a = Float64Array.from(stiffness);
  for (let side = 0; side < 2; side += 1) {
    for (let c = 0; c < n; c += 1)
      for (let i = 0; i < n; i += 1) {
        let sum = a[i * n + c];
        for (let k = 0; k < i; k += 1) sum -= l[i * n + k] * a[k * n + c];
        a[i * n + c] = sum / l[i * n + i];
      }
    for (let i = 0; i < n; i += 1)
      for (let j = 0; j < i; j += 1) {
        const swap = a[i * n + j];
        a[i * n + j] = a[j * n + i];
        a[j * n + i] = swap;
      }
  }
  const v = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) v[i * n + i] = 1;
  for (let sweep = 0; sweep < 30; sweep += 1) {
    let off = 0;
    for (let p = 0; p < n; p += 1) for (let q = 0; q < p; q += 1) off += a[p * n + q] ** 2;
    if (off === 0) break;
    for (let p = 0; p < n; p += 1)
      for (let q = p + 1; q < n; q += 1) {
        const apq = a[p * n + q];
        if (apq === 0) continue;
        const theta = (a[q * n + q] - a[p * n + p]) / (2 * apq);
        const t = (theta < 0 ? -1 : 1) / (Math.abs(theta) + Math.sqrt(theta * theta + 1));
        const c = 1 / Math.sqrt(t * t + 1);
        const s = t * c;
        for (let k = 0; k < n; k += 1) {
          const x = a[k * n + p];
          const y = a[k * n + q];
          a[k * n + p] = c * x - s * y;
          a[k * n + q] = s * x + c * y;
        }
        for (let k = 0; k < n; k += 1) {
          const x = a[p * n + k];
          const y = a[q * n + k];
          a[p * n + k] = c * x - s * y;
          a[q * n + k] = s * x + c * y;
        }
        a[p * n + q] = 0;
        a[q * n + p] = 0;
        for (let k = 0; k < n; k += 1) {
          const x = v[k * n + p];
          const y = v[k * n + q];
          v[k * n + p] = c * x - s * y;
          v[k * n + q] = s * x + c * y;
        }
      }
  }
  const order = Array.from({ length: n }, (_, i) => i).sort((i, j) => a[i * n + i] - a[j * n + j]);
  const lambda = new Float64Array(n);
  const basis = new Float64Array(n * n);
  order.forEach((from, k) => {
    lambda[k] = a[from * n + from];
    // basis column = L^-T v
    for (let i = n - 1; i >= 0; i -= 1) {
      let sum = v[i * n + from];
      for (let j = i + 1; j < n; j += 1) sum -= l[j * n + i] * basis[j * n + k];
      basis[i * n + k] = sum / l[i * n + i];
    }
  });
  return { lambda, basis };
}

/** Coefficients by powers of s of the Legendre polynomial of even degree 2j, scaled to integral 1 over [0, 1]. */
function evenLegendre(j: number): number[] {
  let before = [1];
  let here = [0, 1];
  if (j === 0) return [1];
  for (let degree = 1; degree < 2 * j; degree += 1) {
    const next = [0, ...here.map((value) => ((2 * degree + 1) / (degree + 1)) * value)];
    before.forEach((value, i) => {
      next[i] = next[i] - (degree / (degree + 1)) * value;
    });
    before = here;
    here = next;
  }
  return here.map((value) => value * Math.sqrt(4 * j + 1));
}

function eigenmodes(parts: readonly (readonly number[])[]): {
  lambda: Float64Array;
  basis: Float64Array;
} {
  const n = parts.length;
  const stiffness = new Float64Array(n * n);
  const mass = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j < n; j += 1) {
      mass[i * n + j] = integral(parts[i], parts[j]);
      stiffness[i * n + j] = integral(derivative(parts[i]), derivative(parts[j]));
    }
  return diagonaliseTogether(stiffness, mass, n);
}

/**
 * The modes for N = `count` >= 1 in-plane modes. By default N - 1 modes across and N for pressure, an
 * inf-sup stable choice; the counts can be given to show that others are not.
 */
export function depthModes(count: number, across = count - 1, pressures = count): DepthModes {
  const inPlaneParts = Array.from({ length: count }, (_, k) => bubble(2 * k));
  const acrossParts = Array.from({ length: across }, (_, k) => bubble(2 * k + 1));
  const inPlane = eigenmodes(inPlaneParts);
  const acrossModes = eigenmodes(acrossParts);
  const psi = Array.from({ length: pressures }, (_, j) => evenLegendre(j));
  const pressureBasis = new Float64Array(pressures * pressures);
  psi.forEach((polynomial, j) => {
    for (let l = 0; l <= j; l += 1) pressureBasis[l * pressures + j] = polynomial[2 * l];
  });
  const coupling = new Float64Array(pressures * count);
  const acrossCoupling = new Float64Array(pressures * across);
  for (let j = 0; j < pressures; j += 1) {
    for (let k = 0; k < count; k += 1)
      coupling[j * count + k] = integral(psi[j], combine(inPlaneParts, inPlane.basis, k));
    for (let m = 0; m < across; m += 1)
      acrossCoupling[j * across + m] = integral(
        psi[j],
        derivative(combine(acrossParts, acrossModes.basis, m)),
      );
  }
  return {
    count,
    inPlaneLambda: inPlane.lambda,
    acrossLambda: acrossModes.lambda,
    inPlaneBasis: inPlane.basis,
    acrossBasis: acrossModes.basis,
    pressureBasis,
    coupling,
    acrossCoupling,
  };
}
