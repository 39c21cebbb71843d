import type { FluidSpec, ShearModel } from '../fluid/spec.ts';
import type { Profile } from '../section/profile.ts';
import type {
  Channel,
  Chip,
  Drive,
  Layer,
  LengthUnit,
  Limit,
  Point,
  Port,
  Target,
  Tolerance,
} from './chip.ts';
import { FORMAT, VERSION } from './description-format.ts';
import type { Process } from './making.ts';
import type { Pump, Reservoir } from './running.ts';
import { LENGTHS, NUMBERS } from './schema-check-making.ts';
import type { Tolerances } from './tolerance.ts';
import type { Kind } from './units.ts';
import { NM_PER_UNIT, planText, writeQuantity } from './units-write.ts';

type Json = string | number | boolean | readonly Json[] | { readonly [key: string]: Json };

/** Quantities recur (one diameter, one pressure at every port): each is put into words once. */
function speller(): (value: number, kind: Exclude<Kind, 'number'>) => Json {
  const spelt = new Map<string, Json>();
  return (value, kind) => {
    const key = `${kind} ${value}`;
    let text = spelt.get(key);
    if (text === undefined) {
      text = writeQuantity(value, kind);
      spelt.set(key, text);
    }
    return text;
  };
}
type Spell = ReturnType<typeof speller>;

const points = (path: readonly Point[], scale: number): Json => path.map(([x, y]) => [x / scale, y / scale]);

function channel(
  { id, layer, path, width, bendRadius, depth, tolerance }: Channel,
  unit: LengthUnit,
  spell: Spell,
): Json {
  const scale = NM_PER_UNIT[unit];
  const [first, last] = width;
  return {
    id,
    layer,
    path: points(path, scale),
    width: first === last ? first / scale : [first / scale, last / scale],
    ...(bendRadius === 0 ? {} : { bendRadius: bendRadius / scale }),
    ...(depth === undefined ? {} : { depth: depth / scale }),
    ...(tolerance && { tolerance: tolerancesOf(tolerance, unit, spell) }),
  };
}

function profileOf(profile: Profile, spell: Spell): Json {
  if (profile.kind !== 'polygon') return { ...profile };
  return {
    kind: profile.kind,
    points: profile.points.map((point) => point.map((value) => spell(value, 'length'))),
  };
}

const toleranceOf = (tolerance: Tolerance, unit: LengthUnit, spell: Spell): Json =>
  'share' in tolerance ? spell(tolerance.share, 'share') : `${planText(tolerance.length, unit)} ${unit}`;

const tolerancesOf = ({ depth, width, common }: Tolerances, unit: LengthUnit, spell: Spell): Json => ({
  ...(depth && { depth: toleranceOf(depth, unit, spell) }),
  ...(width && { width: toleranceOf(width, unit, spell) }),
  ...(common === undefined ? {} : { common: spell(common, 'share') }),
});

function layerOf(
  { id, depth, profile, fillet, tolerance, roof }: Layer,
  unit: LengthUnit,
  spell: Spell,
): Json {
  const scale = NM_PER_UNIT[unit];
  return {
    id,
    depth: depth / scale,
    profile: profileOf(profile, spell),
    fillet: fillet / scale,
    ...(tolerance && { tolerance: tolerancesOf(tolerance, unit, spell) }),
    ...(roof && {
      roof: {
        modulus: spell(roof.modulus, 'modulus'),
        thickness: spell(roof.thickness, 'length'),
        poisson: roof.poisson,
        ...(roof.law && { law: roof.law }),
        ...(roof.constant === undefined ? {} : { constant: roof.constant }),
      },
    }),
  };
}

function driveOf(drive: Drive, spell: Spell): Json {
  switch (drive.kind) {
    case 'pressure':
      return { pressure: spell(drive.pressure, 'pressure') };
    case 'flow':
      return { flow: spell(drive.flow, 'flow') };
    case 'head':
      return { head: spell(drive.head, 'length') };
    case 'closed':
      return { closed: true };
  }
}

