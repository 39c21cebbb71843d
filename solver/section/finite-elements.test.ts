import { describe } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import type { Edge, Mesh } from '../mesh/mesh.ts';
import { meshShape } from '../mesh/mesh-shape.ts';
import { factorise } from '../sparse/factorise.ts';
import { solve } from '../sparse/solve.ts';
import { edgeGradients, edgeValues } from './basis.ts';
import { elementTable } from './element-table.ts';
import { planeFlow } from './plane-flow.ts';
import { DEGREE_4, DEGREE_6, LINE_POINTS, LINE_WEIGHTS } from './quadrature.ts';
import { stiffness, withFixed } from './stiffness.ts';
import { residualOf, wallShear } from './wall-shear.ts';

const ELEMENTS = 'Ciarlet 1978, The Finite Element Method for Elliptic Problems, from memory';
const QUARTER = Math.tan(Math.PI / 8);
const loop = (corners: readonly (readonly [number, number, number?])[]): Edge[] =>
  corners.map(([x, y, bulge = 0]) => ({ x, y, bulge, tag: 0 }));
const SQUARE = [
  loop([
    [0, 0],
    [1, 0],
    [1, 1],
    [0, 1],
  ]),
];
const DISC = [
  loop([
    [0, -1, QUARTER],
    [1, 0, QUARTER],
    [0, 1, QUARTER],
    [-1, 0, QUARTER],
  ]),
];

/** Each triangle in four; new middles on curved boundary edges go where `project` says. */
function halved(mesh: Mesh, project: (x: number, y: number) => readonly [number, number]): Mesh {
  const curved = new Set<string>();
  const name = (a: number, b: number): string => (a < b ? `${a} ${b}` : `${b} ${a}`);
  for (let i = 0; i < mesh.boundaryTag.length; i += 1) {
    const [a, b, m] = mesh.boundary.subarray(3 * i, 3 * i + 3);
    curved.add(name(a, m)).add(name(m, b));
  }
  const x = [...mesh.x];
  const y = [...mesh.y];
  const middles = new Map<string, number>();
  const middle = (a: number, b: number): number => {
    const key = name(a, b);
    const known = middles.get(key);
    if (known !== undefined) return known;
    let [mx, my]: readonly [number, number] = [(x[a] + x[b]) / 2, (y[a] + y[b]) / 2];
    if (curved.has(key)) [mx, my] = project(mx, my);
    middles.set(key, x.length);
    x.push(mx);
    y.push(my);
    return x.length - 1;
  };
  const triangles: number[] = [];
  for (let t = 0; t < mesh.triangles.length; t += 6) {
    const [a, b, c, ab, bc, ca] = mesh.triangles.subarray(t, t + 6);
    for (const [p, q, r] of [
      [a, ab, ca],
      [ab, b, bc],
      [ca, bc, c],
      [ab, bc, ca],
    ]) {
      triangles.push(p, q, r, middle(p, q), middle(q, r), middle(r, p));
    }
  }
  const boundary: number[] = [];
  const boundaryTag: number[] = [];
  for (let i = 0; i < mesh.boundaryTag.length; i += 1) {
    const [a, b, m] = mesh.boundary.subarray(3 * i, 3 * i + 3);
    boundary.push(a, m, middle(a, m), m, b, middle(m, b));
    boundaryTag.push(mesh.boundaryTag[i], mesh.boundaryTag[i]);
  }
  return {
    vertexCount: mesh.nodeCount,
    nodeCount: x.length,
    x: Float64Array.from(x),
    y: Float64Array.from(y),
    triangles: Int32Array.from(triangles),
    boundary: Int32Array.from(boundary),
    boundaryTag: Int32Array.from(boundaryTag),
  };
}
const onCircle = (x: number, y: number): readonly [number, number] => {
  const r = Math.hypot(x, y);
  return [x / r, y / r];
};
const asIs = (x: number, y: number): readonly [number, number] => [x, y];

const wallOf = (mesh: Mesh): Uint8Array => {
  const wall = new Uint8Array(mesh.nodeCount);
  for (const node of mesh.boundary) wall[node] = 1;
  return wall;
};

interface Field {
  readonly u: (x: number, y: number) => number;
  readonly grad: (x: number, y: number) => readonly [number, number];
  /** −∇²u */
  readonly source: (x: number, y: number) => number;
}

