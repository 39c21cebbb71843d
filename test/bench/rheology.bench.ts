import { BLOOD_CARREAU, BLOOD_CASSON } from '../../solver/fluid/reference.ts';
import type { ShearModel } from '../../solver/fluid/spec.ts';
import type { DuctLaw } from '../../solver/network/law.ts';
import { prepareNetwork } from '../../solver/network/prepare.ts';
import { solveNetwork } from '../../solver/network/solve-network.ts';
import { solveNonlinear } from '../../solver/network/solve-nonlinear.ts';
import type { NetworkSpec } from '../../solver/network/spec.ts';
import { type DuctShape, ductLaws, ordinaryViscosity } from '../../solver/section/rheology/duct-law.ts';
import type { Rheology } from '../../solver/section/rheology/local.ts';
import { taperResistance } from '../../solver/section/taper.ts';
import type { BenchRow } from './row.ts';

const RUNS = 9;
const um = 1e-6;
const SIDE = 23;
const roof = { modulus: 2e6, thickness: 5e-3, poisson: 0.5 } as const;

/** A square grid of 2 SIDE (SIDE − 1) = 1012 channels: 20 rectangles, every fifth a taper; pressures at two corners. */
function grid(soft: boolean): { shapes: DuctShape[]; from: Int32Array; to: Int32Array } {
  const ends: [number, number][] = [];
  for (let row = 0; row < SIDE; row += 1) {
    for (let column = 0; column < SIDE; column += 1) {
      const node = row * SIDE + column;
      if (column + 1 < SIDE) ends.push([node, node + 1]);
      if (row + 1 < SIDE) ends.push([node, node + SIDE]);
    }
  }
  const shapes = ends.map((_, k): DuctShape => {
    const first = (100 + 15 * (k % 20)) * um;
    const last = k % 5 === 0 ? first * 1.6 : first;
    const shape = { profile: { kind: 'rectangle' as const }, width: [first, last] as const, depth: 50 * um };
    return { ...shape, length: (1 + (k % 7) / 5) * 1e-3, ...(soft ? { roof } : {}) };
  });
  return {
    shapes,
    from: Int32Array.from(ends, ([a]) => a),
    to: Int32Array.from(ends, ([, b]) => b),
  };
}

function specOf(rheology: Rheology, { shapes, from, to }: ReturnType<typeof grid>): NetworkSpec {
  const viscosity = ordinaryViscosity(rheology);
  return {
    nodeCount: SIDE * SIDE,
    ductFrom: from,
    ductTo: to,
    resistance: Float64Array.from(
      shapes,
      ({ profile, width, depth, length }) =>
        viscosity * taperResistance(profile, width[0], width[1], depth, length),
    ),
    blocks: [],
    drives: [
      { node: 0, kind: 'pressure', value: 20e3, series: 0 },
      { node: SIDE * SIDE - 1, kind: 'pressure', value: 0, series: 0 },
    ],
  };
}

const median = (times: number[]): number => times.sort((a, b) => a - b)[times.length >> 1];

const clock = (work: () => void): number => {
  const start = performance.now();
  work();
  return performance.now() - start;
};

function compared(what: string, rheology: Rheology, soft: boolean, target?: number): BenchRow[] {
  const network = grid(soft);
  const spec = specOf(rheology, network);
  const made = ductLaws(rheology);
  let laws: DuctLaw[] = [];
  const tables = clock(() => {
    laws = network.shapes.map((shape) => made.law(shape));
    solveNonlinear(spec, laws);
  });
  const prepared = prepareNetwork(spec);
  const ours: number[] = [];
  const linear: number[] = [];
  let steps = 0;
  for (let run = -3; run < RUNS; run += 1) {
    const one = clock(() => solveNetwork(spec));
    const two = clock(() => {
      steps = solveNonlinear(spec, laws, prepared).steps;
    });
    if (run < 0) continue;
    linear.push(one);
    ours.push(two);
  }
  const base = median(linear);
  return [
    {
      what: `${what}, ${network.shapes.length} channels, ${steps} Newton steps`,
      median: median(ours),
      unit: 'ms',
      runs: RUNS,
      against: `one linear solve of the same network (${base.toPrecision(3)} ms)`,
      ratio: median(ours) / base,
      ...(target === undefined ? {} : { target }),
    },
    { what: `${what}, the first time (sections solved)`, median: tables, unit: 'ms', runs: 1 },
  ];
}

export default async function rheology(): Promise<BenchRow[]> {
  const shear = (model: ShearModel): Rheology => ({ shear: model });
  return [
    ...compared('Carreau blood', shear(BLOOD_CARREAU), false, 10),
    ...compared('power law', shear({ kind: 'power-law', consistency: 0.015, index: 0.7 }), false, 10),
    ...compared('Casson blood', shear(BLOOD_CASSON), false, 10),
    ...compared('water under a soft roof', { viscosity: 1e-3 }, true),
  ];
}
