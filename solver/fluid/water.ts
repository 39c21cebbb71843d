/**
 * Pure liquid water at atmospheric pressure.
 *
 * Viscosity: the full formulation IAPWS R12-08 (Huber et al. 2009, J. Phys. Chem. Ref. Data 38, 101)
 * without its critical enhancement, which is below 1e-6 here. Density: Tanaka et al. 2001, Metrologia
 * 38, 301 (0 to 40 degC), above it Kell 1975, J. Chem. Eng. Data 20, 97 (the two differ by less than
 * 1e-6 where they meet).
 */

const ICE_POINT = 273.15;
/** Where Tanaka's formula ends, degC. */
const TANAKA_END = 40;

const CRITICAL_TEMPERATURE = 647.096;
const CRITICAL_DENSITY = 322;
const DILUTE = [1.67752, 2.20462, 0.6366564, -0.241605] as const;
/** [power of 1/T - 1, power of rho - 1, coefficient] */
const RESIDUAL: readonly (readonly [number, number, number])[] = [
  [0, 0, 5.20094e-1],
  [1, 0, 8.50895e-2],
  [2, 0, -1.08374],
  [3, 0, -2.89555e-1],
  [0, 1, 2.22531e-1],
  [1, 1, 9.99115e-1],
  [2, 1, 1.88797],
  [3, 1, 1.26613],
  [5, 1, 1.20573e-1],
  [0, 2, -2.81378e-1],
  [1, 2, -9.06851e-1],
  [2, 2, -7.72479e-1],
  [3, 2, -4.89837e-1],
  [4, 2, -2.5704e-1],
  [0, 3, 1.61913e-1],
  [1, 3, 2.57399e-1],
  [0, 4, -3.25372e-2],
  [3, 4, 6.98452e-2],
  [4, 5, 8.72102e-3],
  [3, 6, -4.35673e-3],
  [5, 6, -5.93264e-4],
];

/**
 * Viscosity (Pa s) of water or steam at `temperature` (K) and `density` (kg/m^3) by IAPWS R12-08,
 * critical enhancement left out. The formula itself; callers keep to its range.
 */
export function iapwsViscosity(temperature: number, density: number): number {
  const t = temperature / CRITICAL_TEMPERATURE;
  const r = density / CRITICAL_DENSITY;
  let dilute = 0;
  for (let i = 0; i < DILUTE.length; i += 1) dilute += DILUTE[i] / t ** i;
  let sum = 0;
  for (const [i, j, coefficient] of RESIDUAL) sum += coefficient * (1 / t - 1) ** i * (r - 1) ** j;
  return 1e-6 * ((100 * Math.sqrt(t)) / dilute) * Math.exp(r * sum);
}

/** Density (kg/m^3) of air-free water at 101325 Pa, `celsius` 0 to 40 (Tanaka et al. 2001). */
export function tanakaDensity(celsius: number): number {
  return (
    999.97495 * (1 - ((celsius - 3.983035) ** 2 * (celsius + 301.797)) / (522528.9 * (celsius + 69.34881)))
  );
}

/** Density (kg/m^3) of water at 101325 Pa, `celsius` 0 to 150 (Kell 1975; constants from memory). */
export function kellDensity(celsius: number): number {
  const t = celsius;
  const numerator =
    999.83952 +
    t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 + t * -280.54253e-12))));
  return numerator / (1 + 16.87985e-3 * t);
}

/** Density (kg/m^3) of water at atmospheric pressure, `temperature` 273.15 to 373.15 K. */
export function waterDensity(temperature: number): number {
  const celsius = temperature - ICE_POINT;
  return celsius <= TANAKA_END ? tanakaDensity(celsius) : kellDensity(celsius);
}

/** Viscosity (Pa s) of water at atmospheric pressure, `temperature` 273.15 to 373.15 K. */
export function waterViscosity(temperature: number): number {
  return iapwsViscosity(temperature, waterDensity(temperature));
}
