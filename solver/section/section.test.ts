import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { Problem } from '../problem/problem.ts';
import { ellipseSection } from './ellipse.ts';
import { equilateralSection } from './equilateral.ts';
import { etchedShape } from './etched-shape.ts';
import type { Profile } from './profile.ts';
import { rectangleSection } from './rectangle.ts';
import type { Section } from './section.ts';
import { sectionOf } from './section-of.ts';
import { SYMMETRY } from './section-shape.ts';
import { solveSection } from './solve-section.ts';
import { scaleSection } from './unit-section.ts';

const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);
const ACCURACY = 1e-4;
const SILICON = (Math.atan(Math.SQRT2) * 180) / Math.PI;

/** Shapes that have both a closed form or series and a finite-element solution. */
const BOTH: readonly (readonly [
  string,
  Profile & { kind: 'rectangle' | 'circle' | 'ellipse' | 'triangle' },
  number,
  number,
  () => Section,
])[] = [
  ['square', { kind: 'rectangle' }, 1, 1, () => rectangleSection(1, 1)],
  ['rectangle 1 : 2', { kind: 'rectangle' }, 2, 1, () => rectangleSection(2, 1)],
  ['rectangle 5 : 1', { kind: 'rectangle' }, 1, 5, () => rectangleSection(1, 5)],
  ['rectangle 1 : 10', { kind: 'rectangle' }, 10, 1, () => rectangleSection(10, 1)],
  ['rectangle 1 : 25', { kind: 'rectangle' }, 25, 1, () => rectangleSection(25, 1)],
  ['circle', { kind: 'circle' }, 1, 1, () => ellipseSection(1, 1)],
  ['ellipse 2 : 1', { kind: 'ellipse' }, 2, 1, () => ellipseSection(2, 1)],
  ['ellipse 1 : 4', { kind: 'ellipse' }, 0.25, 1, () => ellipseSection(0.25, 1)],
  ['ellipse 10 : 1', { kind: 'ellipse' }, 10, 1, () => ellipseSection(10, 1)],
  ['equilateral triangle', { kind: 'triangle' }, 1, Math.sqrt(3) / 2, () => equilateralSection(1)],
];
for (const [name, profile, width, depth, exact] of BOTH) {
  const byElements = (): Section => {
    const shape = etchedShape(profile, width, depth, '');
    return scaleSection(shape, solveSection(shape, ACCURACY, ''));
  };
  const claim = { check: 'exact', at: name, source: 'closed form or series: White 2006 sec. 3-3' } as const;
  verify({ ...claim, quantity: 'resistance by finite elements', tolerance: 1e-4 }, () =>
    relative(byElements().conductance, exact().conductance),
  );
  verify({ ...claim, quantity: 'bound of the finite-element error over the error', tolerance: 1 }, () => {
    const section = byElements();
    return relative(section.conductance, exact().conductance) / section.error;
  });
  verify({ ...claim, quantity: 'peak velocity by finite elements', tolerance: 2e-4 }, () =>
    relative(byElements().peakVelocity, exact().peakVelocity),
  );
  verify({ ...claim, quantity: 'peak, floor and side shear by finite elements', tolerance: 1e-3 }, () => {
    const [got, wanted] = [byElements(), exact()];
    return Math.max(
      relative(got.peakShear!, wanted.peakShear!),
      Math.abs(got.floorShear - wanted.floorShear) / wanted.meanShear,
      Math.abs(got.sideShear - wanted.sideShear) / wanted.meanShear,
    );
  });
  verify(
    { ...claim, quantity: 'area, perimeter, width and depth of the etched shape', tolerance: 1e-12 },
    () => {
      const [got, wanted] = [byElements(), exact()];
      return Math.max(
        relative(got.area, wanted.area),
        relative(got.perimeter, wanted.perimeter),
        relative(got.width, wanted.width),
        relative(got.depth, wanted.depth),
      );
    },
  );
}

