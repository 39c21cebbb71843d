/**
 * A lumped network. Nodes carry a pressure (Pa), everything else a flow (m³/s).
 *
 * Sign, once for all: a duct's flow is positive from its first node to its second; a drive's flow is
 * positive into the network; a block's flow at one of its nodes is positive out of that node into the block.
 */
export interface NetworkSpec {
  readonly nodeCount: number;
  /** First and second node of each duct. */
  readonly ductFrom: Int32Array;
  readonly ductTo: Int32Array;
  /** Pa s/m³ of each duct, positive and finite. */
  readonly resistance: Float64Array;
  readonly blocks: readonly Block[];
  readonly drives: readonly Drive[];
}

/** A piece of the plan solved in three dimensions, seen through its faces. */
export interface Block {
  /** Node of each face. */
  readonly nodes: Int32Array;
  /**
   * m³/(s Pa), faces × faces by rows: flow into the block through face i is Σⱼ matrix(i, j) p(j). Symmetric,
   * positive semidefinite, every row summing to zero: only the entries off the diagonal are used.
   */
  readonly matrix: Float64Array;
}

/** What is imposed at a node. A node with none is closed. */
export interface Drive {
  readonly node: number;
  readonly kind: 'pressure' | 'flow';
  /** Pa or m³/s into the network. */
  readonly value: number;
  /** Resistance of tubing before the node, Pa s/m³, 0 for none; a driven pressure lies at its far end. */
  readonly series: number;
}

/** A part of the network that has no answer, and why. */
export interface Fault {
  /**
   * no-drive: nothing drives this part, its pressure is anyone's guess. no-reference: only flows are given
   * there. contradiction: two pressures are given at one node. singular: the pressures are not determined
   * though a pressure is given (a block that passes nothing between its faces). no-flow: a yield stress holds
   * all of it still. not-converged: its laws did not lead to a balance.
   */
  readonly kind: 'no-drive' | 'no-reference' | 'contradiction' | 'singular' | 'no-flow' | 'not-converged';
  /** All nodes of the part, ascending. */
  readonly nodes: Int32Array;
  /** The drives at fault, by index: those that contradict, or the flows that lack a reference. */
  readonly drives: readonly number[];
}

export interface NetworkSolution {
  /** Pa, nodeCount; not a number in a part that has a fault. */
  readonly pressure: Float64Array;
  /** m³/s of each duct; 0 in a part that is at rest (no-drive, no-flow), not a number in a part that has another fault. */
  readonly ductFlow: Float64Array;
  /** m³/s into each block at each of its faces. */
  readonly blockFlow: readonly Float64Array[];
  /** m³/s into the network at each drive. */
  readonly driveFlow: Float64Array;
  /** Pa at the far end of each drive's tubing. */
  readonly drivePressure: Float64Array;
  /** 1 where a flow is below 1e-9 of what flows through its part: too small for its digits to mean anything. */
  readonly ductUnresolved: Uint8Array;
  readonly driveUnresolved: Uint8Array;
  /** All that the drives push in, m³/s. */
  readonly throughput: number;
  /** Worst imbalance of a node over what flows through that node (at least 1e-9 of its part's throughput). */
  readonly conservationResidual: number;
  /** Worst difference between a flow and conductance × pressure difference, over the same as above. */
  readonly lawResidual: number;
  /** W that the drives put in, at the far end of their tubing. */
  readonly powerIn: number;
  /** W lost in ducts, blocks and tubing. */
  readonly dissipation: number;
  readonly faults: readonly Fault[];
}