function pumpOf({ pressure, flow, bore, volume }: Pump, spell: Spell): Json {
  return {
    ...(pressure === undefined ? {} : { pressure: spell(pressure, 'pressure') }),
    ...(flow === undefined ? {} : { flow: spell(flow, 'flow') }),
    ...(bore === undefined ? {} : { bore: spell(bore, 'length') }),
    ...(volume === undefined ? {} : { volume: spell(volume, 'volume') }),
  };
}

function reservoirOf({ bore, area, volume }: Reservoir, spell: Spell): Json {
  return {
    ...(bore === undefined ? {} : { bore: spell(bore, 'length') }),
    ...(area === undefined ? {} : { area: spell(area, 'area') }),
    ...(volume === undefined ? {} : { volume: spell(volume, 'volume') }),
  };
}

const portOf = (
  { id, at, layer, diameter, drive, tubing, pump, reservoir }: Port,
  scale: number,
  spell: Spell,
): Json => ({
  id,
  at: [at[0] / scale, at[1] / scale],
  layer,
  diameter: diameter / scale,
  drive: driveOf(drive, spell),
  ...(tubing.length > 0 && {
    tubing: tubing.map(({ bore, length }) => ({
      bore: spell(bore, 'length'),
      length: spell(length, 'length'),
    })),
  }),
  ...(pump && { pump: pumpOf(pump, spell) }),
  ...(reservoir && { reservoir: reservoirOf(reservoir, spell) }),
});

function shearOf(shear: ShearModel, spell: Spell): Json {
  switch (shear.kind) {
    case 'power-law':
      return { kind: shear.kind, consistency: shear.consistency, index: shear.index };
    case 'carreau':
      return {
        kind: shear.kind,
        zeroShear: spell(shear.zeroShear, 'viscosity'),
        infiniteShear: spell(shear.infiniteShear, 'viscosity'),
        time: spell(shear.time, 'time'),
        index: shear.index,
      };
    case 'casson':
      return {
        kind: shear.kind,
        yieldStress: spell(shear.yieldStress, 'stress'),
        viscosity: spell(shear.viscosity, 'viscosity'),
      };
  }
}

function fluidOf(fluid: FluidSpec, spell: Spell): Json {
  if ('name' in fluid) {
    const share: Record<string, Json> = {};
    if (fluid.name === 'glycerol-water') {
      if (fluid.massFraction !== undefined) share.massFraction = spell(fluid.massFraction, 'share');
      if (fluid.volumeFraction !== undefined) share.volumeFraction = spell(fluid.volumeFraction, 'share');
    }
    return { name: fluid.name, temperature: spell(fluid.temperature, 'temperature'), ...share };
  }
  if ('table' in fluid) {
    return {
      temperature: spell(fluid.temperature, 'temperature'),
      table: fluid.table.map((row) => ({
        temperature: spell(row.temperature, 'temperature'),
        viscosity: spell(row.viscosity, 'viscosity'),
        density: spell(row.density, 'density'),
      })),
    };
  }
  const density = spell(fluid.density, 'density');
  return 'shear' in fluid
    ? { density, shear: shearOf(fluid.shear, spell) }
    : { viscosity: spell(fluid.viscosity, 'viscosity'), density };
}

const targetOf = (target: Target, spell: Spell): Json => ({
  ...('port' in target ? { port: target.port } : { channel: target.channel }),
  ...('share' in target ? { share: spell(target.share, 'share') } : { flow: spell(target.flow, 'flow') }),
  within: spell(target.within, 'share'),
});

