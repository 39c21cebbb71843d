import { apparentViscosity, shearRate } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';

/**
 * Fully developed flow of a shear-thinning fluid where one integral gives it: round tube and parallel
 * plates. With tau_w the wall shear stress and g(tau) the shear rate,
 *
 *   tube of radius R:         Q = pi R^3 / tau_w^3 * integral of tau^2 g(tau)      (Rabinowitsch, Mooney)
 *   plates, gap h, width W:   Q = W h^2 / (2 tau_w^2) * integral of tau g(tau)
 *
 * from 0 to tau_w, and the velocity on the axis is that of power 0 times the distance to the wall. The
 * power law and Casson have closed forms, Carreau is integrated.
 */

/** tau_w^-(power + 1) times the integral of tau^power g(tau) from 0 to tau_w, 1/s. */
export function rateMoment(model: ShearModel, wall: number, power: 0 | 1 | 2): number {
  switch (model.kind) {
    case 'power-law':
      return shearRate(model, wall) / (power + 1 + 1 / model.index);
    case 'casson': {
      const xi = model.yieldStress / wall;
      if (xi >= 1) return 0;
      // Integral of s^power (sqrt(s) - sqrt(xi))^2 from xi to 1.
      const p = power;
      const share =
        1 / (p + 2) -
        (2 * Math.sqrt(xi)) / (p + 1.5) +
        xi / (p + 1) -
        xi ** (p + 2) * (1 / (p + 2) - 2 / (p + 1.5) + 1 / (p + 1));
      return (wall / model.viscosity) * share;
    }
    case 'carreau':
      return carreauMoment(model, wall, power);
  }
}

/**
 * By parts, so that only the stress at a rate is needed, never its inverse inside the integral:
 * (power + 1) integral of tau^power g dtau = tau_w^(power+1) g_w - integral of tau^(power+1) dg,
 * by Gauss's rule over the logarithm of the rate, where it is smooth.
 */
function carreauMoment(model: ShearModel, wall: number, power: number): number {
  const rate = shearRate(model, wall);
  const parts = 48;
  const from = Math.log(rate * 1e-9);
  const step = (Math.log(rate) - from) / parts;
  let integral = 0;
  for (let i = 0; i < parts; i += 1) {
    for (let k = 0; k < NODES.length; k += 1) {
      const g = Math.exp(from + step * (i + NODES[k]));
      integral += WEIGHTS[k] * step * g * ((apparentViscosity(model, g) * g) / wall) ** (power + 1);
    }
  }
  return (rate - integral) / (power + 1);
}

/** Gauss-Legendre on [0, 1], five points. */
const NODES = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const WEIGHTS = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];
