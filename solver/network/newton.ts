import { SingularMatrix } from '../sparse/singular.ts';
import type { Imposed } from './imposed.ts';
import { applyLaws, type DuctLaw, type LawState, lawState } from './law.ts';
import { dependsOnDifferences, newtonStep, type StepRoom, stepRoom } from './newton-step.ts';
import type { PreparedNetwork } from './prepare.ts';

/** Imbalance of every node over what passes through it at which the pressures count as found. */
export const CONVERGED = 1e-10;
/** Below this another step gains nothing that counts. */
const ROUND_OFF = 1e-12;
/** A node is judged by at least this share of all that passes through the nodes. */
const LEAST_SHARE = 1e-9;
/** What the sum of all imbalances may be from round-off in the laws, over all that flows. */
const LAW_ROUND_OFF = 1e-12;
const STEPS_MOST = 60;
/** Of a Newton step, tried at least. */
const SMALLEST_SHARE = 2 ** -30;

/** A search for the pressures at which every node balances, and where it stands. */
export interface Search {
  readonly network: PreparedNetwork;
  readonly laws: readonly (DuctLaw | null)[];
  /** m³/(s Pa) of each edge as if linear. */
  readonly linear: Float64Array;
  readonly drives: Imposed;
  /** Pa, in two parts; those given are never changed. */
  readonly coarse: Float64Array;
  readonly fine: Float64Array;
  /** Laws at these pressures. */
  state: LawState;
  /** Worst imbalance of each part, over what passes through the node. */
  readonly worst: Float64Array;
  /** m³/s per node, scratch: what flows in less what flows out, and all of both. */
  readonly net: Float64Array;
  readonly around: Float64Array;
  /** Made at the first law that asks for it. */
  room: StepRoom | null;
  /** Newton steps taken so far. */
  steps: number;
}

/**
 * Newton's method from where the search stands: J δ = −imbalance, then the longest of δ, δ/2, δ/4, … that
 * brings Σ |imbalance| down.
 *
 * @param blend share of the linear law in each law
 * @returns whether every node balances
 */
export function newton(search: Search, blend: number): boolean {
  const { network, laws, linear, drives, coarse, fine, worst } = search;
  const { nodeOf } = network;
  const right = new Float64Array(nodeOf.length);
  const step = new Float64Array(nodeOf.length);
  const before = fine.slice();
  let other = lawState(linear.length);
  if (applyLaws(network, laws, linear, blend, coarse, fine, search.state) >= 0) {
    worst.fill(Number.POSITIVE_INFINITY);
    return false;
  }
  let sum = imbalance(search, search.state, right);
  for (let k = 0; k < STEPS_MOST; k += 1) {
    const reached = largest(worst);
    if (reached <= ROUND_OFF) return true;
    try {
      if (search.room === null && !dependsOnDifferences(search.state)) search.room = stepRoom(network);
      step.set(right);
      newtonStep(network, search.state, search.room, drives.left, step);
    } catch (error) {
      if (error instanceof SingularMatrix) return false;
      throw error;
    }
    before.set(fine);
    let noise = 0;
    for (let e = 0; e < linear.length; e += 1) noise += LAW_ROUND_OFF * search.state.size[e];
    let accepted = false;
    let tried = 0;
    for (let size = 1; !accepted && size > SMALLEST_SHARE; size /= 2) {
      for (let u = 0; u < step.length; u += 1) fine[nodeOf[u]] = before[nodeOf[u]] + size * step[u];
      if (applyLaws(network, laws, linear, blend, coarse, fine, other) >= 0) continue;
      tried = imbalance(search, other, right);
      accepted = tried <= (1 - 1e-4 * size) * sum || tried <= noise;
    }
    search.steps += 1;
    const now = largest(worst);
    if (!accepted || (reached <= CONVERGED && now > reached)) {
      fine.set(before);
      imbalance(search, search.state, right);
      return reached <= CONVERGED;
    }
    const left = search.state;
    search.state = other;
    other = left;
    sum = tried;
    normalise(coarse, fine, nodeOf);
    if (reached <= CONVERGED && now > reached / 2) return true;
  }
  return worst.every((w) => w <= CONVERGED);
}

function largest(values: Float64Array): number {
  let most = 0;
  for (let i = 0; i < values.length; i += 1) most = Math.max(most, values[i]);
  return most;
}

/** Moves what coarse can hold out of fine, without rounding. */
function normalise(coarse: Float64Array, fine: Float64Array, nodeOf: Int32Array): void {
  for (let u = 0; u < nodeOf.length; u += 1) {
    const i = nodeOf[u];
    const together = coarse[i] + fine[i];
    const rest = together - coarse[i];
    fine[i] = coarse[i] - (together - rest) + (fine[i] - rest);
    coarse[i] = together;
  }
}

/**
 * What flows into each unknown's node too much, into `right`, and the worst of it per part, into `search.worst`.
 * @returns Σ |imbalance|, m³/s
 */
function imbalance(
  { network, drives, worst, net, around }: Search,
  { flow, size }: LawState,
  right: Float64Array,
): number {
  const { edges, parts, nodeOf } = network;
  const { from, to } = edges;
  const { injected, left } = drives;
  net.set(injected);
  for (let i = 0; i < around.length; i += 1) around[i] = Math.abs(injected[i]);
  let most = 0;
  for (let e = 0; e < flow.length; e += 1) {
    const q = flow[e];
    net[from[e]] -= q;
    net[to[e]] += q;
    around[from[e]] += size[e];
    around[to[e]] += size[e];
  }
  for (let i = 0; i < around.length; i += 1) most = Math.max(most, around[i]);
  worst.fill(0);
  let sum = 0;
  for (let u = 0; u < nodeOf.length; u += 1) {
    const i = nodeOf[u];
    const part = parts.of[i];
    right[u] = left[part] === 1 ? 0 : net[i];
    const off = Math.abs(right[u]);
    sum += off;
    if (off > 0) worst[part] = Math.max(worst[part], (2 * off) / Math.max(around[i], LEAST_SHARE * most));
  }
  return sum;
}
