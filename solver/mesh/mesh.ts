/**
 * A plan shape to mesh, and the mesh. Coordinates are plain numbers in any one unit; callers scale.
 */

/** An edge from one vertex of a loop to the next: straight, or a circular arc. */
export interface Edge {
  /** Start point; the edge ends at the next edge's start. */
  readonly x: number;
  readonly y: number;
  /** Tangent of a quarter of the arc's sweep, positive counter-clockwise; 0 is a straight edge. */
  readonly bulge: number;
  /** The caller's label, carried to the boundary edges of the mesh. */
  readonly tag: number;
}

/** Outer boundary counter-clockwise first, holes clockwise. */
export type Shape = readonly (readonly Edge[])[];

/**
 * Quadratic (six-node) triangles. Nodes 0..vertexCount-1 are corners, the rest mid-edge nodes;
 * mid-edge nodes on arcs lie on the arc, so curved edges are isoparametric.
 */
export interface Mesh {
  readonly vertexCount: number;
  readonly nodeCount: number;
  /** nodeCount */
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** 6 per triangle: corners a b c counter-clockwise, then mid ab, bc, ca. */
  readonly triangles: Int32Array;
  /** 3 per boundary edge: start, end (counter-clockwise round the fluid), middle. */
  readonly boundary: Int32Array;
  /** Tag of the shape's edge, one per boundary edge. */
  readonly boundaryTag: Int32Array;
}
