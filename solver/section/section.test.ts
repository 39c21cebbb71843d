import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import type { Edge } from '../mesh/mesh.ts';
import { Problem } from '../problem/problem.ts';
import { ellipseSection } from './ellipse.ts';
import { equilateralSection } from './equilateral.ts';
import { etchedShape } from './etched-shape.ts';
import type { Profile } from './profile.ts';
import { rectangleSection } from './rectangle.ts';
import type { Section } from './section.ts';
import { sectionOf } from './section-of.ts';
import { type SectionShape, SYMMETRY, WALL } from './section-shape.ts';
import { solveSection } from './solve-section.ts';
import { scaleSection } from './unit-section.ts';

const radians = (degrees: number): number => (degrees * Math.PI) / 180;
const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);
const ACCURACY = 1e-4;

const COLLOCATION =
  'recomputed by rational-function boundary collocation to 1e-9; Shah & London 1978 ch. VIII and X where known, from memory';

interface Row {
  readonly name: string;
  readonly section: () => Section;
  readonly fRe: number;
  readonly top: number;
  readonly peak: number;
  readonly area: number;
  readonly perimeter: number;
  /** Q µ/G for the unit lengths given. */
  readonly q: number;
}

const etched =
  (profile: Profile, width: number, depth = 1) =>
  (): Section =>
    sectionOf(profile, width, depth, '', { accuracy: ACCURACY });
const triangle = (apex: number) => etched({ kind: 'triangle' }, 2 * Math.tan(radians(apex / 2)));
const SILICON = (Math.atan(Math.SQRT2) * 180) / Math.PI;
const silicon = (lid: number) => etched({ kind: 'trapezoid', wallAngle: SILICON }, lid);
const leaning = (floor: number, angle: number) =>
  etched({ kind: 'trapezoid', wallAngle: angle }, floor + 2 / Math.tan(radians(angle)));
const glass = (mask: number) => etched({ kind: 'rounded' }, mask);
const measured = (points: readonly (readonly [number, number])[]) => etched({ kind: 'polygon', points }, 1);

/** Any outline with arcs, solved as the profiles are. */
function drawn(corners: readonly (readonly [number, number, number?])[], area: number, perimeter: number) {
  return (): Section => {
    const shape: SectionShape = {
      key: 'drawn',
      shape: [corners.map(([x, y, bulge = 0]): Edge => ({ x, y, bulge, tag: WALL }))],
      symmetric: false,
      stretch: 1,
      unit: 1,
      origin: [0, 0],
      extra: 0,
      area,
      perimeter,
      width: 1,
      depth: 1,
      floorMiddle: [corners[0][0], corners[0][1]],
      sideMiddle: [corners[1][0], corners[1][1]],
      obtuse: [],
      reentrant: [],
      moved: 0,
      averaged: 0,
    };
    return scaleSection(shape, solveSection(shape, ACCURACY, ''));
  };
}
const sector = (angle: number) => {
  const [c, s] = [Math.cos(radians(angle)), Math.sin(radians(angle))];
  const bulge = Math.tan(radians(angle) / 4);
  return drawn(
    [
      [0, 0],
      [1, 0, bulge],
      [c, s],
    ],
    radians(angle) / 2,
    2 + radians(angle),
  );
};
const segment = (half: number) => {
  const a = radians(half);
  const [c, s] = [Math.cos(a), Math.sin(a)];
  return drawn(
    [
      [c, -s, Math.tan(a / 2)],
      [c, s],
    ],
    a - s * c,
    2 * a + 2 * s,
  );
};
const parabola = (width: number) =>
  measured(
    Array.from({ length: 361 }, (_, i) => {
      // Chords of the same sagitta all along.
      const x = (width * (i - 180)) / 360;
      return [x, ((2 * x) / width) ** 2] as const;
    }),
  );