for (const [ratio, fRe, peak, least] of [
  [0.1, 19.313866, 1.280795, 0.12808],
  [0.25, 18.239959, 1.284987, 0.321247],
  [0.5, 16.823304, 1.233572, 0.616786],
  [0.75, 16.160989, 1.125722, 0.844291],
  [0.8, 16.09793, 1.100951, 0.880761],
] as const) {
  verify(
    {
      quantity: 'f·Re, peak and least shear of an ellipse',
      check: 'published',
      at: `b/a = ${ratio}`,
      source: 'White 2006 sec. 3-3, closed form evaluated',
      tolerance: 4e-6,
    },
    () => {
      const section = sectionOf({ kind: 'ellipse' }, 1e-4, ratio * 1e-4);
      return Math.max(
        relative(section.frictionReynolds, fRe),
        relative(section.peakShear! / section.meanShear, peak),
        relative(section.sideShear / section.meanShear, least),
        relative(section.peakVelocity, 2),
      );
    },
  );
}

/** µ 1 mPa·s, length 10 mm; µm; Pa·s/m³. */
for (const [name, profile, width, depth, resistance] of [
  ['circle 100 µm', { kind: 'circle' }, 100, 100, 4.0743665e12],
  ['ellipse 200 × 100 µm', { kind: 'ellipse' }, 200, 100, 1.2732395e12],
  ['equilateral triangle, side 100 µm', { kind: 'triangle' }, 100, 50 * Math.sqrt(3), 1.8475209e13],
  [
    '54.74° trapezoid, depth 50 µm, lid 150 µm',
    { kind: 'trapezoid', wallAngle: SILICON },
    150,
    50,
    1.2264399e13,
  ],
  ['isotropic etch, mask 50 µm, depth 50 µm', { kind: 'rounded' }, 50, 50, 1.0225853e13],
] as const) {
  verify(
    {
      quantity: 'resistance, worked',
      check: 'published',
      at: name,
      source: 'White 2006 sec. 3-3 and Bruus 2008 ch. 3, closed form; etched shapes by boundary collocation',
      tolerance: 2e-5,
    },
    () => {
      const section = sectionOf(profile, width * 1e-6, depth * 1e-6, '', { accuracy: 3e-5 });
      return relative((1e-3 * 0.01) / section.conductance, resistance);
    },
  );
}

verify(
  {
    quantity: 'resistance of a half-round channel: an isotropic etch through a slit',
    check: 'published',
    at: 'R = 50 µm, 10 mm, mask 0.05 nm',
    source: 'semicircle by boundary collocation; S&L 1978 ch. X gives its f·Re as 15.767, from memory',
    tolerance: 2e-5,
  },
  () => {
    const section = sectionOf({ kind: 'rounded' }, 5e-11, 5e-5, '', { accuracy: 3e-5 });
    return relative((1e-3 * 0.01) / section.conductance, 2.15085e13);
  },
);
verify(
  {
    quantity: 'resistance of a parabolic floor, worked',
    check: 'published',
    at: '200 µm wide, 20 µm deep, 10 mm',
    source: 'boundary collocation',
    tolerance: 1e-4,
  },
  () => {
    const points = Array.from({ length: 361 }, (_, i): [number, number] => {
      const x = (i - 180) / 180;
      return [1e-4 * x, 2e-5 * x * x];
    });
    const section = sectionOf({ kind: 'polygon', points }, 1, 1, '', { accuracy: ACCURACY });
    return relative((1e-3 * 0.01) / section.conductance, 1.6697452e14);
  },
);

test('scale changes nothing but units, whatever the size', () => {
  const profile = { kind: 'trapezoid', wallAngle: 70 } as const;
  const a = sectionOf(profile, 3, 1);
  const b = sectionOf(profile, 3e-5, 1e-5);
  expect(relative(b.conductance, a.conductance * 1e-20)).toBeLessThan(1e-12);
  expect(relative(b.peakShear!, a.peakShear! * 1e-5)).toBeLessThan(1e-12);
  expect(b.frictionReynolds).toBeCloseTo(a.frictionReynolds, 10);
});

