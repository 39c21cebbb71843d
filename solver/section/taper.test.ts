import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { etchedShape } from './etched-shape.ts';
import { outlineOf } from './outline-of.ts';
import type { Profile } from './profile.ts';
import { varyingResistance } from './resistance-at.ts';
import { sectionOf } from './section-of.ts';
import { solveFlow } from './solve-section.ts';
import { taperMeans, taperResistance } from './taper.ts';

const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);
const SILICON = (Math.atan(Math.SQRT2) * 180) / Math.PI;

/** Solved directly to a bound of 2e-6, in a shape of depth 1. */
function direct(profile: Exclude<Profile, { kind: 'polygon' }>, width: number): number {
  const shape = etchedShape(profile, width, 1, '');
  const { conductance } = solveFlow(shape, 2e-6, '').solved;
  return (conductance + shape.extra / 12) * shape.unit ** 4;
}

for (const [profile, widths] of [
  [{ kind: 'trapezoid', wallAngle: SILICON }, [0.9, 1.5, 1.9, 2.6, 3.7, 7.3, 14]],
  [{ kind: 'rounded' }, [0.03, 0.4, 1.7, 6.1]],
  [{ kind: 'triangle' }, [0.4, 1.3, 3.3]],
] as const) {
  verify(
    {
      quantity: 'table of resistance against width, worst of a solve at other widths',
      check: 'exact',
      at: profile.kind,
      source: 'direct finite-element solutions with a proven bound of 2e-6',
      tolerance: 1e-5,
    },
    () => {
      const table = varyingResistance(profile, '');
      return Math.max(...widths.map((width) => relative(1 / table.at(width, 1, ''), direct(profile, width))));
    },
  );
}

verify(
  {
    quantity: 'resistance of a taper from a closed V to an open trapezoid',
    check: 'exact',
    at: '54.74°, width 0.5 to 3.5 depths',
    source: 'composite Gauss quadrature of direct solutions',
    tolerance: 2e-5,
  },
  () => {
    const profile = { kind: 'trapezoid', wallAngle: SILICON } as const;
    const closes = Math.SQRT2;
    // The V part in closed form: ∫ dw/(c w⁴).
    const v = direct(profile, closes) / closes ** 4;
    const closed = (1 / 0.5 ** 3 - 1 / closes ** 3) / (3 * v);
    // The open part: five-point Gauss on the width, in two halves.
    const nodes = [-0.906179845938664, -0.538469310105683, 0, 0.538469310105683, 0.906179845938664];
    const weights = [
      0.236926885056189, 0.478628670499366, 0.568888888888889, 0.478628670499366, 0.236926885056189,
    ];
    let open = 0;
    const breaks = [closes, 2.1, 3.5];
    for (let i = 1; i < breaks.length; i += 1) {
      const half = (breaks[i] - breaks[i - 1]) / 2;
      nodes.forEach((node, k) => {
        open += (half * weights[k]) / direct(profile, breaks[i - 1] + half * (1 + node));
      });
    }
    return relative(taperResistance(profile, 0.5, 3.5, 1, 1), (closed + open) / 3);
  },
);

test('a taper is the same from either end, and scales', () => {
  for (const profile of [
    { kind: 'trapezoid', wallAngle: 75 },
    { kind: 'rounded' },
    { kind: 'ellipse' },
  ] as const) {
    const r = taperResistance(profile, 1e-4, 3e-4, 5e-5, 1e-3);
    expect(relative(taperResistance(profile, 3e-4, 1e-4, 5e-5, 1e-3), r)).toBeLessThan(1e-13);
    expect(relative(taperResistance(profile, 1, 3, 0.5, 10) * 1e12, r)).toBeLessThan(1e-12);
  }
});

