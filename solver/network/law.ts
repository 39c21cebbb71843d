import type { PreparedNetwork } from './prepare.ts';

/** How much flows through a duct between two pressures: a shear-thinning fluid, a yield stress, a roof that gives. */
export interface DuctLaw {
  /**
   * The flow must rise (or stay) with the first pressure and fall (or stay) with the second, without jumps.
   *
   * @param drop Pa, p from − p to: given apart, because it can be far smaller than either
   * @param to Pa, pressure at the second node
   * @param out receives m³/s from first to second node, and its derivatives with p from (≥ 0) and p to (≤ 0),
   *   m³/(s Pa)
   */
  flow(drop: number, to: number, out: Float64Array): void;
}

/** Flow of every edge at some pressures, and how it depends on them. */
export interface LawState {
  /** m³/s */
  readonly flow: Float64Array;
  /** m³/s, what a node is judged by: the flow's magnitude, and at least 1e-4 of the linear law's. */
  readonly size: Float64Array;
  /** m³/(s Pa), ∂flow/∂p from and −∂flow/∂p to; positive */
  readonly byFrom: Float64Array;
  readonly byTo: Float64Array;
  /** 1 where the law gives less than the least that a duct passes. */
  readonly leaking: Uint8Array;
}

export function lawState(edges: number): LawState {
  return {
    flow: new Float64Array(edges),
    size: new Float64Array(edges),
    byFrom: new Float64Array(edges),
    byTo: new Float64Array(edges),
    leaking: new Uint8Array(edges),
  };
}

/**
 * What a duct passes at least, over what it would pass as a linear one. A yield stress makes that nothing; with
 * this, the pressures behind a plug stay determined, and the flow is one that counts as unresolved.
 */
const LEAK = 1e-11;
/** Round-off of a law that is a difference of large terms near its yield, over 1e-10. */
const LAW_NOISE = 1e-4;

/**
 * Laws at the pressures coarse + fine. Edges without one are linear.
 *
 * @param linear m³/(s Pa) of each edge as if linear
 * @param blend of each law taken as linear, 0 … 1: a path from a problem that is easy to the one asked
 * @returns the first duct whose law gives no number, or −1
 */
export function applyLaws(
  network: PreparedNetwork,
  laws: readonly (DuctLaw | null)[],
  linear: Float64Array,
  blend: number,
  coarse: Float64Array,
  fine: Float64Array,
  { flow, size, byFrom, byTo, leaking }: LawState,
): number {
  const { from, to } = network.edges;
  const out = new Float64Array(3);
  for (let e = 0; e < flow.length; e += 1) {
    const a = from[e];
    const b = to[e];
    const g = linear[e];
    const drop = coarse[a] - coarse[b] + (fine[a] - fine[b]);
    const straight = g * drop;
    const law = e < laws.length ? laws[e] : null;
    if (law === null) {
      flow[e] = straight;
      size[e] = Math.abs(straight);
      byFrom[e] = g;
      byTo[e] = g;
      continue;
    }
    law.flow(drop, coarse[b] + fine[b], out);
    const own = !(Math.abs(out[0]) < LEAK * Math.abs(straight));
    leaking[e] = own ? 0 : 1;
    const rest = 1 - blend;
    flow[e] = rest * (own ? out[0] : LEAK * straight) + blend * straight;
    size[e] = Math.max(Math.abs(flow[e]), LAW_NOISE * Math.abs(straight));
    byFrom[e] = rest * (own ? Math.max(out[1], LEAK * g) : LEAK * g) + blend * g;
    byTo[e] = rest * (own ? Math.max(-out[2], LEAK * g) : LEAK * g) + blend * g;
    if (!Number.isFinite(flow[e] + byFrom[e] + byTo[e])) return e;
  }
  return -1;
}
