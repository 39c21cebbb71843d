/**
 * Every unit that the program knows, once and exactly: a factor to SI as a ratio of whole numbers, so
 * that a quantity read from text is the nearest double to what the text says, whichever unit it uses.
 *
 * Factors that are no power of ten or count of seconds: inch, pound-force, standard atmosphere and
 * gravity are exact by definition (international yard and pound 1959; NIST SP 811, appendix B;
 * conventional water 1000 kg/m^3 and mercury 13595.1 kg/m^3 of ISO 80000-4).
 */

/** Exponents of metre, kilogram, second, kelvin, degree of angle, share. */
export type Dimensions = readonly [number, number, number, number, number, number];

export interface Unit {
  /** SI value = (number + offset) * num / den. */
  readonly num: bigint;
  readonly den: bigint;
  readonly dimensions: Dimensions;
  /** In hundredths of the unit; only temperatures have one. */
  readonly offsetHundredths?: bigint;
}

const LENGTH: Dimensions = [1, 0, 0, 0, 0, 0];
const VOLUME: Dimensions = [3, 0, 0, 0, 0, 0];
const MASS: Dimensions = [0, 1, 0, 0, 0, 0];
const TIME: Dimensions = [0, 0, 1, 0, 0, 0];
const TEMPERATURE: Dimensions = [0, 0, 0, 1, 0, 0];
const ANGLE: Dimensions = [0, 0, 0, 0, 1, 0];
const SHARE: Dimensions = [0, 0, 0, 0, 0, 1];
const FORCE: Dimensions = [1, 1, -2, 0, 0, 0];
const STRESS: Dimensions = [-1, 1, -2, 0, 0, 0];
const VISCOSITY: Dimensions = [-1, 1, -1, 0, 0, 0];
const POWER: Dimensions = [2, 1, -3, 0, 0, 0];
const RATE: Dimensions = [0, 0, -1, 0, 0, 0];

const unit = (dimensions: Dimensions, num: bigint, den = 1n): Unit => ({ dimensions, num, den });

/** Units that take decimal prefixes. */
export const PREFIXED: Readonly<Record<string, Unit>> = {
  m: unit(LENGTH, 1n),
  g: unit(MASS, 1n, 1000n),
  s: unit(TIME, 1n),
  L: unit(VOLUME, 1n, 1000n),
  l: unit(VOLUME, 1n, 1000n),
  Pa: unit(STRESS, 1n),
  bar: unit(STRESS, 100_000n),
  N: unit(FORCE, 1n),
  W: unit(POWER, 1n),
  P: unit(VISCOSITY, 1n, 10n),
  Hz: unit(RATE, 1n),
};

/** Units that stand alone. */
export const PLAIN: Readonly<Record<string, Unit>> = {
  min: unit(TIME, 60n),
  h: unit(TIME, 3600n),
  d: unit(TIME, 86_400n),
  in: unit(LENGTH, 254n, 10_000n),
  mil: unit(LENGTH, 254n, 10_000_000n),
  dyn: unit(FORCE, 1n, 100_000n),
  psi: unit(STRESS, 44_482_216_152_605n, 6_451_600_000n),
  atm: unit(STRESS, 101_325n),
  Torr: unit(STRESS, 101_325n, 760n),
  mmHg: unit(STRESS, 133_322_387_415n, 1_000_000_000n),
  inHg: unit(STRESS, 3_386_388_640_341n, 1_000_000_000n),
  mmH2O: unit(STRESS, 980_665n, 100_000n),
  cmH2O: unit(STRESS, 980_665n, 10_000n),
  inH2O: unit(STRESS, 24_908_891n, 100_000n),
  K: unit(TEMPERATURE, 1n),
  degC: { ...unit(TEMPERATURE, 1n), offsetHundredths: 27_315n },
  degF: { ...unit(TEMPERATURE, 5n, 9n), offsetHundredths: 45_967n },
  deg: unit(ANGLE, 1n),
  // A radian in degrees, 180/pi: the one factor that is no ratio, here to 40 digits.
  rad: unit(ANGLE, 572_957_795_130_823_208_767_981_548_141_051_703_324n, 10n ** 37n),
  '%': unit(SHARE, 1n, 100n),
  '‰': unit(SHARE, 1n, 1000n),
  ppm: unit(SHARE, 1n, 1_000_000n),
};

/** Powers of ten of the decimal prefixes; micro is written u here, whichever sign was typed. */
export const PREFIXES: Readonly<Record<string, number>> = {
  f: -15,
  p: -12,
  n: -9,
  u: -6,
  m: -3,
  c: -2,
  d: -1,
  h: 2,
  k: 3,
  M: 6,
  G: 9,
};

export interface KindRow {
  readonly dimensions: Dimensions;
  /** "a length": how a message names it. */
  readonly noun: string;
  /** What a message offers as an example. */
  readonly example: string;
  /** Units offered to people, in plain letters; the first is the SI one. */
  readonly units: readonly string[];
  /** Units that a figure climbs through as it grows, each from that many SI units upward. */
  readonly ladder: readonly (readonly [unit: string, from: number])[];
}

const PRESSURE_UNITS = [
  'Pa',
  'kPa',
  'MPa',
  'mbar',
  'bar',
  'psi',
  'dyn/cm^2',
  'mmHg',
  'cmH2O',
  'atm',
  'mPa',
] as const;

/**
 * The kinds of quantity that the chip, its results and its notes hold. SI throughout; an angle counts in
 * degrees, because that is how a wall angle is stated and kept.
 */
