import { describe, expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { prepareNetwork } from './prepare.ts';
import { solveNetwork } from './solve-network.ts';
import type { Block, Drive, NetworkSpec } from './spec.ts';

/** Pa s/m³, of the size of a real channel's. */
const R = 1e12;

function network(
  nodeCount: number,
  ducts: readonly (readonly [number, number, number])[],
  drives: readonly Drive[],
  blocks: readonly Block[] = [],
): NetworkSpec {
  return {
    nodeCount,
    ductFrom: Int32Array.from(ducts, ([from]) => from),
    ductTo: Int32Array.from(ducts, ([, to]) => to),
    resistance: Float64Array.from(ducts, ([, , r]) => r),
    blocks,
    drives,
  };
}

const pressureAt = (node: number, value: number, series = 0): Drive => ({
  node,
  kind: 'pressure',
  value,
  series,
});
const flowAt = (node: number, value: number, series = 0): Drive => ({ node, kind: 'flow', value, series });

const OH = 'hydraulic-electric analogy, Oh, Lee, Ahn, Furlani 2012, Lab Chip 12, 515; fractions computed';
const worst = (pairs: readonly (readonly [number, number])[]) =>
  pairs.reduce((max, [got, wanted]) => Math.max(max, Math.abs(got / wanted - 1)), 0);

/** Levels 0 … m, 2^k segments of resistance R ratio^k on level k; root pressure 1000 Pa, outlets 0. */
function symmetricTree(m: number, ratio: number): NetworkSpec {
  const ducts: [number, number, number][] = [[0, 1, R]];
  for (let node = 1, level = 1; level <= m; level += 1) {
    for (let k = 0; k < 2 ** (level - 1); k += 1, node += 1) {
      ducts.push([node, 2 * node, R * ratio ** level], [node, 2 * node + 1, R * ratio ** level]);
    }
  }
  const outlets = Array.from({ length: 2 ** m }, (_, k) => pressureAt(2 ** m + k, 0));
  return network(2 ** (m + 1), ducts, [pressureAt(0, 1000), ...outlets]);
}

for (const [ratio, wanted] of [
  [1, 1.875],
  [2, 4],
  [0.5, 1.328125],
] as const) {
  verify(
    {
      quantity: 'network: resistance and outlet shares of a symmetric tree',
      check: 'exact',
      at: `three levels, each ${ratio} times the one before`,
      source: OH,
      tolerance: 1e-14,
    },
    () => {
      const { driveFlow } = solveNetwork(symmetricTree(3, ratio));
      const shares = [...driveFlow.slice(1)].map((q) => [-q / driveFlow[0], 1 / 8] as const);
      return worst([[1000 / driveFlow[0] / R, wanted], ...shares]);
    },
  );
}

/** in-A, in-B, A-out, B-out, A-B with in 0, out 1, A 2, B 3. */
const bridge = (r: readonly number[]) =>
  network(
    4,
    [
      [0, 2, r[0] * R],
      [0, 3, r[1] * R],
      [2, 1, r[2] * R],
      [3, 1, r[3] * R],
      [2, 3, r[4] * R],
    ],
    [pressureAt(0, 1000), pressureAt(1, 0)],
  );

verify(
  {
    quantity: 'network: pressures and flows of a bridge',
    check: 'exact',
    at: 'resistances 1, 2, 3, 4 and 5 across',
    source: OH,
    tolerance: 1e-14,
  },
  () => {
    const { pressure, ductFlow, driveFlow } = solveNetwork(bridge([1, 2, 3, 4, 5]));
    const flows = [22 / 85, 27 / 170, 21 / 85, 29 / 170, 1 / 85];
    return worst([
      [pressure[2], 12600 / 17],
      [pressure[3], 11600 / 17],
      [1000 / driveFlow[0] / R, 170 / 71],
      ...flows.map((q, e) => [ductFlow[e] * 1e9, q] as const),
    ]);
  },
);

verify(
  {
    quantity: 'network: flow across a balanced bridge over the total',
    check: 'exact',
    at: 'resistances 1, 2, 2, 4 and 0.001 to 1000 across',
    source: OH,
    tolerance: 1e-13,
  },
  () => {
    let most = 0;
    for (const across of [1e-3, 1, 1e3]) {
      const { pressure, ductFlow, driveFlow } = solveNetwork(bridge([1, 2, 2, 4, across]));
      most = Math.max(most, Math.abs(ductFlow[4] / driveFlow[0]), worst([[pressure[2], 2000 / 3]]));
    }
    return most;
  },
);

/**
 * Rows of 3 … `last` mixing channels of resistance R under a header of nearly none, fed by two inlets.
 * Header: top 0, bottom 0 of the row above, top 1, bottom 1, … in line.
 */
function gradientTree(last: number): { spec: NetworkSpec; left: number[][]; into: number[][] } {
  const ducts: [number, number, number][] = [];
  const drives: Drive[] = [flowAt(0, 1e-9), flowAt(1, 1e-9)];
  let nodes = 2;
  let bottoms = [0, 1];
  const left: number[][] = [];
  const into: number[][] = [];
  for (let channels = 3; channels <= last; channels += 1) {
    const tops = Array.from({ length: channels }, (_, k) => nodes + k);
    const next = tops.map((_, k) => nodes + channels + k);
    nodes += 2 * channels;
    left.push(bottoms.map((_, k) => ducts.length + 2 * k));
    bottoms.forEach((bottom, k) => {
      ducts.push([bottom, tops[k], 1e-10 * R], [bottom, tops[k + 1], 1e-10 * R]);
    });
    into.push(tops.map((_, k) => ducts.length + k));
    tops.forEach((top, k) => {
      ducts.push([top, next[k], R]);
    });
    bottoms = next;
  }
  for (const bottom of bottoms) drives.push(pressureAt(bottom, 0));
  return { spec: network(nodes, ducts, drives), left, into };
}

verify(
  {
    quantity: 'network: splits and mixed concentrations of a gradient tree',
    check: 'published',
    at: 'inlets 1 and 0, rows of 3, 4 and 5, headers 1e-10 of a channel',
    source:
      'Jeon et al. 2000, Langmuir 16, 8311; Dertinger et al. 2001, Anal. Chem. 73, 1240; formula from memory, derived again',
    tolerance: 1e-9,
  },
  () => {
    const { spec, left, into } = gradientTree(5);
    const { ductFlow } = solveNetwork(spec);
    const rows = [
      [1, 1 / 2, 0],
      [1, 2 / 3, 1 / 3, 0],
      [1, 3 / 4, 1 / 2, 1 / 4, 0],
    ];
    let above = [1, 0];
    let off = 0;
    left.forEach((edges, row) => {
      const B = edges.length;
      edges.forEach((e, V) => {
        const share = ductFlow[e] / (ductFlow[e] + ductFlow[e + 1]);
        off = Math.max(off, Math.abs(share - (B - V) / (B + 1)));
      });
      const mixed = into[row].map((_, V) => {
        const fromLeft = V > 0 ? ductFlow[edges[V - 1] + 1] : 0;
        const fromRight = V < B ? ductFlow[edges[V]] : 0;
        const carried = (V > 0 ? fromLeft * above[V - 1] : 0) + (V < B ? fromRight * above[V] : 0);
        return carried / (fromLeft + fromRight);
      });
      mixed.forEach((c, V) => {
        off = Math.max(off, Math.abs(c - rows[row][V]));
      });
      above = mixed;
    });
    return off;
  },
);

/** Four branches of R between headers of 0.1 R a piece; inlet at the head of the first header. */
function ladder(outletAtFarEnd: boolean): NetworkSpec {
  const ducts: [number, number, number][] = [];
  for (let k = 0; k < 4; k += 1) ducts.push([k, 4 + k, R]);
  for (let k = 0; k < 3; k += 1) ducts.push([k, k + 1, 0.1 * R], [4 + k, 5 + k, 0.1 * R]);
  return network(8, ducts, [pressureAt(0, 1000), pressureAt(outletAtFarEnd ? 7 : 4, 0)]);
}

for (const [form, far, shares, equivalent] of [
  ['U', false, [0.385403329, 0.262483995, 0.19206146, 0.160051216], 0.385403329],
  ['Z', true, [0.272727273, 0.227272727, 0.227272727, 0.272727273], 0.422727273],
] as const) {
  verify(
    {
      quantity: 'network: shares and resistance of a ladder manifold',
      check: 'exact',
      at: `four branches, headers 0.1 of a branch, ${form} form`,
      source: OH,
      tolerance: 4e-9,
    },
    () => {
      const { ductFlow, driveFlow } = solveNetwork(ladder(far));
      return worst([
        ...shares.map((share, k) => [ductFlow[k] / driveFlow[0], share] as const),
        [1000 / driveFlow[0] / R, equivalent],
      ]);
    },
  );
}

describe('drives', () => {
  test('tubing in series: a driven pressure lies at its far end, a driven flow passes it', () => {
    const spec = network(2, [[0, 1, R]], [pressureAt(0, 3000, R), pressureAt(1, 0, R)]);
    const byPressure = solveNetwork(spec);
    expect(byPressure.driveFlow[0]).toBeCloseTo(1e-9, 20);
    expect(byPressure.pressure[0]).toBeCloseTo(2000, 9);
    expect(byPressure.drivePressure[0]).toBe(3000);
    expect(byPressure.powerIn).toBeCloseTo(3e-6, 15);
    expect(byPressure.dissipation).toBeCloseTo(3e-6, 15);
    const byFlow = solveNetwork(network(2, [[0, 1, R]], [flowAt(0, 1e-9, R), pressureAt(1, 0)]));
    expect(byFlow.pressure[0]).toBeCloseTo(1000, 9);
    expect(byFlow.drivePressure[0]).toBeCloseTo(2000, 9);
    expect(byFlow.powerIn).toBeCloseTo(2e-6, 15);
    expect(byFlow.dissipation).toBeCloseTo(2e-6, 15);
  });

  test('a flow and a pressure at one node, two flows at one node, two pressures through tubing at one node', () => {
    const both = solveNetwork(
      network(2, [[0, 1, R]], [pressureAt(0, 1000), flowAt(0, 5e-9), pressureAt(1, 0)]),
    );
    expect(both.driveFlow[0]).toBeCloseTo(-4e-9, 18);
    const twice = solveNetwork(network(2, [[0, 1, R]], [flowAt(0, 1e-9), flowAt(0, 2e-9), pressureAt(1, 0)]));
    expect(twice.pressure[0]).toBeCloseTo(3000, 9);
    const tubes = solveNetwork(
      network(2, [[0, 1, R]], [pressureAt(0, 3000, 2 * R), pressureAt(0, 3000, 2 * R), pressureAt(1, 0)]),
    );
    expect(tubes.pressure[0]).toBeCloseTo(1500, 9);
  });

  test('equal pressures twice at one node share its flow', () => {
    const { driveFlow } = solveNetwork(
      network(2, [[0, 1, R]], [pressureAt(0, 1000), pressureAt(0, 1000), pressureAt(1, 0)]),
    );
    expect(driveFlow[0]).toBeCloseTo(5e-10, 20);
    expect(driveFlow[1]).toBeCloseTo(5e-10, 20);
  });

  test('dead ends carry exactly nothing, to their tips, and are resolved', () => {
    const { ductFlow, ductUnresolved, pressure } = solveNetwork(
      network(
        6,
        [
          [0, 1, R],
          [1, 2, R],
          [1, 3, 7 * R],
          [3, 4, R / 3],
          [3, 5, 1e6 * R],
        ],
        [pressureAt(0, 1000), pressureAt(2, 0)],
      ),
    );
    expect([...ductFlow.slice(2)].map(Math.abs)).toEqual([0, 0, 0]);
    expect([...ductUnresolved]).toEqual([0, 0, 0, 0, 0]);
    expect(pressure[5]).toBeCloseTo(500, 9);
  });

  test('a flow below 1e-9 of the total is marked, one above it is not', () => {
    const spec = (ratio: number) =>
      network(
        2,
        [
          [0, 1, R],
          [0, 1, R * ratio],
        ],
        [pressureAt(0, 1000), pressureAt(1, 0)],
      );
    expect([...solveNetwork(spec(1.01e9)).ductUnresolved]).toEqual([0, 1]);
    expect([...solveNetwork(spec(0.99e9)).ductUnresolved]).toEqual([0, 0]);
    expect(solveNetwork(spec(1.01e9)).driveUnresolved[0]).toBe(0);
  });

  test('ducts in parallel, from a node to itself, and none at all', () => {
    const { ductFlow } = solveNetwork(
      network(
        2,
        [
          [0, 1, R],
          [1, 0, R],
          [1, 1, R],
        ],
        [pressureAt(0, 1000), pressureAt(1, 0)],
      ),
    );
    expect(ductFlow[0]).toBeCloseTo(1e-9, 20);
    expect(ductFlow[1]).toBeCloseTo(-1e-9, 20);
    expect(ductFlow[2]).toBe(0);
    expect(solveNetwork(network(0, [], [])).faults).toEqual([]);
    expect(solveNetwork(network(1, [], [pressureAt(0, 7)])).pressure[0]).toBe(7);
  });
});

describe('blocks', () => {
  /** Three faces, each a resistance R to a common middle: conductances 1/(3R) between each two. */
  const star = (): Float64Array => Float64Array.of(2, -1, -1, -1, 2, -1, -1, -1, 2).map((v) => v / (3 * R));

  test('a block that is a star of resistances equals the star', () => {
    const ends = [pressureAt(0, 1000), pressureAt(1, 100), pressureAt(2, 0)];
    const block = solveNetwork(network(3, [], ends, [{ nodes: Int32Array.of(0, 1, 2), matrix: star() }]));
    const ducts = solveNetwork(
      network(
        4,
        [
          [0, 3, R],
          [1, 3, R],
          [2, 3, R],
        ],
        ends,
      ),
    );
    for (let i = 0; i < 3; i += 1) {
      expect(block.driveFlow[i] / ducts.driveFlow[0]).toBeCloseTo(
        ducts.driveFlow[i] / ducts.driveFlow[0],
        13,
      );
      expect(block.blockFlow[0][i]).toBe(block.driveFlow[i]);
    }
    expect(block.dissipation / ducts.dissipation).toBeCloseTo(1, 12);
  });

  test('a matrix with a positive entry off the diagonal, as junctions of short legs have', () => {
    // Legs of R, R and −0.1 R to the middle: still positive semidefinite.
    const g = [1, 1, -10];
    const sum = -8;
    const matrix = Float64Array.from({ length: 9 }, (_, k) => {
      const i = Math.floor(k / 3);
      const j = k % 3;
      return ((i === j ? g[i] : 0) - (g[i] * g[j]) / sum) / R;
    });
    const spec = network(
      6,
      [
        [3, 0, R],
        [1, 4, R],
        [2, 5, R],
      ],
      [pressureAt(3, 1000), pressureAt(4, 0), pressureAt(5, 0)],
      [{ nodes: Int32Array.of(0, 1, 2), matrix }],
    );
    const { driveFlow, conservationResidual, lawResidual } = solveNetwork(spec);
    // Outlets in parallel: 2 R and 0.9 R, after 2 R.
    const total = 1000 / (2 + 1 / (1 / 2 + 1 / 0.9)) / R;
    expect(driveFlow[0] / total).toBeCloseTo(1, 12);
    expect(-driveFlow[2] / total).toBeCloseTo(2 / 2.9, 12);
    expect(Math.max(conservationResidual, lawResidual)).toBeLessThan(1e-14);
  });

  test('what is not a port matrix is refused', () => {
    const refused = (matrix: Float64Array) => () =>
      solveNetwork(
        network(2, [], [pressureAt(0, 1), pressureAt(1, 0)], [{ nodes: Int32Array.of(0, 1), matrix }]),
      );
    expect(refused(Float64Array.of(1, -1, -1, 1))).not.toThrow();
    expect(refused(Float64Array.of(1, -1, -2, 2))).toThrow('symmetric');
    expect(refused(Float64Array.of(1, -0.9, -0.9, 1))).toThrow('row 0 sums');
    expect(refused(Float64Array.of(-1, 1, 1, -1))).toThrow('row 0');
    expect(refused(Float64Array.of(1, Number.NaN, Number.NaN, 1))).toThrow('Block 0');
  });
});

describe('faults', () => {
  const drivenPart = [
    [0, 1, R],
    [1, 2, R],
  ] as const;
  const driven = [pressureAt(0, 1000), pressureAt(2, 0)];

  test('a part without drives is at rest and named; the rest is solved', () => {
    const { faults, pressure, ductFlow } = solveNetwork(network(6, [...drivenPart, [5, 3, R]], driven));
    expect(faults).toEqual([
      { kind: 'no-drive', nodes: Int32Array.of(3, 5), drives: [] },
      { kind: 'no-drive', nodes: Int32Array.of(4), drives: [] },
    ]);
    expect(pressure[1]).toBeCloseTo(500, 9);
    expect([...pressure.slice(3)]).toEqual([Number.NaN, Number.NaN, Number.NaN]);
    expect(ductFlow[2]).toBe(0);
  });

  test('a part with flows only lacks a reference, balanced or not', () => {
    for (const out of [1e-9, 2e-9]) {
      const { faults, ductFlow, driveFlow, conservationResidual } = solveNetwork(
        network(5, [...drivenPart, [3, 4, R]], [...driven, flowAt(3, 1e-9), flowAt(4, -out)]),
      );
      expect(faults).toEqual([{ kind: 'no-reference', nodes: Int32Array.of(3, 4), drives: [2, 3] }]);
      expect(ductFlow[2]).toBeNaN();
      expect(driveFlow[2]).toBe(1e-9);
      expect(conservationResidual).toBeLessThan(1e-14);
    }
  });

  test('two pressures at one node contradict; the other parts are solved', () => {
    const { faults, pressure, driveFlow } = solveNetwork(
      network(
        5,
        [...drivenPart, [3, 4, R]],
        [...driven, pressureAt(3, 5), pressureAt(3, 6), pressureAt(4, 0)],
      ),
    );
    expect(faults).toEqual([{ kind: 'contradiction', nodes: Int32Array.of(3, 4), drives: [2, 3] }]);
    expect(pressure[1]).toBeCloseTo(500, 9);
    expect(pressure[3]).toBeNaN();
    expect(driveFlow[2]).toBeNaN();
  });

  test('a block that passes nothing leaves its far side undetermined', () => {
    const { faults, pressure } = solveNetwork(
      network(
        5,
        [...drivenPart],
        [...driven, pressureAt(3, 5)],
        [{ nodes: Int32Array.of(3, 4), matrix: new Float64Array(4) }],
      ),
    );
    expect(faults).toEqual([{ kind: 'singular', nodes: Int32Array.of(3, 4), drives: [] }]);
    expect(pressure[1]).toBeCloseTo(500, 9);
    expect(pressure[4]).toBeNaN();
  });

  test('values and indices that make no sense are refused with their place', () => {
    const solve = (spec: NetworkSpec) => () => solveNetwork(spec);
    for (const r of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(solve(network(2, [[0, 1, r]], driven.slice(0, 1)))).toThrow('Duct 0');
    }
    expect(solve(network(2, [[0, 2, R]], []))).toThrow('nodes 0 and 2');
    expect(solve(network(2, [], [pressureAt(2, 1)]))).toThrow('Drive 0');
    expect(solve(network(2, [], [pressureAt(1, Number.NaN)]))).toThrow('Drive 0');
    expect(solve(network(2, [], [pressureAt(1, 1, -1)]))).toThrow('Drive 0');
  });
});

test('values only: the same as from nothing, and another topology is refused', () => {
  const spec = ladder(true);
  const prepared = prepareNetwork(spec);
  solveNetwork(spec, prepared);
  const changed = { ...spec, resistance: spec.resistance.map((r, e) => r * (1 + 0.1 * e)) };
  const again = solveNetwork(changed, prepared);
  const cold = solveNetwork(changed);
  changed.resistance.forEach((_, e) => {
    expect(Math.abs(again.ductFlow[e] - cold.ductFlow[e]) / cold.throughput).toBeLessThan(1e-14);
  });
  const tubing = { ...spec, drives: spec.drives.map((drive) => ({ ...drive, series: R })) };
  expect(() => solveNetwork(tubing, prepared)).toThrow('not the one prepared');
});
