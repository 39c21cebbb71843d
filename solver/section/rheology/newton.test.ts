import { describe, expect, test } from 'vitest';
import { plateFlow } from '../../../test/outside/shear-thinning-ducts.ts';
import { verify } from '../../../test/verify/row.ts';
import { BLOOD_CARREAU } from '../../fluid/reference.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import type { Mesh } from '../../mesh/mesh.ts';
import { Problem } from '../../problem/problem.ts';
import { sectionElements } from './elements.ts';
import { solveSection } from './newton.ts';
import { quarterRectangle, WALL } from './rectangle-mesh.ts';
import { peakWallStress } from './wall-stress.ts';
import { yieldStressOf } from './yield-stress.ts';

/** A quarter of a rectangle of the given aspect, half depth 1. */
const rectangle = (aspect: number, across = 8) =>
  sectionElements(quarterRectangle(1 / aspect, across), (tag) => tag === WALL);

/** Between plates at y = ±1: the same grid with its side wall a line of symmetry. */
function plates(across: number) {
  const mesh: Mesh = quarterRectangle(1, across);
  const tags = mesh.boundaryTag.map((tag, e) => (mesh.x[mesh.boundary[3 * e + 2]] > 1 - 1e-9 ? 1 : tag));
  return sectionElements({ ...mesh, boundaryTag: tags }, (tag) => tag === WALL);
}

function flowOf(elements: ReturnType<typeof rectangle>, model: ShearModel, gradient: number, smallest = 0) {
  const start = new Float64Array(elements.mesh.nodeCount);
  const newtonian: ShearModel = { kind: 'power-law', consistency: 1, index: 1 };
  solveSection(elements, newtonian, gradient, 0, start);
  return solveSection(elements, model, gradient, smallest, start);
}

// Friction factor F = f rho u_m^(2-n) Dh^n / K, and peak over mean velocity.
const finite = 'direct finite elements made separately (quadratic, two meshes agreeing to 1e-6)';
for (const [aspect, index, friction, peak] of [
  [1, 0.75, 9.05434, 1.94852],
  [1, 0.5, 5.7214, 1.75189],
  [0.5, 0.75, 9.69028, 1.88907],
  [0.5, 0.5, 5.99867, 1.72747],
] as const) {
  const model: ShearModel = { kind: 'power-law', consistency: 1, index };
  const solved = () => {
    const elements = rectangle(aspect, 12);
    const { flow, velocity } = flowOf(elements, model, 1, 1e-6);
    const mean = flow / elements.area;
    const dh = (4 * elements.area) / elements.perimeter;
    return { friction: (dh / 2) * mean ** -index * dh ** index, peak: Math.max(...velocity) / mean };
  };
  const at = `h/W = ${aspect}, n = ${index}`;
  verify(
    {
      quantity: 'friction of a power-law fluid in a rectangle',
      check: 'package',
      at,
      source: finite,
      tolerance: 1e-5,
    },
    () => Math.abs(solved().friction / friction - 1),
  );
  verify(
    {
      quantity: 'peak velocity of a power-law fluid in a rectangle',
      check: 'package',
      at,
      source: finite,
      tolerance: 3e-4,
    },
    () => Math.abs(solved().peak / peak - 1),
  );
}

// Kozicki, Chou and Tiu's formula is an approximation; it must lie above by about what the references found.
for (const [aspect, index, a, b, off] of [
  [1, 0.5, 0.212091, 0.677102, 0.038],
  [0.5, 0.75, 0.243939, 0.727815, 0.021],
] as const) {
  verify(
    {
      quantity: "excess of Kozicki's approximate friction over the solved one, less what was found elsewhere",
      check: 'band',
      at: `h/W = ${aspect}, n = ${index}`,
      source: 'Kozicki, Chou and Tiu 1966, Chem. Eng. Sci. 21, 665 (form from memory)',
      tolerance: 1e-3,
    },
    () => {
      const elements = rectangle(aspect);
      const mean =
        flowOf(elements, { kind: 'power-law', consistency: 1, index }, 1, 1e-6).flow / elements.area;
      const dh = (4 * elements.area) / elements.perimeter;
      const solved = (dh / 2) * mean ** -index * dh ** index;
      return Math.abs((2 * 8 ** index * (b + a / index) ** index) / solved - 1 - off);
    },
  );
}

const between: readonly (readonly [string, ShearModel, number, number, number])[] = [
  ['power law n = 0.5', { kind: 'power-law', consistency: 2, index: 0.5 }, 3, 1e-7, 3e-5],
  ['power law n = 0.25', { kind: 'power-law', consistency: 2, index: 0.25 }, 3, 1e-7, 2e-4],
  ['Carreau, blood', BLOOD_CARREAU, 0.4, 0, 3e-5],
  ['Casson, wall stress 10 yields', { kind: 'casson', yieldStress: 1, viscosity: 1 }, 10, 5e-4, 2e-4],
  ['Casson, wall stress 2 yields', { kind: 'casson', yieldStress: 1, viscosity: 1 }, 2, 2e-5, 1e-3],
];
for (const [at, model, gradient, smallest, tolerance] of between) {
  verify(
    {
      quantity: 'flow of a shear-thinning fluid between plates by finite elements',
      check: 'exact',
      at,
      source: 'closed form or quadrature of the model',
      tolerance,
    },
    () =>
      Math.abs(
        flowOf(plates(12), model, gradient, smallest).flow / (plateFlow(model, 2, 1, gradient) / 2) - 1,
      ),
  );
}

