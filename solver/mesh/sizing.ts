/** How fine a shape is meshed. Lengths in the shape's own unit. */
export interface Sizing {
  /** Longest edge anywhere. */
  readonly size: number;
  /** Growth of the edge length per unit of distance from where it is small; default 0.35. */
  readonly growth?: number;
  /** Edges are about `size` long at (x, y), longer by `growth` per unit of distance from it. */
  readonly points?: readonly SizePoint[];
  /** Longest edge on a boundary edge of this tag; Infinity for no wish. */
  readonly wallSize?: (tag: number) => number;
  /** Least number of edges on a quarter circle, fewer on shorter arcs; default 4. */
  readonly perQuarter?: number;
  /** Least number of edges across a gap between walls; default 1. */
  readonly across?: number;
  /** Meshing stops with a `Problem` beyond this many triangles; default 200,000. */
  readonly maxTriangles?: number;
}

export interface SizePoint {
  readonly x: number;
  readonly y: number;
  readonly size: number;
  /** Default: the sizing's growth. */
  readonly growth?: number;
}

/** Sizing with its defaults filled in. */
export type FullSizing = Required<Omit<Sizing, 'points'>> & {
  readonly points: readonly Required<SizePoint>[];
};

export const DEFAULT_GROWTH = 0.35;

export function fullSizing(sizing: Sizing): FullSizing {
  const growth = sizing.growth ?? DEFAULT_GROWTH;
  return {
    size: sizing.size,
    growth,
    points: (sizing.points ?? []).map((point) => ({ ...point, growth: point.growth ?? growth })),
    wallSize: sizing.wallSize ?? (() => Number.POSITIVE_INFINITY),
    perQuarter: sizing.perQuarter ?? 4,
    across: sizing.across ?? 1,
    maxTriangles: sizing.maxTriangles ?? 200_000,
  };
}