/** Solves −∇²u = source with the field's own values on the boundary; errors in L2 and H1. */
function errors(mesh: Mesh, field: Field): { l2: number; h1: number } {
  const table = elementTable(mesh, DEGREE_6);
  const system = stiffness(mesh, table);
  const wall = wallOf(mesh);
  const u = new Float64Array(mesh.nodeCount);
  for (let i = 0; i < mesh.nodeCount; i += 1) if (wall[i]) u[i] = field.u(mesh.x[i], mesh.y[i]);
  const load = new Float64Array(mesh.nodeCount);
  const { count } = table.rule;
  for (let p = 0; p < table.weight.length; p += 1) {
    const t = Math.floor(p / count);
    const f = table.weight[p] * field.source(table.x[p], table.y[p]);
    for (let i = 0; i < 6; i += 1) load[mesh.triangles[6 * t + i]] += f * table.value[6 * (p % count) + i];
  }
  const right = residualOf(mesh, system.element, load, u);
  for (let i = 0; i < mesh.nodeCount; i += 1) if (wall[i]) right[i] = u[i];
  solve(factorise(system.symbolic, withFixed(system.pattern, system.element, wall)), right);

  let [l2, h1] = [0, 0];
  for (let p = 0; p < table.weight.length; p += 1) {
    const t = Math.floor(p / count);
    let [value, gx, gy] = [0, 0, 0];
    for (let i = 0; i < 6; i += 1) {
      const c = right[mesh.triangles[6 * t + i]];
      value += c * table.value[6 * (p % count) + i];
      gx += c * table.gx[6 * p + i];
      gy += c * table.gy[6 * p + i];
    }
    const [ex, ey] = field.grad(table.x[p], table.y[p]);
    l2 += table.weight[p] * (value - field.u(table.x[p], table.y[p])) ** 2;
    h1 += table.weight[p] * ((gx - ex) ** 2 + (gy - ey) ** 2);
  }
  return { l2: Math.sqrt(l2), h1: Math.sqrt(h1) };
}

const QUADRATIC: Field = {
  u: (x, y) => 1 + x - 2 * y + 3 * x * x - x * y + 2 * y * y,
  grad: (x, y) => [1 + 6 * x - y, -2 - x + 4 * y],
  source: () => -10,
};
const LINEAR: Field = { u: (x, y) => 2 - x + 3 * y, grad: () => [-1, 3], source: () => 0 };
const WAVY: Field = {
  u: (x, y) => Math.sin(2 * x + 0.3) * Math.cosh(1.5 * y),
  grad: (x, y) => [
    2 * Math.cos(2 * x + 0.3) * Math.cosh(1.5 * y),
    1.5 * Math.sin(2 * x + 0.3) * Math.sinh(1.5 * y),
  ],
  source: (x, y) => (4 - 2.25) * Math.sin(2 * x + 0.3) * Math.cosh(1.5 * y),
};

for (const [name, shape, field] of [
  ['quadratic field on straight triangles', SQUARE, QUADRATIC],
  ['linear field on curved triangles', DISC, LINEAR],
] as const) {
  verify(
    {
      quantity: 'finite elements, field inside their space',
      check: 'manufactured',
      at: name,
      source: 'patch test: Strang & Fix 1973, from memory',
      tolerance: 1e-12,
    },
    () => {
      const { l2, h1 } = errors(meshShape(shape, { size: 0.3 }), field);
      return Math.max(l2, h1);
    },
  );
}

for (const [name, shape, project] of [
  ['square', SQUARE, asIs],
  ['disc, curved edges', DISC, onCircle],
] as const) {
  const found = (): { l2: number; h1: number }[] => {
    let mesh = meshShape(shape, { size: 0.4, perQuarter: 3 });
    return [0, 1, 2, 3].map((level) => {
      if (level > 0) mesh = halved(mesh, project);
      return errors(mesh, WAVY);
    });
  };
  for (const [norm, order] of [
    ['l2', 3],
    ['h1', 2],
  ] as const) {
    verify(
      {
        quantity: `order of convergence in ${norm === 'l2' ? 'L2' : 'H1'}, distance from ${order}`,
        check: 'order',
        at: name,
        source: ELEMENTS,
        tolerance: 0.1,
      },
      () => {
        const [, , coarse, fine] = found();
        return Math.log2(coarse[norm] / fine[norm]) - order;
      },
    );
  }
}

const flowOn = (mesh: Mesh) => {
  const table = elementTable(mesh, DEGREE_4);
  const system = stiffness(mesh, table);
  return { table, system, ...planeFlow(mesh, table, system, wallOf(mesh), new Uint8Array(mesh.nodeCount)) };
};