for (const [aspect, value] of [
  [1, (2 + Math.sqrt(Math.PI)) / 4],
  [0.5, (4 - Math.PI) / (3 * (3 - Math.sqrt(1 + 2 * Math.PI)))],
] as const) {
  verify(
    {
      quantity: 'mean wall stress over yield stress at which a rectangle starts to flow',
      check: 'exact',
      at: `h/W = ${aspect}`,
      source:
        'least ratio of boundary to area, Mosolov and Miasnikov 1965, J. Appl. Math. Mech. 29, 545 (from memory)',
      tolerance: 1e-9,
    },
    () => {
      // h = (4 - pi)/(a + b - sqrt((a - b)^2 + pi a b)); the mean wall stress is h times area over perimeter.
      const h = (4 - Math.PI) / (1 + aspect - Math.sqrt((1 - aspect) ** 2 + Math.PI * aspect));
      const formula = (h * aspect) / (2 * (1 + aspect));
      expect(formula).toBeCloseTo(value, 12);
      return Math.abs(yieldStressOf(rectangle(aspect), 4) / formula - 1);
    },
  );
}

verify(
  {
    quantity: 'order at which the flow of a power-law fluid converges, shortfall from 3',
    check: 'order',
    at: 'between plates, n = 0.5, cells 4, 8, 16',
    source: 'velocity 1 - y^3, quadratic elements',
    tolerance: 0,
  },
  () => {
    const model: ShearModel = { kind: 'power-law', consistency: 1, index: 0.5 };
    const exact = plateFlow(model, 2, 1, 1) / 2;
    const [coarse, , fine] = [4, 8, 16].map((n) =>
      Math.abs(flowOf(plates(n), model, 1, 1e-9).flow / exact - 1),
    );
    return Math.max(0, 3 - Math.log2(coarse / fine) / 2);
  },
);

describe('the solve itself', () => {
  test.each<[string, ShearModel, number, number]>([
    ['power law', { kind: 'power-law', consistency: 1, index: 0.6 }, 2, 1e-6],
    ['Carreau', { kind: 'carreau', zeroShear: 1, infiniteShear: 0.01, time: 1, index: 0.3 }, 3, 0],
    ['Casson', { kind: 'casson', yieldStress: 1, viscosity: 1 }, 8, 1e-4],
  ])('the slope of the flow is its derivative by the gradient: %s', (_, model, gradient, smallest) => {
    const elements = rectangle(0.4, 6);
    const h = 1e-4 * gradient;
    const rise =
      flowOf(elements, model, gradient + h, smallest).flow -
      flowOf(elements, model, gradient - h, smallest).flow;
    expect(rise / (2 * h) / flowOf(elements, model, gradient, smallest).slope).toBeCloseTo(1, 5);
  });

  test('models at their Newtonian limit give the Newtonian flow', () => {
    const elements = rectangle(0.3, 6);
    const newtonian = flowOf(elements, { kind: 'power-law', consistency: 2, index: 1 }, 5).flow;
    const limits: ShearModel[] = [
      { kind: 'carreau', zeroShear: 2, infiniteShear: 2, time: 1, index: 0.5 },
      { kind: 'carreau', zeroShear: 2, infiniteShear: 0.1, time: 0, index: 0.5 },
      { kind: 'carreau', zeroShear: 2, infiniteShear: 0.1, time: 1, index: 1 },
      { kind: 'casson', yieldStress: 0, viscosity: 2 },
    ];
    for (const model of limits) expect(flowOf(elements, model, 5, 1e-9).flow / newtonian).toBeCloseTo(1, 10);
  });

  test('the stress on the wall carries the pressure: its peak is that of the series for a Newtonian fluid', () => {
    const elements = rectangle(1, 16);
    const newtonian: ShearModel = { kind: 'power-law', consistency: 1, index: 1 };
    const { velocity } = flowOf(elements, newtonian, 1);
    const mean = elements.area / elements.perimeter;
    expect(peakWallStress(elements, newtonian, 1, 0, velocity) / mean / 1.35062897).toBeCloseTo(1, 2);
  });

  test('numbers that cannot be solved end in a problem, not in a crash or a NaN', () => {
    const elements = rectangle(1, 4);
    const start = new Float64Array(elements.mesh.nodeCount);
    const model: ShearModel = { kind: 'casson', yieldStress: Number.NaN, viscosity: 1 };
    expect(() => solveSection(elements, model, 1, 1e-6, start)).toThrow(Problem);
  });
});
