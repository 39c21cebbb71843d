import type { CellSolution } from '../cell/cell.ts';
import { type PeakShear, peakShear } from '../cell/peak.ts';

/** Pressures that differ by less than this share of their spread make the same flow. */
const ALIKE = 1e-11;
/** Flow patterns remembered for each solution; the copies of a junction in one chip rarely have more. */
const PATTERNS = 12;

interface Seen {
  readonly pattern: Float64Array;
  readonly peak: PeakShear | null;
}
const seen = new WeakMap<CellSolution, Seen[]>();

/**
 * The peak of a cell, remembered by flow pattern: creeping flow is linear, so a pattern that only grows
 * has its peak at the same place, grown alike. Looking a cell's walls through anew for every edit would
 * cost more than the rest of the answer.
 */
export function patternPeak(solution: CellSolution, pressures: readonly number[]): PeakShear | null {
  const last = pressures.at(-1)!;
  let spread = 0;
  for (const p of pressures) spread = Math.max(spread, Math.abs(p - last));
  if (spread === 0) return peakShear(solution, pressures);
  const pattern = Float64Array.from(pressures, (p) => (p - last) / spread);
  // The flow turned round has the same walls and the same peak.
  if ((pattern.find((value) => value !== 0) ?? 0) < 0)
    for (let i = 0; i < pattern.length; i += 1) pattern[i] *= -1;
  let known = seen.get(solution);
  if (!known) {
    known = [];
    seen.set(solution, known);
  }
  let match = known.find((one) => one.pattern.every((value, i) => Math.abs(value - pattern[i]) <= ALIKE));
  if (!match) {
    match = { pattern, peak: peakShear(solution, pattern) };
    known.unshift(match);
    if (known.length > PATTERNS) known.pop();
  }
  return match.peak && { ...match.peak, value: match.peak.value * spread };
}
