import { shearRate } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';

/**
 * Fully developed flow of a shear-thinning fluid where one integral gives it: round tube and parallel
 * plates. With tau_w the wall shear stress and g(tau) the shear rate,
 *
 *   tube of radius R:         Q = pi R^3 / tau_w^3 * integral of tau^2 g(tau)      (Rabinowitsch, Mooney)
 *   plates, gap h, width W:   Q = W h^2 / (2 tau_w^2) * integral of tau g(tau)
 *
 * from 0 to tau_w. The power law and Casson have closed forms, Carreau is integrated.
 */

/** Flow (m^3/s) through a round tube under a pressure gradient (Pa/m); `radius` in m. */
export function tubeFlow(model: ShearModel, radius: number, gradient: number): number {
  const wall = (gradient * radius) / 2;
  if (wall <= 0) return 0;
  return Math.PI * radius ** 3 * momentOfRate(model, wall, 2);
}

/** Flow (m^3/s) between parallel plates, side walls left out; `gap` and `width` in m. */
export function plateFlow(model: ShearModel, gap: number, width: number, gradient: number): number {
  const wall = (gradient * gap) / 2;
  if (wall <= 0) return 0;
  return (width * gap ** 2 * momentOfRate(model, wall, 1)) / 2;
}

/** tau_w^-(power + 1) times the integral of tau^power g(tau) from 0 to tau_w. */
function momentOfRate(model: ShearModel, wall: number, power: 1 | 2): number {
  switch (model.kind) {
    case 'power-law':
      return shearRate(model, wall) / (power + 1 + 1 / model.index);
    case 'casson': {
      const xi = model.yieldStress / wall;
      if (xi >= 1) return 0;
      const share =
        power === 2
          ? 1 - (16 / 7) * Math.sqrt(xi) + (4 / 3) * xi - xi ** 4 / 21
          : 1 - (12 / 5) * Math.sqrt(xi) + (3 / 2) * xi - xi ** 3 / 10;
      return ((wall / model.viscosity) * share) / (power + 2);
    }
    case 'carreau': {
      // By parts, so that only the stress at a rate is needed, never its inverse inside the integral:
      // (power + 1) integral tau^power g dtau = tau_w^(power+1) g_w - integral tau(g)^(power+1) dg.
      const rate = shearRate(model, wall);
      let integral = 0;
      // Composite Gauss over decades of the rate from far below the wall's: the integrand is smooth in ln g.
      const parts = 48;
      const from = Math.log(rate * 1e-9);
      const step = (Math.log(rate) - from) / parts;
      for (let i = 0; i < parts; i += 1) {
        for (let k = 0; k < NODES.length; k += 1) {
          const g = Math.exp(from + step * (i + NODES[k]!));
          const viscosity =
            model.infiniteShear +
            (model.zeroShear - model.infiniteShear) * (1 + (model.time * g) ** 2) ** ((model.index - 1) / 2);
          integral += WEIGHTS[k]! * step * g * ((viscosity * g) / wall) ** (power + 1);
        }
      }
      return (rate - integral) / (power + 1);
    }
  }
}

/** Gauss-Legendre on [0, 1], five points. */
const NODES = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const WEIGHTS = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];
