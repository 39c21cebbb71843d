import type { CellSpec } from '../cell/cut/spec.ts';
import type { Chip } from '../chip/chip.ts';
import type { Graph, Piece } from '../chip/graph.ts';

/** A stretch of channel that the network sees as one duct. */
export interface Stretch {
  /** Index into Graph.pieces; one piece may hold several stretches, in path order. */
  readonly piece: number;
  /** Network nodes. */
  readonly from: number;
  readonly to: number;
  /** Names of the places at its ends: "port:in", "junction:1". */
  readonly fromName: string;
  readonly toName: string;
  /** m */
  readonly length: number;
  /** Mask widths at its ends, m. */
  readonly width: readonly [number, number];
  /** Distances along the channel at which it starts and stops, m. */
  readonly along: readonly [number, number];
}

/** In a metre; dividing by it rounds once, which multiplying by 1e-9 does not. */
export const NANOMETRES = 1e9;

/** Depth of a channel in metres: its own, where it was measured, else its layer's. */
export function channelDepth(chip: Chip, { channelIndex, layerIndex }: Piece): number {
  return (chip.channels[channelIndex].depth ?? chip.layers[layerIndex].depth) / NANOMETRES;
}

/**
 * By how much the resistance of the channels at a solved cell may differ from what its one depth makes of it,
 * relative: 0 where they all have that depth. At small depths resistance goes with its cube, where it differs most.
 */
export function depthMismatch(chip: Chip, { pieces }: Graph, { faces, shape }: CellSpec): number {
  let most = 0;
  for (const { piece } of faces) {
    if (piece < 0) continue;
    const own = channelDepth(chip, pieces[piece]);
    // far below what counts in the end
    if (Math.abs(shape.depth - own) < 1e-7 * own) continue;
    most = Math.max(most, Math.abs((shape.depth / own) ** 3 - 1), Math.abs((own / shape.depth) ** 3 - 1));
  }
  // Metres and whole nanometres differ by rounding.
  return most < 1e-6 ? 0 : most;
}

/** Depth of a layer in metres. */
export function depthOf(chip: Chip, layerIndex: number): number {
  return chip.layers[layerIndex].depth / NANOMETRES;
}
