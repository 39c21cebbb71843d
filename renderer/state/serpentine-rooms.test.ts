import { expect, test } from 'vitest';
import type { Desk, KeptView } from './desk.ts';
import { keepRoom, readRoom } from './serpentine-rooms.ts';

test('what was kept of a room is read back; nonsense and rooms of what is gone are left out', () => {
  expect(readRoom({}, 's')).toEqual({});
  expect(readRoom({ serpentines: { s: { wall: 150_000, high: -3 } } }, 's')).toEqual({ wall: 150_000 });
  expect(readRoom({ serpentines: [1, 2] }, 's')).toEqual({});
  expect(readRoom({ serpentines: { s: 'x' } }, 's')).toEqual({});
  expect(readRoom({ serpentines: {} }, 'constructor')).toEqual({});
  let kept: KeptView = { serpentines: { gone: { wall: 1 }, other: { wall: 2 } } };
  const desk = {
    keptView: () => kept,
    keepView: (patch: KeptView) => {
      kept = { ...kept, ...patch };
    },
    chip: () => ({ channels: [{ id: 's' }, { id: 'other' }] }),
  } as unknown as Desk;
  keepRoom(desk, 's', { wall: 150_000, high: 9_000_000 });
  expect(kept).toEqual({ serpentines: { other: { wall: 2 }, s: { wall: 150_000, high: 9_000_000 } } });
});
