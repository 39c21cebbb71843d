import { expect, test } from 'vitest';
import { type Accuracy, PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { memoryStore } from '../../solver/cell/store.ts';
import { solveOrdered } from '../../solver/lump/cell-order.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';
import { teeChip } from '../testing/chips.ts';
import { verdicts } from '../verdict/verdicts.ts';
import type { AtHand } from './at-hand.ts';
import type { CellHand } from './cell-hand.ts';
import type { News } from './messages.ts';
import { solvingThread } from './thread.ts';

/**
 * The thread with a hand that finds nothing, or what there is to be found; each step of both, and of the
 * clock, taken one by one.
 */
function bench(finds = false, held?: AtHand) {
  const news: News[] = [];
  const works: (() => void)[] = [];
  const timers: (() => void)[] = [];
  const store = memoryStore();
  const handed: { cells: readonly CellSpec[]; accuracy: Accuracy; ahead: boolean }[] = [];
  let queue: { cell: CellSpec; accuracy: Accuracy }[] = [];
  let listener: Parameters<CellHand['listen']>[0] = () => undefined;
  const hand: CellHand = {
    solve(cells, accuracy, ahead = false) {
      handed.push({ cells, accuracy, ahead });
      queue = cells.map((cell) => ({ cell, accuracy }));
    },
    listen(given) {
      listener = given;
    },
    hold: () => undefined,
  };
  const order = solvingThread(
    (told) => {
      news.push(told);
      // the project has kept nothing
      if (told.kind === 'want') works.push(() => order({ kind: 'kept', cells: [] }));
      // the page has painted it
      if (told.kind === 'short') works.push(() => order({ kind: 'rest' }));
    },
    (work) => works.push(work),
    hand,
    (work) => timers.push(work),
    held,
  );
  /** Works until there is nothing left to do; false where there is no end to it. */
  const settle = (): boolean => {
    for (let i = 0; i < 500; i += 1) {
      const work = works.shift();
      const job = work ? undefined : queue.shift();
      if (work) work();
      else if (job) {
        const { cell, accuracy } = job;
        const found = finds
          ? solveOrdered(cell.shape, accuracy, cell.name, store)
          : new Problem('memory', 'Not now.', '', 'Wait.');
        listener(cell, accuracy, found, queue.length);
      } else return true;
    }
    return false;
  };
  const of = <K extends News['kind']>(kind: K) =>
    news.filter((told): told is Extract<News, { kind: K }> => told.kind === kind);
  /** What waits for time to pass is done once. */
  const wait = (): boolean => {
    for (const timer of timers.splice(0)) timer();
    return settle();
  };
  /** Time passes, and nothing else happens. */
  const elapse = (): void => {
    for (const timer of timers.splice(0)) timer();
  };
  return { order, settle, wait, elapse, of, handed, step: () => works.shift()?.() };
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

/** All is left to the threads. */
const NOTHING_AT_HAND: AtHand = { begin: () => undefined, solve: () => undefined };

test('what is dragged is answered beside the chip, to preview accuracy, and none of it is kept', () => {
  const { order, settle, of, handed } = bench(false, NOTHING_AT_HAND);
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

const FAIR = { accuracy: 0.02 } as const;

test('the five answers come first, and are those of the whole answer that follows', () => {
  const { order, settle, of } = bench();
  const chip = teeChip();
  order({ kind: 'load', id: 1, chip, options: {} });
  expect(settle()).toBe(true);
  const { outcome, waiting } = of('solved').at(-1)!;
  const { answers, id } = of('short').at(-1)!;
  expect(id).toBe(1);
  expect(outcome.ok).toBe(true);
  if (outcome.ok) expect(answers).toEqual(verdicts({ chip, result: outcome.result, trouble: '', waiting }));
  order({ kind: 'edit', id: 2, edit: closedWell });
  expect(settle()).toBe(true);
  const stopped = of('solved').at(-1)!.outcome;
  expect(stopped.ok).toBe(false);
  if (!stopped.ok)
    expect(of('short').at(-1)!.answers[0]!.says).toEqual([expect.stringContaining(stopped.problem.what)]);
});

test('a junction that the hand holds is solved with its first answer, and by no thread', () => {
  const { order, settle, wait, of, handed } = bench(true);
  const chip = teeChip();
  order({ kind: 'load', id: 1, chip, options: FAIR });
  expect(settle()).toBe(true);
  const before = handed.length;
  const moved = chip.channels[1]!;
  const part = { ...moved, width: [90_000, 90_000] as const };
  const changes = [{ kind: 'put' as const, list: 'channels' as const, id: moved.id, part }];
  order({ kind: 'drag', id: 2, edit: { label: 'as it would be', changes } });
  expect(settle()).toBe(true);
  expect(of('dragged').length).toBe(1);
  const { waiting, outcome } = of('dragged')[0]!;
  expect(waiting).toBe(0);
  expect(outcome.ok && outcome.result.junctions).toBe('solved');
  expect(handed.slice(before).flatMap(({ cells }) => cells)).toEqual([]);
  // as good as asked for it is only once the hand rests
  expect(wait()).toBe(true);
  expect(handed.at(-1)).toMatchObject({ ahead: true, accuracy: { flow: 0.02 } });
  expect(handed.at(-1)!.cells.length).toBeGreaterThan(0);
});

test('what the hand lets go of is answered once, with its junctions; without them only where these take too long', () => {
  const chip = teeChip();
  const moved = chip.channels[1]!;
  const part = { ...moved, width: [90_000, 90_000] as const };
  const changes = [{ kind: 'put' as const, list: 'channels' as const, id: moved.id, part }];
  /** Dragged, and let go of before the hand has rested. */
  const letGo = ({ order, settle }: ReturnType<typeof bench>): void => {
    order({ kind: 'load', id: 1, chip, options: FAIR });
    expect(settle()).toBe(true);
    order({ kind: 'drag', id: 2, edit: { label: 'as it would be', changes } });
    expect(settle()).toBe(true);
    order({ kind: 'edit', id: 3, edit: { label: 'widen the outlet', changes } });
    order({ kind: 'drag', id: 4, edit: null });
  };
  const found = bench(true);
  letGo(found);
  expect(found.settle()).toBe(true);
  const answers = found.of('solved').filter(({ id }) => id === 3);
  expect(answers.map(({ waiting }) => waiting)).toEqual([0]);
  expect(found.handed.some(({ ahead }) => ahead)).toBe(false);
  // threads that give nothing at all
  const silent = bench(true);
  letGo(silent);
  const none = (): boolean => silent.of('short').every(({ id }) => id === 1);
  expect(none()).toBe(true);
  // another edit is answered at once, whatever the one before it still waits for
  const back = [{ kind: 'put' as const, list: 'channels' as const, id: moved.id, part: moved }];
  silent.order({ kind: 'edit', id: 5, edit: { label: 'as it was', changes: back } });
  silent.step();
  expect(silent.of('short').at(-1)!.id).toBe(5);
  const late = bench(true);
  letGo(late);
  late.elapse();
  late.step();
  expect(late.of('short').at(-1)!.id).toBe(3);
});

test('where the hand rests, what it holds is solved ahead; let go there, it is answered at once', () => {
  const { order, settle, wait, of, handed } = bench(true, NOTHING_AT_HAND);
  const chip = teeChip();
  order({ kind: 'load', id: 1, chip, options: FAIR });
  expect(settle()).toBe(true);
  const moved = chip.channels[1]!;
  const part = { ...moved, width: [90_000, 90_000] as const };
  const changes = [{ kind: 'put' as const, list: 'channels' as const, id: moved.id, part }];
  order({ kind: 'drag', id: 2, edit: { label: 'as it would be', changes } });
  expect(settle()).toBe(true);
  expect(handed.at(-1)).toMatchObject({ accuracy: PREVIEW_ACCURACY, ahead: false });
  const dragged = of('dragged').length;
  expect(wait()).toBe(true);
  const ahead = handed.at(-1)!;
  expect(ahead).toMatchObject({ ahead: true, accuracy: { flow: 0.02 } });
  expect(ahead.cells.length).toBeGreaterThan(0);
  // what is held goes on being shown as rough as it was
  expect(of('dragged').length).toBe(dragged);
  // the hand goes on: that is dropped before its preview is answered, and begun anew where it rests
  order({ kind: 'drag', id: 3, edit: { label: 'as it would be', changes } });
  expect(handed.at(-1)).toMatchObject({ cells: [], ahead: false });
  expect(of('dragged').length).toBe(dragged);
  expect(settle()).toBe(true);
  expect(wait()).toBe(true);
  expect(handed.at(-1)).toMatchObject({ ahead: true, accuracy: { flow: 0.02 } });
  expect(of('solved').every(({ id }) => id === 1)).toBe(true);

  order({ kind: 'edit', id: 4, edit: { label: 'widen the outlet', changes } });
  order({ kind: 'drag', id: 5, edit: null });
  expect(settle()).toBe(true);
  const answers = of('solved').filter(({ id }) => id === 4);
  expect(answers[0]).toMatchObject({ waiting: 0, outcome: { ok: true } });
  const { outcome } = answers[0]!;
  const fresh = solve({ ...chip, channels: chip.channels.map((one) => (one === moved ? part : one)) }, FAIR);
  if (!outcome.ok) return;
  const { result } = outcome;
  expect(result.junctions).toBe('solved');
  expect(result.cells.map(({ id, accuracy }) => [id, accuracy])).toEqual(
    fresh.cells.map(({ id, accuracy }) => [id, accuracy]),
  );
  // a network kept from before sums up in another order
  result.ports.forEach(({ flow }, i) => {
    expect(flow! / fresh.ports[i]!.flow!).toBeCloseTo(1, 9);
  });
});

test('solved junctions are handed over to be kept when it has been quiet', () => {
  const { order, settle, wait, of } = bench(true);
  order({ kind: 'load', id: 1, chip: teeChip(), options: FAIR });
  expect(settle()).toBe(true);
  expect(of('keep')).toEqual([]);
  const began = performance.now();
  while (of('keep').length === 0 && performance.now() - began < 60_000) expect(wait()).toBe(true);
  expect(of('keep').length).toBeGreaterThan(0);
  for (let i = 0; i < 10; i += 1) expect(wait()).toBe(true);
  const keys = of('keep').map(({ cell }) => cell.key);
  expect(new Set(keys).size).toBe(keys.length);
});
