import { expect, test } from 'vitest';
import type { ShearModel } from '../../fluid/spec.ts';
import { type PerimeterCurve, perimeterCurve } from '../perimeter-curve.ts';
import type { Profile } from '../profile.ts';
import { sectionOf } from '../section-of.ts';
import { thinPerimeterCurve } from './thin-curve.ts';
import { thinSection } from './thin-section.ts';

const WATERY: ShearModel = { kind: 'power-law', consistency: 1e-3, index: 1 };
const THIN: ShearModel = { kind: 'power-law', consistency: 0.02, index: 0.6 };
/** Blood: Cho and Kensey 1991, Biorheology 28, 241. */
const BLOOD: ShearModel = {
  kind: 'carreau',
  zeroShear: 0.056,
  infiniteShear: 0.00345,
  time: 3.313,
  index: 0.3568,
};
const CASSON: ShearModel = { kind: 'casson', yieldStress: 0.005, viscosity: 0.0035 };

const PROFILES: readonly (readonly [Profile, number, number])[] = [
  [{ kind: 'rectangle' }, 200e-6, 50e-6],
  [{ kind: 'rectangle' }, 40e-6, 120e-6],
  [{ kind: 'rectangle' }, 5e-3, 50e-6],
  [{ kind: 'trapezoid', wallAngle: 80 }, 200e-6, 50e-6],
  [{ kind: 'rounded' }, 100e-6, 40e-6],
  [{ kind: 'ellipse' }, 200e-6, 80e-6],
  [{ kind: 'circle' }, 100e-6, 100e-6],
];

/** Mean of a curve over its own length, by Simpson's rule on edges of a middle and two ends. */
function mean({ s, shear }: PerimeterCurve): number {
  let sum = 0;
  for (let i = 1; i < s.length; i += 1) sum += ((s[i]! - s[i - 1]!) * (shear[i]! + shear[i - 1]!)) / 2;
  return sum / s.at(-1)!;
}

test('the wall holds what drives the flow: the mean round every section is the one asked for', () => {
  for (const fluid of [WATERY, THIN, BLOOD, CASSON])
    for (const [profile, width, depth] of PROFILES) {
      const curve = thinPerimeterCurve(fluid, profile, width, depth, 0.4)!;
      expect(Math.abs(mean(curve) / 0.4 - 1), `${fluid.kind} ${profile.kind}`).toBeLessThan(0.02);
    }
});

test('of index 1 it is the Newtonian curve, by its exact series', () => {
  for (const [width, depth] of [
    [200e-6, 50e-6],
    [60e-6, 90e-6],
  ] as const) {
    const exact = perimeterCurve({ kind: 'rectangle' }, width, depth);
    const { meanShear } = sectionOf({ kind: 'rectangle' }, width, depth);
    const curve = thinPerimeterCurve(WATERY, { kind: 'rectangle' }, width, depth, 1)!;
    const peak = Math.max(...curve.shear);
    expect(peak / (Math.max(...exact.shear) / meanShear)).toBeCloseTo(1, 2);
    // the places too: the same box, the floor at 0
    for (const key of ['x', 'y'] as const) {
      expect(Math.min(...curve[key])).toBeCloseTo(Math.min(...exact[key]), 12);
      expect(Math.max(...curve[key])).toBeCloseTo(Math.max(...exact[key]), 12);
    }
  }
});

test('its peak is the one that the channel is told with, within what a table between solves is off by', () => {
  for (const fluid of [THIN, BLOOD, CASSON])
    for (const [profile, width, depth] of PROFILES.slice(0, 6)) {
      const flow = thinSection(fluid, profile, width, depth);
      const gradient = (0.4 * flow.section.perimeter) / flow.section.area;
      const told = 0.4 * flow.peaks(gradient).stress!;
      const drawn = Math.max(...thinPerimeterCurve(fluid, profile, width, depth, 0.4)!.shear);
      expect(Math.abs(drawn / told - 1), `${fluid.kind} ${profile.kind}`).toBeLessThan(0.02);
    }
});

test('far from the sides of a wide slit the wall bears G h / 2, whatever the fluid', () => {
  const width = 5e-3;
  const depth = 50e-6;
  const { perimeter, area } = sectionOf({ kind: 'rectangle' }, width, depth);
  for (const fluid of [THIN, BLOOD, CASSON]) {
    const curve = thinPerimeterCurve(fluid, { kind: 'rectangle' }, width, depth, 0.4)!;
    const gradient = (0.4 * perimeter) / area;
    expect(curve.shear[0]! / ((gradient * depth) / 2)).toBeCloseTo(1, 3);
  }
});

test('below its yield stress nothing flows and nothing is drawn', () => {
  expect(thinPerimeterCurve(CASSON, { kind: 'rectangle' }, 200e-6, 50e-6, 0.004)).toBeNull();
});
