import { solve } from '../sparse/solve.ts';
import type { Edges } from './edges.ts';
import type { PreparedNetwork } from './prepare.ts';
import type { NetworkSolution, NetworkSpec } from './spec.ts';

/** What dependence is asked of: the flow of a duct or of a drive, the pressure of a node, by index. */
export interface Target {
  readonly of: 'duct' | 'drive' | 'node';
  readonly index: number;
}

export interface Gradient {
  /** λ of each node (far ends of tubing included): what the target gains per flow driven in there. */
  readonly weight: Float64Array;
  /** m³/s (Pa for a node) by which the target changes per relative change of each duct's resistance: ∂q/∂ln R, ducts. */
  readonly byResistance: Float64Array;
  /**
   * m³/s per relative error of each block, blocks: the most by which the flow changes where the block's
   * matrix A is off by no more than its own energy, |x·δA·y| ≤ √(x·A·x) √(y·A·y).
   */
  readonly byBlock: Float64Array;
  /** ∂q/∂value of each drive: m³/(s Pa) for a pressure, 1 for a flow. */
  readonly byDrive: Float64Array;
}

/**
 * How flows of a solved network depend on every resistance and every drive, by one more solve with the
 * factor at hand for each: with λ the pressures' weights in the flow q (A λ = ∂q/∂p; at a pressure-driven
 * node λ = −1 where its own flow is asked for, else 0; for the pressure of a node A λ is 1 there),
 *   ∂q/∂ln R_e = (λ from − λ to) q_e, less q itself where e is the duct asked for,
 *   ∂q/∂(flow driven in at i) = λ_i,   ∂q/∂(pressure given at k) = −Σ over edges at k of g (λ_k − λ_other),
 * plus ± g of the duct asked for where it ends at k.
 *
 * @param network as left by the `solveNetwork` of the same spec that gave `solution`
 */
export function gradients(
  spec: NetworkSpec,
  network: PreparedNetwork,
  solution: NetworkSolution,
  targets: readonly Target[],
): Gradient[] {
  return gradientsBy(spec, network, solution, targets, weightsOf(spec, network, targets));
}

/**
 * Where weights lie: given again and again it is made once, since fresh memory of this size takes longer to get than
 * the weights to find. What it held before is gone.
 */
export interface WeightRoom {
  /** Right sides and weights, one after the other for each target. */
  right: Float64Array;
  weights: Float64Array;
}

export const weightRoom = (): WeightRoom => ({ right: new Float64Array(0), weights: new Float64Array(0) });

/**
 * The weights λ of each target, which depend on the network and not on what drives it by how much.
 * @param network as left by the `solveNetwork` of the same spec
 */
export function weightsOf(
  spec: NetworkSpec,
  network: PreparedNetwork,
  targets: readonly Target[],
  room = weightRoom(),
): Float64Array[] {
  const { edges, unknown, nodeOf, conductance, factor } = network;
  const { from, to, driveNode } = edges;
  const n = nodeOf.length;
  const touching = edgesAt(edges);
  const right = cleared(room, 'right', n * targets.length);
  const all = cleared(room, 'weights', edges.nodes * targets.length);
  const weights = targets.map((_, t) => all.subarray(t * edges.nodes, (t + 1) * edges.nodes));
  targets.forEach(({ of, index }, t) => {
    const add = (node: number, value: number) => {
      if (unknown[node] >= 0) right[t * n + unknown[node]] += value;
    };
    if (of === 'duct') {
      if (from[index] === to[index]) return;
      add(from[index], conductance[index]);
      add(to[index], -conductance[index]);
      return;
    }
    if (of === 'node') {
      add(index, 1);
      return;
    }
    if (spec.drives[index].kind === 'flow') return;
    const at = driveNode[index];
    weights[t][at] = -1;
    for (const e of touching(at)) {
      if (from[e] === to[e]) continue;
      if (from[e] === at) add(to[e], -conductance[e]);
      if (to[e] === at) add(from[e], -conductance[e]);
    }
  });
  solve(factor, right, targets.length);

  weights.forEach((weight, t) => {
    for (let u = 0; u < n; u += 1) weight[nodeOf[u]] = right[t * n + u];
  });
  return weights;
}

/** As many noughts of a room, which grows where it is too small. */
function cleared(room: WeightRoom, which: keyof WeightRoom, length: number): Float64Array {
  if (room[which].length < length) room[which] = new Float64Array(length);
  else room[which].fill(0, 0, length);
  return room[which].subarray(0, length);
}