test('a wide flat middle is put back exactly: wide shapes join on smoothly and tend to plates', () => {
  for (const profile of [{ kind: 'rounded' }, { kind: 'trapezoid', wallAngle: 60 }] as const) {
    const at = (width: number): Section => sectionOf(profile, width, 1, '', { accuracy: 1e-5 });
    // Slope of the conductance with width is that of plates, 1/12.
    const [a, b] = [at(30), at(31)];
    expect((b.conductance - a.conductance) * 12).toBeCloseTo(1, 9);
    expect(b.area - a.area).toBeCloseTo(1, 9);
    expect(b.perimeter - a.perimeter).toBeCloseTo(2, 9);
    expect(b.width - a.width).toBeCloseTo(1, 9);
    expect(at(1e6).frictionReynolds).toBeCloseTo(24, 3);
    expect(at(1e6).peakVelocity).toBeCloseTo(1.5, 4);
    expect(at(1e6).peakShear).toBeCloseTo(0.5, 5);
  }
});

test('a mask too narrow for its depth closes to a V, which stops above the floor of its layer', () => {
  const section = sectionOf({ kind: 'trapezoid', wallAngle: SILICON }, 1e-4, 2e-4);
  expect(section.depth).toBeCloseTo(1e-4 / Math.SQRT2, 12);
  expect(section.conductance).toBeCloseTo(
    sectionOf({ kind: 'triangle' }, 1e-4, section.depth).conductance,
    30,
  );
  expect(section.peakAt[1]).toBeGreaterThan(2e-4 - section.depth);
  expect(section.peakAt[1]).toBeLessThan(2e-4);
  expect(section.floorShear).toBe(0);
});

test.each<[Profile, number, number, RegExp]>([
  [{ kind: 'rectangle' }, 0, 1, /width of the cross-section is 0/],
  [{ kind: 'rectangle' }, 1, -1, /depth of the cross-section is -1/],
  [{ kind: 'rounded' }, Number.NaN, 1, /width of the cross-section is NaN/],
  [{ kind: 'ellipse' }, 1, Number.POSITIVE_INFINITY, /depth of the cross-section is Infinity/],
  [{ kind: 'circle' }, 1e-4, 2e-4, /round bore/],
  [{ kind: 'trapezoid', wallAngle: 0 }, 1, 1, /wall angle of 0°/],
  [{ kind: 'trapezoid', wallAngle: 90 }, 1, 1, /wall angle of 90°/],
  [{ kind: 'trapezoid', wallAngle: 120 }, 1, 1, /wall angle of 120°/],
  [{ kind: 'trapezoid', wallAngle: Number.NaN }, 1, 1, /wall angle of NaN°/],
  [{ kind: 'triangle' }, 1e-3, 1, /too thin/],
  [{ kind: 'triangle' }, 1e3, 1, /too thin/],
])('%j %f × %f is refused', (profile, width, depth, what) => {
  try {
    sectionOf(profile, width, depth, 'layer flow');
    expect.unreachable();
  } catch (error) {
    expect(error).toBeInstanceOf(Problem);
    expect(error).toMatchObject({ kind: 'profile', where: 'layer flow' });
    expect((error as Problem).what).toMatch(what);
    expect((error as Problem).remedy.length).toBeGreaterThan(10);
  }
});

test('mirror lines are the only boundary that is no wall', () => {
  for (const profile of [{ kind: 'rounded' }, { kind: 'triangle' }] as const) {
    const [outline] = etchedShape(profile, 1, 1, '').shape;
    expect(outline.filter((edge) => edge.tag === SYMMETRY)).toHaveLength(1);
  }
});
