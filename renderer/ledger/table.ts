import { inUnit, type Kind, parseQuantity } from '../../solver/chip/units.ts';
import { ratioToNumber } from '../../solver/chip/units-exact.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import type { Ref } from '../state/ref.ts';
import { unitFor } from '../words/figure.ts';

/** A cell: text, an SI number, or nothing known. */
export type Cell = string | number | null;

export interface Column {
  readonly id: string;
  readonly head: string;
  /** Of its numbers; text where absent. */
  readonly kind?: Kind;
  /** A unit of its own. */
  readonly unit?: string;
  readonly signed?: boolean;
  /** Significant digits of the largest figure, where fewer say enough. */
  readonly digits?: number;
  /** What is typed into a cell is this quantity of the row's part. */
  readonly edits?: 'name' | 'drive' | 'width' | 'length' | 'hole' | 'wanted';
  /** Text of whole sentences, which may take more lines than one. */
  readonly sentence?: true;
}

export interface Row {
  readonly ref: Ref;
  readonly cells: readonly Cell[];
  /** Indices of cells that miss a target or limit. */
  readonly missed?: readonly number[];
}

export interface Table {
  readonly columns: readonly Column[];
  readonly rows: readonly Row[];
}

/** How a column writes its numbers: one unit and one number of decimals, so that points stand in line. */
export interface Writing {
  readonly unit: string;
  readonly decimals: number;
}

/** Significant digits that the largest figure of a column shows, and the least that a small one keeps. */
const DIGITS = 4;
const LEAST = 3;
const MOST_DECIMALS = 6;
/** Of per cents: below a thousandth of one nothing can be made or measured. */
const SHARE_DECIMALS = 3;

export function writingOf(column: Column, rows: readonly Row[], index: number): Writing {
  let largest = 0;
  let smallest = Number.POSITIVE_INFINITY;
  for (const row of rows) {
    const value = row.cells[index];
    if (typeof value !== 'number' || value === 0 || !Number.isFinite(value)) continue;
    const size = Math.abs(value);
    largest = Math.max(largest, size);
    smallest = Math.min(smallest, size);
  }
  const unit = column.unit ?? (column.kind ? unitFor(largest, column.kind) : '');
  if (largest === 0) return { unit, decimals: column.kind === 'share' ? 2 : 0 };
  const places = (value: number, digits: number): number =>
    digits - 1 - Math.floor(Math.log10(Math.abs(inUnit(value, unit))) + 1e-9);
  if (column.digits !== undefined) {
    return { unit, decimals: Math.min(MOST_DECIMALS, Math.max(0, places(largest, column.digits))) };
  }
  // a few tiny figures do not make all others long
  const decimals = Math.max(
    places(largest, column.signed ? 2 : DIGITS),
    Math.min(places(smallest, LEAST), places(largest, DIGITS) + 1),
  );
  const most = column.kind === 'share' ? SHARE_DECIMALS : MOST_DECIMALS;
  return { unit, decimals: Math.min(most, Math.max(0, decimals)) };
}

export function cellText(cell: Cell | undefined, column: Column, { unit, decimals }: Writing): string {
  if (cell === null || cell === undefined) return '–';
  if (typeof cell === 'string') return cell;
  if (!Number.isFinite(cell)) return '–';
  const value = inUnit(cell, unit);
  if (column.kind === 'share' && Math.abs(value) < 0.5 * 10 ** -decimals) return (0).toFixed(decimals);
  if (value !== 0 && (Math.abs(value) >= 1e7 || Math.abs(value) < 0.5 * 10 ** -decimals))
    return value
      .toExponential(2)
      .replace('-', '−')
      .replace(
        /e([+−-]?)(\d+)/,
        (_, sign: string, digits: string) => `e${sign.replace('-', '−').replace('+', '')}${digits}`,
      );
  const text = Math.abs(value).toFixed(decimals);
  if (value < 0) return `−${text}`;
  return column.signed && value > 0 ? `+${text}` : text;
}

export const headText = (column: Column, { unit }: Writing): string =>
  unit === '' ? column.head : `${column.head}, ${unitInPrint(unit)}`;

/** "shear>1.5", "width<=120um": a column by a word of its head, and what its figure is to be. */
const COMPARED = /^(\p{L}[^<>=]*)(<=|>=|<|>|=)(.+)$/u;

