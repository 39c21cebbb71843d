import type { Mesh } from '../mesh/mesh.ts';
import type { Placement } from './canonical.ts';

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
 * zero on the others; pattern n follows, because equal pressures drive nothing), for viscosity 1 and
 * depth 1. Coefficients of the depth modes of depth.ts: pattern by pattern, mode by mode, node by node.
 * To be read through flow-field.ts.
 */
export interface CellFields {
  readonly mesh: Mesh;
  /** N: in-plane and pressure modes; N - 1 for the velocity across the plan. */
  readonly modes: number;
  /** (faces - 1) x N x 2 (all x, then all y) x nodeCount */
  readonly inPlane: Float32Array;
  /** (faces - 1) x (N - 1) x nodeCount */
  readonly across: Float32Array;
  /** (faces - 1) x N x vertexCount */
  readonly pressure: Float32Array;
  /** Side-wall shear along the boundary edge's direction: (faces - 1) x N x edges x 3 (start, end, middle). */
  readonly wallAlong: Float32Array;
  /** The same along the depth: (faces - 1) x (N - 1) x edges x 3. */
  readonly wallAcross: Float32Array;
}

/** A shape of depth 1 solved for viscosity 1: what is kept, for all its copies. */
export interface ShapeSolution {
  readonly faces: number;
  readonly asked: Accuracy;
  readonly portMatrix: Float64Array;
  readonly flowError: number;
  readonly peakError: number | null;
  readonly sharp: boolean;
  readonly checks: CellChecks;
  /** null where only the port matrix was kept. */
  readonly fields: CellFields | null;
}

/** A solved cell, in the frame and unit of the shape that was given; viscosity 1. */
export interface CellSolution {
  readonly faces: number;
  /** Equal for turned, mirrored, moved and scaled copies of one shape. */
  readonly key: string;
  /**
   * faces x faces by rows: flow out of the channel at face i, into the cell, per unit pressure on
   * face j. Symmetric, positive semidefinite, rows sum to zero; p Y p is the power dissipated. For a
   * viscosity mu and a unit of u metres multiply by u^3 / mu.
   */
  readonly portMatrix: Float64Array;
  /** The same to the rims of holes, which is what the fields hold; the same array where there is no hole. */
  readonly inner: Float64Array;
  /** Resistance of the turn into a hole at each face, per viscosity (1 / m^3 for a shape in metres), else 0. */
  readonly holes: Float64Array;
  /** Bound of the relative error of p Y p for any face pressures p. */
  readonly flowError: number;
  /** Bound of the relative error of a peak; null where the cell has none. */
  readonly peakError: number | null;
  /** What the peak of the fields is to be multiplied with, where a rectangle stands in for another profile. */
  readonly peakScale: number;
  /** The part of `flowError` that comes from standing a rectangle in for another profile; 0 for rectangles. */
  readonly profileError: number;
  /** The same of `peakError`; null where the profile has no peak that is known. */
  readonly profilePeakError: number | null;
  /** Walls lean outward by as much as some fillet's radius, which leaves it sharp: the cell has no peak. */
  readonly leansSharp: boolean;
  /** Depth of the extruded shape that was solved, in the caller's unit: the layer's own for rectangles. */
  readonly depth: number;
  /** Re-entrant corners without fillet, where shear is unbounded: the cell then has no peak. */
  readonly sharp: boolean;
  readonly checks: CellChecks;
  /** Of the copy that was solved, of depth 1; null where only the port matrix was kept. */
  readonly fields: CellFields | null;
  /** How that copy lies on the shape that was given; several where the shape is symmetric in itself. */
  readonly placements: readonly [Placement, ...Placement[]];
}