export const KINDS = {
  length: {
    dimensions: LENGTH,
    noun: 'a length',
    example: '120 um',
    units: ['m', 'um', 'mm', 'cm', 'nm', 'in', 'mil'],
    ladder: [
      ['nm', 0],
      ['um', 1e-6],
      ['mm', 1e-3],
      ['m', 1],
    ],
  },
  area: {
    dimensions: [2, 0, 0, 0, 0, 0],
    noun: 'an area',
    example: '2 mm^2',
    units: ['m^2', 'um^2', 'mm^2', 'cm^2'],
    ladder: [
      ['um^2', 0],
      ['mm^2', 1e-8],
      ['m^2', 1],
    ],
  },
  volume: {
    dimensions: VOLUME,
    noun: 'a volume',
    example: '5 uL',
    units: ['m^3', 'uL', 'nL', 'pL', 'mL', 'L'],
    ladder: [
      ['fL', 0],
      ['pL', 1e-15],
      ['nL', 1e-12],
      ['uL', 1e-9],
      ['mL', 1e-6],
      ['L', 1e-3],
    ],
  },
  time: {
    dimensions: TIME,
    noun: 'a time',
    example: '0.1 s',
    units: ['s', 'ms', 'us', 'min', 'h', 'd'],
    ladder: [
      ['us', 0],
      ['ms', 1e-3],
      ['s', 1],
      ['min', 600],
      ['h', 36_000],
    ],
  },
  velocity: {
    dimensions: [1, 0, -1, 0, 0, 0],
    noun: 'a velocity',
    example: '5 mm/s',
    units: ['m/s', 'mm/s', 'um/s', 'cm/s', 'mm/min'],
    ladder: [
      ['nm/s', 0],
      ['um/s', 1e-6],
      ['mm/s', 1e-3],
      ['m/s', 1],
    ],
  },
  flow: {
    dimensions: [3, 0, -1, 0, 0, 0],
    noun: 'a flow',
    example: '10 uL/min',
    units: ['m^3/s', 'uL/min', 'nL/min', 'mL/min', 'nL/s', 'uL/s', 'pL/s', 'uL/h', 'mL/h', 'L/h'],
    ladder: [
      ['pL/min', 0],
      ['nL/min', 1e-12 / 60],
      ['uL/min', 1e-9 / 60],
      ['mL/min', 1e-6 / 60],
      ['L/min', 1e-3 / 60],
    ],
  },
  pressure: {
    dimensions: STRESS,
    noun: 'a pressure',
    example: '2.5 kPa',
    units: PRESSURE_UNITS,
    ladder: [
      ['mPa', 0],
      ['Pa', 1],
      ['kPa', 1e3],
      ['MPa', 1e6],
    ],
  },
  stress: {
    dimensions: STRESS,
    noun: 'a stress',
    example: '1.5 Pa',
    units: PRESSURE_UNITS,
    ladder: [
      ['mPa', 0],
      ['Pa', 0.1],
      ['kPa', 1e3],
      ['MPa', 1e6],
    ],
  },
  modulus: {
    dimensions: STRESS,
    noun: 'a modulus',
    example: '2 MPa',
    units: ['Pa', 'kPa', 'MPa', 'GPa', 'psi'],
    ladder: [
      ['kPa', 0],
      ['MPa', 1e6],
      ['GPa', 1e9],
    ],
  },
  viscosity: {
    dimensions: VISCOSITY,
    noun: 'a viscosity',
    example: '1.002 mPa.s',
    units: ['Pa.s', 'mPa.s', 'cP', 'uPa.s', 'P'],
    ladder: [
      ['mPa.s', 0],
      ['Pa.s', 1],
    ],
  },
  density: {
    dimensions: [-3, 1, 0, 0, 0, 0],
    noun: 'a density',
    example: '997 kg/m^3',
    units: ['kg/m^3', 'g/mL', 'g/cm^3', 'g/L', 'kg/L'],
    ladder: [['kg/m^3', 0]],
  },
  temperature: {
    dimensions: TEMPERATURE,
    noun: 'a temperature',
    example: '25 degC',
    units: ['K', 'degC', 'degF'],
    ladder: [['degC', 0]],
  },
  share: {
    dimensions: SHARE,
    noun: 'a share',
    example: '5 %',
    units: ['', '%', '‰', 'ppm'],
    ladder: [['%', 0]],
  },
  angle: {
    dimensions: ANGLE,
    noun: 'an angle',
    example: '54.74 deg',
    units: ['deg', 'rad'],
    ladder: [['deg', 0]],
  },
  resistance: {
    dimensions: [-4, 1, -1, 0, 0, 0],
    noun: 'a hydraulic resistance',
    example: '4e13 Pa.s/m^3',
    units: ['Pa.s/m^3', 'mbar.min/uL', 'kPa.min/uL'],
    ladder: [['Pa.s/m^3', 0]],
  },
  'shear rate': {
    dimensions: RATE,
    noun: 'a shear rate',
    example: '100 s^-1',
    units: ['s^-1', 'min^-1'],
    ladder: [['s^-1', 0]],
  },
  power: {
    dimensions: POWER,
    noun: 'a power',
    example: '1 uW',
    units: ['W', 'mW', 'uW', 'nW', 'pW'],
    ladder: [
      ['fW', 0],
      ['pW', 1e-12],
      ['nW', 1e-9],
      ['uW', 1e-6],
      ['mW', 1e-3],
      ['W', 1],
    ],
  },
  number: {
    dimensions: [0, 0, 0, 0, 0, 0],
    noun: 'a plain number',
    example: '0.5',
    units: [''],
    ladder: [['', 0]],
  },
} as const satisfies Record<string, KindRow>;

export type Kind = keyof typeof KINDS;
