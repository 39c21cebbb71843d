import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { PieceResult, PortResult } from '../chip/result.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { ProcessRules } from './process.ts';

/** One stretch of channel with what flows in it. */
export interface StretchEvidence {
  /** "feed#2" */
  readonly name: string;
  /** Index into Graph.pieces. */
  readonly piece: number;
  readonly result: PieceResult;
  /** Pa at its two ends, gauge. */
  readonly pressure: readonly [number, number];
  /** Mask widths at its ends, m. */
  readonly width: readonly [number, number];
  /** Of the narrow end, m. */
  readonly hydraulicDiameter: number;
  /** Of the narrow end, m². */
  readonly area: number;
}

/** One solved junction, bend or chamber. */
export interface CellEvidence {
  readonly id: string;
  /** m */
  readonly at: readonly [number, number];
  /**
   * Bound of the relative error of its port matrix: that of the shape solved (0 where a hole's own is in it),
   * and what comes of solving it with upright walls.
   */
  readonly accuracy: number;
  readonly upright: number;
  /** What comes of it for the peak; null where none can be given. */
  readonly uprightPeak: number | null;
  /** By how much resistances of its channels may differ from what its one depth makes of them; 0 where they share it. */
  readonly depths: number;
}

/** What the checks are made from: the chip, how the fluid reads it, and what was solved. */
export interface Evidence {
  readonly chip: Chip;
  readonly graph: Graph;
  readonly fluid: Fluid;
  readonly stretches: readonly StretchEvidence[];
  readonly ports: readonly PortResult[];
  readonly cells: readonly CellEvidence[];
  /** Relative accuracy that was asked of flows through junctions. */
  readonly asked: number;
}

/** What the drawing alone is checked by. */
export interface Drawn {
  readonly chip: Chip;
  readonly graph: Graph;
  /** Null where no process is given: then only what every process must obey is checked. */
  readonly rules: ProcessRules | null;
}