const ROWS: readonly Row[] = [
  ...(
    [
      [
        'isosceles triangle, apex 20°',
        triangle(20),
        12.822076,
        2.368106,
        1.64941,
        0.17632698,
        2.38350719,
        0.0006020811,
      ],
      [
        'isosceles triangle, apex 40°',
        triangle(40),
        13.222173,
        2.24852,
        1.54015,
        0.36397023,
        2.85629601,
        0.003575842,
      ],
      [
        'isosceles triangle, apex 60°',
        triangle(60),
        13.333333,
        2.222222,
        1.5,
        0.57735027,
        3.46410162,
        0.009622504,
      ],
      ['isosceles triangle, apex 90°', triangle(90), 13.152562, 2.263508, 1.56772, 1, 4.82842712, 0.02608965],
      [
        'isosceles triangle, apex 120°',
        triangle(120),
        12.738498,
        2.378857,
        1.66757,
        1.73205081,
        7.46410162,
        0.05857315,
      ],
      [
        'right triangle 30-60-90',
        drawn(
          [
            [0, 0],
            [Math.tan(Math.PI / 6), 0],
            [0, 1],
          ],
          0.28867513459481287,
          2.7320508075688772,
        ),
        13.031693,
        2.297958,
        1.59695,
        0.28867513,
        2.73205081,
        0.001978517,
      ],
      ['circular sector, 30°', sector(30), 13.309937, 2.270133, 1.56056, 0.26179939, 2.52359878, 0.001693477],
      ['circular sector, 60°', sector(60), 14.171136, 2.149016, 1.42537, 0.52359878, 3.04719755, 0.008727302],
      ['quarter circle', sector(90), 14.768764, 2.102342, 1.35917, 0.78539816, 3.57079633, 0.02058189],
      ['semicircle', segment(90), 15.766831, 2.061299, 1.38921, 1.57079633, 5.14159265, 0.0743892],
      [
        'circular segment, half-angle 30°',
        segment(30),
        15.598866,
        2.162372,
        1.4813,
        0.09058607,
        2.04719755,
        9.096237e-5,
      ],
      [
        'circular segment, half-angle 60°',
        segment(60),
        15.690507,
        2.110486,
        1.43903,
        0.61418485,
        3.82644591,
        0.008067875,
      ],
      [
        'regular hexagon',
        measured([0, 1, 2, 3, 4, 5].map((k) => [Math.cos((k * Math.PI) / 3), Math.sin((k * Math.PI) / 3)])),
        15.054636,
        2.031313,
        1.22608,
        2.59807621,
        6,
        0.2588647,
      ],
      [
        'V-groove 54.74°',
        silicon(Math.SQRT2),
        13.30813,
        2.227793,
        1.52017,
        Math.SQRT1_2,
        3.86370331,
        0.01423706,
      ],
      [
        'trapezoid 54.74°, lid 2',
        silicon(2),
        13.678593,
        2.177745,
        1.49837,
        1.29289322,
        5.03527618,
        0.04985284,
      ],
      [
        'trapezoid 54.74°, lid 3',
        silicon(3),
        14.935008,
        2.039978,
        1.45058,
        2.29289322,
        7.03527618,
        0.1304589,
      ],
      [
        'trapezoid 54.74°, lid 5',
        silicon(5),
        17.499159,
        1.801183,
        1.28218,
        4.29289322,
        11.03527618,
        0.2970001,
      ],
      [
        'trapezoid 54.74°, lid 10',
        silicon(10),
        20.330639,
        1.627665,
        1.13179,
        9.29289322,
        21.03527618,
        0.7136666,
      ],
      [
        'trapezoid 75°, floor 1',
        leaning(1, 75),
        14.251758,
        2.099402,
        1.42539,
        1.26794919,
        4.60645075,
        0.05392551,
      ],
      [
        'trapezoid 85°, floor 2',
        leaning(2, 85),
        15.675647,
        1.981082,
        1.39059,
        2.08748866,
        6.182617,
        0.1214485,
      ],
      [
        'trapezoid 60°, floor 2',
        leaning(2, 60),
        15.691569,
        1.969139,
        1.4005,
        2.57735027,
        7.46410162,
        0.1566711,
      ],
      [
        'isotropic etch, floor 0.5',
        glass(0.5),
        16.375268,
        2.01674,
        1.37098,
        2.07079633,
        6.14159265,
        0.1150143,
      ],
      ['isotropic etch, floor 1', glass(1), 17.032657, 1.955668, 1.33892, 2.57079633, 7.14159265, 0.1564662],
      ['isotropic etch, floor 2', glass(2), 18.17987, 1.843233, 1.27013, 3.57079633, 9.14159265, 0.2397456],
      [
        'isotropic etch, floor 10',
        glass(10),
        21.630648,
        1.59569,
        1.08642,
        11.57079633,
        25.14159265,
        0.9064099,
      ],
      [
        'parabolic floor, lid 5',
        parabola(5),
        15.132018,
        2.172085,
        1.49729,
        3.33333333,
        10.49115042,
        0.177903,
      ],
      [
        'parabolic floor, lid 10',
        parabola(10),
        15.427001,
        2.182956,
        1.4998,
        6.66666667,
        20.2606063,
        0.3743086,
      ],
    ] as const
  ).map(([name, section, fRe, top, peak, area, perimeter, q]) => ({
    name,
    section,
    fRe,
    top,
    peak,
    area,
    perimeter,
    q,
  })),
];

const solved = new Map<string, Section>();
function of(row: Row): Section {
  const known = solved.get(row.name) ?? row.section();
  solved.set(row.name, known);
  return known;
}

for (const row of ROWS) {
  const exact = row.name.includes('apex 60°');
  const claim = { check: 'published', at: row.name, source: COLLOCATION } as const;
  verify({ ...claim, quantity: 'f·Re', tolerance: 1e-4 }, () => relative(of(row).frictionReynolds, row.fRe));
  verify({ ...claim, quantity: 'resistance', tolerance: 1e-4 }, () => relative(of(row).conductance, row.q));
  verify({ ...claim, quantity: 'area and perimeter', tolerance: 2e-5 }, () =>
    Math.max(relative(of(row).area, row.area), relative(of(row).perimeter, row.perimeter)),
  );
  verify({ ...claim, quantity: 'peak over mean velocity', tolerance: 2e-4 }, () =>
    relative(of(row).peakVelocity, row.top),
  );
  verify({ ...claim, quantity: 'peak over mean wall shear', tolerance: 1e-3 }, () =>
    relative(of(row).peakShear! / of(row).meanShear, row.peak),
  );
  if (exact) continue;
  verify(
    {
      quantity: 'error of the resistance over its stated bound',
      check: 'band',
      at: row.name,
      source: COLLOCATION,
      tolerance: 1,
    },
    // The digits printed are good to a few 1e-7; the parabola's chords are the outline's, not the solver's.
    () =>
      Math.max(0, relative(of(row).conductance, row.q) - (row.name.startsWith('parab') ? 3e-5 : 5e-7)) /
      of(row).error,
  );
  verify(
    {
      quantity: 'error of the peak wall shear over its estimate',
      check: 'band',
      at: row.name,
      source: COLLOCATION,
      tolerance: 1,
    },
    () => Math.max(0, relative(of(row).peakShear! / of(row).meanShear, row.peak) - 2e-5) / of(row).shearError,
  );
}

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
