import { describe, expect, test } from 'vitest';
import type { DuctLaw } from '../../solver/network/law.ts';
import { prepareNetwork } from '../../solver/network/prepare.ts';
import { solveNetwork } from '../../solver/network/solve-network.ts';
import { solveNonlinear } from '../../solver/network/solve-nonlinear.ts';
import type { Drive, NetworkSpec } from '../../solver/network/spec.ts';
import { verify } from '../verify/row.ts';
import { bisect, cassonTube, linearLaw, powerLaw, softRoof } from './laws.ts';
import { randomNetwork } from './random-network.ts';

const R = 1e12;
const pressureAt = (node: number, value: number): Drive => ({ node, kind: 'pressure', value, series: 0 });
const flowAt = (node: number, value: number): Drive => ({ node, kind: 'flow', value, series: 0 });
const out = new Float64Array(3);

function flowOf(law: DuctLaw, from: number, to: number): number {
  law.flow(from - to, to, out);
  return out[0];
}

function network(ducts: readonly (readonly [number, number])[], drives: readonly Drive[]): NetworkSpec {
  return {
    nodeCount: 1 + Math.max(...ducts.flat()),
    ductFrom: Int32Array.from(ducts, ([from]) => from),
    ductTo: Int32Array.from(ducts, ([, to]) => to),
    resistance: new Float64Array(ducts.length).fill(R),
    blocks: [],
    drives,
  };
}

/** Header 0 – 1 – 2 – 3 – 4 with a branch from each of 1 … 4 to the outlet, node 5, at zero. */
const ladder = (inlet: Drive) =>
  network(
    [
      [0, 1],
      [1, 2],
      [2, 3],
      [3, 4],
      [1, 5],
      [2, 5],
      [3, 5],
      [4, 5],
    ],
    [inlet, pressureAt(5, 0)],
  );

/** Pressures 0 … 4 of the ladder by shooting: from a guess of the last one back to the inlet, pressure given there. */
function shot(laws: readonly DuctLaw[], inlet: number): number[] {
  const march = (last: number) => {
    const p = [0, 0, 0, 0, last];
    let q = 0;
    for (let k = 4; k >= 1; k -= 1) {
      q += flowOf(laws[3 + k], p[k], 0);
      p[k - 1] = bisect((x) => flowOf(laws[k - 1], x, p[k]) - q, p[k], 10 * inlet);
    }
    return p;
  };
  return march(bisect((last) => march(last)[0] - inlet, 0, inlet));
}

const FLUIDS: Readonly<Record<string, (e: number) => DuctLaw>> = {
  'power law, n from 0.3 to 1.4, the same and mixed': (e) =>
    powerLaw(R * (1 + e), [0.6, 0.3, 1.4, 0.8][e % 4], 200),
  'Casson fluid in tubes of different yield': (e) => cassonTube(R * (1 + e), 20 + 7 * e),
  'soft roofs of different stiffness': (e) => softRoof(R * (1 + e), 2e-4 * (1 + (e % 3))),
  'rigid, shear-thinning, yielding and soft in one': (e) =>
    [linearLaw(R), powerLaw(R, 0.5, 100), cassonTube(R, 30), softRoof(R, 5e-4)][e % 4],
};

for (const [at, fluid] of Object.entries(FLUIDS)) {
  verify(
    {
      quantity: 'nonlinear network: pressures along a ladder over the inlet pressure',
      check: 'invariant',
      at,
      source: 'shooting from the far end with bisection',
      tolerance: 1e-13,
    },
    () => {
      const laws = Array.from({ length: 8 }, (_, e) => fluid(e));
      const found = solveNonlinear(ladder(pressureAt(0, 2000)), laws);
      // The same once more with the inlet flow that this takes, from a start that knows nothing.
      const driven = solveNonlinear(ladder(flowAt(0, found.driveFlow[0])), laws);
      const wanted = shot(laws, 2000);
      expect([...found.faults, ...driven.faults]).toEqual([]);
      const off = wanted.map((p, i) =>
        Math.max(Math.abs(found.pressure[i] - p), Math.abs(driven.pressure[i] - p)),
      );
      return Math.max(...off) / 2000;
    },
  );
}

verify(
  {
    quantity: 'nonlinear network: flows with loops under one soft roof, over the largest',
    check: 'exact',
    at: '40 random networks between given pressures',
    source: 'Kirchhoff transform: (1 + b p)⁴ obeys the linear network (solved by the linear solver)',
    tolerance: 1.2e-12,
  },
  () => {
    const b = 3e-4;
    let worst = 0;
    for (let seed = 0; seed < 40; seed += 1) {
      const base = randomNetwork(4 * seed + 2);
      const drives = base.drives.map(({ node }, d) => pressureAt(node, 400 * d * d));
      const spec = { ...base, drives };
      const soft = solveNonlinear(
        spec,
        Array.from(spec.resistance, (r) => softRoof(r, b)),
      );
      const linear = solveNetwork({
        ...spec,
        drives: drives.map((drive) => ({ ...drive, value: (1 + b * drive.value) ** 4 / (4 * b) })),
      });
      const size = Math.max(...linear.ductFlow.map(Math.abs), Number.MIN_VALUE);
      linear.ductFlow.forEach((q, e) => {
        worst = Math.max(worst, Math.abs(soft.ductFlow[e] - q) / size);
      });
    }
    return worst;
  },
);

