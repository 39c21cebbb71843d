import type { Edge, Mesh } from '../../solver/mesh/mesh.ts';
import { meshShape } from '../../solver/mesh/mesh-shape.ts';
import { boundedFlow } from '../../solver/section/bounded-flow.ts';
import { etchedShape } from '../../solver/section/etched-shape.ts';
import type { Profile } from '../../solver/section/profile.ts';
import { rectangleSection } from '../../solver/section/rectangle.ts';
import { SectionCache } from '../../solver/section/section-cache.ts';
import { sectionOf } from '../../solver/section/section-of.ts';
import { SYMMETRY } from '../../solver/section/section-shape.ts';
import { sectionMesh, solveSection } from '../../solver/section/solve-section.ts';
import { taperMeans } from '../../solver/section/taper.ts';
import { Python } from './native/scipy.ts';
import { type BenchRow, timed } from './row.ts';

const RUNS = 15;
const ACCURACY = 1e-3;
const tan = (degrees: number): number => Math.tan((degrees * Math.PI) / 180);
const SILICON = (Math.atan(Math.SQRT2) * 180) / Math.PI;

/** The profiles among the published duct shapes, with their flow Q µ/G at depth 1. */
const SHAPES: readonly (readonly [string, Exclude<Profile, { kind: 'polygon' }>, number, number])[] = [
  ['triangle, apex 20°', { kind: 'triangle' }, 2 * tan(10), 0.0006020811],
  ['triangle, apex 40°', { kind: 'triangle' }, 2 * tan(20), 0.003575842],
  ['triangle, apex 90°', { kind: 'triangle' }, 2, 0.02608965],
  ['triangle, apex 120°', { kind: 'triangle' }, 2 * tan(60), 0.05857315],
  ['V-groove', { kind: 'trapezoid', wallAngle: SILICON }, Math.SQRT2, 0.01423706],
  ['trapezoid 54.7°, lid 2', { kind: 'trapezoid', wallAngle: SILICON }, 2, 0.04985284],
  ['trapezoid 54.7°, lid 3', { kind: 'trapezoid', wallAngle: SILICON }, 3, 0.1304589],
  ['trapezoid 54.7°, lid 5', { kind: 'trapezoid', wallAngle: SILICON }, 5, 0.2970001],
  ['trapezoid 54.7°, lid 10', { kind: 'trapezoid', wallAngle: SILICON }, 10, 0.7136666],
  ['trapezoid 75°', { kind: 'trapezoid', wallAngle: 75 }, 1 + 2 / tan(75), 0.05392551],
  ['trapezoid 85°', { kind: 'trapezoid', wallAngle: 85 }, 2 + 2 / tan(85), 0.1214485],
  ['trapezoid 60°', { kind: 'trapezoid', wallAngle: 60 }, 2 + 2 / tan(60), 0.1566711],
  ['isotropic etch, floor 0.5', { kind: 'rounded' }, 0.5, 0.1150143],
  ['isotropic etch, floor 1', { kind: 'rounded' }, 1, 0.1564662],
  ['isotropic etch, floor 2', { kind: 'rounded' }, 2, 0.2397456],
  ['isotropic etch, floor 10', { kind: 'rounded' }, 10, 0.9064099],
];

const median = (values: readonly number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];

/** What ours are off by at most when asked for ACCURACY (a note shows it); scipy is asked for the same. */
const EQUAL = 1e-4;

/** The coarsest mesh of ours on which the plain finite-element flow is within EQUAL of the published one. */
function equalMesh(profile: (typeof SHAPES)[number][1], width: number, flow: number): Mesh {
  const shape = etchedShape(profile, width, 1, '');
  for (let size = (0.5 * 4 * shape.area) / shape.perimeter; ; size *= 0.93) {
    const mesh = sectionMesh(shape, size, 6, '');
    if (1 - (2 * boundedFlow(shape, mesh).flow.lower) / flow <= EQUAL) return mesh;
  }
}

/** From profile to section (mesh, both bounds, shears, as often as it takes), against one plain solve by scipy. */
async function newProfiles(): Promise<BenchRow[]> {
  const python = await Python.start('sections.py');
  const ours: number[] = [];
  const ratios: number[] = [];
  const theirErrors: number[] = [];
  const ourErrors: number[] = [];
  const work = SHAPES.map(([, profile, width]) => () => {
    solveSection(etchedShape(profile, width, 1, ''), ACCURACY, '');
  });
  for (let warm = 0; warm < 10; warm += 1) for (const solve of work) solve();
  for (const [i, [, profile, width, flow]] of SHAPES.entries()) {
    if (python) {
      const mesh = equalMesh(profile, width, flow);
      const wall = new Set<number>();
      mesh.boundaryTag.forEach((tag, edge) => {
        if (tag !== SYMMETRY)
          for (const node of mesh.boundary.subarray(3 * edge, 3 * edge + 3)) wall.add(node);
      });
      const data = { x: [...mesh.x], y: [...mesh.y], triangles: [...mesh.triangles], wall: [...wall] };
      await python.ask(`mesh ${JSON.stringify(data)}`);
      theirErrors.push(Math.abs((2 * (await python.ask('flow'))) / flow - 1));
    }
    const shape = etchedShape(profile, width, 1, '');
    ourErrors.push(Math.abs(solveSection(shape, ACCURACY, '').conductance / flow - 1));
    const times: number[] = [];
    const theirs: number[] = [];
    for (let run = -3; run < RUNS; run += 1) {
      const mine = timed(work[i], 1, 0);
      const other = python ? await python.ask('solve') : Number.NaN;
      if (run < 0) continue;
      times.push(mine);
      theirs.push(other);
    }
    ours.push(median(times));
    ratios.push(median(times) / median(theirs));
  }
  python?.stop();
  const worst = (values: readonly number[]): string => Math.max(...values).toExponential(1);
  const compared = python
    ? {
        against: 'one solve of equal error by scipy (splu, one thread), meshing not counted',
        ratio: median(ratios),
        target: 1,
        note: `worst ratio ${Math.max(...ratios).toPrecision(3)}; worst error ${worst(ourErrors)}, scipy ${worst(theirErrors)}`,
      }
    : { note: 'no Python with scipy here: not compared (Debian: python3-scipy)' };
  return [
    {
      what: `new profile to 0.1 %, median of ${SHAPES.length} published shapes`,
      median: median(ours),
      unit: 'ms',
      runs: RUNS,
      target: 8,
    },
    {
      what: 'new profile to 0.1 %, slowest of them',
      median: Math.max(...ours),
      unit: 'ms',
      runs: RUNS,
      target: 20,
    },
    {
      what: 'the same against scipy, median of the ratios',
      median: median(ours),
      unit: 'ms',
      runs: RUNS,
      ...compared,
    },
  ];
}

