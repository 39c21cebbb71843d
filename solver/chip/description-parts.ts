import { z } from 'zod';
import type { FluidSpec, ShearModel } from '../fluid/spec.ts';
import type { Profile } from '../section/profile.ts';
import { BOUNDS } from './bounds.ts';
import type { Drive, KeepOut, Layer, LengthUnit, Port, Roof, Via } from './chip.ts';
import { readPoint } from './description-lists.ts';
import { Fault, valueInWords } from './schema-fault.ts';
import { choice, id, inMetres, keyed, list, pair, plan, quantity, text } from './schema-fields.ts';
import { step } from './schema-parse.ts';
import { pump, reservoir } from './schema-running.ts';
import { readTolerances } from './schema-tolerance.ts';
import { NM_PER_UNIT } from './units-write.ts';

/** The parts of a description that come in small numbers: layers, vias, ports, the fluid. */

/** The object without the keys whose value is undefined: a chip holds no such keys. */
type Defined<T> = { [K in keyof T]: Exclude<T[K], undefined> };
export function defined<T extends object>(value: T): Defined<T> {
  return Object.fromEntries(Object.entries(value).filter(([, entry]) => entry !== undefined)) as Defined<T>;
}

const point = (unit: LengthUnit) =>
  z.unknown().transform(step((value) => readPoint(value, unit, NM_PER_UNIT[unit])));

export const PROFILE_KINDS = [
  'rectangle',
  'trapezoid',
  'rounded',
  'circle',
  'ellipse',
  'triangle',
  'polygon',
] as const satisfies readonly Profile['kind'][];

const profile = (unit: LengthUnit) =>
  keyed(
    {
      kind: choice(PROFILE_KINDS),
      wallAngle: quantity('angle').optional(),
      points: list(pair(inMetres(unit)), BOUNDS.profilePoints, 3).optional(),
    },
    { kind: '"rectangle"' },
  ).transform(
    step(({ kind, wallAngle, points }): Profile => {
      for (const [key, value, owner] of [
        ['wallAngle', wallAngle, 'trapezoid'],
        ['points', points, 'polygon'],
      ] as const) {
        if ((value !== undefined) === (kind === owner)) continue;
        throw value === undefined
          ? new Fault('missing', `has no "${key}".`, `Give "${key}": a ${kind} needs it.`)
          : new Fault('profile', `belongs to a ${owner}, not to a ${kind}.`, `Take "${key}" away.`, [key]);
      }
      if (kind === 'trapezoid') return { kind, wallAngle: wallAngle! };
      if (kind === 'polygon') return { kind, points: points! };
      return { kind };
    }),
  );

const tolerance = z.unknown().transform(step(readTolerances));

const roof = (unit: LengthUnit) =>
  keyed(
    {
      modulus: quantity('modulus'),
      thickness: inMetres(unit),
      poisson: quantity('number'),
      law: choice(['thick', 'plate']).optional(),
      constant: quantity('number').optional(),
    },
    { modulus: '"2 MPa"', thickness: '"5 mm"', poisson: '0.5' },
  ).transform((value): Roof => defined(value));

export const layer = (unit: LengthUnit) =>
  keyed(
    {
      id: id(),
      depth: plan(unit),
      profile: profile(unit).optional(),
      fillet: plan(unit).optional(),
      tolerance: tolerance.optional(),
      roof: roof(unit).optional(),
    },
    { id: '"flow"', depth: '50' },
  ).transform(
    (value): Layer =>
      defined({ ...value, profile: value.profile ?? { kind: 'rectangle' }, fillet: value.fillet ?? 0 }),
  );

export const via = (unit: LengthUnit) =>
  keyed(
    { id: id(), at: point(unit), layers: pair(id()), diameter: plan(unit) },
    { id: '"v1"', at: '[34000, 13000]', layers: '["flow", "upper"]', diameter: '300' },
  ).transform((value): Via => value);

export const keepOut = (unit: LengthUnit) =>
  keyed(
    {
      id: id(),
      layer: id().optional(),
      outline: list(point(unit), BOUNDS.points),
      clearance: plan(unit).optional(),
      note: text(BOUNDS.note, true).optional(),
    },
    { id: '"clamp"', outline: '[[0, 0], [4000, 0], [4000, 2000]]' },
  ).transform(
    ({ note, clearance = 0, ...value }): KeepOut => defined({ ...value, clearance, note: note || undefined }),
  );

