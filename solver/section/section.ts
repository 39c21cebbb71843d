/**
 * Fully developed flow through one cross-section: −µ∇²u = G with no slip on the wall, G = −dp/dx.
 * Everything is given per unit G and µ, so one section serves every flow and fluid. Lengths in metres.
 *
 * Places are [x, y]: x across from the middle of the mask opening, y up from the layer's floor, so
 * the lid is at y = depth. A measured polygon keeps the coordinates of its points.
 */
export type Place = readonly [number, number];

export interface Section {
  /** m² */
  readonly area: number;
  /** Wetted, m */
  readonly perimeter: number;
  /** 4 area / perimeter, m */
  readonly hydraulicDiameter: number;
  /** Greatest width and depth of the shape that is solved (a closed V is shallower than its layer), m */
  readonly width: number;
  readonly depth: number;
  /** m⁴: Q = conductance G/µ; resistance per length is µ / conductance. */
  readonly conductance: number;
  /** Greatest velocity over the mean, and where. */
  readonly peakVelocity: number;
  readonly peakAt: Place;
  /** Wall shear stress per unit G, m: the mean is area / perimeter. */
  readonly meanShear: number;
  /** null where a re-entrant corner makes it unbounded. */
  readonly peakShear: number | null;
  readonly peakShearAt: Place | null;
  /** In the middle of the floor (the tip, where the floor is one: zero). */
  readonly floorShear: number;
  /** On the side wall, at half the depth. */
  readonly sideShear: number;
  /** Fanning friction factor times Reynolds number: hydraulicDiameter² area / (2 conductance). */
  readonly frictionReynolds: number;
  /** Bound of the relative error of `conductance`; 0 where it is exact but for rounding. */
  readonly error: number;
  /** Estimated relative error of the shears, `peakVelocity` as well. */
  readonly shearError: number;
}

/** What a solution gives; the rest of a section follows. */
export type SectionData = Omit<Section, 'hydraulicDiameter' | 'meanShear' | 'frictionReynolds'>;

export function sectionFrom(data: SectionData): Section {
  const { area, perimeter, conductance } = data;
  const hydraulicDiameter = (4 * area) / perimeter;
  return {
    area,
    perimeter,
    hydraulicDiameter,
    width: data.width,
    depth: data.depth,
    conductance,
    peakVelocity: data.peakVelocity,
    peakAt: data.peakAt,
    meanShear: area / perimeter,
    peakShear: data.peakShear,
    peakShearAt: data.peakShearAt,
    floorShear: data.floorShear,
    sideShear: data.sideShear,
    frictionReynolds: (hydraulicDiameter * hydraulicDiameter * area) / (2 * conductance),
    error: data.error,
    shearError: data.shearError,
  };
}
