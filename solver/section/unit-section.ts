import type { Place, Section } from './section.ts';
import { sectionFrom } from './section.ts';
import type { SectionShape } from './section-shape.ts';

/** A solved shape in its own unit, with numbers only: kept in caches and project files. */
export interface UnitSection {
  /** Flow and greatest velocity per unit G/µ. */
  readonly conductance: number;
  readonly top: number;
  readonly topAt: Place;
  readonly peakShear: number | null;
  readonly peakShearAt: Place | null;
  readonly floorShear: number;
  readonly sideShear: number;
  readonly error: number;
  readonly shearError: number;
  /** Along the wall (the right half of a symmetric shape): x, y, shear of each point, one after the other. */
  readonly wall: readonly number[];
}

/** The section in metres; a flat middle that was left out is put back, where flow is as between plates. */
export function scaleSection(shape: SectionShape, unit: UnitSection): Section {
  const { extra, unit: m } = shape;
  const area = shape.area + extra * shape.depth;
  const conductance = unit.conductance + (extra * shape.depth ** 3) / 12;
  return sectionFrom({
    area: area * m * m,
    perimeter: (shape.perimeter + 2 * extra) * m,
    width: (shape.width + extra) * m,
    depth: shape.depth * m,
    conductance: conductance * m ** 4,
    peakVelocity: (unit.top * area) / conductance,
    peakAt: toMetres(shape, unit.topAt),
    peakShear: unit.peakShear === null ? null : unit.peakShear * m,
    peakShearAt: unit.peakShearAt && toMetres(shape, unit.peakShearAt),
    floorShear: unit.floorShear * m,
    sideShear: unit.sideShear * m,
    error: unit.error,
    shearError: unit.shearError,
  });
}

/** A place of the shape (right half where symmetric) in metres. */
export function toMetres(shape: SectionShape, [x, y]: Place): Place {
  const aside = x > 0 ? x + shape.extra / 2 : x;
  return [shape.origin[0] + aside * shape.unit, shape.origin[1] + y * shape.unit];
}
