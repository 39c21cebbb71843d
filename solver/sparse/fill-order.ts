import { peelLeaves } from './leaves.ts';
import type { SymmetricMatrix } from './matrix.ts';
import { minimumDegree } from './minimum-degree.ts';

/**
 * An order of elimination that keeps the factor sparse: leaves first, then approximate minimum degree
 * on what is left.
 * @returns the unknowns in order of elimination, n
 */
export function fillOrder(pattern: SymmetricMatrix): Int32Array {
  const { n, columnStart, row } = pattern;
  const order = new Int32Array(n);
  const left = new Uint8Array(n);
  const leaves = peelLeaves(pattern, order, left);
  if (leaves === n) return order;

  const core = new Int32Array(n - leaves);
  const local = new Int32Array(n);
  let count = 0;
  for (let i = 0; i < n; i += 1) {
    if (left[i] === 0) continue;
    core[count] = i;
    local[i] = count;
    count += 1;
  }
  const start = new Int32Array(count + 1);
  for (let j = 0; j < n; j += 1) {
    if (left[j] === 0) continue;
    const end = columnStart[j + 1];
    for (let p = columnStart[j] + 1; p < end; p += 1) {
      const i = row[p];
      if (left[i] === 0) continue;
      start[local[i] + 1] += 1;
      start[local[j] + 1] += 1;
    }
  }
  for (let i = 0; i < count; i += 1) start[i + 1] += start[i];
  const graph = new Int32Array(start[count] + count + 1);
  const fill = start.slice(0, count);
  for (let j = 0; j < n; j += 1) {
    if (left[j] === 0) continue;
    const b = local[j];
    const end = columnStart[j + 1];
    for (let p = columnStart[j] + 1; p < end; p += 1) {
      const i = row[p];
      if (left[i] === 0) continue;
      const a = local[i];
      graph[fill[a]] = b;
      fill[a] += 1;
      graph[fill[b]] = a;
      fill[b] += 1;
    }
  }
  const coreOrder = new Int32Array(count);
  minimumDegree(count, start, graph, coreOrder);
  for (let k = 0; k < count; k += 1) order[leaves + k] = core[coreOrder[k]];
  return order;
}
