import type { Drive, NetworkSpec } from '../../../solver/network/spec.ts';

/** Pa s/m³, as networks.py has them but for the unit. */
const resistances = (count: number) =>
  Float64Array.from({ length: count }, (_, e) => 1e12 * (0.5 + ((e * 7919) % 1000) / 1000));

/** A square grid of channels; the first corner is driven through tubing, the last is at zero. */
export function gridNetwork(side: number): NetworkSpec {
  const ducts = 2 * side * (side - 1);
  const ductFrom = new Int32Array(ducts);
  const ductTo = new Int32Array(ducts);
  let e = 0;
  for (let i = 0; i < side; i += 1) {
    for (let j = 0; j + 1 < side; j += 1, e += 1) {
      ductFrom[e] = i * side + j;
      ductTo[e] = i * side + j + 1;
    }
  }
  for (let k = 0; k + side < side * side; k += 1, e += 1) {
    ductFrom[e] = k;
    ductTo[e] = k + side;
  }
  const drives: Drive[] = [
    { node: 0, kind: 'pressure', value: 1000, series: 1e11 },
    { node: side * side - 1, kind: 'pressure', value: 0, series: 1e11 },
  ];
  return { nodeCount: side * side, ductFrom, ductTo, resistance: resistances(ducts), blocks: [], drives };
}

/** A binary tree; the root is driven and every tip lets out through tubing. */
export function treeNetwork(nodeCount: number): NetworkSpec {
  const drives: Drive[] = [{ node: 0, kind: 'pressure', value: 1000, series: 1e11 }];
  for (let node = (nodeCount - 1) >> 1; node < nodeCount; node += 1) {
    drives.push({ node, kind: 'pressure', value: 0, series: 1e12 });
  }
  return {
    nodeCount,
    ductFrom: Int32Array.from({ length: nodeCount - 1 }, (_, e) => e >> 1),
    ductTo: Int32Array.from({ length: nodeCount - 1 }, (_, e) => e + 1),
    resistance: resistances(nodeCount - 1),
    blocks: [],
    drives,
  };
}
