import type { ShearModel } from './spec.ts';

/**
 * Apparent viscosity of a shear-thinning fluid and its tangent. A shear rate is a magnitude (1/s).
 *
 * `smallest` is a shear rate below which the fluid is taken as a viscous one (both the power law and a
 * yield stress have an unbounded viscosity at rest): the rate is replaced by sqrt(g^2 + smallest^2)
 * where the model is singular. 0 leaves the model as it is.
 */

/** Apparent viscosity tau/g, Pa s. Infinite at g = 0 for a power law or a yield stress with `smallest` 0. */
export function apparentViscosity(model: ShearModel, rate: number, smallest = 0): number {
  switch (model.kind) {
    case 'power-law':
      return model.consistency * Math.hypot(rate, smallest) ** (model.index - 1);
    case 'carreau':
      return (
        model.infiniteShear +
        (model.zeroShear - model.infiniteShear) * (1 + (model.time * rate) ** 2) ** ((model.index - 1) / 2)
      );
    case 'casson': {
      const regular = Math.hypot(rate, smallest);
      return (Math.sqrt(model.yieldStress / regular) + Math.sqrt(model.viscosity)) ** 2;
    }
  }
}

/** Derivative of the apparent viscosity with respect to the shear rate, Pa s^2 (never positive). */
export function viscositySlope(model: ShearModel, rate: number, smallest = 0): number {
  switch (model.kind) {
    case 'power-law': {
      const regular = Math.hypot(rate, smallest);
      return model.consistency * (model.index - 1) * regular ** (model.index - 3) * rate;
    }
    case 'carreau':
      return (
        (model.zeroShear - model.infiniteShear) *
        (model.index - 1) *
        model.time ** 2 *
        rate *
        (1 + (model.time * rate) ** 2) ** ((model.index - 3) / 2)
      );
    case 'casson': {
      const regular = Math.hypot(rate, smallest);
      const root = Math.sqrt(model.yieldStress / regular);
      return (-root * (root + Math.sqrt(model.viscosity)) * rate) / regular ** 2;
    }
  }
}

/** Shear rate (1/s) under a stress (Pa): 0 up to the yield stress. */
export function shearRate(model: ShearModel, stress: number): number {
  switch (model.kind) {
    case 'power-law':
      return (stress / model.consistency) ** (1 / model.index);
    case 'casson': {
      const excess = Math.sqrt(stress) - Math.sqrt(model.yieldStress);
      return excess <= 0 ? 0 : excess ** 2 / model.viscosity;
    }
    case 'carreau': {
      if (stress === 0) return 0;
      // Stress rises with the rate, steeper than rate^index: Newton in logarithms from the side where it cannot overshoot.
      let rate = stress / model.zeroShear;
      for (let i = 0; i < 100; i += 1) {
        const viscosity = apparentViscosity(model, rate);
        const gain = 1 + (rate * viscositySlope(model, rate)) / viscosity;
        const step = Math.log(stress / (viscosity * rate)) / gain;
        rate *= Math.exp(step);
        if (Math.abs(step) < 1e-15) break;
      }
      return rate;
    }
  }
}