function limitOf(limit: Limit, spell: Spell): Json {
  let stated: Record<string, Json>;
  if ('shear' in limit) stated = { shear: spell(limit.shear, 'stress') };
  else if ('floor' in limit) {
    stated = { floor: limit.floor.map((value) => spell(value, 'stress')), area: spell(limit.area, 'share') };
  } else if ('curve' in limit) {
    stated = { curve: limit.curve.map(([time, stress]) => [spell(time, 'time'), spell(stress, 'stress')]) };
  } else {
    const { constant, stress, time } = limit.law;
    stated = { law: { constant, stress, time }, damage: spell(limit.damage, 'share'), passes: limit.passes };
  }
  return {
    name: limit.name,
    ...stated,
    ...(limit.where === undefined ? {} : { where: limit.where }),
    ...(limit.cellDiameter === undefined ? {} : { cellDiameter: spell(limit.cellDiameter, 'length') }),
  };
}

function processOf(process: Process, scale: number, spell: Spell): Json {
  const written: Record<string, Json> = { kind: process.kind };
  for (const key of LENGTHS) if (process[key] !== undefined) written[key] = process[key] / scale;
  for (const key of NUMBERS) if (process[key] !== undefined) written[key] = process[key];
  if (process.modulus !== undefined) written.modulus = spell(process.modulus, 'modulus');
  return written;
}

/** JSON on one line with room after commas and inside curly brackets. */
function inline(value: Json): string {
  if (typeof value !== 'object') return JSON.stringify(value);
  if (Array.isArray(value)) return `[${value.map(inline).join(', ')}]`;
  const entries = Object.entries(value).map(([key, entry]) => `${JSON.stringify(key)}: ${inline(entry)}`);
  return entries.length === 0 ? '{}' : `{ ${entries.join(', ')} }`;
}

/**
 * The description of a chip: the same chip always gives the same bytes, one entry of a list to a line,
 * and reading it back gives an equal chip.
 */
export function writeDescription(chip: Chip): string {
  const spell = speller();
  const scale = NM_PER_UNIT[chip.lengthUnit];
  const lines: string[] = [`"format": "${FORMAT}", "version": ${VERSION}`];
  const one = (key: string, value: Json): number => lines.push(`"${key}": ${inline(value)}`);
  const list = <T>(key: string, entries: readonly T[], write: (entry: T) => Json, always = false): void => {
    if (entries.length === 0 && !always) return;
    const written = entries.map((entry) => `    ${inline(write(entry))}`).join(',\n');
    lines.push(`"${key}": [${written === '' ? '' : `\n${written}\n  `}]`);
  };
  one('name', chip.name);
  if (chip.note !== '') one('note', chip.note);
  one('lengthUnit', chip.lengthUnit);
  one('outline', { width: chip.outline.width / scale, height: chip.outline.height / scale });
  list('layers', chip.layers, (layer) => layerOf(layer, chip.lengthUnit, spell), true);
  list('channels', chip.channels, (entry) => channel(entry, chip.lengthUnit, spell), true);
  list('chambers', chip.chambers, ({ id, layer, outline }) => ({
    id,
    layer,
    outline: points(outline, scale),
  }));
  list('vias', chip.vias, ({ id, at, layers, diameter }) => ({
    id,
    at: [at[0] / scale, at[1] / scale],
    layers,
    diameter: diameter / scale,
  }));
  list('ports', chip.ports, (port) => portOf(port, scale, spell), true);
  one('fluid', fluidOf(chip.fluid, spell));
  list('targets', chip.targets, (target) => targetOf(target, spell));
  list('limits', chip.limits, (limit) => limitOf(limit, spell));
  if (chip.process) one('process', processOf(chip.process, scale, spell));
  list('accepted', chip.accepted ?? [], ({ kind, where, reason }) => ({ kind, where, reason }));
  if (chip.rating) one('rating', { pressure: spell(chip.rating.pressure, 'pressure') });
  if (chip.assay) one('assay', { time: spell(chip.assay.time, 'time') });
  list('keepOuts', chip.keepOuts ?? [], ({ id, layer, outline, clearance, note }) => ({
    id,
    ...(layer !== undefined && { layer }),
    outline: points(outline, scale),
    ...(clearance !== 0 && { clearance: clearance / scale }),
    ...(note !== undefined && { note }),
  }));
  return `{\n${lines.map((line) => `  ${line}`).join(',\n')}\n}\n`;
}
