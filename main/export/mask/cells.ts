import type { MaskModel, MaskPlane } from './model.ts';
import { wrapped } from './names.ts';
import type { Box } from './shapes.ts';

/** The parts of a drawing, each on a layer of its own in the formats that have layers. */
export const PARTS = ['cavities', 'marks', 'outline', 'lane'] as const;
export type Part = (typeof PARTS)[number];

/** Where copies of the chip are set, relative to how it is drawn: nothing moved where there is no wafer. */
export function shifts({ wafer, centre }: MaskModel): (readonly [number, number])[] {
  return wafer ? wafer.centres.map(([x, y]) => [x - centre[0], y - centre[1]] as const) : [[0, 0]];
}

/** One drawing's name with what it is, for notes. */
export const planeTitle = ({ kind, name, number }: MaskPlane): string =>
  kind === 'layer' ? `Layer ${number}, "${name}"` : 'Holes of ports and vias';

/**
 * All that is to be read on a mask, in lines of at most `most` characters: the chip, each drawing, what holds of all.
 * `unit` is the format's own sentence on its numbers.
 */
export function legend(model: MaskModel, planes: readonly MaskPlane[], unit: string, most: number): string[] {
  const { title, version, made, notes } = model;
  return [
    title,
    `Masks by Channelwright ${version}, ${made.toISOString().slice(0, 10)}`,
    unit,
    ...planes.map((plane) => [`${planeTitle(plane)}:`, ...plane.notes].join(' ')),
    ...notes,
  ].flatMap((line) => wrapped(line, most));
}

/** Height of the notes' letters on a drawing as large as this, nm; lines are LINE heights apart. */
export const letterHeight = ({ x0, x1 }: Box): number =>
  Math.round(Math.min(1_500_000, Math.max(100_000, (x1 - x0) / 70)));
export const LINE = 1.6;
