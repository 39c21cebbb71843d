import type { ShearModel } from './spec.ts';

/**
 * Media that no formula describes: nominal values with where they come from, the temperatures they
 * are meant for and how far they may be off. Reference data, to be replaced by the user's own measurement.
 */
export interface ReferenceMedium {
  /** K, both ends included. */
  readonly from: number;
  readonly to: number;
  /** Pa s, or a multiple of water's at the same temperature. */
  readonly viscosity: number;
  /** kg/m^3, or a multiple of water's. */
  readonly density: number;
  /** Whether the two are multiples of water's. */
  readonly ofWater: boolean;
  /** Relative half-width of the range in which published and customary values of the viscosity lie. */
  readonly uncertainty: number;
  readonly source: string;
  readonly caution?: string;
}

const BODY_FROM = 309.15;
const BODY_TO = 311.15;

export const REFERENCE_MEDIA: Readonly<
  Record<'saline' | 'culture-medium' | 'plasma' | 'blood', ReferenceMedium>
> = {
  saline: {
    from: 273.15,
    to: 313.15,
    viscosity: 1.02,
    density: 1.005,
    ofWater: true,
    uncertainty: 0.01,
    source:
      'isotonic or phosphate-buffered saline as 1.02 times the viscosity (1.01 to 1.03) and 1.005 times the density of water; common practice, no source',
  },
  'culture-medium': {
    from: BODY_FROM,
    to: BODY_TO,
    viscosity: 0.85e-3,
    density: 1000,
    ofWater: false,
    uncertainty: 0.18,
    source:
      'middle of 0.7 to 1.0 mPa s for media with 5 to 10 % serum at 37 °C; common practice; that it rises with serum and during culture: Poon 2020, bioRxiv 2020.08.25.266221',
    caution:
      'Media with serum differ, and one study reports them strongly shear-thinning (Sints et al. 2025, PLoS ONE e0322069): give a measured viscosity.',
  },
  plasma: {
    from: BODY_FROM,
    to: BODY_TO,
    viscosity: 1.2e-3,
    density: 1025,
    ofWater: false,
    uncertainty: 0.09,
    source:
      '1.1 to 1.3 mPa s at 37 °C, Késmárky et al. 2008, Clin. Hemorheol. Microcirc. 39, 243 (from memory)',
  },
  blood: {
    from: BODY_FROM,
    to: BODY_TO,
    viscosity: 3.5e-3,
    density: 1060,
    ofWater: false,
    uncertainty: 0.2,
    source:
      'whole blood at high shear rates, nominal 3.5 mPa s at 37 °C, Hund et al. 2017, Fluids 2, 10; density 1060 kg/m³ from memory; spread: common practice',
    caution:
      'One viscosity holds for whole blood only above shear rates of about 100 1/s (below, choose a shear-thinning model), and in channels below about 0.3 mm blood is not a continuum of one viscosity: cells leave the wall and the apparent viscosity falls.',
  },
};

/** Whole blood as a Carreau fluid: Cho and Kensey 1991, Biorheology 28, 241 (digits from memory). */
export const BLOOD_CARREAU: ShearModel = {
  kind: 'carreau',
  zeroShear: 0.056,
  infiniteShear: 0.00345,
  time: 3.313,
  index: 0.3568,
};

/** Whole blood as a Casson fluid, haematocrit 0.4 to 0.45: Merrill 1969, Physiol. Rev. 49, 863 (from memory). */
export const BLOOD_CASSON: ShearModel = { kind: 'casson', yieldStress: 0.005, viscosity: 0.0035 };
