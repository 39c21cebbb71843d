import { Problem } from '../problem/problem.ts';
import { glycerolMassFraction, glycerolWaterDensity, glycerolWaterViscosity } from './glycerol.ts';
import { hermite, monotoneSlopes } from './monotone.ts';
import { REFERENCE_MEDIA } from './reference.ts';
import type { FluidSpec, MeasuredRow, ShearModel } from './spec.ts';
import { waterDensity, waterViscosity } from './water.ts';

/** A fluid with its numbers at its temperature, and how far they can be trusted. */
export interface Fluid {
  /** In words, for people: "water at 25 °C". */
  readonly name: string;
  /** Pa s; null where it depends on the shear rate (`shear` is given then). */
  readonly viscosity: number | null;
  /** kg/m^3 */
  readonly density: number;
  readonly shear?: ShearModel;
  readonly source: string;
  /** What the source holds for, in words. */
  readonly range: string;
  /** Relative, of the viscosity; null where it is not known. */
  readonly uncertainty: number | null;
  /** What the user should know before trusting the numbers. */
  readonly caution?: string;
}

const ICE_POINT = 273.15;
/** Half a nanokelvin of rounding in a converted temperature is no reason to refuse the end of a range. */
const ROUNDING = 1e-9;

/**
 * The fluid of a description. Throws `Problem` ('range' outside the validity of its source, never an
 * extrapolation; 'fluid' where the description itself makes no sense).
 */
export function fluidOf(spec: FluidSpec): Fluid {
  if ('table' in spec) return measured(spec.table, spec.temperature);
  if ('shear' in spec) return shearThinning(spec.density, spec.shear);
  if ('viscosity' in spec) {
    positive(spec.viscosity, 'viscosity', 'fluid.viscosity');
    positive(spec.density, 'density', 'fluid.density');
    return {
      name: 'fluid with given viscosity',
      viscosity: spec.viscosity,
      density: spec.density,
      source: 'given by the user',
      range: 'as the user measured it',
      uncertainty: null,
    };
  }
  switch (spec.name) {
    case 'water':
      return water(spec.temperature);
    case 'glycerol-water':
      return glycerolWater(spec);
    case 'saline':
    case 'culture-medium':
    case 'plasma':
    case 'blood':
      return reference(spec.name, spec.temperature);
    default:
      throw new Problem(
        'fluid',
        `No fluid is called "${(spec as { name: string }).name}".`,
        'fluid.name',
        'Choose water, glycerol-water, saline, culture-medium, plasma or blood, or give a viscosity and a density.',
      );
  }
}

function water(temperature: number): Fluid {
  within(temperature, ICE_POINT, 373.15, 'Water');
  return {
    name: `water at ${celsius(temperature)}`,
    viscosity: waterViscosity(temperature),
    density: waterDensity(temperature),
    source:
      'viscosity: IAPWS R12-08 (full formulation); density: Tanaka et al. 2001, Metrologia 38, 301, above 40 °C Kell 1975, J. Chem. Eng. Data 20, 97',
    range: 'liquid water at atmospheric pressure, 0 to 100 °C',
    uncertainty: 0.01,
  };
}

function glycerolWater(spec: Extract<FluidSpec, { name: 'glycerol-water' }>): Fluid {
  const { temperature, massFraction, volumeFraction } = spec;
  if ((massFraction === undefined) === (volumeFraction === undefined)) {
    throw new Problem(
      'fluid',
      massFraction === undefined
        ? 'The share of glycerol is missing.'
        : 'The share of glycerol is given both by mass and by volume.',
      'fluid',
      'Give either "massFraction" or "volumeFraction" of glycerol, from 0 to 1.',
    );
  }
  const where = massFraction === undefined ? 'fluid.volumeFraction' : 'fluid.massFraction';
  const share = massFraction ?? volumeFraction ?? 0;
  if (!(share >= 0 && share <= 1)) {
    throw new Problem(
      'range',
      `A share of glycerol of ${share} is not between 0 and 1.`,
      where,
      'Give the share of glycerol as a number from 0 (water) to 1 (glycerol).',
    );
  }
  within(temperature, ICE_POINT + 15, ICE_POINT + 30, 'Glycerol and water');
  const t = temperature - ICE_POINT;
  const w = massFraction ?? glycerolMassFraction(share, t);
  return {
    name: `glycerol and water, ${(100 * w).toPrecision(3)} % by mass, at ${celsius(temperature)}`,
    viscosity: glycerolWaterViscosity(w, t),
    density: glycerolWaterDensity(w, t),
    source:
      'viscosity: Cheng 2008, Ind. Eng. Chem. Res. 47, 3285; density: Volk and Kähler 2018, Exp. Fluids 59, 75',
    range: '15 to 30 °C (density; the viscosity formula alone holds from 0 to 100 °C), any share of glycerol',
    uncertainty: 0.04,
  };
}

