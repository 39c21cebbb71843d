import { apparentViscosity, shearRate, viscositySlope } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';

/**
 * A shear-thinning fluid without dimensions, so that one solved section serves every size, and every
 * fluid of the same groups: stresses in units of `stress`, viscosities in units of `viscosity`.
 *
 *   power law   stress K (1 1/s)^n, one group: the index
 *   Carreau     stress mu_0/t, viscosity mu_0, two groups: the index and mu_inf/mu_0
 *   Casson      stress tau_y, viscosity eta, no group at all
 */
export interface ScaledFluid {
  /** In its own units. */
  readonly model: ShearModel;
  /** Equal for fluids that differ in scale alone. */
  readonly key: string;
  /** Pa */
  readonly stress: number;
  /** Pa s */
  readonly viscosity: number;
}

export function scaledFluid(shear: ShearModel): ScaledFluid {
  switch (shear.kind) {
    case 'power-law':
      return {
        model: { kind: 'power-law', consistency: 1, index: shear.index },
        key: `power-law ${shear.index}`,
        stress: shear.consistency,
        viscosity: shear.consistency,
      };
    case 'carreau': {
      const floor = shear.infiniteShear / shear.zeroShear;
      return {
        model: { kind: 'carreau', zeroShear: 1, infiniteShear: floor, time: 1, index: shear.index },
        key: `carreau ${shear.index} ${floor}`,
        stress: shear.zeroShear / shear.time,
        viscosity: shear.zeroShear,
      };
    }
    case 'casson':
      return {
        model: { kind: 'casson', yieldStress: 1, viscosity: 1 },
        key: 'casson',
        stress: shear.yieldStress,
        viscosity: shear.viscosity,
      };
  }
}

/**
 * Where the fluid stands between its limits, by the mean wall stress (scaled): the coordinate along
 * which tables have even steps, because the flow is smooth in it.
 *
 *   power law   0: one shape, one number
 *   Carreau     logarithm of the shear rate at that stress
 *   Casson      logarithm of stress / yield - 1, `yieldStress` being the mean wall stress at which the
 *               section starts to flow (near 1, see `yieldStressOf`)
 */
export function coordinate(model: ShearModel, stress: number, yieldStress: number): number {
  switch (model.kind) {
    case 'power-law':
      return 0;
    case 'carreau':
      return Math.log(shearRate(model, stress));
    case 'casson':
      return Math.log(stress / yieldStress - 1);
  }
}

/** Mean wall stress (scaled) at a coordinate. */
export function stressAt(model: ShearModel, at: number, yieldStress: number): number {
  switch (model.kind) {
    case 'power-law':
      return 1;
    case 'carreau': {
      const rate = Math.exp(at);
      return apparentViscosity(model, rate) * rate;
    }
    case 'casson':
      return yieldStress * (1 + Math.exp(at));
  }
}

/** d ln(stress) / d(coordinate) at a coordinate. */
export function stressGain(model: ShearModel, at: number): number {
  switch (model.kind) {
    case 'power-law':
      return 1;
    case 'carreau': {
      const rate = Math.exp(at);
      return 1 + (rate * viscositySlope(model, rate)) / apparentViscosity(model, rate);
    }
    case 'casson':
      // e^c / (1 + e^c), written so that large c does not overflow.
      return 1 / (1 + Math.exp(-at));
  }
}

/**
 * The shear rate (scaled) below which a solve takes the fluid as viscous, small against the rates that
 * carry the flow: 1e-4 of the wall's where a yield stress makes plugs, which changes the flow by less
 * than the mesh does (checked between plates).
 */
export function smallestRate(model: ShearModel, stress: number, yieldStress: number): number {
  switch (model.kind) {
    case 'power-law':
      return 1e-5;
    case 'carreau':
      return 0;
    case 'casson':
      return 1e-4 * (Math.sqrt(stress / yieldStress) - 1) ** 2;
  }
}
