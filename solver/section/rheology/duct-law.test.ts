import { describe, expect, test } from 'vitest';
import { verify } from '../../../test/verify/row.ts';
import { BLOOD_CARREAU, BLOOD_CASSON } from '../../fluid/reference.ts';
import { roofLaw } from '../roof/roof.ts';
import { sectionOf } from '../section-of.ts';
import { taperResistance } from '../taper.ts';
import { type DuctShape, ductLaws } from './duct-law.ts';
import type { Rheology } from './local.ts';
import { thinSection } from './thin-section.ts';

const um = 1e-6;
const rectangle = { kind: 'rectangle' } as const;
const rigid: DuctShape = { profile: rectangle, width: [400 * um, 400 * um], depth: 40 * um, length: 8e-3 };
const taper: DuctShape = { ...rigid, width: [150 * um, 500 * um] };
const roof = { modulus: 1.5e6, thickness: 5e-3, poisson: 0.5, law: 'thick', constant: 0.5 } as const;
const water: Rheology = { viscosity: 1e-3 };
const carreau: Rheology = { shear: BLOOD_CARREAU };
const casson: Rheology = { shear: BLOOD_CASSON };
const power: Rheology = { shear: { kind: 'power-law', consistency: 0.01, index: 0.6 } };

const three = new Float64Array(3);
const two = new Float64Array(2);
const flowOf = (rheology: Rheology, shape: DuctShape, pFrom: number, pTo: number): number => {
  ductLaws(rheology)
    .law(shape)
    .flow(pFrom - pTo, pTo, three);
  return three[0];
};

verify(
  {
    quantity: 'flow of a Newtonian fluid along a soft channel',
    check: 'published',
    at: 'thick roof, closed form, λ = 0.5',
    source: 'Gervais et al. 2006, Lab Chip 6, 500 (formula from memory, derived again)',
    tolerance: 1e-12,
  },
  () => {
    const dp = (0.5 * roof.modulus * 40 * um) / (0.5 * 400 * um);
    return Math.abs(flowOf(water, { ...rigid, roof }, dp, 0) / flowOf(water, rigid, dp, 0) / 2.03125 - 1);
  },
);
verify(
  {
    quantity: 'flow along a soft channel by marching',
    check: 'exact',
    at: 'thick roof, λ = 0.5, a fluid that is all but Newtonian',
    source: 'closed form of the Newtonian fluid',
    tolerance: 3e-5,
  },
  () => {
    const dp = (0.5 * roof.modulus * 40 * um) / (0.5 * 400 * um);
    const nearly: Rheology = { shear: { kind: 'power-law', consistency: 1e-3, index: 1 - 1e-9 } };
    return Math.abs(flowOf(nearly, { ...rigid, roof }, dp, 0) / flowOf(water, { ...rigid, roof }, dp, 0) - 1);
  },
);

/** Far pressure of a soft taper by the midpoint rule in many small steps, from formulas alone. */
function shoot(rheology: Rheology, shape: DuctShape, high: number, flow: number): number {
  const n = 800;
  const h = shape.length / n;
  const gradient = (s: number, p: number): number => {
    const width = shape.width[0] + (shape.width[1] - shape.width[0]) * s;
    const section = sectionOf(rectangle, width, shape.depth);
    const law = shape.roof && roofLaw(shape.roof, width, shape.depth);
    const x = law ? law.slope * p : 0;
    // A thick roof rises evenly: the depth is 1 + x times the rigid one.
    const open = 1 + x;
    if ('viscosity' in rheology) return (rheology.viscosity * flow) / section.conductance / open ** 3;
    const thin = cached(rheology, width, shape.depth);
    thin.gradient(flow / open ** 2, two);
    return two[0] / open;
  };
  let p = high;
  for (let i = 0; i < n; i += 1) {
    const half = p - (h / 2) * gradient(i / n, p);
    p -= h * gradient((i + 0.5) / n, half);
  }
  return p;
}
const kept = new Map<string, ReturnType<typeof thinSection>>();
function cached(rheology: Extract<Rheology, { shear: unknown }>, width: number, depth: number) {
  const key = `${rheology.shear.kind} ${width.toPrecision(9)} ${depth}`;
  const known = kept.get(key) ?? thinSection(rheology.shear, rectangle, width, depth);
  kept.set(key, known);
  return known;
}

