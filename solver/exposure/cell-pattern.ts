/**
 * How the flow through a cell divides between its faces, rounded so that what was worked out once serves
 * again while a chip is being edited: creeping flow keeps its pattern when all flows grow alike, and a few
 * hundredths more or less in one arm change little of where fluid goes and how it is strained. Sizes (flow,
 * viscosity) are not rounded.
 */
export interface CellPattern {
  /** Equal for patterns that count as one. */
  readonly key: string;
  /** Flow into the cell at each face, those in and those out adding up to 1. */
  readonly flow: Float64Array;
  /** By how much the arm that differs most from its true flow does, relative to it. */
  readonly rounding: number;
}

/** Steps in a factor of two: neighbours differ by 4.4 %, so that rounding is at most 2.2 %. */
const STEPS = 16;
/** Arms with less than this share of the flow count as closed. */
const LEAST = 1e-6;

/** @param flow into the cell at each face, m³/s; @returns null where nothing flows */
export function cellPattern(flow: ArrayLike<number>): CellPattern | null {
  const n = flow.length;
  let into = 0;
  for (let i = 0; i < n; i += 1) into += Math.max(0, flow[i]);
  if (!(into > 0)) return null;
  const rounded = new Float64Array(n);
  const key: string[] = [];
  const sum = [0, 0];
  for (let i = 0; i < n; i += 1) {
    const share = Math.abs(flow[i]) / into;
    if (share < LEAST) {
      key.push('-');
      continue;
    }
    const step = Math.round(STEPS * Math.log2(share));
    rounded[i] = Math.sign(flow[i]) * 2 ** (step / STEPS);
    sum[flow[i] > 0 ? 0 : 1] += Math.abs(rounded[i]);
    key.push(`${flow[i] > 0 ? 'i' : 'o'}${step}`);
  }
  if (sum[0] === 0 || sum[1] === 0) return null;
  let rounding = 0;
  for (let i = 0; i < n; i += 1) {
    if (rounded[i] === 0) continue;
    rounded[i] /= sum[rounded[i] > 0 ? 0 : 1];
    rounding = Math.max(rounding, Math.abs((rounded[i] * into) / flow[i] - 1));
  }
  return { key: key.join(' '), flow: rounded, rounding };
}
