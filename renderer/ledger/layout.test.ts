import { expect, test } from 'vitest';
import { columnsShown, fittedWidths, layoutOf, rowHeight } from './layout.ts';
import { type Table, writingOf } from './table.ts';

/** Ten px a sign, whatever it is. */
const measure = (text: string): number => 10 * text.length;

const table: Table = {
  columns: [
    { id: 'name', head: 'port', edits: 'name' },
    { id: 'wanted', head: 'wanted', kind: 'share', unit: '%', edits: 'wanted' },
    { id: 'got', head: 'got', kind: 'share', unit: '%' },
    { id: 'flow', head: 'flow', kind: 'flow', unit: 'uL/min' },
    { id: 'says', head: 'found', sentence: true },
  ],
  rows: [
    {
      ref: 'port:a',
      cells: ['a', null, null, 1e-9 / 60, 'one two three four five six seven eight nine ten'],
    },
    { ref: 'port:b', cells: ['b', null, null, -1234e-9 / 60, ''] },
  ],
};
const writings = table.columns.map((column, i) => writingOf(column, table.rows, i));
const layout = layoutOf(table, columnsShown(table), writings, measure);

test('a column without any value is left out, unless something can be typed into it', () => {
  expect(columnsShown(table)).toEqual([0, 1, 3, 4]);
});

test('every head and every figure has its room', () => {
  const [name, , flow] = layout.widths;
  expect(name).toBeGreaterThanOrEqual(measure('port'));
  expect(flow).toBeGreaterThanOrEqual(measure('flow, µL/min'));
  const tight = fittedWidths(table, layout, 10);
  expect(tight.slice(0, 3)).toEqual(layout.widths.slice(0, 3));
});

test('what is left over is shared; where room is short sentences give way first, and rows grow for them', () => {
  const sum = (widths: readonly number[]): number => widths.reduce((a, b) => a + b, 0);
  const total = sum(layout.widths);
  expect(sum(fittedWidths(table, layout, total + 300))).toBeCloseTo(total + 300, 9);
  expect(rowHeight(table, layout, fittedWidths(table, layout, total), measure, 24)).toBe(24);
  const less = fittedWidths(table, layout, total - 150);
  expect(sum(less)).toBeCloseTo(total - 150, 9);
  expect(less[0]).toBe(layout.widths[0]);
  expect(rowHeight(table, layout, less, measure, 24)).toBeGreaterThan(24);
});
