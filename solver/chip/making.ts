import type { Nm } from './chip.ts';

/** How the chip is made, and which findings its designer takes as they are. */

export const PROCESS_KINDS = [
  'film-mask',
  'glass-mask',
  'dry-film',
  'glass-etch',
  'silicon-etch',
  'milling',
  'laser',
  'printing',
] as const;
export type ProcessKind = (typeof PROCESS_KINDS)[number];

/** Numbers of one workshop that stand in place of the usual ones of its process. */
export interface ProcessNumbers {
  /** Least mask width of a channel. */
  readonly leastWidth?: Nm;
  /** Least wall between two bodies of a layer, as drawn. */
  readonly leastGap?: Nm;
  /** Radius of the cutting tool, or of what laser and printer leave in a corner. */
  readonly toolRadius?: Nm;
  /** Material left between a channel and the edge of the chip. */
  readonly edge?: Nm;
  /** How far two layers may lie off each other. */
  readonly alignment?: Nm;
  /** Greatest depth over width. */
  readonly deepest?: number;
  /** Greatest width over depth that a roof spans. */
  readonly widest?: number;
  /** Greatest height over thickness of a wall. */
  readonly wall?: number;
  /** How far an etch goes sideways under its mask, over the depth. */
  readonly undercut?: number;
  /** Young's modulus of a soft lid where its layer has no roof, Pa. */
  readonly modulus?: number;
}

export interface Process extends ProcessNumbers {
  readonly kind: ProcessKind;
}

/** A finding that the designer takes as it is, and why; it goes on being listed. */
export interface Acceptance {
  readonly kind: string;
  /** As the finding has it: "feed", "port:in", '' for the whole chip. */
  readonly where: string;
  readonly reason: string;
}
