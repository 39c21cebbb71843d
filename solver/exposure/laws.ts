/**
 * A published power law of damage, its three constants kept together as they were fitted: share of damage
 * in per cent = constant · stress^(stress exponent) · time^(time exponent), stress in Pa, time in s.
 */
export interface DamageLaw {
  readonly constant: number;
  readonly stress: number;
  readonly time: number;
}

/** What a path puts a cell through: for how long (s) it bears each stress (Pa), in any order. */
export interface History {
  readonly stress: Float64Array;
  readonly time: Float64Array;
}

/** γ of the dose ∫ stress^γ dt: the law's stress exponent over its time exponent. */
export const doseExponent = ({ stress, time }: DamageLaw): number => stress / time;

/**
 * Dose of a path, Pa^γ s: D = Σ stress^γ Δt. It adds up along a path however that is cut, which the sum of
 * constant · stress^α · Δt^β does not (Grigioni et al. 2005, Biomech. Model. Mechanobiol. 4, 249).
 */
export function doseOf({ stress, time }: History, exponent: number): number {
  let dose = 0;
  for (let i = 0; i < time.length; i += 1) dose += stress[i] ** exponent * time[i];
  return dose;
}

/** Damage (a share, at most 1) of a dose met `passes` times over: constant · (passes · D)^β per cent. */
export function damageOf(law: DamageLaw, dose: number, passes = 1): number {
  return Math.min(1, (law.constant * (passes * dose) ** law.time) / 100);
}
