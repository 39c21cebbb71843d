import { describe, expect, test } from 'vitest';
import { BLOOD_CARREAU, BLOOD_CASSON } from './reference.ts';
import { apparentViscosity, shearRate, viscositySlope } from './shear.ts';
import type { ShearModel } from './spec.ts';

const MODELS: readonly (readonly [string, ShearModel])[] = [
  ['power law', { kind: 'power-law', consistency: 0.015, index: 0.7 }],
  ['Carreau', BLOOD_CARREAU],
  [
    'Carreau without a lower plateau',
    { kind: 'carreau', zeroShear: 1, infiniteShear: 0, time: 0.1, index: 0.2 },
  ],
  ['Casson', BLOOD_CASSON],
];

describe.each(MODELS)('%s', (_, model) => {
  test('stress and rate are inverse to each other over ten decades', () => {
    for (let rate = 1e-4; rate < 1e6; rate *= 3) {
      expect(shearRate(model, apparentViscosity(model, rate) * rate) / rate).toBeCloseTo(1, 9);
    }
  });

  test.each([0, 0.5])('the slope is that of the apparent viscosity, smallest rate %s', (smallest) => {
    for (let rate = 1e-2; rate < 1e5; rate *= 7) {
      const h = rate * 1e-5;
      const difference =
        (apparentViscosity(model, rate + h, smallest) - apparentViscosity(model, rate - h, smallest)) /
        (2 * h);
      const slope = viscositySlope(model, rate, smallest);
      expect(slope).toBeLessThanOrEqual(0);
      expect(Math.abs(slope - difference)).toBeLessThan(1e-6 * (apparentViscosity(model, rate) / rate));
    }
  });

  test('stress rises with the rate, so that a flow is unique', () => {
    for (let rate = 1e-4; rate < 1e6; rate *= 3) {
      expect(apparentViscosity(model, rate) + rate * viscositySlope(model, rate)).toBeGreaterThan(0);
    }
  });
});

test('a Casson fluid bears its yield stress at rest', () => {
  expect(shearRate(BLOOD_CASSON, 5e-3)).toBe(0);
  expect(shearRate(BLOOD_CASSON, 4e-3)).toBe(0);
  expect(shearRate(BLOOD_CASSON, 0)).toBe(0);
  expect(Number.isFinite(apparentViscosity(BLOOD_CASSON, 0, 1e-3))).toBe(true);
});
