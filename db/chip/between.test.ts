import { expect, test } from 'vitest';
import { applyEdit } from '../../solver/chip/edit.ts';
import { madeUpChip, random, randomEdit } from '../../test/faults/random.ts';
import { editBetween } from './between.ts';

test('the edit between two chips leads from one to the other, 200 random pairs', () => {
  for (let seed = 1; seed <= 200; seed += 1) {
    const next = random(seed);
    const from = madeUpChip(1 + (seed % 12), seed);
    let to = from;
    for (let step = 0; step < seed % 9; step += 1) to = applyEdit(to, randomEdit(to, next));
    const edit = editBetween(from, to, 'lead');
    expect(applyEdit(from, edit), `seed ${seed}`).toEqual(to);
    expect(applyEdit(to, editBetween(to, from, 'back')), `seed ${seed}`).toEqual(from);
    if (from === to) expect(edit.changes).toEqual([]);
  }
});

test('keep-outs come and go', () => {
  const from = madeUpChip(2);
  const part = {
    id: 'clamp',
    outline: [
      [0, 0],
      [9, 0],
      [0, 9],
    ] as const,
    clearance: 5,
  };
  const to = { ...from, keepOuts: [part] };
  expect(editBetween(from, to, 'add').changes).toEqual([
    { kind: 'insert', list: 'keepOuts', index: 0, part },
  ]);
  expect(applyEdit(to, editBetween(to, from, 'away'))).toStrictEqual(from);
});

test('one channel widened among many is one change', () => {
  const from = madeUpChip(500);
  const wide = { ...from.channels[7]!, width: [1, 1] as const };
  const to = { ...from, channels: from.channels.with(7, wide) };
  expect(editBetween(from, to, 'widen').changes).toEqual([
    { kind: 'put', list: 'channels', id: 'c7', part: wide },
  ]);
});