verify(
  {
    quantity: 'nonlinear network: flow under a soft roof over the rigid one',
    check: 'published',
    at: 'c Δp W/(E h₀) = 0.5, split into five pieces in series',
    source: 'Gervais et al. 2006, Lab Chip 6, 500 (quartic form): 2.03125',
    tolerance: 1.4e-15,
  },
  () => {
    const pieces = [0, 1, 2, 3, 4].map((k) => [k, k + 1] as const);
    const spec = network(pieces, [pressureAt(0, 1000), pressureAt(5, 0)]);
    const laws = pieces.map(() => softRoof(R / 5, 0.5 / 1000));
    return Math.abs(solveNonlinear(spec, laws).driveFlow[0] / (1000 / R) / 2.03125 - 1);
  },
);

verify(
  {
    quantity: 'nonlinear network: flow of a Casson fluid through two tubes in series',
    check: 'exact',
    at: 'radii 1 and 0.7, yield between 3 and 12 % of the wall shear',
    source: 'velocity profile of each tube integrated numerically at the pressure found between them',
    tolerance: 5e-14,
  },
  () => {
    // µ, yield stress and lengths 1, 0.05, 1; Q = ∫ π r² γ̇(r) dr, √γ̇ = √τ − √τ_y, τ = r Δp/2.
    const quadrature = (radius: number, drop: number) => {
      const core = 0.1 / drop;
      let sum = 0;
      const n = 20000;
      for (let k = 0; k <= n; k += 1) {
        const r = core + ((radius - core) * k) / n;
        const rate = (Math.sqrt((r * drop) / 2) - Math.sqrt(0.05)) ** 2;
        sum += (k === 0 || k === n ? 1 : k % 2 === 1 ? 4 : 2) * Math.PI * r * r * rate;
      }
      return (sum * (radius - core)) / (3 * n);
    };
    const radii = [1, 0.7];
    const resistances = radii.map((a) => 8 / (Math.PI * a ** 4));
    const spec = {
      ...network(
        [
          [0, 1],
          [1, 2],
        ],
        [pressureAt(0, 8), pressureAt(2, 0)],
      ),
      resistance: Float64Array.from(resistances),
    };
    const laws = radii.map((a, e) => cassonTube(resistances[e], 0.1 / a));
    const { pressure, ductFlow } = solveNonlinear(spec, laws);
    const first = quadrature(1, 8 - pressure[1]);
    const second = quadrature(0.7, pressure[1]);
    return Math.max(Math.abs(first / ductFlow[0] - 1), Math.abs(second / ductFlow[1] - 1));
  },
);

for (const [at, tolerance, fluid] of [
  ['power law, n = 0.3', 2.5e-12, (r: number) => powerLaw(r, 0.3, 1000)],
  ['power law, n = 0.6', 2.5e-12, (r: number) => powerLaw(r, 0.6, 1000)],
  ['Casson, yield 30 to 90 Pa', 1e-10, (r: number, e: number) => cassonTube(r, 30 + 10 * (e % 7))],
  ['Casson, yield 300 to 900 Pa', 1e-10, (r: number, e: number) => cassonTube(r, 300 + 100 * (e % 7))],
  ['soft roofs of three stiffnesses', 2.5e-12, (r: number, e: number) => softRoof(r, 1e-4 * (1 + (e % 3)))],
] as const) {
  verify(
    {
      quantity:
        'nonlinear network: imbalance by the laws alone of the worst node over what passes through it',
      check: 'invariant',
      at: `100 random networks, ${at}`,
      source: 'conservation of mass',
      tolerance,
    },
    () => {
      let worst = 0;
      for (let seed = 0; seed < 100; seed += 1) {
        const base = randomNetwork(seed);
        // Inflows and pressures that no roof collapses under.
        const drives = base.drives.map((drive) => ({
          ...drive,
          value: Math.abs(drive.value) * (drive.kind === 'flow' ? 1e-4 : 1),
        }));
        const spec = { ...base, drives };
        const { lawImbalance, conservationResidual, faults } = solveNonlinear(
          spec,
          Array.from(spec.resistance, (r, e) => fluid(r, e)),
        );
        worst = Math.max(worst, lawImbalance, conservationResidual);
        expect(faults.filter(({ kind }) => kind === 'not-converged')).toEqual([]);
      }
      return worst;
    },
  );
}

