import type { Profile } from '../section/profile.ts';
import { type Section, sectionOf } from '../section/section-of.ts';
import { taperResistance } from '../section/taper.ts';

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

/** Gauss-Legendre on [0, 1], five points. */
const POINTS = [0.04691007703066802, 0.23076534494715845, 0.5, 0.7692346550528415, 0.953089922969332];
const WEIGHTS = [
  0.11846344252809454, 0.23931433524968324, 0.28444444444444444, 0.23931433524968324, 0.11846344252809454,
];

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
  let area = 0;
  let wall = 0;
  let force = 0;
  for (let i = 0; i < POINTS.length; i += 1) {
    const here = sectionOf(profile, width[0] + (width[1] - width[0]) * POINTS[i]!, depth, where);
    area += WEIGHTS[i]! * here.area;
    wall += WEIGHTS[i]! * here.perimeter;
    force += (WEIGHTS[i]! * here.area) / here.conductance;
  }
  return {
    resistance: taperResistance(profile, width[0], width[1], depth, 1, where),
    area,
    meanShear: force / wall,
    narrow: first.conductance <= last.conductance ? first : last,
    error: Math.max(first.error, last.error),
  };
}
