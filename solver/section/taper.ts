import type { Profile } from './profile.ts';
import { varyingResistance } from './resistance-at.ts';
import { checkSize, sectionOf } from './section-of.ts';

/**
 * Resistance of a channel whose mask width runs linearly from `w1` to `w2` (metres) along `length`,
 * divided by µ (m⁻³): ∫ dx / conductance(width(x)), the flow taken as fully developed everywhere
 * (small angles). Gauss–Legendre in the logarithm of the width, where the integrand is analytic in a
 * strip of half-width about π/2: relative error below 1e-10 for rectangles and ellipses, below 1e-5 for
 * profiles solved by finite elements.
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
  checkSize(profile, w2, depth, where);
  if (w2 === w1 || profile.kind === 'polygon' || profile.kind === 'circle') {
    return length / sectionOf(profile, w1, depth, where).conductance;
  }
  const resistance = varyingResistance(profile, where);
  const low = Math.min(w1, w2);
  const high = Math.max(w1, w2);
  const breaks = [low, ...resistance.kinks(depth).filter((w) => w > low && w < high), high];
  let integral = 0;
  for (let i = 1; i < breaks.length; i += 1) {
    const span = Math.log(breaks[i] / breaks[i - 1]);
    const panels = Math.ceil(span / PANEL);
    const half = span / (2 * panels);
    let sum = 0;
    for (let panel = 0; panel < panels; panel += 1) {
      const middle = (2 * panel + 1) * half;
      for (let k = 0; k < NODES.length; k += 1) {
        const width = breaks[i - 1] * Math.exp(middle + half * NODES[k]);
        sum += WEIGHTS[k] * width * resistance.at(width, depth);
      }
    }
    integral += sum * half;
  }
  // dx = length · width · d(ln width)/(high − low)
  return (integral * length) / (high - low);
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