for (const [at, rheology, shape, high] of [
  ['water, soft taper', water, { ...taper, roof }, 5e4],
  ['Carreau blood, soft channel', carreau, { ...rigid, roof }, 5e4],
  ['Carreau blood, rigid taper', carreau, taper, 2e4],
] as const) {
  verify(
    {
      quantity: 'pressure drop along a channel for a flow',
      check: 'exact',
      at,
      source: 'shooting: midpoint rule in 800 steps',
      tolerance: 3e-5,
    },
    () => {
      const flow = flowOf(rheology, shape, high, 1e3);
      return Math.abs((high - shoot(rheology, shape, high, flow)) / (high - 1e3) - 1);
    },
  );
}

test('a rigid taper carries a Newtonian fluid as its resistance says', () => {
  const resistance = 1e-3 * taperResistance(rectangle, 150 * um, 500 * um, 40 * um, 8e-3);
  expect((flowOf(water, taper, 1e4, 0) * resistance) / 1e4).toBeCloseTo(1, 6);
});

describe.each<[string, Rheology, DuctShape]>([
  ['water, soft', water, { ...rigid, roof }],
  ['water, soft taper', water, { ...taper, roof }],
  ['power law, rigid', power, rigid],
  ['power law, soft', power, { ...rigid, roof }],
  ['Carreau, rigid', carreau, rigid],
  ['Carreau, taper', carreau, taper],
  ['Casson, taper', casson, taper],
  ['Casson, soft', casson, { ...rigid, roof }],
])('%s', (_, rheology, shape) => {
  const law = ductLaws(rheology).law(shape);

  test.each([
    [3e4, 0],
    [0, 3e4],
    [1e4, -1e4],
    [500, 0],
    [2e4, 1.9e4],
  ])('slopes at %s and %s Pa', (pFrom, pTo) => {
    law.flow(pFrom - pTo, pTo, three);
    const [, first, second] = three;
    expect(first).toBeGreaterThan(0);
    expect(second).toBeLessThan(0);
    const h = 0.05;
    const at = (a: number, b: number): number => {
      law.flow(a - b, b, three);
      return three[0];
    };
    expect((at(pFrom + h, pTo) - at(pFrom - h, pTo)) / (2 * h) / first).toBeCloseTo(1, 4);
    expect((at(pFrom, pTo + h) - at(pFrom, pTo - h)) / (2 * h) / second).toBeCloseTo(1, 4);
  });

  test('the same pressure at both ends moves nothing, and the state agrees with the flow', () => {
    law.flow(0, 1e3, three);
    expect(three[0]).toBe(0);
    // A power law or a yield stress has no slope at rest.
    const thick = 'shear' in rheology && rheology.shear.kind !== 'carreau';
    expect(three[1]).toBeGreaterThan(thick ? -1 : 0);
    expect(three[2]).toBe(-three[1]);
    law.flow(2e4, 0, three);
    const state = law.state(2e4, 0);
    expect(state.flow).toBe(three[0]);
    expect(state.flowing).toBe(true);
    expect(state.peakShear!).toBeGreaterThan(state.meanShear);
    expect(law.state(0, 2e4).flow).toBeLessThan(0);
  });

  test('the force on the wall is that of the pressure', () => {
    // Rigid and uniform: exactly area times drop; else near the mean of what the ends give.
    const { meanShear } = law.state(1e4, 0);
    const { area, perimeter } = sectionOf(rectangle, (shape.width[0] + shape.width[1]) / 2, shape.depth);
    const even = (1e4 * area) / (perimeter * shape.length);
    expect(meanShear / even).toBeCloseTo(1, shape.roof || shape.width[0] !== shape.width[1] ? 0 : 10);
  });
});

test.each([
  ['rigid', rigid],
  ['taper', taper],
  ['soft', { ...rigid, roof }],
])('a yield stress that the walls do not reach is told, not divided by: %s', (_, shape) => {
  const law = ductLaws(casson).law(shape);
  const still = law.state(1, 0);
  expect(still).toMatchObject({ flow: 0, flowing: false, peakVelocity: 0 });
  expect(still.meanShear).toBeLessThan(5e-3);
  expect(Number.isFinite(still.peakShear!)).toBe(true);
  law.flow(1, 0, three);
  expect([...three].map(Math.abs)).toEqual([0, 0, 0]);
  expect(law.state(0, 0)).toMatchObject({ flow: 0, flowing: false });
  expect(law.state(200, 0).flowing).toBe(true);
});

test('a roof rises where pressure is above, and sinks where it is below the outside', () => {
  const { rise } = ductLaws(water)
    .law({ ...rigid, roof })
    .state(3e4, -1e4);
  expect(rise[0]).toBeCloseTo((0.5 * 3e4 * 400) / (1.5e6 * 40), 12);
  expect(rise[1]).toBeCloseTo((-0.5 * 1e4 * 400) / (1.5e6 * 40), 12);
});
