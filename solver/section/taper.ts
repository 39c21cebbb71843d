import { ellipseConductance } from './ellipse.ts';
import type { Profile } from './profile.ts';
import { rectangleConductance } from './rectangle.ts';
import { checkSize, sectionOf } from './section-of.ts';

/**
 * Resistance of a channel whose mask width runs linearly from `w1` to `w2` (metres) along `length`,
 * divided by µ (m⁻³): ∫ dx / conductance(width(x)), the flow taken as fully developed everywhere
 * (small angles). Gauss–Legendre in the logarithm of the width, where the integrand is analytic in a
 * strip of half-width about π/2: relative error below 1e-10 for rectangles and ellipses.
 */
export function taperResistance(
  profile: Profile,
  w1: number,
  w2: number,
  depth: number,
  length: number,
  where = '',
): number {
  checkSize(profile, w1, depth, where);
  if (w2 === w1 || profile.kind === 'polygon') return length / conductanceOf(profile, w1, depth, where);
  checkSize(profile, w2, depth, where);
  const span = Math.log(w2 / w1);
  const panels = Math.ceil(Math.abs(span) / PANEL);
  const half = span / (2 * panels);
  let sum = 0;
  for (let panel = 0; panel < panels; panel += 1) {
    const middle = Math.log(w1) + (2 * panel + 1) * half;
    for (let k = 0; k < NODES.length; k += 1) {
      const width = Math.exp(middle + half * NODES[k]!);
      sum += (WEIGHTS[k]! * width) / conductanceOf(profile, width, depth, where);
    }
  }
  // dx = length · width · d(ln width)/(w2 − w1); the half-width of a panel relative to w2 − w1 stays
  // finite as w2 → w1.
  return (sum * half * length) / (w2 - w1);
}

const PANEL = 0.75;
/** Six-point Gauss–Legendre on [−1, 1]. */
const NODES = [
  -0.932469514203152, -0.6612093864662645, -0.2386191860831969, 0.2386191860831969, 0.6612093864662645,
  0.932469514203152,
];
const WEIGHTS = [
  0.1713244923791704, 0.3607615730481386, 0.467913934572691, 0.467913934572691, 0.3607615730481386,
  0.1713244923791704,
];

function conductanceOf(profile: Profile, width: number, depth: number, where: string): number {
  if (profile.kind === 'rectangle') return rectangleConductance(width, depth);
  if (profile.kind === 'ellipse') return ellipseConductance(width, depth);
  return sectionOf(profile, width, depth, where).conductance;
}
