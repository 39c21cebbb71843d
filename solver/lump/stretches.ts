import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';

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
}

/** In a metre; dividing by it rounds once, which multiplying by 1e-9 does not. */
export const NANOMETRES = 1e9;

/**
 * Ideal junctions: every site is one node at one pressure, every piece one stretch. A piece that lies
 * wholly inside a port's hole or a chamber keeps a nanometre, so that its flow stays defined; that is
 * below the rounding of the drawing.
 */
export function idealStretches(graph: Graph): Stretch[] {
  return graph.pieces.map((piece, index) => ({
    piece: index,
    from: piece.from,
    to: piece.to,
    fromName: graph.sites[piece.from]!.name,
    toName: graph.sites[piece.to]!.name,
    length: Math.max(piece.length, 1) / NANOMETRES,
    width: [piece.width[0] / NANOMETRES, piece.width[1] / NANOMETRES],
  }));
}

/** Depth of a layer in metres. */
export function depthOf(chip: Chip, layerIndex: number): number {
  return chip.layers[layerIndex]!.depth / NANOMETRES;
}
