import { Problem } from '../../problem/problem.ts';

/** A soft lid; the same numbers as the chip's layer gives. */
export interface SoftRoof {
  /** Young's modulus, Pa */
  readonly modulus: number;
  /** m */
  readonly thickness: number;
  readonly poisson: number;
  /** Chosen by thickness where absent. */
  readonly law?: 'thick' | 'plate';
  /** Mean rise of a thick roof is constant · p W / E; where absent, that of a pressurised slit. */
  readonly constant?: number;
}

/**
 * How a shallow channel opens under its own pressure p (gauge): with x = slope · p the rise of the roof
 * over the depth, the local conductance is that of the rigid channel times
 *
 *   1 + c1 x + c2 x² + c3 x³.
 */
export interface RoofLaw {
  readonly law: 'thick' | 'plate';
  /** Relative rise per pressure, 1/Pa: of the mean (thick) or of the middle (plate). */
  readonly slope: number;
  readonly coefficients: readonly [number, number, number];
  /** Rise in the middle of the channel per pressure, m/Pa. */
  readonly middleRise: number;
  readonly source: string;
  readonly range: string;
  readonly caution?: string;
}

/** Uniform rise: the cube of 1 + x. */
const UNIFORM = [3, 3, 1] as const;
/** Mean over s from 0 to 1 of (1 + x (1 - s²)²)³. */
const CLAMPED = [8 / 5, 128 / 105, 1024 / 3003] as const;

/** Mean opening, p W/E, of one face of a pressurised slit of width W in plane strain: π(1 − ν²)/4. */
function slitConstant(poisson: number): number {
  return (Math.PI * (1 - poisson ** 2)) / 4;
}

/** Rise in the middle of a clamped strip under pressure, m/Pa: W⁴/(384 B), B = E t³/(12(1 − ν²)). */
function plateRise(roof: SoftRoof, width: number): number {
  const stiffness = (roof.modulus * roof.thickness ** 3) / (12 * (1 - roof.poisson ** 2));
  return width ** 4 / (384 * stiffness);
}

/**
 * The law of a roof over a channel, `width` and `depth` in m. Where the description names none, the one
 * with the larger mean rise is taken: each leaves out compliance that the other has (a plate its shear
 * and its edges, a thick roof its bending), so the larger is nearer. The change comes at a thickness of
 * about 0.28 widths.
 */
export function roofLaw(roof: SoftRoof, width: number, depth: number, where = ''): RoofLaw {
  check(roof, where);
  const constant = roof.constant ?? slitConstant(roof.poisson);
  const thickRise = (constant * width) / roof.modulus;
  const middleRise = plateRise(roof, width);
  const law = roof.law ?? ((8 / 15) * middleRise > thickRise ? 'plate' : 'thick');
  const aspect = depth / width;
  const shallow =
    aspect > 0.3
      ? `The channel is ${aspect.toPrecision(2)} as deep as wide; the law is for shallow ones.`
      : '';
  const share = roof.thickness / width;
  if (law === 'plate') {
    // Deflection by shear over that by bending of a clamped strip, shear coefficient 5/6.
    const shear = (9.6 / (1 - roof.poisson)) * share ** 2;
    const stiff =
      shear > 0.1
        ? `The roof is ${share.toPrecision(2)} widths thick: bending alone understates its rise, the shear left out is ${(100 * shear).toPrecision(2)} % of it.`
        : '';
    return {
      law,
      slope: middleRise / depth,
      coefficients: CLAMPED,
      middleRise,
      source:
        'Christov, Cognet, Shidhore and Stone 2018, J. Fluid Mech. 841, 267 (formula from memory, derived again)',
      range:
        'thin clamped roof: thickness well below the width, rise below the thickness, depth well below the width',
      ...caution(stiff, shallow),
    };
  }
  const thin =
    share < 0.5
      ? `The roof is only ${share.toPrecision(2)} widths thick: it also bends, and rises further.`
      : '';
  return {
    law,
    slope: thickRise / depth,
    coefficients: UNIFORM,
    // The slit opens as an ellipse: the middle is 4/π of the mean.
    middleRise: (4 / Math.PI) * thickRise,
    source: `Gervais et al. 2006, Lab Chip 6, 500 (formula from memory, derived again), constant ${constant.toPrecision(3)}${
      roof.constant === undefined ? ' of a pressurised slit in plane strain' : ' as given'
    }`,
    range:
      'soft roof at least as thick as the channel is wide, depth well below the width, rise below half the depth',
    ...caution(thin, shallow),
  };
}

function caution(...parts: string[]): { caution?: string } {
  const said = parts.filter((part) => part !== '');
  return said.length === 0 ? {} : { caution: said.join(' ') };
}

/** Where the roof has come down to this share of the depth the laws end; suction beyond is held here. */
const LOWEST = -0.9;

/** Whether a pressure lies so low that `opening` no longer follows the law. */
export function collapsed(law: RoofLaw, pressure: number): boolean {
  return law.slope * pressure < LOWEST;
}

/** Local conductance over that of the rigid channel at pressure p (Pa); positive for every p. */
export function opening(law: RoofLaw, pressure: number): number {
  const x = Math.max(law.slope * pressure, LOWEST);
  const [a, b, c] = law.coefficients;
  return 1 + x * (a + x * (b + x * c));
}

/** Derivative of `opening` with respect to the pressure, 1/Pa. */
export function openingSlope(law: RoofLaw, pressure: number): number {
  const x = law.slope * pressure;
  if (x < LOWEST) return 0;
  const [a, b, c] = law.coefficients;
  return law.slope * (a + x * (2 * b + x * 3 * c));
}

/**
 * Mean of `opening` over the pressures from `to` to `to + drop`: a Newtonian fluid flows along a uniform
 * channel by Q = drop · mean / R, R the resistance of the rigid channel. (The potential whose slope is the
 * opening, divided by the drop before it can cancel.)
 */
export function meanOpening(law: RoofLaw, drop: number, to: number): number {
  const floor = LOWEST / law.slope;
  const high = Math.max(to, to + drop);
  const low = Math.min(to, to + drop);
  if (low < floor && high > floor) {
    const below = (floor - low) / (high - low);
    return below * opening(law, floor) + (1 - below) * meanOpening(law, high - floor, floor);
  }
  const x = Math.max(law.slope * high, LOWEST);
  const y = Math.max(law.slope * low, LOWEST);
  const [a, b, c] = law.coefficients;
  return 1 + (a / 2) * (x + y) + (b / 3) * (x * x + x * y + y * y) + (c / 4) * (x + y) * (x * x + y * y);
}

function check(roof: SoftRoof, where: string): void {
  const bad = (what: string, value: number, ask: string): never => {
    throw new Problem('range', `The roof's ${what} is ${value}.`, where, ask);
  };
  if (!(roof.modulus > 0 && roof.modulus < 1e13)) {
    bad('modulus', roof.modulus, "Give Young's modulus in pascals, or leave the roof out: then it is rigid.");
  }
  if (!(roof.thickness > 0 && roof.thickness < 1)) {
    bad('thickness', roof.thickness, 'Give a thickness above zero.');
  }
  if (!(roof.poisson > -1 && roof.poisson <= 0.5)) {
    bad('Poisson ratio', roof.poisson, 'Give a Poisson ratio up to 0.5 (elastomers: 0.5).');
  }
  if (roof.constant !== undefined && !(roof.constant > 0 && roof.constant < 100)) {
    bad('constant', roof.constant, 'Give the fitted constant, a number near one.');
  }
}