function reference(name: keyof typeof REFERENCE_MEDIA, temperature: number): Fluid {
  const medium = REFERENCE_MEDIA[name];
  const title = { saline: 'Saline', 'culture-medium': 'Culture medium', plasma: 'Plasma', blood: 'Blood' }[
    name
  ];
  within(temperature, medium.from, medium.to, title);
  return {
    name: `${title.toLowerCase()} at ${celsius(temperature)}`,
    viscosity: medium.viscosity * (medium.ofWater ? waterViscosity(temperature) : 1),
    density: medium.density * (medium.ofWater ? waterDensity(temperature) : 1),
    source: medium.source,
    range: `${celsius(medium.from)} to ${celsius(medium.to)}`,
    uncertainty: medium.uncertainty,
    ...(medium.caution === undefined ? {} : { caution: medium.caution }),
  };
}

function measured(table: readonly MeasuredRow[], temperature: number): Fluid {
  if (table.length < 2) {
    throw new Problem(
      'fluid',
      'A table of viscosity against temperature needs at least two rows.',
      'fluid.table',
      'Add a row, or give one viscosity and one density instead of a table.',
    );
  }
  table.forEach((row, i) => {
    const where = `fluid.table[${i}]`;
    positive(row.temperature, 'temperature', `${where}.temperature`);
    positive(row.viscosity, 'viscosity', `${where}.viscosity`);
    positive(row.density, 'density', `${where}.density`);
    if (i > 0 && !(row.temperature > table[i - 1].temperature)) {
      throw new Problem(
        'fluid',
        'The temperatures of the table do not increase from row to row.',
        where,
        'Sort the rows by temperature and keep one row per temperature.',
      );
    }
  });
  const temperatures = table.map((row) => row.temperature);
  within(temperature, temperatures[0], temperatures.at(-1)!, 'The table');
  const at = (values: readonly number[]): number =>
    hermite(temperatures, values, monotoneSlopes(temperatures, values), temperature);
  return {
    name: `measured fluid at ${celsius(temperature)}`,
    viscosity: at(table.map((row) => row.viscosity)),
    density: at(table.map((row) => row.density)),
    source: `the user's table of ${table.length} temperatures, interpolated without overshoot`,
    range: `${celsius(temperatures[0])} to ${celsius(temperatures.at(-1)!)}`,
    uncertainty: null,
  };
}

function shearThinning(density: number, shear: ShearModel): Fluid {
  positive(density, 'density', 'fluid.density');
  const common = {
    density,
    source: 'given by the user',
    range: 'as the user measured it',
    uncertainty: null,
  };
  switch (shear.kind) {
    case 'power-law':
      positive(shear.consistency, 'consistency', 'fluid.shear.consistency');
      bounded(shear.index, 0.1, 1, 'index', 'fluid.shear.index');
      if (shear.index === 1) return { ...common, name: 'power-law fluid', viscosity: shear.consistency };
      return { ...common, name: 'power-law fluid', viscosity: null, shear };
    case 'carreau':
      positive(shear.zeroShear, 'viscosity at rest', 'fluid.shear.zeroShear');
      bounded(
        shear.infiniteShear,
        0,
        shear.zeroShear,
        'viscosity at high shear',
        'fluid.shear.infiniteShear',
      );
      bounded(shear.time, 0, Number.MAX_VALUE, 'time constant', 'fluid.shear.time');
      bounded(shear.index, 0.1, 1, 'index', 'fluid.shear.index');
      if (shear.time === 0 || shear.index === 1 || shear.infiniteShear === shear.zeroShear) {
        return { ...common, name: 'Carreau fluid', viscosity: shear.zeroShear };
      }
      return { ...common, name: 'Carreau fluid', viscosity: null, shear };
    case 'casson':
      positive(shear.viscosity, 'Casson viscosity', 'fluid.shear.viscosity');
      bounded(shear.yieldStress, 0, Number.MAX_VALUE, 'yield stress', 'fluid.shear.yieldStress');
      if (shear.yieldStress === 0) return { ...common, name: 'Casson fluid', viscosity: shear.viscosity };
      return { ...common, name: 'Casson fluid', viscosity: null, shear };
  }
}

function within(temperature: number, from: number, to: number, what: string): void {
  if (temperature >= from - ROUNDING && temperature <= to + ROUNDING) return;
  throw new Problem(
    'range',
    Number.isFinite(temperature)
      ? `${what}: ${celsius(temperature)} is outside ${celsius(from)} to ${celsius(to)}, where the values hold.`
      : `${what}: the temperature is not a number.`,
    'fluid.temperature',
    'Choose a temperature inside, or give the viscosity and density that you measured.',
  );
}

function positive(value: number, what: string, where: string): void {
  if (Number.isFinite(value) && value > 0) return;
  throw new Problem(
    'range',
    `The ${what} is ${value}, not a positive number.`,
    where,
    `Give a ${what} above zero.`,
  );
}

function bounded(value: number, low: number, high: number, what: string, where: string): void {
  if (value >= low && value <= high) return;
  const bounds = high === Number.MAX_VALUE ? `${low} or more` : `from ${low} to ${high}`;
  throw new Problem('range', `The ${what} is ${value}.`, where, `Give a ${what} ${bounds}.`);
}

function celsius(kelvin: number): string {
  return `${Number((kelvin - ICE_POINT).toFixed(2))} °C`;
}
