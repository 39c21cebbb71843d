import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit, makeEdit } from '../../solver/chip/edit.ts';
import { toEdit } from '../edits/to-edit.ts';
import { newChip } from '../start/new-chip.ts';
import { broughtIn } from './put-on-sheet.ts';

const channel = (id: string, y: number) =>
  ({
    id,
    layer: 'flow',
    path: [
      [0, y],
      [5_000_000, y],
    ],
    width: [100_000, 100_000],
    bendRadius: 0,
  }) as const;
const there: Chip = {
  ...newChip('there', 10_000_000, 10_000_000, 50_000),
  channels: [channel('channel 1', 1_000_000)],
};
const brought: Chip = {
  ...newChip('drawing', 20_000_000, 5_000_000, 50_000),
  channels: [channel('channel 1', 2_000_000), channel('channel 2', 3_000_000)],
  ports: [
    {
      id: 'port 1',
      at: [0, 2_000_000],
      layer: 'flow',
      diameter: 0,
      drive: { kind: 'pressure', pressure: 0 },
      tubing: [],
    },
  ],
};

test('beside what is there: one edit, taken names numbered, the same layer shared, undone whole', () => {
  const edit = toEdit(there, broughtIn(there, brought, 'a.dxf', false));
  const { chip, inverse } = makeEdit(there, edit);
  expect(edit.label).toBe('bring in a.dxf');
  expect(chip.channels.map(({ id }) => id)).toEqual(['channel 1', 'channel 1 (2)', 'channel 2']);
  expect(chip.layers).toHaveLength(1);
  expect(chip.outline).toEqual({ width: 20_000_000, height: 10_000_000 });
  expect(applyEdit(chip, inverse)).toEqual(there);
});

test('in place of it: only what came is left; another depth is another layer', () => {
  const deep: Chip = { ...brought, layers: [{ ...brought.layers[0]!, depth: 20_000 }] };
  const { chip, inverse } = makeEdit(there, toEdit(there, broughtIn(there, deep, 'a.dxf', true)));
  expect(chip.channels.map(({ id, layer }) => [id, layer])).toEqual([
    ['channel 1', 'flow (2)'],
    ['channel 2', 'flow (2)'],
  ]);
  expect(chip.layers.map(({ id, depth }) => [id, depth])).toEqual([['flow (2)', 20_000]]);
  expect(applyEdit(chip, inverse)).toEqual(there);
});
