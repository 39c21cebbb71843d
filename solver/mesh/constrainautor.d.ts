/**
 * What we use of `@kninnug/constrainautor`. The package ships its TypeScript sources as its types,
 * which do not compile under our settings; tsconfig.base.json points here instead.
 */
export default class Constrainautor {
  /** Constrains a triangulation, in place, to hold the edges; throws where they cross or touch. */
  constructor(
    delaunay: { triangles: Uint32Array; halfedges: Int32Array; coords: ArrayLike<number> },
    edges: readonly (readonly [number, number])[],
  );
}
