import type { Crossing } from './crossing.ts';
import type { History } from './laws.ts';

const NOTHING: History = { stress: new Float64Array(0), time: new Float64Array(0) };

/**
 * A chamber taken at one pressure: what goes through stays for its volume over the flow. How fast and how
 * strained it goes is not known; the times are those of complete mixing, of which a hundredth leaves within
 * −ln 0.99 of the mean and a hundredth stays for −ln 0.01 of it.
 */
export function poolCrossing(time: number): Crossing {
  return {
    time,
    fast: -Math.log(0.99) * time,
    slow: -Math.log(0.01) * time,
    peakWallShear: 0,
    stretch: null,
    dose: () => 0,
    history: () => NOTHING,
    hugging: () => ({ time, peak: 0, dose: () => 0, history: () => NOTHING }),
  };
}
