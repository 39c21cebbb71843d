/**
 * Glycerol and water. Viscosity: Cheng 2008, Ind. Eng. Chem. Res. 47, 3285 (0 to 100 degC). Density:
 * Volk and Kaehler 2018, Exp. Fluids 59, 75 (15 to 30 degC). The formulas themselves, in degC and
 * glycerol mass fraction 0 to 1; `fluidOf` keeps to the range where both hold.
 */

function glycerolDensity(celsius: number): number {
  return 1273.3 - 0.6121 * celsius;
}

function solventDensity(celsius: number): number {
  return 1000 * (1 - (Math.abs(celsius - 3.98) / 615) ** 1.71);
}

/** Viscosity, Pa s. */
export function glycerolWaterViscosity(massFraction: number, celsius: number): number {
  const w = massFraction;
  const t = celsius;
  const water = 1.79e-3 * Math.exp(((-1230 - t) * t) / (36100 + 360 * t));
  const glycerol = 12.1 * Math.exp(((-1233 + t) * t) / (9900 + 70 * t));
  const a = 0.705 - 0.0017 * t;
  const b = (4.9 + 0.036 * t) * a ** 2.5;
  const alpha = 1 - w + (a * b * w * (1 - w)) / (a * w + b * (1 - w));
  return water ** alpha * glycerol ** (1 - alpha);
}

/** Density, kg/m^3, with the contraction on mixing. */
export function glycerolWaterDensity(massFraction: number, celsius: number): number {
  const t = celsius;
  const contraction =
    1 + (1.78e-6 * t * t - 1.82e-4 * t + 1.41e-2) * Math.sin(Math.PI * massFraction ** 1.31) ** 0.81;
  const volume = massFraction / glycerolDensity(t) + (1 - massFraction) / solventDensity(t);
  return contraction / volume;
}

/**
 * Mass fraction of glycerol from its share of the volumes before mixing (what a pipette measures;
 * the mixture itself is up to 1 % smaller than the sum).
 */
export function glycerolMassFraction(volumeFraction: number, celsius: number): number {
  const glycerol = volumeFraction * glycerolDensity(celsius);
  return glycerol / (glycerol + (1 - volumeFraction) * solventDensity(celsius));
}
