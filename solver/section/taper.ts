import { outlineOf } from './outline-of.ts';
import type { Profile } from './profile.ts';
import { varyingResistance } from './resistance-at.ts';
import { checkSize, sectionOf } from './section-of.ts';

/** Means along a channel whose mask width runs linearly, K(x) being the conductance and A(x) the area. */
export interface TaperMeans {
  /** Of 1/K, m⁻⁴: times µ and the length, the channel's resistance. */
  readonly resistance: number;
  /** Of A, m², and of the wetted perimeter, m. */
  readonly area: number;
  readonly perimeter: number;
  /** Of A/K, m⁻²: over the mean perimeter, the mean wall shear per µQ. */
  readonly force: number;
}

/**
 * The flow is taken as fully developed everywhere (small angles). Gauss–Legendre in the logarithm of the
 * width, where the integrand is analytic in a strip of half-width about π/2: relative error below 1e-10
 * for rectangles and ellipses, below 1e-5 for profiles solved by finite elements. Some microseconds, once
 * a profile's table is made; no section is solved for it.
 *
 * @param w1,w2 mask width at the two ends, m
 */
export function taperMeans(profile: Profile, w1: number, w2: number, depth: number, where = ''): TaperMeans {
  checkSize(profile, w1, depth, where);
  checkSize(profile, w2, depth, where);
  if (w2 === w1 || profile.kind === 'polygon' || profile.kind === 'circle') {
    const { conductance, area, perimeter } = sectionOf(profile, w1, depth, where);
    return { resistance: 1 / conductance, area, perimeter, force: area / conductance };
  }
  const varying = varyingResistance(profile, where);
  const low = Math.min(w1, w2);
  const high = Math.max(w1, w2);
  const breaks = [low, ...varying.kinks(depth).filter((w) => w > low && w < high), high];
  let [resistance, area, perimeter, force] = [0, 0, 0, 0];
  for (let i = 1; i < breaks.length; i += 1) {
    const span = Math.log(breaks[i] / breaks[i - 1]);
    const panels = Math.ceil(span / PANEL);
    const half = span / (2 * panels);
    for (let panel = 0; panel < panels; panel += 1) {
      const middle = (2 * panel + 1) * half;
      for (let k = 0; k < NODES.length; k += 1) {
        const width = breaks[i - 1] * Math.exp(middle + half * NODES[k]);
        // dx = length · width · d(ln width)/(high − low)
        const weight = half * WEIGHTS[k] * width;
        const here = varying.at(width, depth, where);
        outlineOf(profile, width, depth, outline);
        resistance += weight * here;
        area += weight * outline[0];
        perimeter += weight * outline[1];
        force += weight * outline[0] * here;
      }
    }
  }
  const range = high - low;
  return {
    resistance: resistance / range,
    area: area / range,
    perimeter: perimeter / range,
    force: force / range,
  };
}

/** Resistance of a whole taper of the given length over µ, m⁻³. */
export function taperResistance(
  profile: Profile,
  w1: number,
  w2: number,
  depth: number,
  length: number,
  where = '',
): number {
  return length * taperMeans(profile, w1, w2, depth, where).resistance;
}

const outline = new Float64Array(2);
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
