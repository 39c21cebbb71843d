import { LINE, legend, letterHeight } from './cells.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { type Box, grown } from './shapes.ts';

/**
 * How a drawing is set out on a page for the formats that have one: the plate with the mask, and below it,
 * outside what is exposed, a bar to check the scale with and the notes. nm, y upward, in the model's coordinates.
 */
export interface Page {
  /** All of it. */
  readonly box: Box;
  /** The ground of the mask: dark or clear. */
  readonly plate: Box;
  readonly letters: number;
  /** Lower left corner and length of the bar; null without notes. */
  readonly bar: {
    readonly x: number;
    readonly y: number;
    readonly length: number;
    readonly height: number;
  } | null;
  /** Base line of each line of the notes. */
  readonly lines: readonly { readonly text: string; readonly x: number; readonly y: number }[];
}

/** Longest arc that stands as one cubic in PDF, radians. */
export const PDF_ARC = Math.PI / 6;
/** Points of a PDF page per millimetre: 72 to the inch of 25.4 mm. */
export const POINTS_PER_MM = 72 / 25.4;

const BAR = 10_000_000;
const BAR_HEIGHT = 200_000;
/** From the page's edge to bar and notes, so that no printer cuts them: a tenth of an inch, whole dots of any. */
const MARGIN = 2_540_000;
/** Ground left round what is drawn. */
const BORDER = 500_000;
/** A letter is about this much wider than high; the notes are broken to the page's width by it. */
const LETTER = 0.62;
const LEAST_WIDTH = 40_000_000;

export function pageOf(model: MaskModel, plane: MaskPlane): Page {
  const { wafer, field, settings } = model;
  const r = wafer ? wafer.diameter / 2 : 0;
  const plate = grown(wafer ? { x0: -r, y0: -r, x1: r, y1: r } : field, BORDER);
  const letters = letterHeight(wafer ? plate : field);
  if (!settings.labels) return { box: plate, plate, letters, bar: null, lines: [] };
  const width = Math.max(plate.x1 - plate.x0, LEAST_WIDTH);
  const unit = 'Unit: millimetre. True size: the bar is 10 mm long; measure it before use.';
  const texts = legend(model, [plane], unit, Math.floor((width - 2 * MARGIN) / (letters * LETTER)));
  const left = plate.x0 + MARGIN;
  const bar = { x: left, y: plate.y0 - 2 * letters - BAR_HEIGHT, length: BAR, height: BAR_HEIGHT };
  const lines = texts.map((text, i) => ({ text, x: left, y: bar.y - (2 + i * LINE) * letters }));
  const low = lines[lines.length - 1]!.y - letters;
  return { box: { x0: plate.x0, x1: plate.x0 + width, y1: plate.y1, y0: low }, plate, letters, bar, lines };
}
