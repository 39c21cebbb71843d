/**
 * What lies between two places of a network in the sense of its flow: the ducts that can be reached
 * from one going with the flow and from the other going against it.
 *
 * @param from, to first and second node of each duct; @param flow of each duct, positive from first to second
 * @returns 1 for each duct that carries fluid from `start` to `goal`
 */
export function ductsBetween(
  nodes: number,
  from: Int32Array,
  to: Int32Array,
  flow: ArrayLike<number | null>,
  start: number,
  goal: number,
): Uint8Array {
  const down = reach(nodes, from, to, flow, start, 1);
  const up = reach(nodes, from, to, flow, goal, -1);
  const found = new Uint8Array(from.length);
  for (let e = 0; e < from.length; e += 1) {
    const q = flow[e] ?? 0;
    if (q === 0) continue;
    const head = q > 0 ? from[e] : to[e];
    const tail = q > 0 ? to[e] : from[e];
    if (down[head] === 1 && up[tail] === 1) found[e] = 1;
  }
  return found;
}

/** 1 for each node that can be reached from `start` with the flow (sense 1) or against it (sense -1). */
function reach(
  nodes: number,
  from: Int32Array,
  to: Int32Array,
  flow: ArrayLike<number | null>,
  start: number,
  sense: 1 | -1,
): Uint8Array {
  const first = new Int32Array(nodes + 1);
  for (let e = 0; e < from.length; e += 1) {
    const q = (flow[e] ?? 0) * sense;
    if (q !== 0) first[(q > 0 ? from[e] : to[e]) + 1] += 1;
  }
  for (let i = 0; i < nodes; i += 1) first[i + 1] += first[i];
  const next = new Int32Array(first[nodes]);
  const fill = first.slice(0, nodes);
  for (let e = 0; e < from.length; e += 1) {
    const q = (flow[e] ?? 0) * sense;
    if (q === 0) continue;
    const tail = q > 0 ? from[e] : to[e];
    next[fill[tail]] = q > 0 ? to[e] : from[e];
    fill[tail] += 1;
  }
  const seen = new Uint8Array(nodes);
  seen[start] = 1;
  const stack = [start];
  while (stack.length > 0) {
    const node = stack.pop()!;
    for (let k = first[node]; k < first[node + 1]; k += 1) {
      if (seen[next[k]] === 1) continue;
      seen[next[k]] = 1;
      stack.push(next[k]);
    }
  }
  return seen;
}
