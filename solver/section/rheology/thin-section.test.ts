import { describe, expect, test } from 'vitest';
import { tubeFlow } from '../../../test/outside/shear-thinning-ducts.ts';
import { verify } from '../../../test/verify/row.ts';
import { BLOOD_CARREAU, BLOOD_CASSON } from '../../fluid/reference.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import { sectionElements } from './elements.ts';
import { solveSection } from './newton.ts';
import { quarterRectangle, WALL } from './rectangle-mesh.ts';
import { thinSection } from './thin-section.ts';

const um = 1e-6;
const POWER: ShearModel = { kind: 'power-law', consistency: 0.015, index: 0.7 };
const STRONG: ShearModel = { kind: 'carreau', zeroShear: 1, infiniteShear: 1e-3, time: 0.1, index: 0.2 };
const MODELS: readonly (readonly [string, ShearModel])[] = [
  ['power law', POWER],
  ['Carreau, blood', BLOOD_CARREAU],
  ['Carreau, strong', STRONG],
  ['Casson, blood', BLOOD_CASSON],
];

const two = new Float64Array(2);
const flowOf = (model: ShearModel, width: number, depth: number, gradient: number): number => {
  thinSection(model, { kind: 'rectangle' }, width, depth).flow(gradient, two);
  return two[0];
};

/** The same by one solve of this very section and gradient, in SI, on a finer mesh. */
function solved(model: ShearModel, width: number, depth: number, gradient: number): number {
  const mesh = quarterRectangle(Math.max(width, depth) / Math.min(width, depth), 12);
  const elements = sectionElements(mesh, (tag) => tag === WALL);
  const half = Math.min(width, depth) / 2;
  const newtonian: ShearModel = { kind: 'power-law', consistency: 1, index: 1 };
  const velocity = new Float64Array(mesh.nodeCount);
  const exact = thinSection(newtonian, { kind: 'rectangle' }, width, depth).section.conductance;
  const viscous = solveSection(elements, newtonian, 1, 0, velocity).flow;
  // In units of the half depth: gradients G half, rates per velocity over half; velocities come out in m/s over half.
  const start = velocity.map((u) => u * 1e-3);
  const { flow } = solveSection(
    elements,
    model,
    gradient * half,
    model.kind === 'casson' ? 1e-5 : 1e-6,
    start,
  );
  return (flow / viscous) * (exact / half);
}

for (const [name, model] of MODELS) {
  for (const [width, depth, gradient] of [
    [100, 100, 2e4],
    [217, 50, 3e4],
    [217, 50, 3e3],
    [45, 120, 1e5],
    [500, 31, 1e4],
  ] as const) {
    verify(
      {
        quantity: 'flow of a shear-thinning fluid from the tables',
        check: 'invariant',
        at: `${name}, ${width} µm by ${depth} µm, ${gradient} Pa/m`,
        source: 'one solve of the very section and gradient on a finer mesh',
        tolerance: 3e-4,
      },
      () =>
        Math.abs(
          flowOf(model, width * um, depth * um, gradient) / solved(model, width * um, depth * um, gradient) -
            1,
        ),
    );
  }
  verify(
    {
      quantity: 'flow of a shear-thinning fluid from the tables',
      check: 'exact',
      at: `${name}, tube of 200 µm, 1e3 to 1e7 Pa/m`,
      source: 'quadrature or closed form of the model at every gradient',
      tolerance: 2e-4,
    },
    () => {
      const tube = thinSection(model, { kind: 'circle' }, 200 * um, 200 * um);
      let worst = 0;
      for (let gradient = 1e3; gradient < 1e7; gradient *= 1.13) {
        tube.flow(gradient, two);
        worst = Math.max(worst, Math.abs(two[0] / tubeFlow(model, 100 * um, gradient) - 1));
      }
      return worst;
    },
  );
}

describe.each(MODELS)('%s', (_, model) => {
  const section = thinSection(model, { kind: 'rectangle' }, 210 * um, 50 * um);

  test('flow rises with the gradient, by the slope it gives, across every step of the tables', () => {
    let before = 0;
    const h = 1e-6;
    for (let gradient = 10 + 1.001 * section.yieldGradient; gradient < 1e7; gradient *= 1.01) {
      section.flow(gradient, two);
      const [flow, slope] = two;
      expect(flow).toBeGreaterThan(before);
      before = flow;
      section.flow(gradient * (1 + h), two);
      const up = two[0];
      section.flow(gradient * (1 - h), two);
      expect((up - two[0]) / (2 * h * gradient * slope)).toBeCloseTo(1, 3);
    }
  });

  test('the gradient of a flow is the inverse', () => {
    for (let gradient = 10 + 1.001 * section.yieldGradient; gradient < 1e7; gradient *= 3) {
      section.flow(gradient, two);
      const [flow, slope] = two;
      section.gradient(flow, two);
      expect(two[0] / gradient).toBeCloseTo(1, 10);
      expect(two[1] * slope).toBeCloseTo(1, 8);
    }
    section.gradient(0, two);
    expect(two[0]).toBe(section.yieldGradient);
  });

  test('a shear-thinning profile is blunter, and its wall stress evener, than the Newtonian one', () => {
    const { stress, velocity } = section.peaks(3e4);
    expect(velocity).toBeLessThan(section.section.peakVelocity);
    expect(stress!).toBeLessThan(section.section.peakShear! / section.section.meanShear);
    expect(velocity).toBeGreaterThan(1);
    expect(stress!).toBeGreaterThan(1);
  });
});

test('below its yield stress a fluid stands still', () => {
  const section = thinSection(BLOOD_CASSON, { kind: 'rectangle' }, 100 * um, 50 * um);
  // Flow starts at 0.94979 of 5 mPa of mean wall stress; area over perimeter is 50/3 µm.
  expect(section.yieldGradient / ((5e-3 * 0.94979) / ((50 / 3) * um))).toBeCloseTo(1, 4);
  section.flow(0.99 * section.yieldGradient, two);
  expect([...two]).toEqual([0, 0]);
  const newtonian = (section.section.conductance * section.yieldGradient) / 3.5e-3;
  section.flow(1.2 * section.yieldGradient, two);
  expect(two[0]).toBeGreaterThan(1e-4 * newtonian);
});

test('a fluid of another scale uses the tables of the same groups', () => {
  const other: ShearModel = { ...BLOOD_CASSON, kind: 'casson', yieldStress: 0.5, viscosity: 0.35 };
  // A hundred times the yield stress and viscosity: the same flow under a hundred times the gradient.
  expect(flowOf(other, 150 * um, 60 * um, 1e6) / flowOf(BLOOD_CASSON, 150 * um, 60 * um, 1e4)).toBeCloseTo(
    1,
    12,
  );
});