/** As `gradients`, by weights that are known. */
export function gradientsBy(
  spec: NetworkSpec,
  network: PreparedNetwork,
  solution: NetworkSolution,
  targets: readonly Target[],
  weights: readonly Float64Array[],
): Gradient[] {
  return targets.map((target, t) => new LazyGradient(spec, network, solution, target, weights[t]));
}

/** Most who ask need one of the lists or none, and these cost more than the weights. */
class LazyGradient implements Gradient {
  readonly weight: Float64Array;
  readonly #spec: NetworkSpec;
  readonly #network: PreparedNetwork;
  readonly #solution: NetworkSolution;
  readonly #target: Target;
  #byResistance: Float64Array | null = null;
  #byBlock: Float64Array | null = null;
  #byDrive: Float64Array | null = null;

  constructor(
    spec: NetworkSpec,
    network: PreparedNetwork,
    solution: NetworkSolution,
    target: Target,
    weight: Float64Array,
  ) {
    this.#spec = spec;
    this.#network = network;
    this.#solution = solution;
    this.#target = target;
    this.weight = weight;
  }

  get byResistance(): Float64Array {
    this.#byResistance ??= resistanceGradient(this.#network, this.#solution, this.#target, this.weight);
    return this.#byResistance;
  }

  get byBlock(): Float64Array {
    this.#byBlock ??= blockGradient(this.#spec, this.#network, this.#solution, this.weight);
    return this.#byBlock;
  }

  get byDrive(): Float64Array {
    this.#byDrive ??= driveGradient(this.#spec, this.#network, this.#target, this.weight);
    return this.#byDrive;
  }
}

function resistanceGradient(
  { edges }: PreparedNetwork,
  { ductFlow }: NetworkSolution,
  { of, index }: Target,
  weight: Float64Array,
): Float64Array {
  const { from, to } = edges;
  const found = new Float64Array(ductFlow.length);
  for (let e = 0; e < found.length; e += 1) found[e] = (weight[from[e]] - weight[to[e]]) * ductFlow[e];
  if (of === 'duct') found[index] -= ductFlow[index];
  return found;
}

/** Edges that end at a node, in order; found for all nodes when first asked for. */
function edgesAt({ from, to, nodes }: Edges): (node: number) => Int32Array {
  let start: Int32Array | null = null;
  let edge = new Int32Array(0);
  return (node) => {
    if (!start) {
      start = new Int32Array(nodes + 1);
      edge = new Int32Array(2 * from.length);
      for (let e = 0; e < from.length; e += 1) {
        start[from[e] + 1] += 1;
        if (to[e] !== from[e]) start[to[e] + 1] += 1;
      }
      for (let i = 0; i < nodes; i += 1) start[i + 1] += start[i];
      const next = start.slice();
      for (let e = 0; e < from.length; e += 1) {
        edge[next[from[e]]++] = e;
        if (to[e] !== from[e]) edge[next[to[e]]++] = e;
      }
    }
    return edge.subarray(start[node], start[node + 1]);
  };
}

function blockGradient(
  spec: NetworkSpec,
  { edges, conductance }: PreparedNetwork,
  { pressure }: NetworkSolution,
  weight: Float64Array,
): Float64Array {
  const { from, to } = edges;
  return Float64Array.from(spec.blocks, (_, b) => {
    let ours = 0;
    let theirs = 0;
    for (let e = edges.blockStart[b]; e < edges.blockStart[b + 1]; e += 1) {
      ours += conductance[e] * (weight[from[e]] - weight[to[e]]) ** 2;
      theirs += conductance[e] * (pressure[from[e]] - pressure[to[e]]) ** 2;
    }
    return Math.sqrt(Math.max(0, ours)) * Math.sqrt(Math.max(0, theirs));
  });
}

function driveGradient(
  spec: NetworkSpec,
  { edges, conductance }: PreparedNetwork,
  { of, index }: Target,
  weight: Float64Array,
): Float64Array {
  const { from, to, driveNode } = edges;
  const supplied = new Float64Array(edges.nodes);
  for (let e = 0; e < from.length; e += 1) {
    const q = conductance[e] * (weight[from[e]] - weight[to[e]]);
    supplied[from[e]] -= q;
    supplied[to[e]] += q;
  }
  if (of === 'duct') {
    supplied[from[index]] += conductance[index];
    supplied[to[index]] -= conductance[index];
  }
  const byDrive = Float64Array.from(spec.drives, ({ kind, node }, d) =>
    kind === 'flow' ? weight[node] : supplied[driveNode[d]],
  );
  if (of === 'drive' && spec.drives[index].kind === 'flow') byDrive[index] = 1;
  return byDrive;
}
