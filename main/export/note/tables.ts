import { csvText, plainCell } from '../csv.ts';
import type { Table } from './blocks.ts';

/** A table as comma-separated values: units in the head as they can be typed, numbers with all their digits. */
export function tableCsv({ columns, rows }: Table): string {
  const heads = columns.map(({ head, unit }) => headText(head, unit));
  const body = Array.from({ length: rows }, (_, i) => columns.map(({ cells }) => cells[i]!));
  return csvText(heads, body);
}

const headText = (head: string, unit: string): string => {
  const name = head === '' ? 'met' : head.replaceAll('\u00a0', ' ');
  return unit ? `${name} (${unit})` : name;
};

/**
 * A table as it goes to the clipboard: tabs between cells, figures as they are read, names that a
 * spreadsheet would run as a formula kept text.
 */
export function tableTabbed({ columns, rows }: Table): string {
  const line = (cells: readonly string[]): string => cells.join('\t');
  return [
    line(columns.map(({ head, unit }) => headText(head, unit))),
    ...Array.from({ length: rows }, (_, i) =>
      line(
        columns.map(({ cells, texts, kind }) => {
          const cell = cells[i]!;
          if (kind === 'verdict') return texts[i]!;
          return typeof cell === 'number' ? String(cell) : plainCell(typeof cell === 'string' ? cell : '');
        }),
      ),
    ),
  ].join('\n');
}

/** The file of one table beside the one named: "chip.csv" gives "chip flow-split.csv". */
export function csvPath(path: string, table: string): string {
  const end = /\.csv$/i.exec(path)?.[0] ?? '.csv';
  return `${path.replace(/\.csv$/i, '')} ${table}${end}`;
}
