import { describe, expect, test } from 'vitest';
import { Problem } from '../problem/problem.ts';
import { fluidOf } from './fluid.ts';
import type { FluidSpec } from './spec.ts';

const K = (celsius: number): number => celsius + 273.15;

function problemOf(spec: FluidSpec): Problem {
  try {
    fluidOf(spec);
  } catch (error) {
    if (error instanceof Problem) return error;
    throw error;
  }
  throw new Error('no problem was raised');
}

describe('ranges are enforced, never extrapolated', () => {
  test.each<[string, FluidSpec]>([
    ['ice', { name: 'water', temperature: K(-1) }],
    ['steam', { name: 'water', temperature: K(101) }],
    ['no number', { name: 'water', temperature: Number.NaN }],
    ['cold glycerol', { name: 'glycerol-water', temperature: K(14.9), massFraction: 0.5 }],
    ['warm glycerol', { name: 'glycerol-water', temperature: K(30.1), massFraction: 0.5 }],
    ['room-temperature blood', { name: 'blood', temperature: K(25) }],
    ['room-temperature plasma', { name: 'plasma', temperature: K(25) }],
    ['room-temperature medium', { name: 'culture-medium', temperature: K(25) }],
    ['hot saline', { name: 'saline', temperature: K(41) }],
  ])('%s', (_, spec) => {
    const problem = problemOf(spec);
    expect(problem.kind).toBe('range');
    expect(problem.where).toBe('fluid.temperature');
    expect(problem.remedy).not.toBe('');
  });

  test('the ends of a range belong to it, also after a conversion of units', () => {
    expect(fluidOf({ name: 'water', temperature: K(0) }).viscosity).toBeGreaterThan(1.79e-3);
    expect(fluidOf({ name: 'water', temperature: 100 + 273.15 }).density).toBeLessThan(959);
    expect(
      fluidOf({ name: 'glycerol-water', temperature: (86 + 459.67) / 1.8, massFraction: 0 }).density,
    ).toBeGreaterThan(995);
  });
});

describe('descriptions that make no sense', () => {
  test.each<[string, string, FluidSpec]>([
    ['fluid', 'fluid', { name: 'glycerol-water', temperature: K(20) }],
    [
      'fluid',
      'fluid',
      { name: 'glycerol-water', temperature: K(20), massFraction: 0.1, volumeFraction: 0.1 },
    ],
    ['range', 'fluid.massFraction', { name: 'glycerol-water', temperature: K(20), massFraction: 1.2 }],
    ['range', 'fluid.viscosity', { viscosity: 0, density: 1000 }],
    ['range', 'fluid.density', { viscosity: 1e-3, density: -1 }],
    [
      'range',
      'fluid.shear.index',
      { density: 1000, shear: { kind: 'power-law', consistency: 0.02, index: 1.5 } },
    ],
    [
      'range',
      'fluid.shear.yieldStress',
      { density: 1000, shear: { kind: 'casson', yieldStress: -1, viscosity: 1e-3 } },
    ],
    [
      'range',
      'fluid.shear.infiniteShear',
      {
        density: 1000,
        shear: { kind: 'carreau', zeroShear: 1e-3, infiniteShear: 2e-3, time: 1, index: 0.5 },
      },
    ],
    [
      'fluid',
      'fluid.table',
      { temperature: K(20), table: [{ temperature: K(20), viscosity: 1e-3, density: 1000 }] },
    ],
    [
      'fluid',
      'fluid.table[1]',
      {
        temperature: K(20),
        table: [
          { temperature: K(20), viscosity: 1e-3, density: 1000 },
          { temperature: K(20), viscosity: 2e-3, density: 1000 },
        ],
      },
    ],
  ])('%s at %s', (kind, where, spec) => {
    expect(problemOf(spec)).toMatchObject({ kind, where });
  });
});

test('a volume fraction is that of the volumes before mixing', () => {
  const byVolume = fluidOf({ name: 'glycerol-water', temperature: K(20), volumeFraction: 0.5 });
  // 0.5 * 1261.058 / (0.5 * 1261.058 + 0.5 * 998.0457): the two liquids' own densities.
  const byMass = fluidOf({ name: 'glycerol-water', temperature: K(20), massFraction: 0.5582117 });
  expect(byVolume.viscosity! / byMass.viscosity!).toBeCloseTo(1, 4);
  expect(byVolume.density / byMass.density).toBeCloseTo(1, 6);
});

test('a table passes through its rows and stays between neighbours', () => {
  const table = [
    { temperature: 290, viscosity: 2e-3, density: 1010 },
    { temperature: 300, viscosity: 1.9e-3, density: 1008 },
    { temperature: 301, viscosity: 1.1e-3, density: 1008 },
    { temperature: 320, viscosity: 1e-3, density: 1001 },
  ];
  for (const row of table) {
    expect(fluidOf({ temperature: row.temperature, table })).toMatchObject({
      viscosity: row.viscosity,
      density: row.density,
    });
  }
  let before = Number.POSITIVE_INFINITY;
  for (let t = 290; t <= 320; t += 0.1) {
    const { viscosity } = fluidOf({ temperature: t, table });
    expect(viscosity!).toBeLessThanOrEqual(before);
    before = viscosity!;
  }
  expect(problemOf({ temperature: 289, table })).toMatchObject({ kind: 'range' });
});

test('models at their Newtonian limit are plain fluids', () => {
  const limits: FluidSpec[] = [
    { density: 1000, shear: { kind: 'power-law', consistency: 2e-3, index: 1 } },
    { density: 1000, shear: { kind: 'carreau', zeroShear: 2e-3, infiniteShear: 1e-3, time: 0, index: 0.5 } },
    { density: 1000, shear: { kind: 'carreau', zeroShear: 2e-3, infiniteShear: 1e-3, time: 1, index: 1 } },
    { density: 1000, shear: { kind: 'casson', yieldStress: 0, viscosity: 2e-3 } },
  ];
  for (const spec of limits) {
    const fluid = fluidOf(spec);
    expect(fluid.viscosity).toBe(2e-3);
    expect(fluid.shear).toBeUndefined();
  }
  const blood = fluidOf({ density: 1060, shear: { kind: 'casson', yieldStress: 5e-3, viscosity: 3.5e-3 } });
  expect(blood.viscosity).toBeNull();
});
