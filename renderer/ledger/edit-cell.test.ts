import { expect, test } from 'vitest';
import type { Desk } from '../state/desk.ts';
import { createStore } from '../state/store.ts';
import { FIRST_VIEW } from '../state/view.ts';
import { teeChip } from '../testing/chips.ts';
import type { Alteration } from '../tools/tool.ts';
import { editCell, readDrive } from './edit-cell.ts';

const made: Alteration[] = [];
const desk = {
  chip: teeChip,
  view: createStore(FIRST_VIEW),
  attempt: (alteration: Alteration) => {
    made.push(alteration);
    return null;
  },
} as unknown as Desk;

test('a drive is typed as what it is', () => {
  // 1 µL/min = 1e-9 m³ / 60 s
  expect(readDrive('12 uL/min')).toEqual({ kind: 'flow', flow: expect.closeTo(12e-9 / 60, 20) });
  expect(readDrive('2 kPa')).toEqual({ kind: 'pressure', pressure: 2000 });
  expect(readDrive('120 mm high')).toEqual({ kind: 'head', head: 0.12 });
  expect(readDrive(' Open ')).toEqual({ kind: 'pressure', pressure: 0 });
  expect(readDrive('closed')).toEqual({ kind: 'closed' });
  for (const text of ['12', 'three bananas', '', '4 s']) expect(readDrive(text)).toContain('with its unit');
});

test('the drive of a port and the length of a channel are changed in their cells', () => {
  made.length = 0;
  expect(editCell(desk, 'port:in', { id: 'drive', head: 'drive', edits: 'drive' }, '3 kPa', '')).toBeNull();
  const length = { id: 'length', head: 'length', kind: 'length', edits: 'length' } as const;
  expect(editCell(desk, 'channel:feed', length, '16', 'mm')).toBeNull();
  expect(made[0]!.put![0]!.value).toMatchObject({ id: 'in', drive: { kind: 'pressure', pressure: 3000 } });
  expect(made[1]!.put).toBeDefined();
  expect(editCell(desk, 'channel:feed', length, 'long', 'mm')).toMatch(/^length /);
});
