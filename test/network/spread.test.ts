import { solveNetwork } from '../../solver/network/solve-network.ts';
import type { NetworkSpec } from '../../solver/network/spec.ts';
import { randomFrom } from '../sparse/matrices.ts';
import { verify } from '../verify/row.ts';

/** A fraction of whole numbers, the denominator positive. */
type Fraction = readonly [bigint, bigint];

function reduced(top: bigint, bottom: bigint): Fraction {
  let [a, b] = [top < 0n ? -top : top, bottom];
  while (b !== 0n) [a, b] = [b, a % b];
  const sign = bottom < 0n ? -1n : 1n;
  return a === 0n ? [0n, 1n] : [(sign * top) / a, (sign * bottom) / a];
}
const minus = ([a, b]: Fraction, [c, d]: Fraction) => reduced(a * d - c * b, b * d);
const times = ([a, b]: Fraction, [c, d]: Fraction) => reduced(a * c, b * d);
const over = ([a, b]: Fraction, [c, d]: Fraction) => reduced(a * d, b * c);
const toNumber = ([a, b]: Fraction) => {
  // Seventeen digits first, so that neither number overflows.
  const scale = 10n ** BigInt(Math.max(0, b.toString().length - a.toString().length + 20));
  return Number((a * scale) / b) / Number(scale);
};

/** Whole resistances over ten decades; loops; node 0 at 1000, the last at 0. */
function spreadNetwork(seed: number): NetworkSpec {
  const random = randomFrom(seed + 400);
  const nodeCount = 10;
  const ducts: [number, number][] = [];
  for (let i = 1; i < nodeCount; i += 1) ducts.push([Math.floor(random() * i), i]);
  for (let k = 0; k < 8; k += 1) {
    const a = Math.floor(random() * nodeCount);
    const b = Math.floor(random() * nodeCount);
    if (a !== b) ducts.push([a, b]);
  }
  return {
    nodeCount,
    ductFrom: Int32Array.from(ducts, ([from]) => from),
    ductTo: Int32Array.from(ducts, ([, to]) => to),
    resistance: Float64Array.from(ducts, () => Math.ceil(9 * random()) * 10 ** Math.floor(11 * random())),
    blocks: [],
    drives: [
      { node: 0, kind: 'pressure', value: 1000, series: 0 },
      { node: nodeCount - 1, kind: 'pressure', value: 0, series: 0 },
    ],
  };
}

/** Flows without any rounding: the node equations in fractions. */
function exactFlows(spec: NetworkSpec): Fraction[] {
  const n = spec.nodeCount;
  const zero: Fraction = [0n, 1n];
  const a = Array.from({ length: n }, () => Array.from({ length: n + 1 }, () => zero));
  const r = Array.from(spec.resistance, BigInt);
  spec.ductFrom.forEach((from, e) => {
    const to = spec.ductTo[e];
    const g: Fraction = [-1n, r[e]];
    a[from][from] = minus(a[from][from], g);
    a[to][to] = minus(a[to][to], g);
    a[from][to] = minus(a[from][to], [1n, r[e]]);
    a[to][from] = minus(a[to][from], [1n, r[e]]);
  });
  for (const { node, value } of spec.drives) {
    a[node] = a[node].map((_, j) => (j === node ? [1n, 1n] : j === n ? [BigInt(value), 1n] : zero));
  }
  for (let k = 0; k < n; k += 1) {
    const pivot = a.findIndex((row, i) => i >= k && row[k][0] !== 0n);
    [a[k], a[pivot]] = [a[pivot], a[k]];
    a[k] = a[k].map((v) => over(v, a[k][k]));
    for (let i = 0; i < n; i += 1) {
      if (i === k || a[i][k][0] === 0n) continue;
      const factor = a[i][k];
      a[i] = a[i].map((v, j) => minus(v, times(factor, a[k][j])));
    }
  }
  return Array.from(r, (resistance, e) =>
    over(minus(a[spec.ductFrom[e]][n], a[spec.ductTo[e]][n]), [resistance, 1n]),
  );
}

verify(
  {
    quantity: 'network: flow of every duct over what flows through its ends (at least 1e-9 of the total)',
    check: 'exact',
    at: '60 networks with resistances spread over ten decades',
    source: 'the node equations in whole-number fractions, no rounding',
    tolerance: 4e-15,
  },
  () => {
    let worst = 0;
    for (let seed = 0; seed < 60; seed += 1) {
      const spec = spreadNetwork(seed);
      const exact = exactFlows(spec).map(toNumber);
      const { ductFlow, throughput, conservationResidual } = solveNetwork(spec);
      const passing = new Float64Array(spec.nodeCount).fill(1e-9 * throughput);
      exact.forEach((q, e) => {
        passing[spec.ductFrom[e]] += Math.abs(q) / 2;
        passing[spec.ductTo[e]] += Math.abs(q) / 2;
      });
      exact.forEach((q, e) => {
        const scale = Math.max(passing[spec.ductFrom[e]], passing[spec.ductTo[e]]);
        worst = Math.max(worst, Math.abs(ductFlow[e] - q) / scale);
      });
      worst = Math.max(worst, conservationResidual);
    }
    return worst;
  },
);
