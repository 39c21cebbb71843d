/** What was measured on a made chip. Lengths in metres. */
export interface Measured {
  /**
   * depth and width of a channel or of a layer at some place; bias: by how much the widths of all channels of a
   * layer came out larger than drawn (a test line's error).
   */
  readonly what: 'depth' | 'width' | 'bias';
  readonly of: 'layer' | 'channel';
  readonly id: string;
  readonly value: number;
  /** ± of the value, at about the confidence that tolerances have; null where it was not stated. */
  readonly uncertainty: number | null;
  /** Distance along the channel, where it was said. */
  readonly along: number | null;
  /** Place on the plan, where it was said. */
  readonly at: readonly [number, number] | null;
  /** Line of the table that it comes from, the head being line 1. */
  readonly row: number;
}

/** How a column of the table is called: the first of each is what the program writes itself. */
export const COLUMNS = {
  part: ['part', 'id', 'name', 'channel', 'layer'],
  what: ['what', 'measured', 'quantity', 'dimension'],
  value: ['value', 'reading', 'size'],
  uncertainty: ['uncertainty', '±', '+/-', 'error'],
  along: ['along', 'distance'],
  x: ['x', 'right'],
  y: ['y', 'up'],
  /** Beside a value that is missing: the row was not filled in, and is as drawn. */
  drawn: ['drawn'],
  note: ['note', 'remark'],
} as const;
export type Column = keyof typeof COLUMNS;

/** A table as it was read: cells by rows, and the line of the text that each row begins on. */
export interface MeasuredTable {
  readonly rows: readonly (readonly string[])[];
  readonly lines: readonly number[];
}

/** More rows than anybody measures. */
export const MOST_ROWS = 20_000;
