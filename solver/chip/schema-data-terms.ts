import { z } from 'zod';
import type { FluidSpec, ShearModel } from '../fluid/spec.ts';
import { BOUNDS } from './bounds.ts';
import type { Limit, Target } from './chip.ts';
import { byKey, byKind, field, kind, si } from './schema-data.ts';
import { choice, id, keyed, list, pair, readId, readList, text } from './schema-fields.ts';
import { parseWith, step } from './schema-parse.ts';

/** The fluid, targets and limits that come as data, in SI, with exactly the keys of their types. */

const shear = byKind<ShearModel>({
  'power-law': keyed(
    { kind: kind('power-law'), consistency: si, index: si },
    { consistency: '0.02', index: '0.7' },
  ),
  carreau: keyed(
    { kind: kind('carreau'), zeroShear: si, infiniteShear: si, time: si, index: si },
    { zeroShear: '0.056', infiniteShear: '0.00345', time: '3.313', index: '0.3568' },
  ),
  casson: keyed(
    { kind: kind('casson'), yieldStress: si, viscosity: si },
    { yieldStress: '0.005', viscosity: '0.0035' },
  ),
});

const plainFluid = keyed(
  { name: choice(['water', 'saline', 'culture-medium', 'plasma', 'blood']), temperature: si },
  { temperature: '298.15' },
);
const glycerolWater = keyed(
  {
    name: choice(['glycerol-water']),
    temperature: si,
    massFraction: si.exactOptional(),
    volumeFraction: si.exactOptional(),
  },
  { temperature: '298.15' },
);
const namedFluid = z.unknown().transform(
  step((value): FluidSpec => {
    const glycerol = (value as { name: unknown }).name === 'glycerol-water';
    return parseWith<FluidSpec>(glycerol ? glycerolWater : plainFluid, value);
  }),
);

export const fluid = byKey<FluidSpec>(
  [
    ['name', namedFluid],
    [
      'table',
      keyed(
        {
          temperature: si,
          table: list(
            keyed(
              { temperature: si, viscosity: si, density: si },
              { temperature: '293.15', viscosity: '1e-3', density: '998' },
            ),
            BOUNDS.fluidRows,
            2,
          ),
        },
        { temperature: '298.15' },
      ),
    ],
    ['shear', keyed({ density: si, shear }, { density: '1000' })],
    ['viscosity', keyed({ viscosity: si, density: si }, { density: '1000' })],
  ],
  'fluid',
);

const target = byKey<Target>(
  [
    ['port', wantedAt({ port: id() })],
    ['channel', wantedAt({ channel: id() })],
  ],
  'target',
);

function wantedAt<P extends { port: z.ZodType<string> } | { channel: z.ZodType<string> }>(place: P) {
  const needs = { within: '0.05' } as const;
  return byKey<Target>(
    [
      ['share', keyed({ ...place, share: si, within: si }, needs) as z.ZodType<unknown> as z.ZodType<Target>],
      ['flow', keyed({ ...place, flow: si, within: si }, needs) as z.ZodType<unknown> as z.ZodType<Target>],
    ],
    'target',
  );
}

export const targets = list(target, BOUNDS.targets);

const where = field((value): string | [string, string] => {
  if (!Array.isArray(value)) return readId(value);
  const [from, to] = readList(value, 2, 2);
  return [readId(from), readId(to)];
});
const limitPlace = {
  name: text(BOUNDS.name),
  where: where.exactOptional(),
  cellDiameter: si.exactOptional(),
};

const limit = byKey<Limit>(
  [
    ['shear', keyed({ ...limitPlace, shear: si }, { name: '"cells"' })],
    ['floor', keyed({ ...limitPlace, floor: pair(si), area: si }, { name: '"cells"', area: '0.9' })],
    ['curve', keyed({ ...limitPlace, curve: list(pair(si), BOUNDS.curve, 1) }, { name: '"cells"' })],
    [
      'law',
      keyed(
        {
          ...limitPlace,
          law: keyed(
            { constant: si, stress: si, time: si },
            { constant: '3.62e-5', stress: '2.416', time: '0.785' },
          ),
          damage: si,
          passes: si,
        },
        { name: '"cells"', damage: '0.001', passes: '1' },
      ),
    ],
  ],
  'limit',
);

export const limits = list(limit, BOUNDS.limits);
