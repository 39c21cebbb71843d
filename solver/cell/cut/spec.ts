import type { Finding } from '../../problem/finding.ts';
import type { CellShape } from '../shape.ts';

/**
 * The chip cut into cells, solved in three dimensions, and the ducts between them. Both meet in nodes:
 * places at one pressure, numbered from 0. Plan lengths are nm unless a field says otherwise.
 */
export interface Cut {
  readonly cells: readonly CellSpec[];
  readonly ducts: readonly DuctSpec[];
  readonly nodeCount: number;
  /** Node of each port, in the chip's order. */
  readonly portNode: Int32Array;
  /** Node of each site of the graph; -1 where the site lies inside a cell. */
  readonly siteNode: Int32Array;
  readonly findings: readonly Finding[];
}

export type CellKind = 'junction' | 'bend' | 'step' | 'chamber' | 'port' | 'via';

export interface CellSpec {
  /** "junction:1" after the first site inside, else "bend:4" or "step:1" (a steep taper), numbered in drawing order. */
  readonly name: string;
  readonly kind: CellKind;
  /** Indices of the graph's sites inside. */
  readonly sites: readonly number[];
  readonly layerIndex: number;
  /** What stands where on the plan: local (x, y) in metres is at origin + 1e9 (x, y). */
  readonly origin: readonly [number, number];
  /** Lengths in metres, coordinates local. */
  readonly shape: CellShape;
  /** Face k of the shape is faces[k - 1]. */
  readonly faces: readonly CellFace[];
}

export interface CellFace {
  /** Square across a channel, the end of a channel at a port without a hole, or the rim of a hole. */
  readonly kind: 'cut' | 'end' | 'rim';
  readonly node: number;
  /** Index of the graph's piece that goes on from it; -1 at a rim. */
  readonly piece: number;
  /** Distance along the channel; 0 at a rim. */
  readonly s: number;
  /** Across it; the hole's diameter at a rim. */
  readonly width: number;
  /** Middle of the cut, or of the hole. */
  readonly centre: readonly [number, number];
  /** Unit, out of the cell; [0, 0] at a rim. */
  readonly direction: readonly [number, number];
}

export interface DuctSpec {
  /** Index into Graph.pieces; a piece may hold several ducts, in path order, or none. */
  readonly piece: number;
  readonly from: number;
  readonly to: number;
  /** "port:in", "junction:3", "bend:4": what lies at its ends. */
  readonly fromName: string;
  readonly toName: string;
  /** Distances along the channel. */
  readonly start: number;
  readonly stop: number;
  readonly length: number;
  /** Mask widths at its ends; linear between. */
  readonly width: readonly [number, number];
}

/** What counts as what; every number has its reason where it is defined (bounds.ts). */
export interface CutOptions {
  /** Cells larger than this, in widths of channel, are not solved but taken as ideal. */
  readonly largest: number;
  /** Places closer than this many decay lengths are one cell. */
  readonly mergeWithin: number;
  /** Cells (by name) to be left ideal, and why: those that could not be solved. */
  readonly leave: ReadonlyMap<string, string>;
}
