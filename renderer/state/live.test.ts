import { afterEach, expect, test, vi } from 'vitest';
import { emptyChip } from '../testing/chips.ts';
import type { PartValue } from '../tools/tool.ts';
import type { Hand } from '../tools/tools.ts';
import type { Desk } from './desk.ts';
import { followHand } from './live.ts';
import { createStore } from './store.ts';
import type { Workbench } from './workbench.ts';

afterEach(() => {
  vi.unstubAllGlobals();
});

/** A hand that moves the end of a channel, what is asked of it (mm), and frames that end when told to. */
function follow() {
  const frames: (() => void)[] = [];
  vi.stubGlobal('requestAnimationFrame', (work: () => void) => frames.push(work));
  const mm = 1e6;
  let parts: PartValue[] = [];
  const hand = createStore<Hand | null>(null);
  const asked: (number | null)[] = [];
  const desk = {
    chip: emptyChip,
    solver: {
      drag: (would: { chip: ReturnType<typeof emptyChip> } | null) =>
        asked.push(would && would.chip.channels[0]!.path.at(-1)![0] / mm),
    },
  } as unknown as Desk;
  followHand(desk, { hand, preview: () => ({ parts }) } as unknown as Workbench);
  const value = (to: number) => ({
    id: 'c',
    layer: 'flow',
    path: [
      [5 * mm, 5 * mm],
      [to * mm, 5 * mm],
    ],
    width: [200_000, 200_000],
    bendRadius: 0,
  });
  return {
    asked,
    move(to: number | null) {
      parts = to === null ? [] : [{ kind: 'channel', value: value(to) } as unknown as PartValue];
      hand.set({} as Hand);
    },
    frame: () => {
      for (const work of frames.splice(0)) work();
    },
  };
}

test('the first move in a frame is asked about at once, of those that follow in it the last when it ends', () => {
  const { asked, move, frame } = follow();
  move(10);
  expect(asked).toEqual([10]);
  move(11);
  move(12);
  expect(asked).toEqual([10]);
  frame();
  expect(asked).toEqual([10, 12]);
  frame();
  move(13);
  expect(asked).toEqual([10, 12, 13]);
  frame();
  expect(asked).toEqual([10, 12, 13]);
});

test('that the hand has let go is told even where it moved within the same frame', () => {
  const { asked, move, frame } = follow();
  move(10);
  move(null);
  frame();
  expect(asked).toEqual([10, null]);
});
