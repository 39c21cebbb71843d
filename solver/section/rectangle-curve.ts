/**
 * Wall shear along the sides of a rectangle, exactly (per unit G). On a side of length L, the other
 * dimension D, at the distance x from the side's middle and n over the odd numbers
 *
 *   shear = D (1/2 − (4/π²) Σ cosh(nπx/D)/cosh(nπL/2D)/n²)     for L ≥ D
 *   shear = (4L/π²) Σ tanh(nπD/2L) cos(nπx/L) (±1)/n²          for L < D, ±: sin(nπ/2)
 *
 * (White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48). The parts that converge slowly near corners are
 * Legendre's chi function of order two and its imaginary part, in closed form up to a fast power series.
 */
export function rectangleShear(side: number, other: number, fromMiddle: number): number {
  const x = Math.abs(fromMiddle);
  if (side >= other) {
    const q = Math.exp((-Math.PI * side) / other);
    const near = (Math.PI * (side / 2 - x)) / other;
    const far = (Math.PI * (side / 2 + x)) / other;
    let sum = chi(near) + chi(far);
    let power = q;
    for (let n = 1; power > 1e-18; n += 2) {
      sum -= ((Math.exp(-n * near) + Math.exp(-n * far)) * power) / ((1 + power) * n * n);
      power *= q * q;
    }
    return Math.max(0, other * (0.5 - (4 / Math.PI ** 2) * sum));
  }
  // sin(nπy/L) with y from the nearer corner.
  const angle = (Math.PI * (side / 2 - x)) / side;
  const q = Math.exp((-Math.PI * other) / side);
  let sum = -0.5 * integral(angle, 1);
  let power = q;
  for (let n = 1; power > 1e-18; n += 2) {
    sum -= (2 * power * Math.sin(n * angle)) / ((1 + power) * n * n);
    power *= q * q;
  }
  return Math.max(0, ((4 * side) / Math.PI ** 2) * sum);
}

/** Σ over odd n of e^(−ns)/n², s ≥ 0. */
function chi(s: number): number {
  if (s < 1.2) return Math.PI ** 2 / 8 + 0.5 * integral(s, -1);
  let sum = 0;
  for (let n = 1; n * s < 42; n += 2) sum += Math.exp(-n * s) / (n * n);
  return sum;
}

/**
 * ∫ from 0 to s of ln tan(t/2) (sign 1) or ln tanh(t/2) (sign −1), 0 ≤ s ≤ π/2:
 * s ln(s/2) − s + s Σ (±1)ᵏ η(2k) (s/π)²ᵏ/(k(2k + 1)), η the alternating zeta function.
 */
function integral(s: number, sign: 1 | -1): number {
  if (s <= 0) return 0;
  const r = (s / Math.PI) ** 2;
  let sum = Math.log(s / 2) - 1;
  let power = 1;
  for (let k = 1; k <= TERMS; k += 1) {
    power *= sign * r;
    sum += (ETA[k] * power) / (k * (2 * k + 1));
  }
  return s * sum;
}

/** (1/2)^(2·26) is nothing in double precision. */
const TERMS = 26;
/** η(2k) = 1 − 2⁻²ᵏ + 3⁻²ᵏ − … */
const ETA = Float64Array.from({ length: TERMS + 1 }, (_, k) => {
  if (k === 0) return 0.5;
  if (k === 1) return Math.PI ** 2 / 12;
  if (k === 2) return (7 * Math.PI ** 4) / 720;
  if (k === 3) return (31 * Math.PI ** 6) / 30240;
  let sum = 0;
  for (let m = 80; m >= 1; m -= 1) sum += (m % 2 === 1 ? 1 : -1) * m ** (-2 * k);
  return sum;
});
