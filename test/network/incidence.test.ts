import { solveNetwork } from '../../solver/network/solve-network.ts';
import type { NetworkSpec } from '../../solver/network/spec.ts';
import { denseSolve } from '../sparse/matrices.ts';
import { verify } from '../verify/row.ts';
import { apart, randomNetwork, UNIT } from './random-network.ts';

/**
 * The same network with flows as unknowns beside the pressures, and every law an equation of its own:
 * R q = p from − p to for each duct, R q + p = P for each given pressure, balance for each node. Full
 * matrix, elimination with exchange of rows. Flows in units of Pa/UNIT.
 */
function incidenceSolution(spec: NetworkSpec): {
  pressure: number[];
  ductFlow: number[];
  driveFlow: number[];
} {
  const ducts = spec.resistance.length;
  const given = spec.drives.filter(({ kind }) => kind === 'pressure');
  const n = ducts + given.length + spec.nodeCount;
  const a = Array.from({ length: n }, () => new Float64Array(n));
  const b = new Float64Array(n);
  const p = (node: number) => ducts + given.length + node;
  for (let e = 0; e < ducts; e += 1) {
    a[e][e] = spec.resistance[e] / UNIT;
    a[e][p(spec.ductFrom[e])] -= 1;
    a[e][p(spec.ductTo[e])] += 1;
    a[p(spec.ductFrom[e])][e] += 1;
    a[p(spec.ductTo[e])][e] -= 1;
  }
  given.forEach(({ node, value, series }, k) => {
    const row = ducts + k;
    a[row][row] = series / UNIT;
    a[row][p(node)] = 1;
    b[row] = value;
    a[p(node)][row] = -1;
  });
  for (const { nodes, matrix } of spec.blocks) {
    nodes.forEach((i, r) => {
      nodes.forEach((j, c) => {
        a[p(i)][p(j)] += matrix[r * nodes.length + c] * UNIT;
      });
    });
  }
  for (const { node, kind, value } of spec.drives) if (kind === 'flow') b[p(node)] += value * UNIT;
  const x = denseSolve(a, b);
  let k = 0;
  return {
    pressure: [...x.slice(ducts + given.length)],
    ductFlow: [...x.slice(0, ducts)].map((q) => q / UNIT),
    driveFlow: spec.drives.map(({ kind, value }) => {
      if (kind === 'flow') return value;
      k += 1;
      return x[ducts + k - 1] / UNIT;
    }),
  };
}

verify(
  {
    quantity: 'network: pressures, duct flows and drive flows, over the largest of each',
    check: 'invariant',
    at: '100 random networks: trees, series, loops, parallel ducts, blocks, tubing, closed ends',
    source: 'incidence form with flows as unknowns, full matrix with row exchanges',
    tolerance: 5e-12,
  },
  () => {
    let worst = 0;
    for (let seed = 0; seed < 100; seed += 1) {
      const spec = randomNetwork(seed);
      const wanted = incidenceSolution(spec);
      const got = solveNetwork(spec);
      worst = Math.max(
        worst,
        apart(got.pressure, wanted.pressure),
        apart(got.ductFlow, wanted.ductFlow),
        apart(got.driveFlow, wanted.driveFlow),
      );
    }
    return worst;
  },
);

verify(
  {
    quantity: 'network: imbalance of the worst node over what flows through it; power in against dissipation',
    check: 'invariant',
    at: '100 random networks',
    source: 'conservation of mass and energy',
    tolerance: 6e-13,
  },
  () => {
    let worst = 0;
    for (let seed = 0; seed < 100; seed += 1) {
      const { conservationResidual, lawResidual, powerIn, dissipation } = solveNetwork(randomNetwork(seed));
      // A single pressure with nothing else moves nothing.
      const power = dissipation === 0 ? Math.abs(powerIn) : Math.abs(powerIn / dissipation - 1);
      worst = Math.max(worst, conservationResidual, lawResidual, power);
    }
    return worst;
  },
);
