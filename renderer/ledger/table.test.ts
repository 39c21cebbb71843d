import { expect, test } from 'vitest';
import { makeEdit } from '../../solver/chip/edit.ts';
import { solve } from '../../solver/solve.ts';
import { toEdit } from '../edits/to-edit.ts';
import { teeChip } from '../testing/chips.ts';
import { cellText, csvOf, filtered, headText, ordered, type Table, tsvOf, writingOf } from './table.ts';
import { tableOf } from './tables.ts';

const table: Table = {
  columns: [
    { id: 'name', head: 'port' },
    { id: 'flow', head: 'flow', kind: 'flow', unit: 'uL/min' },
  ],
  rows: [
    { ref: 'port:b', cells: ['=well 10', 2.5e-9 / 60] },
    { ref: 'port:a', cells: ['well 2', null] },
    { ref: 'port:c', cells: ['feed, "main"', -1e-8 / 60] },
  ],
};

test('figures of a column share unit and decimals, so that points stand in line', () => {
  const writing = writingOf(table.columns[1]!, table.rows, 1);
  expect(headText(table.columns[1]!, writing)).toBe('flow, µL/min');
  expect(table.rows.map((row) => cellText(row.cells[1], table.columns[1]!, writing))).toEqual([
    '2.50',
    '–',
    '−10.00',
  ]);
});

test('order: numbers by size, names by their numbers, the unknown last either way', () => {
  const by = (column: string, down: boolean) =>
    ordered(table.rows, table, { column, down }).map((row) => row.ref);
  expect(by('flow', false)).toEqual(['port:c', 'port:b', 'port:a']);
  expect(by('flow', true)).toEqual(['port:b', 'port:c', 'port:a']);
  expect(by('name', false).indexOf('port:a')).toBeGreaterThan(by('name', false).indexOf('port:c'));
});

test('a filter keeps rows that hold every word', () => {
  expect(filtered(table, 'WELL').map((row) => row.ref)).toEqual(['port:b', 'port:a']);
  expect(filtered(table, 'well 10')).toHaveLength(1);
});

test('copied and saved tables carry plain numbers, and no name runs as a formula', () => {
  expect(tsvOf(table, table.rows, [0, 1]).split('\r\n')).toEqual([
    'port\tflow, µL/min',
    "'=well 10\t2.5",
    'well 2\t',
    'feed, "main"\t-10',
  ]);
  // RFC 4180: quotes doubled within quotes, CRLF after each record
  expect(csvOf(table)).toBe('port,"flow, µL/min"\r\n\'=well 10,2.5\r\nwell 2,\r\n"feed, ""main""",-10\r\n');
});

test('the ports of a solved chip: wanted, got, off', () => {
  const chip = { ...teeChip(), targets: [{ port: 'well 1', share: 0.5, within: 0.02 }] };
  const made = tableOf('ports', chip, solve(chip, { junctions: 'ideal' }), null);
  const row = made.rows.find((entry) => entry.ref === 'port:well 1')!;
  expect(row.cells[2]).toBe(0.5);
  expect(row.cells[3]).toBeCloseTo(0.5, 9);
  expect(row.cells[4]).toBe(0);
});

test('dropping a port drops what spoke of it, and undoing brings both back', () => {
  const chip = { ...teeChip(), targets: [{ port: 'well 1', share: 0.5, within: 0.02 }] };
  const { chip: next, inverse } = makeEdit(chip, toEdit(chip, { label: 'delete', drop: ['port:well 1'] }));
  expect(next.ports).toHaveLength(2);
  expect(next.targets).toEqual([]);
  expect(makeEdit(next, inverse).chip).toEqual(chip);
});

test('a filter takes a column with a figure, bare in its own unit or with one, and words beside it', () => {
  const table: Table = {
    columns: [
      { id: 'name', head: 'channel' },
      { id: 'width', head: 'width', kind: 'length', unit: 'um' },
      { id: 'shear', head: 'peak shear', kind: 'stress', unit: 'Pa' },
    ],
    rows: [
      { ref: 'channel:a', cells: ['feed a', 120e-6, 0.4] },
      { ref: 'channel:b', cells: ['feed b', 200e-6, 1.8] },
      { ref: 'channel:c', cells: ['neck', 80e-6, null] },
    ],
  };
  const found = (words: string) => filtered(table, words).map((row) => row.cells[0]);
  expect(found('width<=120')).toEqual(['feed a', 'neck']);
  expect(found('width < 120')).toEqual(['neck']);
  expect(found('width = 0.2mm feed')).toEqual(['feed b']);
  expect(found('shear > 500mPa')).toEqual(['feed b']);
  // what is not known is neither more nor less
  expect(found('shear >= 0')).toEqual(['feed a', 'feed b']);
  // no such column, no figure: a word like others
  expect(found('colour>3')).toEqual([]);
});
