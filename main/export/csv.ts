import { type Input, stringify } from 'csv-stringify/sync';

export type Cell = string | number | boolean | null;

/** What makes a spreadsheet take a text for a formula, full-width forms included. */
const FORMULA = /^[=+\-@\t\r\uff1d\uff0b\uff0d\uff20]/;

/**
 * A table as text by RFC 4180: commas, CRLF, quotes where needed, as many fields in every record as the
 * header has. A text that a spreadsheet would take for a formula is kept text by an apostrophe before it.
 */
export function csvText(header: readonly string[], rows: readonly (readonly Cell[])[]): string {
  for (const row of rows) {
    if (row.length !== header.length)
      throw new RangeError(`a row of ${row.length} under ${header.length} heads`);
  }
  return stringify([header, ...rows] as Input, {
    record_delimiter: 'windows',
    escape_formulas: true,
    cast: { boolean: (value) => (value ? 'yes' : 'no') },
  });
}

/** A text as one cell of tabbed lines: on one line, and no formula whatever it begins with. */
export function plainCell(text: string): string {
  const line = text.replaceAll(/[\t\r\n]+/g, ' ');
  return FORMULA.test(text) ? `'${line}` : line;
}
