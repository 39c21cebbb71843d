import { ellipseConductance } from '../section/ellipse.ts';
import { LEVELS, type SectionExposure, WALL_POINTS } from './section-exposure.ts';

/** Directions over a quarter turn by the midpoint rule, which is exact to rounding for periodic functions. */
const DIRECTIONS = 64;
/** Rings of equal area, for the parts by shear. */
const RINGS = 32;

/**
 * Ellipse and circle: u = c (1 − x²/a² − y²/b²) per unit G/µ, c = a²b²/(2(a² + b²)). Flow by speed is that of
 * a circle: a share s moves slower than 2 √s of the mean. In closed form but for one integral round the rim.
 * @param width,depth full axes, m
 */
export function ellipseExposure(width: number, depth: number): SectionExposure {
  const a = width / 2;
  const b = depth / 2;
  const c = (a * a * b * b) / (2 * (a * a + b * b));
  const short = Math.min(a, b);
  const rim = Float64Array.from({ length: DIRECTIONS }, (_, k) => {
    const angle = (Math.PI * (k + 0.5)) / (2 * DIRECTIONS);
    return 2 * c * Math.hypot(Math.cos(angle) / a, Math.sin(angle) / b);
  });
  return {
    area: Math.PI * a * b,
    conductance: ellipseConductance(width, depth),
    clearance: 2 * short,
    slow: 0.2,
    fast: 2 * Math.sqrt(0.99),
    levels: levelsOf(rim),
    shearPower(exponent) {
      let mean = 0;
      for (const shear of rim) mean += shear ** exponent / DIRECTIONS;
      return (2 * Math.PI * a * b * mean) / (exponent + 2);
    },
    hugging(diameter) {
      const radius = diameter / 2;
      if (!(radius <= short)) return null;
      const at = (distance: number): number => (2 * c * (short - distance)) / (short * short);
      return {
        velocity: c * (1 - ((short - radius) / short) ** 2),
        shear: at(radius),
        between: Float64Array.from(WALL_POINTS, (share) => at(share * radius)),
      };
    },
  };
}

/** On the ring of share ρ² of the area the shear is ρ times that of the rim in the same direction. */
function levelsOf(rim: Float64Array): Float64Array {
  const all = new Float64Array(rim.length * RINGS);
  for (let ring = 0; ring < RINGS; ring += 1) {
    const rho = Math.sqrt((ring + 0.5) / RINGS);
    for (let k = 0; k < rim.length; k += 1) all[ring * rim.length + k] = rho * rim[k];
  }
  all.sort();
  return Float64Array.from({ length: LEVELS }, (_, k) => all[Math.floor(((k + 0.5) / LEVELS) * all.length)]);
}
