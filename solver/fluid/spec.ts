/** The fluid as the description gives it, in SI units. */
export type FluidSpec =
  | {
      readonly name: 'water' | 'saline' | 'culture-medium' | 'plasma' | 'blood';
      /** K */
      readonly temperature: number;
    }
  | {
      readonly name: 'glycerol-water';
      readonly temperature: number;
      /** Of glycerol, 0 to 1; exactly one of the two. */
      readonly massFraction?: number;
      readonly volumeFraction?: number;
    }
  /**
   * The user's own measurements against temperature, two or more rows, temperatures (K) strictly
   * increasing: interpolated at `temperature` without overshoot, never beyond the ends.
   */
  | { readonly temperature: number; readonly table: readonly MeasuredRow[] }
  /** Pa s, kg/m^3 */
  | { readonly viscosity: number; readonly density: number }
  | { readonly density: number; readonly shear: ShearModel };

/** K, Pa s, kg/m^3 */
export interface MeasuredRow {
  readonly temperature: number;
  readonly viscosity: number;
  readonly density: number;
}

/** Shear-thinning media: apparent viscosity as a function of shear rate (1/s). */
export type ShearModel =
  /** mu = K g^(n-1); K in Pa s^n */
  | { readonly kind: 'power-law'; readonly consistency: number; readonly index: number }
  /** mu = mu_inf + (mu_0 - mu_inf)(1 + (t g)^2)^((n-1)/2); Pa s, s */
  | {
      readonly kind: 'carreau';
      readonly zeroShear: number;
      readonly infiniteShear: number;
      readonly time: number;
      readonly index: number;
    }
  /** sqrt(tau) = sqrt(tau_y) + sqrt(eta g); Pa, Pa s */
  | { readonly kind: 'casson'; readonly yieldStress: number; readonly viscosity: number };
