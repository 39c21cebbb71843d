import { expect, test } from 'vitest';
import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { lackingCells } from '../../solver/lump/cells.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { channel, emptyChip, port, teeChip } from '../testing/chips.ts';
import { atHand } from './at-hand.ts';

const mm = 1_000_000;

/** A channel into and out of a chamber many times as wide as it is. */
function wideChamber(): Chip {
  return {
    ...emptyChip(),
    channels: [
      channel('in', [
        [5 * mm, 13 * mm],
        [20 * mm, 13 * mm],
      ]),
      channel('out', [
        [30 * mm, 13 * mm],
        [45 * mm, 13 * mm],
      ]),
    ],
    chambers: [
      {
        id: 'well',
        layer: 'flow',
        outline: [
          [20 * mm, 10 * mm],
          [30 * mm, 10 * mm],
          [30 * mm, 16 * mm],
          [20 * mm, 16 * mm],
        ],
      },
    ],
    ports: [
      port('a', [5 * mm, 13 * mm], { kind: 'flow', flow: 1e-9 / 60 }),
      port('b', [45 * mm, 13 * mm], { kind: 'pressure', pressure: 0 }),
    ],
  };
}

/** How many junctions are still missing after the hand's turn. */
function left(chip: Chip, held: ReturnType<typeof atHand>): number {
  const memory = emptyMemory();
  const { cells } = memory.cut(chip);
  // two of the tee's three places: as many as one drag changes
  const few = cells.slice(0, 2);
  held.solve(few, memory.cells);
  return lackingCells(few, PREVIEW_ACCURACY, memory.cells).length;
}

test('few small junctions are solved at once; a wide chamber is left to the threads', () => {
  expect(left(teeChip(), atHand())).toBe(0);
  const memory = emptyMemory();
  expect(
    lackingCells(memory.cut(wideChamber()).cells, PREVIEW_ACCURACY, memory.cells).length,
  ).toBeGreaterThan(0);
  expect(left(wideChamber(), atHand())).toBeGreaterThan(0);
});

test('what turned out slow is left to the threads for a while, or until the hand takes hold anew', () => {
  let now = 0;
  const held = atHand(() => {
    now += 100;
    return now;
  });
  held.begin();
  expect(left(teeChip(), held)).toBe(0);
  for (let i = 0; i < 8; i += 1) expect(left(teeChip(), held)).toBeGreaterThan(0);
  // it may have been slow that once
  expect(left(teeChip(), held)).toBe(0);
  expect(left(teeChip(), held)).toBeGreaterThan(0);
  held.begin();
  expect(left(teeChip(), held)).toBe(0);
});
