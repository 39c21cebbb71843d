import { Problem } from '../problem/problem.ts';
import { ellipseSection } from './ellipse.ts';
import { EQUILATERAL, equilateralSection } from './equilateral.ts';
import type { Profile } from './profile.ts';
import { rectangleSection } from './rectangle.ts';
import type { Section } from './section.ts';
import { ACCURACY, type SectionOptions, shapeOf, sharedSections, solvedUnit } from './solved-unit.ts';
import { scaleSection } from './unit-section.ts';

export type { Section } from './section.ts';
export type { SectionOptions } from './solved-unit.ts';

/**
 * The section of a profile with the given mask width and layer depth, metres: exact where a closed form
 * or series exists (rectangle, circle, ellipse, equilateral triangle), else by finite elements to the
 * accuracy asked for, each shape solved once whatever its size. A circle's bore is its width and must
 * equal the depth; a polygon takes neither. Throws `Problem` 'profile' for what cannot be made, naming
 * `where`.
 */
export function sectionOf(
  profile: Profile,
  width: number,
  depth: number,
  where = '',
  options: SectionOptions = {},
): Section {
  checkSize(profile, width, depth, where);
  switch (profile.kind) {
    case 'rectangle':
      return rectangleSection(width, depth);
    case 'circle':
    case 'ellipse':
      return ellipseSection(width, depth);
    case 'triangle':
      if (Math.abs(depth / width - EQUILATERAL) < 1e-12) return equilateralSection(width);
      break;
    default:
  }
  const { accuracy = ACCURACY, cache = sharedSections } = options;
  const known = cache.recall(profile, width, depth, accuracy);
  if (known) return known;
  const shape = shapeOf(profile, width, depth, where);
  const section = scaleSection(shape, solvedUnit(shape, options, where));
  cache.remember(profile, width, depth, accuracy, section);
  return section;
}

/** Throws unless width and depth are lengths that the profile can have. */
export function checkSize(profile: Profile, width: number, depth: number, where: string): void {
  if (profile.kind === 'polygon') return;
  for (const [name, value] of [
    ['width', width],
    ['depth', depth],
  ] as const) {
    if (value > 0 && value < Number.POSITIVE_INFINITY) continue;
    throw new Problem(
      'profile',
      `The ${name} of the cross-section is ${value} m.`,
      where,
      `Give a ${name} above zero.`,
    );
  }
  if (profile.kind === 'circle' && Math.abs(width - depth) > 1e-9 * depth) {
    throw new Problem(
      'profile',
      `A round bore ${width} m wide cannot lie in a layer ${depth} m deep.`,
      where,
      'Make width and depth equal, or choose an ellipse.',
    );
  }
}