const drive = (unit: LengthUnit) =>
  keyed(
    {
      pressure: quantity('pressure').optional(),
      flow: quantity('flow').optional(),
      head: inMetres(unit).optional(),
      closed: z
        .unknown()
        .transform(
          step((value): true => {
            if (value === true) return true;
            throw new Fault(
              'quantity',
              `takes true; ${valueInWords(value)}.`,
              'Write "closed": true, or give a drive.',
            );
          }),
        )
        .optional(),
    },
    {},
  ).transform(
    step(({ pressure, flow, head, closed }): Drive => {
      const given = Object.entries({ pressure, flow, head, closed }).filter(
        ([, value]) => value !== undefined,
      );
      if (given.length !== 1) {
        throw new Fault(
          'drive',
          given.length === 0
            ? 'imposes nothing.'
            : `imposes both ${given.map(([key]) => key).join(' and ')}.`,
          'Give one of "pressure", "flow", "head" or "closed": true.',
        );
      }
      if (pressure !== undefined) return { kind: 'pressure', pressure };
      if (flow !== undefined) return { kind: 'flow', flow };
      return head !== undefined ? { kind: 'head', head } : { kind: 'closed' };
    }),
  );

const tube = (unit: LengthUnit) =>
  keyed({ bore: inMetres(unit), length: inMetres(unit) }, { bore: '"0.5 mm"', length: '"300 mm"' });

export const port = (unit: LengthUnit) =>
  keyed(
    {
      id: id(),
      at: point(unit),
      layer: id(),
      diameter: plan(unit).optional(),
      drive: drive(unit).optional(),
      tubing: list(tube(unit), BOUNDS.tubing).optional(),
      pump: pump(unit).optional(),
      reservoir: reservoir(unit).optional(),
    },
    { id: '"in"', at: '[1000, 13000]', layer: '"flow"' },
  ).transform(
    step((value): Port => {
      if (value.drive === undefined) {
        throw new Fault(
          'drive',
          'has no drive.',
          'Add "drive" with one of "pressure", "flow", "head" or "closed": true.',
        );
      }
      return defined({
        ...value,
        diameter: value.diameter ?? 0,
        drive: value.drive,
        tubing: value.tubing ?? [],
      });
    }),
  );

export const FLUID_NAMES = [
  'water',
  'glycerol-water',
  'saline',
  'culture-medium',
  'plasma',
  'blood',
] as const;

const shear = keyed(
  {
    kind: choice(['power-law', 'carreau', 'casson']),
    consistency: quantity('number').optional(),
    index: quantity('number').optional(),
    zeroShear: quantity('viscosity').optional(),
    infiniteShear: quantity('viscosity').optional(),
    time: quantity('time').optional(),
    yieldStress: quantity('stress').optional(),
    viscosity: quantity('viscosity').optional(),
  },
  { kind: '"power-law"' },
).transform(
  step((value): ShearModel => {
    const needs = {
      'power-law': ['consistency', 'index'],
      carreau: ['zeroShear', 'infiniteShear', 'time', 'index'],
      casson: ['yieldStress', 'viscosity'],
    }[value.kind];
    exactly(value, ['kind', ...needs], `a ${value.kind} fluid`);
    return defined(value) as ShearModel;
  }),
);

/** Throws unless `value` has just these keys. */
function exactly(value: object, keys: readonly string[], owner: string): void {
  for (const key of keys) {
    if (!Object.hasOwn(value, key)) {
      throw new Fault('fluid', `has no "${key}".`, `Give "${key}": ${owner} takes ${keys.join(', ')}.`);
    }
  }
  for (const key of Object.keys(value)) {
    if (keys.includes(key)) continue;
    throw new Fault(
      'fluid',
      `does not belong to ${owner}.`,
      `Take "${key}" away; ${owner} takes ${keys.join(', ')}.`,
      [key],
    );
  }
}

const row = keyed(
  {
    temperature: quantity('temperature', false),
    viscosity: quantity('viscosity'),
    density: quantity('density'),
  },
  { temperature: '"20 degC"', viscosity: '"1.002 mPa.s"', density: '"998.2 kg/m^3"' },
);

export const fluid = keyed(
  {
    name: choice(FLUID_NAMES).optional(),
    temperature: quantity('temperature', false).optional(),
    massFraction: quantity('share').optional(),
    volumeFraction: quantity('share').optional(),
    viscosity: quantity('viscosity').optional(),
    density: quantity('density').optional(),
    shear: shear.optional(),
    table: list(row, BOUNDS.fluidRows, 2).optional(),
  },
  {},
).transform(
  step((value): FluidSpec => {
    const { name, massFraction, volumeFraction } = value;
    if (name === 'glycerol-water') {
      const share = massFraction !== undefined ? ['massFraction'] : [];
      if (volumeFraction !== undefined) share.push('volumeFraction');
      exactly(value, ['name', 'temperature', ...share], name);
    } else if (name !== undefined) exactly(value, ['name', 'temperature'], name);
    else if (value.table !== undefined) exactly(value, ['temperature', 'table'], 'a measured fluid');
    else if (value.shear !== undefined) exactly(value, ['density', 'shear'], 'a shear-thinning fluid');
    else exactly(value, ['viscosity', 'density'], 'a fluid without a name');
    return defined(value) as FluidSpec;
  }),
);
