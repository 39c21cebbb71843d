import { describe, expect, test } from 'vitest';
import { verify } from '../../../test/verify/row.ts';
import { BLOOD_CARREAU, BLOOD_CASSON } from '../../fluid/reference.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import type { Profile } from '../profile.ts';
import { thinSection } from './thin-section.ts';

const um = 1e-6;
const MODELS: readonly (readonly [string, ShearModel])[] = [
  ['power law', { kind: 'power-law', consistency: 0.01, index: 0.6 }],
  ['Carreau, blood', BLOOD_CARREAU],
  ['Casson, blood', BLOOD_CASSON],
];
const circle = Array.from({ length: 180 }, (_, i): [number, number] => {
  const turn = (i * Math.PI) / 90;
  // Vertices a little out, so that the polygon has the circle's area.
  const radius = 100 * um * Math.sqrt(Math.PI / 90 / Math.sin(Math.PI / 90));
  return [radius * Math.cos(turn), radius * Math.sin(turn)];
});
const corners = [
  [0, 0],
  [200, 0],
  [200, 50],
  [0, 50],
].map(([x, y]): [number, number] => [x * um, y * um]);

const two = new Float64Array(2);
interface Case {
  readonly profile: Profile;
  readonly width: number;
  readonly depth: number;
}
const tube: Case = { profile: { kind: 'circle' }, width: 200 * um, depth: 200 * um };
const box: Case = { profile: { kind: 'rectangle' }, width: 200 * um, depth: 50 * um };

/** Worst difference of flow, and of the peaks, over three decades of gradient above yielding. */
function differences(model: ShearModel, one: Case, other: Case) {
  const a = thinSection(model, one.profile, one.width, one.depth);
  const b = thinSection(model, other.profile, other.width, other.depth);
  let flow = 0;
  let peaks = 0;
  for (const gradient of [2e3, 1e4, 1e5, 1e6]) {
    a.flow(gradient, two);
    const [mine] = two;
    b.flow(gradient, two);
    flow = Math.max(flow, Math.abs(mine / two[0] - 1));
    const p = a.peaks(gradient);
    const q = b.peaks(gradient);
    peaks = Math.max(peaks, Math.abs(p.stress! / q.stress! - 1), Math.abs(p.velocity / q.velocity - 1));
  }
  return { flow, peaks };
}

for (const [name, model] of MODELS) {
  for (const [at, one, other, source] of [
    [
      'a circle traced by 180 points',
      { ...tube, profile: { kind: 'polygon', points: circle } },
      tube,
      'closed form',
    ],
    [
      'a rectangle traced by its corners',
      { ...box, profile: { kind: 'polygon', points: corners } },
      box,
      'grid of a quarter',
    ],
    [
      'walls at 89.999°',
      { ...box, profile: { kind: 'trapezoid', wallAngle: 89.999 } },
      box,
      'grid of a quarter',
    ],
    ['a round ellipse', { ...tube, profile: { kind: 'ellipse' } }, tube, 'closed form'],
  ] as const) {
    verify(
      {
        quantity: 'flow of a shear-thinning fluid through a meshed section',
        check: 'exact',
        at: `${name}, ${at}`,
        source,
        tolerance: 8e-4,
      },
      () => differences(model, one, other).flow,
    );
    test(`peaks of ${name}, ${at}`, () => {
      expect(differences(model, one, other).peaks).toBeLessThan(0.015);
    });
  }
}

describe.each(MODELS.slice(0, 2))('%s', (_, model) => {
  test.each<[string, Profile]>([
    ['rectangle', { kind: 'rectangle' }],
    ['rounded', { kind: 'rounded' }],
    ['trapezoid', { kind: 'trapezoid', wallAngle: 60 }],
  ])('%s: where the flat middle is left to plates, nothing jumps', (_kind, profile) => {
    const depth = 40 * um;
    const flows = [9.8, 9.9, 10, 10.1, 11, 11.1, 11.2].map((ratio) => {
      thinSection(model, profile, ratio * depth, depth).flow(2e4, two);
      return { ratio, flow: two[0] };
    });
    // Every further depth of flat middle carries the same.
    const [{ ratio: r0, flow: q0 }, { ratio: r1, flow: q1 }] = [flows[0], flows[flows.length - 1]];
    for (const { ratio, flow } of flows) {
      expect(flow / (q0 + ((q1 - q0) * (ratio - r0)) / (r1 - r0))).toBeCloseTo(1, 3);
    }
  });

  test('a wider section carries more, across every step of the aspect ratio', () => {
    let before = 0;
    for (let width = 10; width < 900; width *= 1.07) {
      thinSection(model, { kind: 'rectangle' }, width * um, 60 * um).flow(3e4, two);
      expect(two[0]).toBeGreaterThan(before);
      before = two[0];
    }
  });
});

test('a section with a re-entrant corner has a flow and no peak', () => {
  const points = [
    [0, 0],
    [200, 0],
    [200, 50],
    [100, 50],
    [100, 150],
    [0, 150],
  ].map(([x, y]): [number, number] => [x * um, y * um]);
  const section = thinSection(BLOOD_CARREAU, { kind: 'polygon', points }, 0, 0);
  section.flow(1e4, two);
  expect(two[0]).toBeGreaterThan(0);
  expect(section.peaks(1e4).stress).toBeNull();
});