function kept(): BenchRow[] {
  const cache = new SectionCache();
  const options = { cache };
  const profile = { kind: 'trapezoid', wallAngle: 60 } as const;
  const count = 1000;
  const other = { ...profile };
  // The same shape in ever new sizes, and the very same section again.
  let size = 1;
  const scaled = timed(() => {
    for (let i = 0; i < count; i += 1) {
      size *= 1.0000001;
      sectionOf(profile, 3e-4 * size, 1e-4 * size, '', options);
    }
  });
  const same = timed(() => {
    for (let i = 0; i < count; i += 1) sectionOf(other, 3e-4, 1e-4, '', options);
  });
  return [
    {
      what: 'section of a shape solved before, another size',
      median: scaled / count,
      unit: 'ms',
      runs: 9,
      target: 0.1,
    },
    { what: 'section asked for again', median: same / count, unit: 'ms', runs: 9, target: 0.1 },
  ];
}

/** 10,000 channels, every second one tapered, of 20 profiles with three widths each. */
function tapers(): BenchRow[] {
  const profiles: Profile[] = [];
  for (let i = 0; i < 20; i += 1) {
    profiles.push(i % 5 === 4 ? { kind: 'rounded' } : { kind: 'trapezoid', wallAngle: 50 + 1.7 * i });
  }
  const width = (k: number): number => (100 + 60 * (k % 3)) * 1e-6;
  const evaluate = (of: (i: number) => Profile): number => {
    let sum = 0;
    for (let i = 0; i < 10_000; i += 1) {
      const profile = of(i);
      const [w1, w2] = [width(i), width(i % 2 === 0 ? i : i + 1)];
      sum += taperMeans(profile, w1, w2, 4e-5).force;
      sum += sectionOf(profile, w1, 4e-5).meanShear + sectionOf(profile, w2, 4e-5).meanShear;
    }
    return sum;
  };
  const rectangle = { kind: 'rectangle' } as const;
  const start = performance.now();
  evaluate((i) => profiles[i % 20]);
  const first = performance.now() - start;
  const various: number[] = [];
  const plain: number[] = [];
  for (let run = -5; run < RUNS; run += 1) {
    const a = timed(() => evaluate((i) => profiles[i % 20]), 1, 0);
    const b = timed(() => evaluate(() => rectangle), 1, 0);
    if (run < 0) continue;
    various.push(a);
    plain.push(b);
  }
  return [
    {
      what: '10,000 channels of 20 profiles, half of them tapers',
      median: median(various),
      unit: 'ms',
      runs: RUNS,
      against: `the same with rectangles (${median(plain).toPrecision(3)} ms)`,
      ratio: median(various) / median(plain),
      target: 2,
      note: `first time, with all tables to be made: ${first.toPrecision(3)} ms`,
    },
  ];
}

function rectangles(): BenchRow {
  const count = 100_000;
  let sum = 0;
  const ms = timed(() => {
    for (let i = 0; i < count; i += 1) sum += rectangleSection(1 + (i % 97) / 30, 1).floorShear;
  });
  return {
    what: 'rectangle, all figures, exact series',
    median: (1000 * ms) / count,
    unit: 'µs',
    runs: 9,
    target: 3,
    note: sum > 0 ? '' : 'no sum',
  };
}

function meshing(): BenchRow {
  const loop = (corners: readonly (readonly [number, number, number?])[]): Edge[] =>
    corners.map(([x, y, bulge = 0], tag) => ({ x, y, bulge, tag }));
  const b = -Math.tan(Math.PI / 8);
  const shape = [
    loop([
      [-2, 0],
      [2.5, 0],
      [2.5, 1],
      [0.6, 1, b],
      [0.5, 1.1],
      [0.5, 3],
      [-0.5, 3],
      [-0.5, 1.1, b],
      [-0.6, 1],
      [-2, 1],
    ]),
  ];
  let triangles = 0;
  const ms = timed(
    () => {
      triangles = meshShape(shape, { size: 0.145, perQuarter: 8 }).triangles.length / 6;
    },
    RUNS,
    20,
  );
  return {
    what: `mesh of a junction with fillets, ${triangles} triangles, per thousand`,
    median: (1000 * ms) / triangles,
    unit: 'ms',
    runs: RUNS,
    target: 6,
  };
}

export default async function bench(): Promise<BenchRow[]> {
  return [rectangles(), ...(await newProfiles()), ...kept(), ...tapers(), meshing()];
}