describe('yield stress', () => {
  const series = (drop: number) =>
    network(
      [
        [0, 1],
        [1, 2],
      ],
      [pressureAt(0, drop), pressureAt(2, 0)],
    );
  const laws = [cassonTube(R, 100), cassonTube(R, 50)];

  test('in series flow starts at the sum of the yields; below it is named', () => {
    const below = solveNonlinear(series(149), laws);
    expect(below.faults).toEqual([{ kind: 'no-flow', nodes: Int32Array.of(0, 1, 2), drives: [] }]);
    expect([...below.ductFlow]).toEqual([0, 0]);
    expect([...below.driveFlow]).toEqual([0, 0]);
    expect(below.pressure[1]).toBeNaN();
    const above = solveNonlinear(series(160), laws);
    expect(above.faults).toEqual([]);
    expect(above.ductFlow[0]).toBeGreaterThan(0);
    expect(above.ductFlow[0]).toBeCloseTo(flowOf(laws[0], 160, above.pressure[1]), 20);
  });

  test('a part held still does not keep the other from flowing; a flow drive overcomes any yield', () => {
    const both = network(
      [
        [0, 1],
        [1, 2],
        [3, 4],
      ],
      [pressureAt(0, 100), pressureAt(2, 0), flowAt(3, 1e-12), pressureAt(4, 0)],
    );
    const { faults, ductFlow, pressure } = solveNonlinear(both, [...laws, cassonTube(R, 500)]);
    expect(faults.map(({ kind, nodes }) => [kind, ...nodes])).toEqual([['no-flow', 0, 1, 2]]);
    expect(ductFlow[2]).toBe(1e-12);
    expect(pressure[3]).toBeGreaterThan(500);
  });

  test('a plug across a bridge that flows passes nothing that counts', () => {
    const bridge = network(
      [
        [0, 1],
        [0, 2],
        [1, 3],
        [2, 3],
        [1, 2],
      ],
      [pressureAt(0, 1000), pressureAt(3, 0)],
    );
    const { faults, ductFlow, ductUnresolved, pressure } = solveNonlinear(bridge, [
      linearLaw(R),
      linearLaw(R),
      linearLaw(R),
      linearLaw(1.1 * R),
      cassonTube(R, 100),
    ]);
    expect(faults).toEqual([]);
    expect([...ductUnresolved]).toEqual([0, 0, 0, 0, 1]);
    expect(pressure[1]).toBeCloseTo(500, 6);
    expect(ductFlow[0]).toBeCloseTo(500 / R, 18);
  });
});

describe('what does not work out is said', () => {
  const single = network(
    [
      [0, 1],
      [1, 2],
    ],
    [flowAt(0, 1e-9), pressureAt(2, 0)],
  );

  test('a law that never passes the flow asked', () => {
    const capped: DuctLaw = {
      flow(drop, _to, result) {
        const slope = 1 / (R * (1 + Math.abs(drop)) ** 2);
        result[0] = drop / (R * (1 + Math.abs(drop)));
        result[1] = slope;
        result[2] = -slope;
      },
    };
    const { faults, ductFlow } = solveNonlinear(single, [linearLaw(R), capped]);
    expect(faults.map(({ kind, nodes }) => [kind, ...nodes])).toEqual([['not-converged', 0, 1, 2]]);
    expect(ductFlow[0]).toBeNaN();
  });

  test('a law that jumps over the flow asked', () => {
    const jump: DuctLaw = {
      flow(drop, _to, result) {
        result[0] = drop / R + (drop > 800 ? 5e-10 : 0);
        result[1] = 1 / R;
        result[2] = -1 / R;
      },
    };
    expect(solveNonlinear(single, [linearLaw(R), jump]).faults.map(({ kind }) => kind)).toEqual([
      'not-converged',
    ]);
  });

  test('a law that gives no number', () => {
    const broken: DuctLaw = { flow: (_drop, _to, result) => void result.fill(Number.NaN) };
    expect(solveNonlinear(single, [linearLaw(R), broken]).faults.map(({ kind }) => kind)).toEqual([
      'not-converged',
    ]);
  });

  test('a duct without a law or null', () => {
    expect(() => solveNonlinear(single, [null])).toThrow('Every duct');
  });
});

test('linear laws give the linear solution, and null is linear', () => {
  for (let seed = 0; seed < 8; seed += 1) {
    const spec = randomNetwork(seed);
    const linear = solveNetwork(spec);
    for (const laws of [Array.from(spec.resistance, linearLaw), Array.from(spec.resistance, () => null)]) {
      const { ductFlow, steps } = solveNonlinear(spec, laws);
      expect(steps).toBeLessThanOrEqual(1);
      ductFlow.forEach((q, e) => {
        expect(Math.abs(q - linear.ductFlow[e])).toBeLessThanOrEqual(1e-13 * linear.throughput);
      });
    }
  }
});

test('an earlier solution is a start: the same answer in fewer steps', () => {
  const laws = Array.from({ length: 8 }, (_, e) => powerLaw(R * (1 + e), 0.4, 200));
  const spec = ladder(pressureAt(0, 2000));
  const prepared = prepareNetwork(spec);
  const first = solveNonlinear(spec, laws, prepared);
  const near = ladder(pressureAt(0, 2001));
  const cold = solveNonlinear(near, laws);
  const warm = solveNonlinear(near, laws, prepared, first.pressure);
  expect(warm.steps).toBeLessThan(cold.steps);
  warm.ductFlow.forEach((q, e) => {
    expect(Math.abs(q / cold.ductFlow[e] - 1)).toBeLessThan(1e-12);
  });
});
