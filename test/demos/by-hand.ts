/**
 * Rectangles by the exact series (Boussinesq 1868, as in White, Viscous Fluid Flow, section 3-3; from
 * memory), written out plainly and apart from the solver, so that the demos are worked twice.
 */

/** Resistance of a straight rectangular channel, Pa s/m^3; lengths in metres, viscosity in Pa s. */
export function resistance(viscosity: number, length: number, width: number, depth: number): number {
  const [long, short] = width > depth ? [width, depth] : [depth, width];
  let sum = 0;
  for (let n = 1; n < 400; n += 2) sum += Math.tanh((n * Math.PI * long) / (2 * short)) / n ** 5;
  return (
    (12 * viscosity * length) / (long * short ** 3 * (1 - ((192 * short) / (Math.PI ** 5 * long)) * sum))
  );
}

/** Peak wall shear stress, at the middle of a long wall, Pa. */
export function peakShear(viscosity: number, flow: number, width: number, depth: number): number {
  const [long, short] = width > depth ? [width, depth] : [depth, width];
  let sum = 0;
  for (let n = 1; n < 200; n += 2)
    sum += 1 / (n * n * Math.cosh(Math.min(700, (n * Math.PI * long) / (2 * short))));
  return flow * resistance(viscosity, 1, width, depth) * (short / 2) * (1 - (8 / Math.PI ** 2) * sum);
}

/** Resistance of a taper, width linear along its length, by the midpoint rule. */
export function taper(viscosity: number, length: number, from: number, to: number, depth: number): number {
  const steps = 2000;
  let sum = 0;
  for (let i = 0; i < steps; i += 1) {
    sum += resistance(viscosity, length / steps, from + ((to - from) * (i + 0.5)) / steps, depth);
  }
  return sum;
}

/** Length of two legs at a right angle with a rounded corner between. */
export const rounded = (first: number, second: number, radius: number): number =>
  first + second - (2 - Math.PI / 2) * radius;

/** m^3/s */
export const microlitresPerMinute = (value: number): number => (value * 1e-9) / 60;
