import { type Section, sectionFrom } from './section.ts';

/**
 * The rectangle, exactly: h the short side, W the long one, n over the odd numbers,
 *
 *   C       = 1 − (192 h/(π⁵W)) Σ tanh(nπW/2h)/n⁵,   conductance = C W h³/12
 *   u_max   = h² (1/8 − (4/π³) Σ ± sech(nπW/2h)/n³)
 *   long    = h (1/2 − (4/π²) Σ sech(nπW/2h)/n²)      shear in the middle of the long wall: the peak
 *   short   = (4h/π²) Σ ± tanh(nπW/2h)/n²             in the middle of the short wall
 *
 * (per unit G and µ). Source: F.M. White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48; R.K. Shah and
 * A.L. London, Laminar Flow Forced Convection in Ducts, 1978, ch. VII. The slowly converging parts
 * are summed in closed form (31ζ(5)/32, π³/32, Catalan's constant), and what is left falls like
 * e^(−nπ/2) or faster at every aspect ratio: one exponential, at most a dozen terms, no overflow.
 * Relative error below 1e-14.
 */

/** Σ over odd n of 1/n⁵ = 31 ζ(5)/32 */
const ODD_ZETA_5 = (31 / 32) * 1.03692775514337;
const CATALAN = 0.915965594177219;
const PI_2 = Math.PI ** 2;
const PI_3 = Math.PI ** 3;
const PI_5 = Math.PI ** 5;
/** Terms below this share of the first one are nothing in double precision. */
const NEGLIGIBLE = 1e-18;

/** m⁴: Q = conductance G/µ. Width and depth in metres, in either order of size. */
export function rectangleConductance(width: number, depth: number): number {
  const h = Math.min(width, depth);
  const w = Math.max(width, depth);
  // tanh(nπW/2h) = 1 − 2qⁿ/(1 + qⁿ)
  const q = Math.exp((-Math.PI * w) / h);
  const q2 = q * q;
  let sum = ODD_ZETA_5;
  let power = q;
  for (let n = 1; power > NEGLIGIBLE; n += 2) {
    const n2 = n * n;
    sum -= (2 * power) / ((1 + power) * n2 * n2 * n);
    power *= q2;
  }
  return (w * h * h * h * (1 - ((192 * h) / (PI_5 * w)) * sum)) / 12;
}

/** Everything about a rectangle, width × depth in metres. */
export function rectangleSection(width: number, depth: number): Section {
  const flat = width >= depth;
  const h = flat ? depth : width;
  const w = flat ? width : depth;
  const p = Math.exp((-Math.PI * w) / (2 * h));
  const p2 = p * p;
  let flow = ODD_ZETA_5;
  let centre = 0;
  let long = 0;
  let short = CATALAN;
  let power = p;
  let sign = 1;
  for (let n = 1; power > NEGLIGIBLE; n += 2) {
    const square = power * power;
    const n2 = n * n;
    const sech = (2 * power) / (1 + square);
    const deficit = (2 * square) / (1 + square);
    flow -= deficit / (n2 * n2 * n);
    centre += (sign * sech) / (n2 * n);
    long += sech / n2;
    short -= (sign * deficit) / n2;
    sign = -sign;
    power *= p2;
  }
  const c = 1 - ((192 * h) / (PI_5 * w)) * flow;
  const longShear = h * (0.5 - (4 / PI_2) * long);
  const shortShear = ((4 * h) / PI_2) * short;
  return sectionFrom({
    area: width * depth,
    perimeter: 2 * (width + depth),
    width,
    depth,
    conductance: (w * h * h * h * c) / 12,
    peakVelocity: (12 / c) * (0.125 - (4 / PI_3) * centre),
    peakAt: [0, depth / 2],
    peakShear: longShear,
    peakShearAt: flat ? [0, 0] : [width / 2, depth / 2],
    floorShear: flat ? longShear : shortShear,
    sideShear: flat ? shortShear : longShear,
    error: 0,
    shearError: 0,
  });
}
