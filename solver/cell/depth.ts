import { diagonaliseTogether } from './diagonalise.ts';

/**
 * Polynomials over the half depth, s = 0 at half depth and 1 at floor and lid, by symmetry even or odd.
 * With P_n the Legendre polynomials: velocity P_(n+1) - P_(n-1), which vanishes at s = 1, with n = 1, 3, 5,
 * ... in the plane (even) and n = 2, 4, ... across it (odd); pressure P_0, P_2, ... scaled to integral of
 * the square 1. As (P_(n+1) - P_(n-1))' = (2n + 1) P_n and the integral of P_a P_b over [0, 1] is
 * 1/(2a + 1) for a = b and else 0 (a + b even), all integrals are closed forms. Stiffness and mass are
 * diagonalised together, so that the velocity block of Stokes flow falls apart into plane problems
 * K + (lambda / H^2) M, one per mode.
 */
export interface DepthModes {
  /** N, number of in-plane modes. */
  readonly count: number;
  /** Of the in-plane modes Phi_k and the modes across X_m: integral of the slope squared for integral of the square 1. */
  readonly inPlaneLambda: Float64Array;
  readonly acrossLambda: Float64Array;
  /** Phi_k = sum over l of value[l * N + k] (P_(2l+2) - P_2l); X_m alike on (P_(2l+3) - P_(2l+1)). */
  readonly inPlaneBasis: Float64Array;
  readonly acrossBasis: Float64Array;
  /** Pressure modes x N: integral of psi_j Phi_k ds at [j * N + k]; the first row is the mean of each velocity mode. */
  readonly coupling: Float64Array;
  /** Pressure modes x modes across: integral of psi_j X_m' ds at [j * across + m]. */
  readonly acrossCoupling: Float64Array;
}

/** Modes on P_(n+1) - P_(n-1) for n = first, first + 2, ... */
function eigenmodes(first: number, count: number): { lambda: Float64Array; basis: Float64Array } {
  const stiffness = new Float64Array(count * count);
  const mass = new Float64Array(count * count);
  for (let l = 0; l < count; l += 1) {
    const n = first + 2 * l;
    stiffness[l * count + l] = 2 * n + 1;
    mass[l * count + l] = 1 / (2 * n + 3) + 1 / (2 * n - 1);
    if (l + 1 < count) mass[l * count + l + 1] = mass[(l + 1) * count + l] = -1 / (2 * n + 3);
  }
  return diagonaliseTogether(stiffness, mass, count);
}

/**
 * The modes for N = `count` >= 1 in-plane modes. N - 1 modes across and N for pressure are an inf-sup
 * stable choice; the counts can be given to show that others are not.
 */
export function depthModes(count: number, across = count - 1, pressures = count): DepthModes {
  const inPlane = eigenmodes(1, count);
  const acrossModes = eigenmodes(2, across);
  const coupling = new Float64Array(pressures * count);
  const acrossCoupling = new Float64Array(pressures * across);
  for (let j = 0; j < pressures; j += 1) {
    const scale = Math.sqrt(4 * j + 1);
    for (let k = 0; k < count; k += 1) {
      if (j > 0 && j <= count) coupling[j * count + k] += inPlane.basis[(j - 1) * count + k] / scale;
      if (j < count) coupling[j * count + k] -= inPlane.basis[j * count + k] / scale;
    }
    for (let m = 0; m < across; m += 1)
      if (j > 0 && j <= across)
        acrossCoupling[j * across + m] = scale * acrossModes.basis[(j - 1) * across + m];
  }
  return {
    count,
    inPlaneLambda: inPlane.lambda,
    acrossLambda: acrossModes.lambda,
    inPlaneBasis: inPlane.basis,
    acrossBasis: acrossModes.basis,
    coupling,
    acrossCoupling,
  };
}

const known = new Map<number, DepthModes>();

/** The stable modes for N, made once. */
export function standardModes(count: number): DepthModes {
  let modes = known.get(count);
  if (!modes) {
    modes = depthModes(count);
    known.set(count, modes);
  }
  return modes;
}

/** Values and slopes of all modes at one s in [-1, 1]. */
export interface DepthValues {
  /** N each: Phi_k and its slope. */
  readonly inPlane: Float64Array;
  readonly inPlaneSlope: Float64Array;
  /** N - 1 each: X_m and its slope. */
  readonly across: Float64Array;
  readonly acrossSlope: Float64Array;
  /** N: psi_j */
  readonly pressure: Float64Array;
}

/** Room for the values of N modes. */
export function emptyDepthValues({ count, acrossLambda }: DepthModes): DepthValues {
  const across = acrossLambda.length;
  return {
    inPlane: new Float64Array(count),
    inPlaneSlope: new Float64Array(count),
    across: new Float64Array(across),
    acrossSlope: new Float64Array(across),
    pressure: new Float64Array(count),
  };
}

let legendre = new Float64Array(0);

/** @param out overwritten and returned; new where absent */
export function depthValues(
  depth: DepthModes,
  s: number,
  out: DepthValues = emptyDepthValues(depth),
): DepthValues {
  const N = depth.count;
  const A = depth.acrossLambda.length;
  const length = 2 * N + 3;
  if (legendre.length < length) legendre = new Float64Array(length);
  const P = legendre;
  P[0] = 1;
  P[1] = s;
  for (let n = 1; n + 1 < length; n += 1) P[n + 1] = ((2 * n + 1) * s * P[n] - n * P[n - 1]) / (n + 1);
  out.inPlane.fill(0);
  out.inPlaneSlope.fill(0);
  out.across.fill(0);
  out.acrossSlope.fill(0);
  for (let l = 0; l < N; l += 1) {
    const n = 2 * l + 1;
    for (let k = 0; k < N; k += 1) {
      out.inPlane[k] += depth.inPlaneBasis[l * N + k] * (P[n + 1] - P[n - 1]);
      out.inPlaneSlope[k] += depth.inPlaneBasis[l * N + k] * (2 * n + 1) * P[n];
    }
    out.pressure[l] = Math.sqrt(4 * l + 1) * P[2 * l];
  }
  for (let l = 0; l < A; l += 1) {
    const n = 2 * l + 2;
    for (let m = 0; m < A; m += 1) {
      out.across[m] += depth.acrossBasis[l * A + m] * (P[n + 1] - P[n - 1]);
      out.acrossSlope[m] += depth.acrossBasis[l * A + m] * (2 * n + 1) * P[n];
    }
  }
  return out;
}
