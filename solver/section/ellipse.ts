import { type Section, sectionFrom } from './section.ts';

/**
 * The ellipse with full axes width × depth, and the circle, its special case, in closed form:
 * u = (G/2µ) a²b²/(a² + b²) (1 − x²/a² − y²/b²). Source: F.M. White, Viscous Fluid Flow, 3rd ed.
 * 2006, sec. 3-3. Exact but for rounding.
 */

/** m⁴: π a³b³/(4(a² + b²)) with the semi-axes a, b. */
export function ellipseConductance(width: number, depth: number): number {
  const a = width / 2;
  const b = depth / 2;
  return (Math.PI * a * a * a * b * b * b) / (4 * (a * a + b * b));
}

/**
 * Perimeter of an ellipse with semi-axes a and b, by the arithmetic-geometric mean:
 * 2π (a² − Σ 2ⁿ⁻¹cₙ²)/M(a, b), c₀² = a² − b² (Abramowitz & Stegun 17.6). Quadratic convergence.
 */
export function ellipsePerimeter(a: number, b: number): number {
  let mean = Math.max(a, b);
  let root = Math.min(a, b);
  const long2 = mean * mean;
  let sum = (mean * mean - root * root) / 2;
  let factor = 0.5;
  while (mean - root > 1e-15 * mean) {
    const c = (mean - root) / 2;
    const next = (mean + root) / 2;
    root = Math.sqrt(mean * root);
    mean = next;
    factor *= 2;
    sum += factor * c * c;
  }
  return (2 * Math.PI * (long2 - sum)) / mean;
}

export function ellipseSection(width: number, depth: number): Section {
  const a = width / 2;
  const b = depth / 2;
  const floor = (a * a * b) / (a * a + b * b);
  const side = (a * b * b) / (a * a + b * b);
  return sectionFrom({
    area: Math.PI * a * b,
    perimeter: ellipsePerimeter(a, b),
    width,
    depth,
    conductance: ellipseConductance(width, depth),
    peakVelocity: 2,
    peakAt: [0, b],
    // At the ends of the minor axis.
    peakShear: Math.max(floor, side),
    peakShearAt: a >= b ? [0, 0] : [a, b],
    floorShear: floor,
    sideShear: side,
    error: 0,
    shearError: 0,
  });
}
