import { cellText, headText, type Row, type Table, type Writing } from './table.ts';

/** px: padding of a cell, both sides together, and a little for the rounding of widths. */
const PADDING = 15;
/** px: a name of one's own is given no more than this, a sentence no less and no more than these. */
const NAME_MOST = 300;
const SENTENCE_LEAST = 220;
const SENTENCE_MOST = 560;
/** px: a line of a sentence, and what a row has above and below its lines. */
const LINE = 18;
const AROUND = 6;
const LINES_MOST = 6;
/** Rows of which the widths of texts are taken; the extremes of numbers are looked for in all. */
const SAMPLE = 400;

/** How wide a text is set, px. */
export type Measure = (text: string, of: 'head' | 'cell') => number;

/** Which columns are shown, and how wide each must be, px. */
export interface Layout {
  /** Indices of the table's columns. */
  readonly shown: readonly number[];
  /** By place among the shown. */
  readonly widths: readonly number[];
}

/** Columns that say something: one without any value is left out, unless it is there to be typed into. */
export function columnsShown({ columns, rows }: Table): readonly number[] {
  const empty = new Set(columns.flatMap((column, i) => (column.edits || i === 0 ? [] : [i])));
  for (const { cells } of rows) {
    if (empty.size === 0) break;
    for (const i of empty) if (cells[i] !== null && cells[i] !== undefined) empty.delete(i);
  }
  return columns.map((_, i) => i).filter((i) => !empty.has(i));
}

/** Rows whose cells of a column are among the widest: a sample of all, and those with extreme numbers. */
function telling(rows: readonly Row[], index: number): readonly Row[] {
  const every = Math.max(1, Math.floor(rows.length / SAMPLE));
  const out: Row[] = [];
  let low: Row | undefined;
  let high: Row | undefined;
  let long: Row | undefined;
  for (const [i, row] of rows.entries()) {
    if (i % every === 0) out.push(row);
    const cell = row.cells[index];
    if (typeof cell === 'number') {
      if (low === undefined || cell < (low.cells[index] as number)) low = row;
      if (high === undefined || cell > (high.cells[index] as number)) high = row;
    } else if (typeof cell === 'string' && cell.length > String(long?.cells[index] ?? '').length) long = row;
  }
  return [...out, ...[low, high, long].filter((row) => row !== undefined)];
}

export function layoutOf(
  table: Table,
  shown: readonly number[],
  writings: readonly Writing[],
  measure: Measure,
  /** Id of the column that the rows are in order of, which an arrow says. */
  ordered = '',
): Layout {
  const widths = shown.map((i) => {
    const column = table.columns[i]!;
    let most = measure(`${headText(column, writings[i]!)}${ordered === column.id ? ' ↓' : ''}`, 'head');
    for (const row of telling(table.rows, i))
      most = Math.max(most, measure(cellText(row.cells[i], column, writings[i]!), 'cell'));
    const limit = column.sentence ? SENTENCE_MOST : column.kind ? most : NAME_MOST;
    return Math.ceil(Math.min(most, limit) + PADDING);
  });
  return { shown, widths };
}

/**
 * Widths that fill `room` px where they can: sentences give way down to their least before anything is
 * scrolled, and what is left over is shared by all in proportion.
 */
export function fittedWidths(table: Table, { shown, widths }: Layout, room: number): readonly number[] {
  const total = widths.reduce((sum, width) => sum + width, 0);
  if (total <= room) return widths.map((width) => (width * room) / total);
  const yielding = widths.map((width, k) =>
    table.columns[shown[k]!]!.sentence ? Math.max(0, width - SENTENCE_LEAST) : 0,
  );
  const spare = yielding.reduce((sum, width) => sum + width, 0);
  const share = spare > 0 ? Math.min(1, (total - room) / spare) : 0;
  return widths.map((width, k) => width - share * yielding[k]!);
}

/** px: rows are of one height, that of the longest sentence at these widths. */
export function rowHeight(
  table: Table,
  { shown }: Layout,
  widths: readonly number[],
  measure: Measure,
  least: number,
): number {
  let lines = 1;
  shown.forEach((i, k) => {
    if (!table.columns[i]!.sentence) return;
    for (const row of telling(table.rows, i)) {
      const cell = row.cells[i];
      if (typeof cell === 'string') lines = Math.max(lines, linesOf(cell, widths[k]! - PADDING, measure));
    }
  });
  return lines === 1 ? least : Math.min(lines, LINES_MOST) * LINE + AROUND;
}

/** Lines that a sentence takes, its words laid one behind the other. */
function linesOf(text: string, room: number, measure: Measure): number {
  let lines = 1;
  let line = '';
  for (const word of text.split(' ')) {
    const next = line === '' ? word : `${line} ${word}`;
    if (line === '' || measure(next, 'cell') <= room) line = next;
    else {
      lines += 1;
      line = word;
    }
  }
  return lines;
}
