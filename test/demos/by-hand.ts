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

/**
 * Area integral of the shear stress to a power over a rectangle, per unit viscosity and flow to that power:
 * slopes of White's series by the midpoint rule on a quarter of the section.
 */
export function stressPower(width: number, depth: number, exponent: number): number {
  const [w, h] = width > depth ? [width, depth] : [depth, width];
  const steps = 60;
  const conductance = 1 / resistance(1, 1, width, depth);
  let sum = 0;
  for (let i = 0; i < steps; i += 1) {
    for (let j = 0; j < steps; j += 1) {
      const x = ((i + 0.5) / steps) * (w / 2);
      const y = ((j + 0.5) / steps) * (h / 2);
      let [ux, uy] = [0, 0];
      for (let n = 1; n < 160; n += 2) {
        const k = (n * Math.PI) / h;
        // cosh(kx)/cosh(kw/2) and sinh(kx)/cosh(kw/2), as large numbers allow.
        const [near, far] = [Math.exp(k * (x - w / 2)), Math.exp(-k * (x + w / 2))];
        const whole = 1 + Math.exp(-k * w);
        uy += ((1 - (near + far) / whole) * Math.cos(k * y)) / n ** 2;
        ux += (((near - far) / whole) * Math.sin(k * y)) / n ** 2;
      }
      sum += (((4 * h) / Math.PI ** 2) * Math.hypot(ux, uy)) ** exponent;
    }
  }
  return (sum * w * h) / steps ** 2 / conductance ** exponent;
}

/** Length of two legs at a right angle with a rounded corner between. */
export const rounded = (first: number, second: number, radius: number): number =>
  first + second - (2 - Math.PI / 2) * radius;

/** m^3/s */
export const microlitresPerMinute = (value: number): number => (value * 1e-9) / 60;
