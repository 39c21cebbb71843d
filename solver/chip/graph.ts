import type { Finding } from '../problem/finding.ts';
import type { Nm, Point } from './chip.ts';

/**
 * The drawing as the fluid reads it: places (sites) and the stretches of channel between them (pieces).
 * Derived from the chip alone by `readGraph`; thrown away and made anew at any edit.
 */

export type SiteKind = 'port' | 'junction' | 'chamber' | 'via' | 'end';

export interface Site {
  /** "port:in", "junction:1", "chamber:well", "via:v1", "end:1"; junctions and ends are numbered in drawing order. */
  readonly name: string;
  readonly kind: SiteKind;
  /** Centre, nm. */
  readonly at: Point;
  /** One layer, or two for a via. */
  readonly layers: readonly string[];
  /** Indices into Graph.pieces with which end of the piece lies here. */
  readonly arms: readonly { readonly piece: number; readonly end: 'from' | 'to' }[];
  /** Chamber ids that belong to this site. */
  readonly chambers: readonly string[];
  /** Port ids at this site (a port inside a chamber or on a junction shares its site). */
  readonly ports: readonly string[];
  readonly vias: readonly string[];
}

/** A vertex of a piece's centreline, from one site to the other. */
export interface Piece {
  /** Channel id and index of the channel in the chip. */
  readonly channel: string;
  readonly channelIndex: number;
  /** 1, 2, ... in path order: the piece is "feed#1". */
  readonly number: number;
  /** Indices into Graph.sites. */
  readonly from: number;
  readonly to: number;
  readonly layer: string;
  readonly layerIndex: number;
  /**
   * Centreline from site to site, nm (not rounded: intersections fall between whole nanometres).
   * Corners with bendRadius 0 are plain vertices; rounded bends are the arc's two tangent points
   * with the bulge of the arc between them (tan of a quarter of the sweep, positive counter-clockwise).
   */
  readonly path: readonly { readonly x: number; readonly y: number; readonly bulge: number }[];
  /** Distance along the channel at which the piece starts and ends, nm, for widths. */
  readonly start: number;
  readonly stop: number;
  /** Length that counts for resistance, nm: from rim to rim where an end lies in a port's hole or a chamber. */
  readonly length: number;
  /** What of `path` was taken off at each end inside the hole of a port or via, nm; a chamber cuts `path` itself. */
  readonly trim: readonly [number, number];
  /** Mask widths at the trimmed ends, nm; linear between. */
  readonly width: readonly [Nm, Nm];
}

export interface Graph {
  readonly sites: readonly Site[];
  readonly pieces: readonly Piece[];
  /** Index of the site each port sits on, in the chip's order of ports. */
  readonly portSite: Int32Array;
  /** Cavity number of each site: sites joined by fluid. */
  readonly cavity: Int32Array;
  /** Cavity number of each channel, in the chip's order; a channel swallowed by others has no piece but a cavity. */
  readonly channelCavity: Int32Array;
  readonly findings: readonly Finding[];
}
