import type { Profile } from '../section/profile.ts';
import { type Section, sectionOf } from '../section/section-of.ts';
import { taperMeans } from '../section/taper.ts';

/**
 * A unit length of channel as the network sees it, free of viscosity and flow. For a stretch whose
 * width runs linearly from one end to the other, every figure is a mean along its length L:
 *
 *   dp = mu Q L resistance,   resistance = (1/L) ∫ dx / K(x),   K the section's conductance (m^4)
 */
export interface Duct {
  /** m^-4 */
  readonly resistance: number;
  /** Volume per length, m^2. */
  readonly area: number;
  /** Wall-area mean of the wall shear per mu Q, m^-3. */
  readonly meanShear: number;
  /** The section at the end with the smaller conductance, where speed and shear peak. */
  readonly narrow: Section;
  /** Relative error of the resistance, as the sections know it. */
  readonly error: number;
}

/**
 * @param width mask width at both ends and
 * @param depth of the layer, m. Throws `Problem` 'profile' where the process cannot make the shape.
 */
export function ductOf(
  profile: Profile,
  width: readonly [number, number],
  depth: number,
  where: string,
): Duct {
  const first = sectionOf(profile, width[0], depth, where);
  if (width[0] === width[1]) {
    return {
      resistance: 1 / first.conductance,
      area: first.area,
      meanShear: first.meanShear / first.conductance,
      narrow: first,
      error: first.error,
    };
  }
  const last = sectionOf(profile, width[1], depth, where);
  const { resistance, area, perimeter, force } = taperMeans(profile, width[0], width[1], depth, where);
  return {
    resistance,
    area,
    meanShear: force / perimeter,
    narrow: first.conductance <= last.conductance ? first : last,
    error: Math.max(first.error, last.error),
  };
}
