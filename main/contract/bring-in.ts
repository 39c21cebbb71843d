import { z } from 'zod';
import type { Chip } from '../../solver/chip/chip.ts';

/** Drawings that come in: what is asked for, and what became of them. */

const nm = z.int().min(1).max(1_000_000_000);
const layerName = z.string().min(1).max(64);

/** What a layer of the drawing is on the chip. */
const role = z.discriminatedUnion('kind', [
  /** Fluid of the chip's layer `layer`, nm deep. */
  z.strictObject({ kind: z.literal('cavity'), depth: nm, layer: layerName }),
  /** Round holes of ports. */
  z.strictObject({ kind: z.literal('holes') }),
  /** The edge of the chip. */
  z.strictObject({ kind: z.literal('outline') }),
  z.strictObject({ kind: z.literal('ignore') }),
]);
export type Role = z.infer<typeof role>;
export const ROLES = ['cavity', 'holes', 'outline', 'ignore'] as const satisfies readonly Role['kind'][];

export const bringInSettings = z.strictObject({
  /** Metres per drawing unit; where given it goes before what the file says. */
  unit: z.number().positive().max(1000).nullable(),
  /** Depth of cavities that no role gives one, nm. */
  depth: nm,
  /** By the name of the drawing's layer; what is not named gets what its name suggests. */
  roles: z.record(layerName, role),
  /** Width of lines that have none, nm; without it they are listed and left out. */
  lineWidth: nm.nullable(),
  /** Ports at the free ends of channels and at round pads where no layer holds holes. */
  portsAtEnds: z.boolean(),
});
export type BringInSettings = z.infer<typeof bringInSettings>;

/** Something in the file that did not become part of the chip; `where` is the line or byte of the first. */
const note = z.object({ what: z.string(), count: z.number(), where: z.string() });
export type Note = z.infer<typeof note>;

const drawing = z.enum(['DXF', 'SVG', 'GDSII']);

/** What a file holds, before anything is made of it. */
export const drawingSummary = z.object({
  drawing,
  /** Metres per drawing unit, null where the file does not say. */
  unit: z.number().nullable(),
  unitSays: z.string(),
  entities: z.number(),
  /** Width and height of all of it, drawing units. */
  extent: z.tuple([z.number(), z.number()]).nullable(),
  layers: z.array(
    z.object({
      name: z.string(),
      regions: z.number(),
      paths: z.number(),
      lines: z.number(),
      /** What the name suggests. */
      role: z.enum(ROLES),
    }),
  ),
  notUnderstood: z.array(note),
});
export type DrawingSummary = z.infer<typeof drawingSummary>;

/** How far the channels and chambers of a layer lie off what was drawn; SI. */
const deviation = z.object({
  /** m² of the drawing, and m of its boundary. */
  area: z.number(),
  perimeter: z.number(),
  /** m² that only one of the two covers. */
  difference: z.number(),
  /** The same as a share of the area. */
  share: z.number(),
  /** The same per boundary, m: how far the walls lie off in the mean. */
  meanOffset: z.number(),
  /** Furthest that a wall lies off, m, and where on the chip. */
  furthest: z.number(),
  furthestAt: z.tuple([z.number(), z.number()]).nullable(),
});
export type Deviation = z.infer<typeof deviation>;

const chipLayer = z.object({
  id: z.string(),
  /** Channels from paths that had a width, from regions, and those among them that taper. */
  channelsFromPaths: z.number(),
  channelsFromRegions: z.number(),
  tapered: z.number(),
  chambers: z.number(),
  /** null where the layer is empty. */
  deviation: deviation.nullable(),
});
export type ChipLayerReport = z.infer<typeof chipLayer>;

/** What became of a drawing. */
export const bringInReport = z.object({
  format: z.literal('channelwright-bring-in'),
  version: z.literal(1),
  file: z.string(),
  drawing,
  unit: z.object({ metres: z.number(), says: z.string() }),
  entities: z.number(),
  layers: z.array(
    z.object({
      name: z.string(),
      role: z.enum(ROLES),
      /** Layer of the chip, where it is one. */
      on: z.string().nullable(),
      regions: z.number(),
      paths: z.number(),
      lines: z.number(),
    }),
  ),
  chipLayers: z.array(chipLayer),
  ports: z.number(),
  /** What was taken for granted, in sentences. */
  assumed: z.array(z.string()),
  notUnderstood: z.array(note),
});
export type BringInReport = z.infer<typeof bringInReport>;

/**
 * Both as path data in whole nm, y up, by layer of the chip: what was drawn and what was made of it. Empty
 * where it would be too long to show.
 */
export const bringInPicture = z.array(z.object({ layer: z.string(), drawn: z.string(), made: z.string() }));
export type BringInPicture = z.infer<typeof bringInPicture>;

export interface BringInOutcome {
  readonly chip: Chip;
  readonly report: BringInReport;
  readonly picture: BringInPicture;
}

/** How such a job stands. */
export const bringInState = z.object({
  job: z.int().positive(),
  state: z.enum(['running', 'done', 'failed', 'cancelled']),
  /** Share done, 0 to 1. */
  part: z.number(),
  /** What is being done, or what went wrong, in words. */
  says: z.string(),
});
