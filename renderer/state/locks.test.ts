import { expect, test } from 'vitest';
import { moveJoined } from '../edits/parts.ts';
import { teeChip } from '../testing/chips.ts';
import { lockRefusal, readLocks, renamedLocks } from './locks.ts';

const chip = teeChip();
const feed = { kind: 'channel', value: chip.channels[0]! } as const;
const locked = new Set(['channel:feed']);

test('what is locked is neither moved nor deleted, nor drawn along; its width may change', () => {
  const moved = moveJoined(chip, [feed], [1000, 0]);
  expect(lockRefusal(chip, locked, { label: '', put: moved })).toMatch(/feed is locked/);
  expect(lockRefusal(chip, locked, { label: '', drop: ['channel:feed'] })).toMatch(/Unlock it first/);
  // the port at its end would draw it along
  const port = { kind: 'port', value: chip.ports[0]! } as const;
  expect(lockRefusal(chip, locked, { label: '', put: moveJoined(chip, [port], [1000, 0]) })).toMatch(/feed/);
  const wide = { kind: 'channel', value: { ...feed.value, width: [1, 1] } } as const;
  expect(lockRefusal(chip, locked, { label: '', put: [wide] })).toBeNull();
  expect(lockRefusal(chip, new Set(), { label: '', put: moved })).toBeNull();
});

test('locks are read from what a file holds, whatever that is, and follow a new name', () => {
  expect(readLocks({ locked: ['channel:feed', 'junction:1', 7, 'nothing'] })).toEqual(locked);
  for (const strange of [undefined, null, 3, [], { locked: 'channel:feed' }])
    expect(readLocks(strange)).toEqual(new Set());
  expect(renamedLocks(locked, [{ ref: 'channel:feed', to: 'main' }])).toEqual(new Set(['channel:main']));
  expect(renamedLocks(locked, [{ ref: 'port:in', to: 'main' }])).toBe(locked);
});