/** What a row's figures must be under one word of the filter; null where the word is just a word. */
function comparison(table: Table, word: string): ((row: Row) => boolean) | null {
  const found = COMPARED.exec(word);
  if (!found) return null;
  const [, name, sign, text] = found as unknown as [string, string, string, string];
  const index = table.columns.findIndex(
    ({ id, head, kind }) =>
      kind && [id, ...head.toLowerCase().split(/\s+/)].some((part) => part.startsWith(name.toLowerCase())),
  );
  const column = table.columns[index];
  if (!column?.kind) return null;
  const { unit } = writingOf(column, table.rows, index);
  const parsed = parseQuantity(text, column.kind, unit);
  if (!parsed.ok) return null;
  const wanted = ratioToNumber(parsed.exact);
  // as near as a figure is shown
  const close = 1e-9 * Math.abs(wanted);
  return ({ cells }) => {
    const value = cells[index];
    if (typeof value !== 'number') return false;
    const off = value - wanted;
    if (Math.abs(off) <= close) return sign.includes('=');
    return off > 0 ? sign.startsWith('>') : sign.startsWith('<');
  };
}

/** Rows whose text holds every word of the filter, and whose figures are as it says. */
export function filtered(table: Table, words: string): readonly Row[] {
  const wanted = words
    // a comparison may be written with spaces
    .replace(/\s*(<=|>=|<|>|=)\s*/g, '$1')
    .split(/\s+/)
    .filter(Boolean);
  if (wanted.length === 0) return table.rows;
  // units are not lowered: M is not m
  const tests = wanted.map((word) => comparison(table, word) ?? word.toLowerCase());
  return table.rows.filter((row) => {
    const text = row.cells
      .filter((cell) => typeof cell === 'string')
      .join(' ')
      .toLowerCase();
    return tests.every((one) => (typeof one === 'string' ? text.includes(one) : one(row)));
  });
}

export interface Order {
  readonly column: string;
  readonly down: boolean;
}

const names = new Intl.Collator('en', { numeric: true });

/** Rows in order of a column; what is not known comes last either way. */
export function ordered(rows: readonly Row[], table: Table, order: Order | null): readonly Row[] {
  const index = order ? table.columns.findIndex((column) => column.id === order.column) : -1;
  if (!order || index < 0) return rows;
  const sign = order.down ? -1 : 1;
  return [...rows].sort((a, b) => {
    const x = a.cells[index] ?? null;
    const y = b.cells[index] ?? null;
    if (x === null || y === null) return x === y ? 0 : x === null ? 1 : -1;
    if (typeof x === 'number' && typeof y === 'number') return sign * (x - y);
    return sign * names.compare(String(x), String(y));
  });
}

/** A text that a spreadsheet must not take for a formula. */
const harmless = (text: string): string => (/^[=+\-@\t\r]/.test(text) ? `'${text}` : text);

function plainCell(cell: Cell | undefined, writing: Writing): string {
  if (cell === null || cell === undefined) return '';
  if (typeof cell === 'string') return harmless(cell);
  // all digits, with a plain minus and point: what a spreadsheet reads as a number
  return Number.isFinite(cell) ? String(Number(inUnit(cell, writing.unit).toPrecision(12))) : '';
}

/**
 * The rows as a spreadsheet takes them from the clipboard: tabs between, one line each.
 * @param shown indices of the columns to take, in their order
 */
export function tsvOf(table: Table, rows: readonly Row[], shown: readonly number[]): string {
  const writings = table.columns.map((column, i) => writingOf(column, table.rows, i));
  const clean = (text: string): string => text.replace(/[\t\r\n]+/g, ' ');
  return [
    shown.map((i) => clean(headText(table.columns[i]!, writings[i]!))).join('\t'),
    ...rows.map((row) => shown.map((i) => clean(plainCell(row.cells[i], writings[i]!))).join('\t')),
  ].join('\r\n');
}

/** The whole table by RFC 4180. */
export function csvOf(table: Table): string {
  const writings = table.columns.map((column, i) => writingOf(column, table.rows, i));
  const quoted = (text: string): string => (/[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
  return `${[
    table.columns.map((column, i) => quoted(headText(column, writings[i]!))).join(','),
    ...table.rows.map((row) =>
      table.columns.map((_, i) => quoted(plainCell(row.cells[i], writings[i]!))).join(','),
    ),
  ].join('\r\n')}\r\n`;
}
