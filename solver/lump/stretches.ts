import type { Chip } from '../chip/chip.ts';
import type { Piece } from '../chip/graph.ts';

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

/** Depth of a layer in metres. */
export function depthOf(chip: Chip, layerIndex: number): number {
  return chip.layers[layerIndex].depth / NANOMETRES;
}
