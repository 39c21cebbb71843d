import { NOT_CHECKED, type NotChecked } from './not-checked.ts';
import type { Row } from './row.ts';

/** The verification table: what was checked, how, against what, with which error. */
export interface Table {
  readonly format: 'channelwright-verification';
  readonly version: 1;
  /** Of the program. */
  readonly program: string;
  /** ISO 8601, UTC */
  readonly date: string;
  readonly runtime: string;
  readonly rows: readonly CheckedRow[];
  /** The rows that came closest to their tolerance (places in `rows`), worst first, at most ten. */
  readonly thinnest: readonly number[];
  readonly failed: number;
  readonly notChecked: readonly NotChecked[];
}

export interface CheckedRow extends Row {
  readonly passed: boolean;
  /** Tolerance over error: how many times worse it could be; null where there was no error at all, or no number. */
  readonly margin: number | null;
}

const THINNEST = 10;

/** Builds the table from the recorded rows only; sorted by quantity and case, so that two runs compare. */
export function tableOf(
  recorded: readonly Row[],
  about: { readonly program: string; readonly date: string; readonly runtime: string },
): Table {
  const rows = recorded
    .map((row): CheckedRow => {
      const passed = row.error !== null && row.error <= row.tolerance;
      return {
        ...row,
        passed,
        margin: row.error === null || row.error === 0 ? null : row.tolerance / row.error,
      };
    })
    .sort((a, b) => compare(a.quantity, b.quantity) || compare(a.at, b.at) || compare(a.source, b.source));
  const thinnest = rows
    .map((row, place) => ({
      place,
      used: row.error === null ? Number.POSITIVE_INFINITY : 1 / (row.margin ?? Number.POSITIVE_INFINITY),
    }))
    .sort((a, b) => b.used - a.used)
    .slice(0, THINNEST)
    .map(({ place }) => place);
  return {
    format: 'channelwright-verification',
    version: 1,
    ...about,
    rows,
    thinnest,
    failed: rows.filter((row) => !row.passed).length,
    notChecked: NOT_CHECKED,
  };
}

function compare(a: string, b: string): number {
  return a.localeCompare(b, 'en', { numeric: true });
}

/** Rows from the lines that the tests appended. */
export function parseRows(lines: string): Row[] {
  return lines
    .split('\n')
    .filter((line) => line !== '')
    .map((line) => JSON.parse(line) as Row);
}
