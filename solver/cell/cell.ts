import type { Mesh } from '../mesh/mesh.ts';

/** What is asked of a solve; relative errors. */
export interface Accuracy {
  /** Of the port matrix, as the power of any combination of face pressures. */
  readonly flow: number;
  /** Of the peak wall shear; null where no peak is wanted. */
  readonly peak: number | null;
}

/** For results that are kept and exported. */
export const DEFAULT_ACCURACY: Accuracy = { flow: 0.005, peak: 0.05 };
/** While a shape is being dragged; to be marked as a preview, never exported. */
export const PREVIEW_ACCURACY: Accuracy = { flow: 0.03, peak: null };

/** What every solve checks of itself; relative to the norm of the port matrix. */
export interface CellChecks {
  /** Largest difference of the port matrix from its transpose, before it was made symmetric. */
  readonly reciprocity: number;
  /** Largest column sum, each face's flow integrated by itself. */
  readonly conservation: number;
  /** Largest difference between p Q and the viscous dissipation, over the face patterns. */
  readonly dissipation: number;
}

/**
 * Velocity and pressure of each of the first `faces - 1` face patterns (unit pressure on face k,
 * zero on the others; pattern n follows, because equal pressures drive nothing), for viscosity 1.
 * In the unit of the shape that was solved; s = 0 at half depth, s = 1 at floor and lid.
 */
export interface CellFields {
  readonly mesh: Mesh;
  readonly halfDepth: number;
  /** Number of in-plane depth modes N; N - 1 for the velocity across the plan, N for pressure. */
  readonly modes: number;
  /** Pattern by pattern, mode by mode, node by node: x, y of the coefficient of (1 - s^2) s^2k. */
  readonly inPlane: Float32Array;
  /** Pattern by pattern, mode by mode, node by node: coefficient of (1 - s^2) s^(2k+1). */
  readonly across: Float32Array;
  /** Pattern by pattern, mode by mode, corner node by corner node: coefficient of s^2k. */
  readonly pressure: Float32Array;
  /** Pattern by pattern, mode by mode, three per boundary edge: wall traction along the wall, even modes. */
  readonly wallAlong: Float32Array;
  /** The same for the traction across the plan (along the depth), odd modes. */
  readonly wallAcross: Float32Array;
}

/** A solved cell. Lengths in the unit of the shape that was given; viscosity 1. */
export interface CellSolution {
  readonly faces: number;
  /**
   * faces x faces by rows: flow out of the channel at face i, into the cell, per unit pressure on
   * face j. Symmetric, positive semidefinite, rows sum to zero; p Y p is the power dissipated. For a
   * viscosity mu and a unit of u metres multiply by u^3 / mu.
   */
  readonly portMatrix: Float64Array;
  /** Bound of the relative error of p Y p for any face pressures p. */
  readonly flowError: number;
  /** Bound of the relative error of a peak; null where the cell has none. */
  readonly peakError: number | null;
  /** Re-entrant corners without fillet, where shear is unbounded: the cell then has no peak. */
  readonly sharp: boolean;
  readonly checks: CellChecks;
}
