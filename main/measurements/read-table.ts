import { CsvError, parse } from 'csv-parse/sync';
import { type MeasuredTable, MOST_ROWS } from '../../solver/asbuilt/measured.ts';
import { Problem, type ProblemKind } from '../../solver/problem/problem.ts';

/** Longest table taken. */
const MOST_TEXT = 8_000_000;
export const MOST_BYTES = 4 * MOST_TEXT;
const MOST_CELL = 1000;

/** What is wrong with the text, in words that do not depend on the library's. */
const WHY: Readonly<Record<string, readonly [ProblemKind, string, string]>> = {
  CSV_QUOTE_NOT_CLOSED: [
    'syntax',
    'A quotation mark is opened and never closed.',
    'Close it, or take it away.',
  ],
  CSV_INVALID_CLOSING_QUOTE: [
    'syntax',
    'A text goes on after its closing quotation mark.',
    'Double a quotation mark that belongs to the text.',
  ],
  INVALID_OPENING_QUOTE: [
    'syntax',
    'A quotation mark stands within a text.',
    'Quote the whole cell and double the mark within.',
  ],
  CSV_MAX_RECORD_SIZE: [
    'too-many',
    'A row is longer than any measurement.',
    'Check that it is the right file.',
  ],
};

/** The separator that the first row uses most: a comma, a semicolon or a tab. */
function separatorOf(text: string): string {
  const [first = ''] = text.split(/\r\n|\r|\n/).filter((line) => line.trim() !== '');
  const bare = first.replace(/"[^"]*"?/g, '');
  const count = (sign: string): number => bare.split(sign).length - 1;
  return [',', ';', '\t'].reduce((best, sign) => (count(sign) > count(best) ? sign : best));
}

/** Line of the quotation mark that opens a text and is never closed. */
function openedIn(text: string): number {
  let [line, opened, open] = [1, 1, false];
  for (let i = 0; i < text.length; i += 1) {
    if (text[i] === '"') {
      open = !open;
      if (open) opened = line;
    } else if (text[i] === '\n') line += 1;
  }
  return opened;
}

/**
 * A table of text as cells, by RFC 4180, with semicolons or tabs for commas where its first row has them. Throws
 * `Problem` with the row at fault.
 */
export function readTable(text: string): MeasuredTable {
  if (text.length > MOST_TEXT) {
    throw new Problem(
      'too-many',
      'The table is longer than any list of measurements.',
      'row 1',
      'Check that it is the right file.',
    );
  }
  const odd = /[\0\ufffd]/.exec(text);
  if (odd) {
    const row = text.slice(0, odd.index).split(/\r\n|\r|\n/).length;
    throw new Problem(
      'not-readable',
      'The table is no text in UTF-8.',
      `row ${row}`,
      'Save it as CSV in UTF-8.',
    );
  }
  try {
    const records = parse(text, {
      bom: true,
      delimiter: separatorOf(text),
      relax_column_count: true,
      skip_empty_lines: true,
      info: true,
      max_record_size: 100 * MOST_CELL,
      to: MOST_ROWS + 3,
    }) as unknown as { readonly record: string[]; readonly info: { readonly lines: number } }[];
    let before = 0;
    const rows: string[][] = [];
    const lines: number[] = [];
    for (const { record, info } of records) {
      // A record that holds line breaks ends on its last line: what is said is where it begins.
      const breaks = record.reduce((sum, cell) => sum + (cell.match(/\r\n|\r|\n/g)?.length ?? 0), 0);
      rows.push(record);
      lines.push(Math.max(before + 1, info.lines - breaks));
      before = info.lines;
      const long = record.findIndex((cell) => cell.length > MOST_CELL);
      if (long >= 0) {
        throw new Problem(
          'too-many',
          `The cell has ${record[long]!.length} characters.`,
          `row ${lines.at(-1)}, column ${long + 1}`,
          'Shorten it.',
        );
      }
    }
    return { rows, lines };
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    const [kind, what, remedy] = WHY[error.code] ?? [
      'syntax',
      'The table cannot be read.',
      'Save it as CSV.',
    ];
    // An open mark is found at the end of the text; what is wanted is where it was opened.
    if (error.code === 'CSV_QUOTE_NOT_CLOSED') throw new Problem(kind, what, `row ${openedIn(text)}`, remedy);
    const { lines = 1, column } = error as CsvError & { readonly lines?: number; readonly column?: number };
    const place = typeof column === 'number' ? `, column ${column + 1}` : '';
    throw new Problem(kind, what, `row ${lines}${place}`, remedy);
  }
}
