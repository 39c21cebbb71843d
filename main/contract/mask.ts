import { z } from 'zod';

/**
 * Masks: what is asked for and what is told of the outcome. Lengths are whole nanometres, shares are
 * plain numbers (0.015 for 1.5 %), areas in the report m², lengths in the report m.
 */

export const MASK_FORMATS = ['dxf', 'gdsii', 'svg', 'pdf'] as const;
export type MaskFormat = (typeof MASK_FORMATS)[number];

const LONGEST = 1_000_000_000;
const length = z.int().min(0).max(LONGEST);
const id = z.string().min(1).max(64);
/** One value for all layers, or by layer id; a layer that is not named then takes its usual value. */
const perLayer = <T extends z.ZodType>(value: T) => z.union([value, z.record(id, value)]);

export const wafer = z.strictObject({
  diameter: z.int().min(1_000_000).max(LONGEST),
  /** Ring along the rim that holds no part of a chip. */
  edge: length,
  /** From a chip to the next, right and up; where absent as close as drawing, marks and lane allow. */
  pitch: z.tuple([z.int().positive().max(LONGEST), z.int().positive().max(LONGEST)]).optional(),
});

export const maskOptions = z.strictObject({
  /** Layers to draw, all of them where absent. */
  layers: z.array(id).min(1).max(64).optional(),
  /** Furthest that a chord may lie off its arc where a format has no arcs; 100 nm where absent. */
  chordError: z.int().min(10).max(100_000).optional(),
  /** How far the etch goes under the mask on each side; where absent as process, depth and profile have it. */
  undercut: perLayer(length).optional(),
  /** How much a part is smaller than its mould, over the mould; 0 where absent. */
  shrink: perLayer(z.number().min(0).max(0.2)).optional(),
  /** As seen from the other side, for the side of the mould; false where absent. */
  mirror: z.boolean().optional(),
  /** Whether what is drawn is clear on a dark plate (the usual, where absent) or dark on a clear one. */
  polarity: z.enum(['dark-field', 'clear-field']).optional(),
  /** Draw the holes of ports and vias in their layers too; false where absent. */
  pads: z.boolean().optional(),
  /** Pairs of alignment marks left and right of the chip, shared by neighbours on a wafer; true where absent. */
  marks: z.boolean().optional(),
  /** Names and notes; true where absent. */
  labels: z.boolean().optional(),
  /** The chip's outline; true where absent. */
  outline: z.boolean().optional(),
  /** Width of the dicing lane round the outline, which neighbours on a wafer share; 0 for none, 200 µm where absent. */
  lane: length.optional(),
  /** An array of the chip on a wafer; a single chip where absent. */
  wafer: wafer.optional(),
  /** A file for every layer also in the formats that hold several (SVG always has one each); false where absent. */
  separate: z.boolean().optional(),
});
export type MaskOptions = z.infer<typeof maskOptions>;
export type WaferOptions = z.infer<typeof wafer>;

const plane = z.object({
  /** Id of the layer; "ports and vias" for the drawing of holes. */
  name: z.string(),
  kind: z.enum(['layer', 'holes']),
  /** Number of the layer in GDSII. */
  number: z.number(),
  cavities: z.number(),
  /** Of all cavities of one chip as drawn on the mask: m², m. */
  area: z.number(),
  perimeter: z.number(),
  /** Taken off on each side for the etch, m. */
  undercut: z.number(),
  /** Size on the mask over size on the chip. */
  scale: z.number(),
});

export const maskReport = z.object({
  format: z.literal('channelwright-masks'),
  version: z.literal(1),
  chip: z.string(),
  /** Every option with the value that was taken. */
  options: z.record(z.string(), z.json()),
  planes: z.array(plane),
  /** Centres of the chips on the wafer, m; one at the chip's own centre where there is no wafer. */
  placed: z.array(z.tuple([z.number(), z.number()])),
  files: z.array(
    z.object({
      name: z.string(),
      /** Where it was written; null where it was handed back. */
      path: z.string().nullable(),
      format: z.enum(MASK_FORMATS),
      size: z.number(),
      /** The unit of the numbers in the file. */
      unit: z.string(),
      /**
       * The file as read back against what was to be drawn: area by which they differ, and what the
       * chord error (or the format's last digit) allows, m².
       */
      compared: z.array(z.object({ plane: z.string(), difference: z.number(), allowed: z.number() })),
    }),
  ),
  /** What the process cannot make as drawn on the mask; empty where all is well. */
  findings: z.array(z.object({ where: z.string(), says: z.string() })),
  /** What whoever uses the masks must know, in sentences. */
  notes: z.array(z.string()),
});
export type MaskReport = z.infer<typeof maskReport>;
export type MaskPlaneReport = z.infer<typeof plane>;

/** How a mask job stands. */
export const maskState = z.object({
  job: z.int().positive(),
  state: z.enum(['running', 'done', 'failed', 'cancelled']),
  /** Share done, 0 to 1. */
  part: z.number(),
  /** What is being done, or what went wrong, in words. */
  says: z.string(),
});
