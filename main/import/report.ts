import type { Note } from './drawing.ts';

/** How far the channels and chambers of a layer lie off what was drawn; SI. */
export interface Deviation {
  /** m² of the drawing, and m of its boundary. */
  readonly area: number;
  readonly perimeter: number;
  /** m² that only one of the two covers. */
  readonly difference: number;
  /** The same as a share of the area. */
  readonly share: number;
  /** The same per boundary, m: how far the walls lie off in the mean. */
  readonly meanOffset: number;
  /** Furthest that a wall lies off, m, and where on the chip. */
  readonly furthest: number;
  readonly furthestAt: readonly [number, number] | null;
}

export interface LayerReport {
  readonly name: string;
  readonly role: 'cavity' | 'holes' | 'outline' | 'ignore';
  /** Layer of the chip, where it is one. */
  readonly on: string | null;
  readonly regions: number;
  readonly paths: number;
  readonly lines: number;
}

export interface ChipLayerReport {
  readonly id: string;
  /** Channels from paths that had a width, from regions, and those with tapering or curved sides among them. */
  readonly channelsFromPaths: number;
  readonly channelsFromRegions: number;
  readonly tapered: number;
  readonly chambers: number;
  readonly deviation: Deviation | null;
}

/** What became of a drawing. */
export interface BringInReport {
  readonly format: 'channelwright-bring-in';
  readonly version: 1;
  readonly file: string;
  readonly drawing: 'DXF' | 'SVG' | 'GDSII';
  readonly unit: { readonly metres: number; readonly says: string };
  readonly entities: number;
  readonly layers: readonly LayerReport[];
  readonly chipLayers: readonly ChipLayerReport[];
  readonly ports: number;
  /** What was taken for granted, in sentences. */
  readonly assumed: readonly string[];
  readonly notUnderstood: readonly Note[];
}