test('without a change of width a taper is a straight channel; a slight one lies within the section’s error', () => {
  for (const profile of [
    { kind: 'trapezoid', wallAngle: 60 },
    { kind: 'rounded' },
    { kind: 'triangle' },
  ] as const) {
    const section = sectionOf(profile, 2e-4, 1e-4);
    const straight = taperResistance(profile, 2e-4, 2e-4, 1e-4, 0.01);
    expect(relative(straight, 0.01 / section.conductance)).toBeLessThan(1e-15);
    const slight = taperResistance(profile, 2e-4, 2e-4 * (1 + 1e-9), 1e-4, 0.01);
    expect(relative(slight, 0.01 / section.conductance)).toBeLessThan(section.error + 1e-5);
  }
  const points = [
    [0, 0],
    [1e-4, 0],
    [1e-4, 5e-5],
    [0, 5e-5],
  ] as const;
  const polygon = { kind: 'polygon', points } as const;
  const constant = taperResistance(polygon, 1, 2, 3, 0.01);
  expect(relative(constant, 0.01 / sectionOf(polygon, 1, 3).conductance)).toBeLessThan(1e-15);
});

test('an ellipse tapers as its closed form says', () => {
  // ∫ 4(a² + b²)/(π a³b³) da with b fixed.
  const [a1, a2, b] = [1, 4, 0.7];
  const antiderivative = (a: number): number => Math.log(a) - b ** 2 / (2 * a * a);
  const wanted = ((4 / (Math.PI * b ** 3)) * (antiderivative(a2) - antiderivative(a1))) / (a2 - a1);
  expect(relative(taperResistance({ kind: 'ellipse' }, 2 * a1, 2 * a2, 2 * b, 1), wanted)).toBeLessThan(
    1e-10,
  );
});

test('what no section can be, no taper can be', () => {
  const taper = (profile: Profile, w1: number, w2: number) => () =>
    taperResistance(profile, w1, w2, 1, 1, 'feed');
  expect(taper({ kind: 'trapezoid', wallAngle: 95 }, 1, 2)).toThrow(/^feed: A wall angle of 95°/);
  expect(taper({ kind: 'rounded' }, 1, 0)).toThrow(/^feed: The width/);
  expect(taper({ kind: 'circle' }, 1, 2)).toThrow(/^feed: A round bore/);
  expect(taper({ kind: 'triangle' }, 1e-4, 2)).toThrow(/^feed: A triangle/);
  // Between the thinnest triangle that is solved and its counterpart that is widest.
  expect(taper({ kind: 'triangle' }, 0.02, 2)).toThrow(/^feed: A triangle/);
  expect(() => taperMeans({ kind: 'triangle' }, 2, 200, 1, 'other')).toThrow(/^other: A triangle/);
});

test('means of area, perimeter and driving force along a taper', () => {
  const profiles: Profile[] = [
    { kind: 'rectangle' },
    { kind: 'ellipse' },
    { kind: 'rounded' },
    { kind: 'triangle' },
    { kind: 'trapezoid', wallAngle: SILICON },
  ];
  for (const profile of profiles) {
    const means = taperMeans(profile, 1, 2.4, 1);
    // Composite midpoint rule over solved sections.
    let [area, perimeter, force] = [0, 0, 0];
    const n = 24;
    for (let i = 0; i < n; i += 1) {
      const section = sectionOf(profile, 1 + (1.4 * (i + 0.5)) / n, 1);
      area += section.area / n;
      perimeter += section.perimeter / n;
      force += section.area / section.conductance / n;
    }
    expect(relative(means.area, area)).toBeLessThan(3e-4);
    expect(relative(means.perimeter, perimeter)).toBeLessThan(3e-4);
    expect(relative(means.force, force)).toBeLessThan(3e-3);
    expect(relative(taperMeans(profile, 2.4, 1, 1).force, means.force)).toBeLessThan(1e-12);
  }
});

test('closed forms of area and perimeter are those of the shapes that are solved', () => {
  const out = new Float64Array(2);
  const profiles = [
    { kind: 'rectangle' },
    { kind: 'circle' },
    { kind: 'ellipse' },
    { kind: 'rounded' },
    { kind: 'triangle' },
    { kind: 'trapezoid', wallAngle: 50 },
  ] as const;
  for (const profile of profiles) {
    for (const width of profile.kind === 'circle' ? [2] : [0.5, 2, 4, 40]) {
      outlineOf(profile, width, 2, out);
      const section = sectionOf(profile, width, 2);
      expect(relative(out[0], section.area)).toBeLessThan(1e-12);
      expect(relative(out[1], section.perimeter)).toBeLessThan(1e-12);
    }
  }
});
