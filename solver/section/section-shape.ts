import type { Shape } from '../mesh/mesh.ts';
import type { Place } from './section.ts';

/** Tags of a section's boundary. */
export const WALL = 0;
/** The mirror line x = 0 of a section of which only the right half is meshed. */
export const SYMMETRY = 1;

/**
 * The shape of a section freed of its size: what is meshed and solved once for all its copies. In units
 * of its own depth (a polygon: of its height); the lowest point lies at y = 0.
 */
export interface SectionShape {
  /** Equal for equal shapes whatever their size. */
  readonly key: string;
  /** Counter-clockwise; only the right half, from the middle of the floor, where `symmetric`. */
  readonly shape: Shape;
  readonly symmetric: boolean;
  /** The meshed outline is stretched by this much across to make the shape (ellipses of circles). */
  readonly stretch: number;
  /** Metres per unit, and where the unit's origin lies, in metres. */
  readonly unit: number;
  readonly origin: Place;
  /** Width left out of the flat middle of a shape so wide that its sides know nothing of each other. */
  readonly extra: number;
  /** Of the whole shape without `extra`. */
  readonly area: number;
  readonly perimeter: number;
  readonly width: number;
  readonly depth: number;
  /** Wall places where the floor's and the side wall's shear is read. */
  readonly floorMiddle: Place;
  readonly sideMiddle: Place;
  /** Obtuse corners, where the mesh is graded, and re-entrant ones, where it is graded far. */
  readonly obtuse: readonly Place[];
  readonly reentrant: readonly Place[];
  /** Farthest that simplifying moved the wall. */
  readonly moved: number;
  /** Length along the wall over which the shear of a measured wall is averaged; 0 for drawn shapes. */
  readonly averaged: number;
}
