import { expect, test } from 'vitest';
import { teeChip } from '../testing/chips.ts';
import type { News } from './messages.ts';
import { solvingThread } from './thread.ts';

/** The thread, each step of it taken one by one; how many junctions were handed on, list by list. */
function bench() {
  const works: (() => void)[] = [];
  const news: News['kind'][] = [];
  const handed: number[] = [];
  const held: number[] = [];
  const order = solvingThread(
    ({ kind }) => news.push(kind),
    (work) => works.push(work),
    { solve: (cells) => handed.push(cells.length), listen: () => undefined, hold: (ms) => held.push(ms) },
    () => undefined,
  );
  const settle = (): void => {
    for (let work = works.shift(); work; work = works.shift()) work();
  };
  return { order, settle, news, handed, held };
}
const chip = teeChip();
const [first] = chip.channels;
const wider = (by: number) => ({
  label: 'wider',
  changes: [
    {
      kind: 'put' as const,
      list: 'channels' as const,
      id: first!.id,
      part: { ...first!, width: [first!.width[0] + by, first!.width[1] + by] as const },
    },
  ],
});

test('junctions of an edit that no hand held wait until its answers are painted', () => {
  const { order, settle, news, handed, held } = bench();
  order({ kind: 'load', id: 1, chip, options: {} });
  settle();
  order({ kind: 'rest' });
  order({ kind: 'kept', cells: [] });
  settle();
  order({ kind: 'rest' });
  const before = handed.length;
  expect(before).toBeGreaterThan(0);

  order({ kind: 'edit', id: 2, edit: wider(4000) });
  settle();
  expect(news.at(-1)).toBe('short');
  expect(handed.length).toBe(before);
  // those of the edit before stand still meanwhile
  expect(held.at(-1)).toBeGreaterThan(0);
  order({ kind: 'rest' });
  expect(held.at(-1)).toBe(0);
  expect(news).toContain('solved');
  expect(handed.length).toBe(before + 1);
  expect(handed.at(-1)).toBeGreaterThan(0);
});
