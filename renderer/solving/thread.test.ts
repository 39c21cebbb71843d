import { expect, test } from 'vitest';
import { type Accuracy, PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { teeChip } from '../testing/chips.ts';
import type { News } from './messages.ts';
import { type CellHand, solvingThread } from './thread.ts';

/** The thread with a hand that finds nothing, each step of both taken one by one. */
function bench() {
  const news: News[] = [];
  const works: (() => void)[] = [];
  const handed: { cells: readonly CellSpec[]; accuracy: Accuracy }[] = [];
  let queue: { cell: CellSpec; accuracy: Accuracy }[] = [];
  let listener: Parameters<CellHand['listen']>[0] = () => undefined;
  const hand: CellHand = {
    solve(cells, accuracy) {
      handed.push({ cells, accuracy });
      queue = cells.map((cell) => ({ cell, accuracy }));
    },
    listen(given) {
      listener = given;
    },
  };
  const order = solvingThread(
    (told) => {
      news.push(told);
      // the project has kept nothing
      if (told.kind === 'want') works.push(() => order({ kind: 'kept', cells: [] }));
    },
    (work) => works.push(work),
    hand,
  );
  /** Works until there is nothing left to do; false where there is no end to it. */
  const settle = (): boolean => {
    for (let i = 0; i < 500; i += 1) {
      const work = works.shift();
      const job = work ? undefined : queue.shift();
      if (work) work();
      else if (job)
        listener(job.cell, job.accuracy, new Problem('memory', 'Not now.', '', 'Wait.'), queue.length);
      else return true;
    }
    return false;
  };
  const of = <K extends News['kind']>(kind: K) =>
    news.filter((told): told is Extract<News, { kind: K }> => told.kind === kind);
  return { order, settle, of, handed, step: () => works.shift()?.() };
}

const closedWell = {
  label: 'drive well 1 by a flow that has no way out',
  changes: teeChip().ports.map((port) => ({
    kind: 'put' as const,
    list: 'ports' as const,
    id: port.id,
    part: { ...port, drive: { kind: 'flow' as const, flow: 1e-10 } },
  })),
};

test('a chip that cannot be solved asks for no junctions, and comes to rest', () => {
  const { order, settle, of } = bench();
  order({ kind: 'load', id: 1, chip: teeChip(), options: {} });
  order({ kind: 'edit', id: 2, edit: closedWell });
  expect(settle()).toBe(true);
  order({ kind: 'edit', id: 3, edit: { ...closedWell, label: 'again' } });
  expect(settle()).toBe(true);
  expect(of('solved').length).toBeLessThan(4);
  expect(of('solved').at(-1)).toMatchObject({ id: 3, outcome: { ok: false }, waiting: 0 });
});

test('junctions handed out before the chip broke do not set it going for ever', () => {
  const { order, settle, of, step } = bench();
  order({ kind: 'load', id: 1, chip: teeChip(), options: {} });
  step();
  step();
  step();
  order({ kind: 'edit', id: 2, edit: closedWell });
  expect(settle()).toBe(true);
  expect(of('solved').length).toBeLessThan(6);
});

test('what is dragged is answered beside the chip, to preview accuracy, and none of it is kept', () => {
  const { order, settle, of, handed } = bench();
  const chip = teeChip();
  order({ kind: 'load', id: 1, chip, options: {} });
  expect(settle()).toBe(true);
  const answered = of('solved').length;
  const moved = chip.channels[1]!;
  const edit = {
    label: 'as it would be',
    changes: [
      {
        kind: 'put' as const,
        list: 'channels' as const,
        id: moved.id,
        part: { ...moved, width: [90_000, 90_000] as const },
      },
    ],
  };
  order({ kind: 'drag', id: 2, edit });
  expect(settle()).toBe(true);
  expect(of('dragged').at(-1)).toMatchObject({ id: 2, outcome: { ok: true } });
  expect(handed.at(-1)!.accuracy).toBe(PREVIEW_ACCURACY);
  expect(of('solved').length).toBe(answered);
  expect(of('keep')).toEqual([]);
  order({ kind: 'drag', id: 3, edit: null });
  expect(settle()).toBe(true);
  expect(of('solved').at(-1)!.id).toBe(1);
});

test('a drag that makes no chip is passed over', () => {
  const { order, settle, of } = bench();
  order({ kind: 'load', id: 1, chip: teeChip(), options: {} });
  order({
    kind: 'drag',
    id: 2,
    edit: { label: 'none', changes: [{ kind: 'remove', list: 'channels', id: 'not there' }] },
  });
  expect(settle()).toBe(true);
  expect(of('dragged')).toEqual([]);
});

test('junctions on screen are handed out before the others', () => {
  const names = (look: boolean): string[] => {
    const { order, settle, handed } = bench();
    if (look) order({ kind: 'look', box: { left: 19e6, right: 21e6, bottom: 5e6, top: 7e6 } });
    order({ kind: 'load', id: 1, chip: teeChip(), options: {} });
    expect(settle()).toBe(true);
    return handed[0]!.cells.map(({ name }) => name);
  };
  const drawn = names(false);
  const seen = names(true);
  // The lower bend, at 20, 6 mm, is the only one in view.
  expect(seen[0]).not.toBe(drawn[0]);
  expect(seen[0]).toMatch(/^bend/);
  expect([...seen].sort()).toEqual([...drawn].sort());
  expect(seen.slice(1)).toEqual(drawn.filter((name) => name !== seen[0]));
});
