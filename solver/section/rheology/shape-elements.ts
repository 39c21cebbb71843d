import type { SectionShape } from '../section-shape.ts';
import { WALL } from '../section-shape.ts';
import { sectionMesh } from '../solve-section.ts';
import { type SectionElements, sectionElements } from './elements.ts';

/** Longest edge over the hydraulic diameter: flows are within 3e-4 then, peaks within 1 % (checked). */
const SIZE = 0.08;
const PER_QUARTER = 6;

/** A section's shape, or its right half where symmetric, meshed for a non-linear solve. */
export function shapeElements(shape: SectionShape, where: string): SectionElements {
  const diameter = (4 * shape.area) / shape.perimeter;
  return sectionElements(sectionMesh(shape, SIZE * diameter, PER_QUARTER, where), (tag) => tag === WALL);
}

/** The shape with the flat middle that `extra` counts put back into its outline. */
export function withFlat(shape: SectionShape): SectionShape {
  const { extra } = shape;
  if (extra === 0) return shape;
  return {
    ...shape,
    key: `${shape.key} ${extra.toPrecision(13)}`,
    shape: shape.shape.map((loop) => loop.map((e) => (e.x > 0 ? { ...e, x: e.x + extra / 2 } : e))),
    extra: 0,
    area: shape.area + extra,
    perimeter: shape.perimeter + 2 * extra,
    width: shape.width + extra,
  };
}