describe('flow of a disc', () => {
  const exact = Math.PI / 8;
  const levels = (): { lower: number; upper: number }[] => {
    let mesh = meshShape(DISC, { size: 0.6, perQuarter: 3 });
    return [0, 1, 2, 3, 4].map((level) => {
      if (level > 0) mesh = halved(mesh, onCircle);
      return flowOn(mesh);
    });
  };
  for (const bound of ['lower', 'upper'] as const) {
    verify(
      {
        quantity: `order of convergence of the flow's ${bound} bound, distance from 4`,
        check: 'order',
        at: 'disc, curved edges',
        source: 'functionals converge at twice the H1 order: Strang & Fix 1973, from memory',
        tolerance: 0.1,
      },
      () => {
        const [coarse, fine] = levels().slice(-2);
        return Math.log2(Math.abs(coarse[bound] - exact) / Math.abs(fine[bound] - exact)) - 4;
      },
    );
  }
});

verify(
  {
    quantity: 'order of convergence of the flow, distance from 4',
    check: 'order',
    at: 'equilateral triangle',
    source: 'exact: White 2006 sec. 3-3',
    tolerance: 0.1,
  },
  () => {
    const triangle = [
      loop([
        [0, 0],
        [1, 0],
        [0.5, Math.sqrt(0.75)],
      ]),
    ];
    const exact = Math.sqrt(3) / 320;
    let mesh = meshShape(triangle, { size: 0.35 });
    const found = [0, 1, 2].map((level) => {
      if (level > 0) mesh = halved(mesh, asIs);
      return exact - flowOn(mesh).lower;
    });
    return Math.log2(found[1] / found[2]) - 4;
  },
);

for (const [name, shape, exact] of [
  // C of a square: Shah & London 1978, series recomputed.
  ['square', SQUARE, 0.421731045 / 12],
  [
    'equilateral triangle',
    [
      loop([
        [0, 0],
        [1, 0],
        [0.5, Math.sqrt(0.75)],
      ]),
    ],
    Math.sqrt(3) / 320,
  ],
] as const) {
  for (const size of [0.7, 0.3, 0.1]) {
    verify(
      {
        quantity: 'true flow outside its two bounds (0 is inside), relative',
        check: 'invariant',
        at: `${name}, mesh size ${size}`,
        source: 'Prager & Synge 1947, from memory; flow: Shah & London 1978, White 2006',
        tolerance: 2e-9,
      },
      () => {
        const { lower, upper } = flowOn(meshShape(shape, { size }));
        return Math.max(0, lower / exact - 1, 1 - upper / exact);
      },
    );
  }
}

for (const k of [0.1, 0.5]) {
  verify(
    {
      quantity: 'resistance of an annulus, lower bound of its flow',
      check: 'exact',
      at: `radius ratio ${k}`,
      source: 'White 2006 sec. 3-3, closed form',
      tolerance: 1e-4,
    },
    () => {
      const hole = loop([
        [-k, 0, -1],
        [k, 0, -1],
      ]);
      const mesh = meshShape([DISC[0], hole], { size: 0.12, perQuarter: 8 });
      const exact = (Math.PI / 8) * (1 - k ** 4 - (1 - k * k) ** 2 / Math.log(1 / k));
      return flowOn(mesh).lower / exact - 1;
    },
  );
}

verify(
  {
    quantity: 'wall shear summed over the wall against the driving force',
    check: 'invariant',
    at: 'consistent flux on a disc and a square',
    source: 'balance of forces: ∮ shear ds = G area',
    tolerance: 1e-12,
  },
  () =>
    Math.max(
      ...[DISC, SQUARE].map((shape) => {
        const mesh = meshShape(shape, { size: 0.3 });
        const { system, load, u, table } = flowOn(mesh);
        const edges = Int32Array.from(mesh.boundaryTag, (_, i) => i);
        const flux = new Float64Array(mesh.nodeCount);
        wallShear(
          mesh,
          edges,
          residualOf(mesh, system.element, load, u),
          new Uint8Array(mesh.nodeCount),
          flux,
        );
        const value = new Float64Array(3);
        const gradient = new Float64Array(3);
        let force = 0;
        for (const edge of edges) {
          const nodes = mesh.boundary.subarray(3 * edge, 3 * edge + 3);
          for (let q = 0; q < 3; q += 1) {
            edgeValues(LINE_POINTS[q], value);
            edgeGradients(LINE_POINTS[q], gradient);
            let [dx, dy, f] = [0, 0, 0];
            nodes.forEach((node, i) => {
              dx += gradient[i] * mesh.x[node];
              dy += gradient[i] * mesh.y[node];
              f += value[i] * flux[node];
            });
            force += LINE_WEIGHTS[q] * Math.hypot(dx, dy) * f;
          }
        }
        return Math.abs(force / table.weight.reduce((sum, weight) => sum + weight) - 1);
      }),
    ),
);
