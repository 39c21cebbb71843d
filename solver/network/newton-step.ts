import { factorise } from '../sparse/factorise.ts';
import {
  emptyGeneralFactor,
  factoriseGeneral,
  type GeneralFactor,
  solveGeneral,
} from '../sparse/factorise-general.ts';
import { solve } from '../sparse/solve.ts';
import type { LawState } from './law.ts';
import type { PreparedNetwork } from './prepare.ts';
import { assemble, leaveOut } from './pressures.ts';

/** What steps on networks with roofs that give need beside the network's own arrays. */
export interface StepRoom {
  /** Values opposite those of the network's matrix. */
  readonly mirrored: Float64Array;
  readonly factor: GeneralFactor;
}

export function stepRoom({ pattern, factor }: PreparedNetwork): StepRoom {
  return {
    mirrored: new Float64Array(pattern.matrix.value.length),
    factor: emptyGeneralFactor(factor.symbolic),
  };
}

/** Whether every flow depends on the difference of its pressures only, so that J is symmetric. */
export function dependsOnDifferences({ byFrom, byTo }: LawState): boolean {
  for (let e = 0; e < byFrom.length; e += 1) {
    if (Math.abs(byFrom[e] - byTo[e]) > 1e-12 * byFrom[e]) return false;
  }
  return true;
}

/**
 * δ with J δ = r in place of r, where J is the change of every node's outflow with the pressures. Where flows
 * depend on pressure differences only, J is the matrix of a linear network. Where they depend on both pressures
 * (a roof that gives), an edge's slopes at its two ends differ; each column still sums to what goes to given
 * pressures, so that elimination without exchange of rows is safe.
 *
 * @param room null where J is symmetric
 * @param left parts to leave out
 * @throws SingularMatrix
 */
export function newtonStep(
  network: PreparedNetwork,
  { byFrom, byTo }: LawState,
  room: StepRoom | null,
  left: Uint8Array,
  right: Float64Array,
): void {
  const { pattern, factor } = network;
  if (room === null) {
    network.conductance.set(byFrom);
    assemble(network, left);
    factorise(factor.symbolic, pattern.matrix, factor);
    solve(factor, right);
    return;
  }
  assembleSlopes(network, byFrom, byTo, left, room.mirrored);
  factoriseGeneral(factor.symbolic, pattern.matrix, room.mirrored, room.factor);
  solveGeneral(room.factor, right);
}

/** J: row i is the outflow of node i, column j its change with the pressure of node j. */
function assembleSlopes(
  network: PreparedNetwork,
  byFrom: Float64Array,
  byTo: Float64Array,
  left: Uint8Array,
  mirrored: Float64Array,
): void {
  const { edges, unknown, pattern } = network;
  const { from, to } = edges;
  const { scatter, matrix } = pattern;
  const { value } = matrix;
  value.fill(0);
  mirrored.fill(0);
  for (let e = 0, s = 0; e < byFrom.length; e += 1, s += 3) {
    const first = scatter[s];
    const between = scatter[s + 1];
    const second = scatter[s + 2];
    if (first >= 0) value[first] += byFrom[e];
    if (second >= 0) value[second] += byTo[e];
    if (between < 0) continue;
    // The value kept lies in the row of the larger unknown.
    const rising = unknown[from[e]] < unknown[to[e]];
    value[between] -= rising ? byFrom[e] : byTo[e];
    mirrored[between] -= rising ? byTo[e] : byFrom[e];
  }
  leaveOut(network, left, value);
  leaveOut(network, left, mirrored);
}
