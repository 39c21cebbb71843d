import type { History } from './laws.ts';

/**
 * How a path crosses a duct or a solved cell at the flow that there is. The mean path stands for all of the
 * flow: what it meets is the mean over the fluid that goes through, exactly, because the mean of ∫ f dt over
 * the flow is ∫ f dV / Q. What costs is worked out when asked for.
 */
export interface Crossing {
  /** Mean time, and the times that the fastest hundredth of the flow stays below and the slowest above, s. */
  readonly time: number;
  readonly fast: number;
  readonly slow: number;
  /** Pa; null where a sharp corner leaves it unbounded. */
  readonly peakWallShear: number | null;
  /** Where fluid is pulled apart fastest; null in a duct, where it only shears. */
  readonly stretch: Stretch | null;
  /** Relative: how far the flow that paths inside were followed in may be from the true one; 0 where absent. */
  readonly rounding?: number;
  /** Of the mean path, Pa^γ s: ∫ stress^γ dV / Q. */
  dose(exponent: number): number;
  history(): History;
  /** A ball whose centre stays one radius off the wall; null where it does not fit in. */
  hugging(diameter: number): Hugging | null;
}

export interface Hugging {
  /** s */
  readonly time: number;
  /** Largest stress at the ball's centre, Pa. */
  readonly peak: number;
  dose(exponent: number): number;
  history(): History;
}

/** The fastest stretching along the flow, which harms cells that touch no wall. */
export interface Stretch {
  /** Rate at which a line along the flow grows, 1/s. */
  readonly rate: number;
  /** Scalar stress of the full rate of strain there, µ √(2 e:e), Pa. */
  readonly stress: number;
  /** Place on the chip, m. */
  readonly at: readonly [number, number];
}
