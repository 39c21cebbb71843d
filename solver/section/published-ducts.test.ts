import { verify } from '../../test/verify/row.ts';
import type { Edge } from '../mesh/mesh.ts';
import type { Profile } from './profile.ts';
import type { Section } from './section.ts';
import { sectionOf } from './section-of.ts';
import { type SectionShape, WALL } from './section-shape.ts';
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

const SECTIONS: Readonly<Record<string, () => Section>> = {
  'isosceles triangle, apex 20°': triangle(20),
  'isosceles triangle, apex 40°': triangle(40),
  'isosceles triangle, apex 60°': triangle(60),
  'isosceles triangle, apex 90°': triangle(90),
  'isosceles triangle, apex 120°': triangle(120),
  'right triangle 30-60-90': drawn(
    [
      [0, 0],
      [Math.tan(Math.PI / 6), 0],
      [0, 1],
    ],
    0.28867513459481287,
    2.7320508075688772,
  ),
  'circular sector, 30°': sector(30),
  'circular sector, 60°': sector(60),
  'quarter circle': sector(90),
  semicircle: segment(90),
  'circular segment, half-angle 30°': segment(30),
  'circular segment, half-angle 60°': segment(60),
  'regular hexagon': measured(
    [0, 1, 2, 3, 4, 5].map((k) => [Math.cos((k * Math.PI) / 3), Math.sin((k * Math.PI) / 3)]),
  ),
  'V-groove 54.74°': silicon(Math.SQRT2),
  'trapezoid 54.74°, lid 2': silicon(2),
  'trapezoid 54.74°, lid 3': silicon(3),
  'trapezoid 54.74°, lid 5': silicon(5),
  'trapezoid 54.74°, lid 10': silicon(10),
  'trapezoid 75°, floor 1': leaning(1, 75),
  'trapezoid 85°, floor 2': leaning(2, 85),
  'trapezoid 60°, floor 2': leaning(2, 60),
  'isotropic etch, floor 0.5': glass(0.5),
  'isotropic etch, floor 1': glass(1),
  'isotropic etch, floor 2': glass(2),
  'isotropic etch, floor 10': glass(10),
  'parabolic floor, lid 5': parabola(5),
  'parabolic floor, lid 10': parabola(10),
};

/** Shape: f·Re, u_max/u_m, tau_p/tau_m, area, perimeter, Q µ/G for the unit lengths given. */
const TABLE = `
isosceles triangle, apex 20°: 12.822076 2.368106 1.64941 0.17632698 2.38350719 0.0006020811
isosceles triangle, apex 40°: 13.222173 2.24852 1.54015 0.36397023 2.85629601 0.003575842
isosceles triangle, apex 60°: 13.333333 2.222222 1.5 0.57735027 3.46410162 0.009622504
isosceles triangle, apex 90°: 13.152562 2.263508 1.56772 1 4.82842712 0.02608965
isosceles triangle, apex 120°: 12.738498 2.378857 1.66757 1.73205081 7.46410162 0.05857315
right triangle 30-60-90: 13.031693 2.297958 1.59695 0.28867513 2.73205081 0.001978517
circular sector, 30°: 13.309937 2.270133 1.56056 0.26179939 2.52359878 0.001693477
circular sector, 60°: 14.171136 2.149016 1.42537 0.52359878 3.04719755 0.008727302
quarter circle: 14.768764 2.102342 1.35917 0.78539816 3.57079633 0.02058189
semicircle: 15.766831 2.061299 1.38921 1.57079633 5.14159265 0.0743892
circular segment, half-angle 30°: 15.598866 2.162372 1.4813 0.09058607 2.04719755 9.096237e-5
circular segment, half-angle 60°: 15.690507 2.110486 1.43903 0.61418485 3.82644591 0.008067875
regular hexagon: 15.054636 2.031313 1.22608 2.59807621 6 0.2588647
V-groove 54.74°: 13.30813 2.227793 1.52017 0.70710678 3.86370331 0.01423706
trapezoid 54.74°, lid 2: 13.678593 2.177745 1.49837 1.29289322 5.03527618 0.04985284
trapezoid 54.74°, lid 3: 14.935008 2.039978 1.45058 2.29289322 7.03527618 0.1304589
trapezoid 54.74°, lid 5: 17.499159 1.801183 1.28218 4.29289322 11.03527618 0.2970001
trapezoid 54.74°, lid 10: 20.330639 1.627665 1.13179 9.29289322 21.03527618 0.7136666
trapezoid 75°, floor 1: 14.251758 2.099402 1.42539 1.26794919 4.60645075 0.05392551
trapezoid 85°, floor 2: 15.675647 1.981082 1.39059 2.08748866 6.182617 0.1214485
trapezoid 60°, floor 2: 15.691569 1.969139 1.4005 2.57735027 7.46410162 0.1566711
isotropic etch, floor 0.5: 16.375268 2.01674 1.37098 2.07079633 6.14159265 0.1150143
isotropic etch, floor 1: 17.032657 1.955668 1.33892 2.57079633 7.14159265 0.1564662
isotropic etch, floor 2: 18.17987 1.843233 1.27013 3.57079633 9.14159265 0.2397456
isotropic etch, floor 10: 21.630648 1.59569 1.08642 11.57079633 25.14159265 0.9064099
parabolic floor, lid 5: 15.132018 2.172085 1.49729 3.33333333 10.49115042 0.177903
parabolic floor, lid 10: 15.427001 2.182956 1.4998 6.66666667 20.2606063 0.3743086
`;

const ROWS: readonly Row[] = TABLE.trim()
  .split('\n')
  .map((line) => {
    const [name, figures] = line.split(': ');
    const [fRe, top, peak, area, perimeter, q] = figures.split(' ').map(Number);
    return { name, section: SECTIONS[name], fRe, top, peak, area, perimeter, q };
  });

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
