/**
 * What we use of `@kninnug/constrainautor`. The package ships its TypeScript sources as its types,
 * which do not compile under our settings; tsconfig.base.json points here instead.
 */
export default class Constrainautor {
  constructor(delaunay: { triangles: Uint32Array; halfedges: Int32Array; coords: ArrayLike<number> });
  /** Constrains the triangulation, in place, to hold the edges; throws where they cross or touch. */
  constrainAll(edges: readonly (readonly [number, number])[]): this;
  constrainOne(from: number, to: number): number;
  isCollinear(a: number, b: number, c: number): boolean;
  flipDiagonal(edge: number): number;
}
