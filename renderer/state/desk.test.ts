import { expect, test, vi } from 'vitest';
import type { Client } from '../../main/contract/client.ts';
import type { ProjectState } from '../../main/contract/contract.ts';
import { createSolver } from '../solving/solver.ts';
import { solvingThread } from '../solving/thread.ts';
import { teeChip } from '../testing/chips.ts';
import { createDesk } from './desk.ts';
import { wouldBe } from './live.ts';
import { createWorkbench } from './workbench.ts';

/** A desk with a host that keeps everything at once, and the solver in the same thread, on demand. */
async function openDesk(
  mode: ProjectState['mode'] = 'draft',
  reply: (answer: () => void) => void = (answer) => answer(),
) {
  const asked: string[] = [];
  const done: string[] = [];
  let seq = 1;
  const state = {
    chip: teeChip(),
    name: 'test',
    path: null,
    mode,
    modeSays: mode === 'read-only' ? 'Another window has it open.' : '',
    notes: [],
    undo: null,
    redo: null,
    seq,
  } as unknown as ProjectState;
  const client = {
    call: (method: string, input: { readonly edit?: { readonly label: string } }) => {
      asked.push(method);
      seq += 1;
      if (input.edit) done.push(input.edit.label);
      else if (method === 'project.undo') done.pop();
      const position = { seq, undo: done.at(-1) ?? null, redo: null, state };
      return new Promise((resolve) => reply(() => resolve(position)));
    },
    on: () => () => undefined,
  } as unknown as Client;
  const works: (() => void)[] = [];
  const solver = createSolver(heldThread(works));
  const desk = createDesk(client, solver);
  await desk.open('Opening …', async () => state);
  return {
    desk,
    asked,
    settle: () => {
      for (let work = works.shift(); work; work = works.shift()) work();
    },
  };
}

function heldThread(works: (() => void)[]) {
  let listener: Parameters<Parameters<typeof createSolver>[0]['listen']>[0] = () => undefined;
  const order = solvingThread(
    (news) => listener(news),
    (work) => works.push(work),
  );
  return { post: order, listen: (given: typeof listener) => (listener = given), end: () => undefined };
}

const widened = (width: number) => {
  const feed = teeChip().channels[0]!;
  return {
    label: `widen feed to ${width}`,
    put: [{ kind: 'channel', value: { ...feed, width: [width, width] } }] as const,
  };
};

test('edits are named, undone and done again, and the host is told each', async () => {
  const { desk, asked } = await openDesk();
  const first = desk.chip();
  expect(desk.alter(widened(250_000))).toBe(true);
  expect(desk.alter(widened(300_000))).toBe(true);
  expect(desk.undoLabel()).toBe('widen feed to 300000');
  desk.undo();
  expect(desk.redoLabel()).toBe('widen feed to 300000');
  desk.undo();
  expect(desk.chip()).toEqual(first);
  desk.redo();
  expect(desk.chip()!.channels[0]!.width).toEqual([250_000, 250_000]);
  await desk.settled();
  expect(asked).toEqual(['project.edit', 'project.edit', 'project.undo', 'project.undo', 'project.redo']);
  expect(desk.project.get()!.keeping).toBe(false);
});

test('while more is on its way to the host, what it could take back now is not offered', async () => {
  const answers: (() => void)[] = [];
  const { desk } = await openDesk('draft', (answer) => answers.push(answer));
  const offered: (string | null)[] = [];
  desk.alter(widened(250_000));
  desk.alter(widened(300_000));
  desk.undo();
  desk.undo();
  for (let last = false; !last; ) {
    await vi.waitFor(() => expect(answers).toHaveLength(1));
    answers.shift()!();
    last = await vi.waitFor(() => {
      expect(desk.position()).toBe(2 + offered.length);
      return !desk.project.get()!.keeping;
    });
    offered.push(desk.undoLabel());
  }
  // the host has the earlier of both widths to take back after every deed but the last
  expect(offered).toEqual([null, null, null, null]);
  expect(desk.redoLabel()).toBe('widen feed to 250000');
});

test('an edit that makes no chip changes nothing and says why', async () => {
  const { desk } = await openDesk();
  const before = desk.chip();
  expect(desk.alter(widened(-5))).toBe(false);
  expect(desk.view.get().says).not.toBe('');
  expect(desk.chip()).toBe(before);
  expect(desk.undoLabel()).toBeNull();
});

test('a project that is only to be read is not changed', async () => {
  const { desk, asked } = await openDesk('read-only');
  expect(desk.attempt(widened(250_000))).toBe('Another window has it open.');
  expect(asked).toEqual([]);
});

test('what is chosen and gone is chosen no more; the answer is that of the newest chip', async () => {
  const { desk, settle } = await openDesk();
  desk.view.patch({ selection: ['channel:up', 'channel:feed'] });
  desk.alter({ label: 'delete up', drop: ['channel:up', 'port:well 1'] });
  expect(desk.view.get().selection).toEqual(['channel:feed']);
  expect(desk.solver.solved.get().busy).toBe(true);
  settle();
  const { busy, chip, result } = desk.solver.solved.get();
  expect(busy).toBe(false);
  expect(chip).toBe(desk.chip());
  expect(result!.channels.map(({ id }) => id)).toEqual(['feed', 'down']);
});

test('what is dragged is answered beside the chip until the hand lets go', async () => {
  const { desk, settle } = await openDesk();
  settle();
  const { solver } = desk;
  const stood = solver.solved.get().result;
  const would = wouldBe(desk.chip()!, [...widened(220_000).put])!;
  solver.drag(would);
  settle();
  expect(solver.live.get()!.result).not.toBeNull();
  expect(solver.solved.get().result).toBe(stood);
  solver.drag(null);
  expect(solver.live.get()).toBeNull();
  // let go with a change: the preview stands until its answer is there
  solver.drag(would);
  settle();
  desk.alter(widened(250_000));
  solver.drag(null);
  expect(solver.live.get()).not.toBeNull();
  settle();
  expect(solver.live.get()).toBeNull();
});

test('the hand holds a tool; locked parts are out of its reach', async () => {
  const { desk } = await openDesk();
  const bench = createWorkbench(desk);
  desk.view.patch({ selection: ['channel:up', 'channel:feed'], locked: new Set(['channel:feed']) });
  expect(bench.scope()!.selection).toEqual(['channel:up']);
  bench.take('channel');
  bench.event({ kind: 'down', at: [1_000_000, 1_000_000] });
  bench.event({ kind: 'up', at: [1_000_000, 1_000_000] });
  for (const text of '4 mm') bench.event({ kind: 'type', text });
  bench.event({ kind: 'arrow', direction: [1, 0] });
  bench.event({ kind: 'accept' });
  expect(
    desk
      .chip()!
      .channels.at(-1)!
      .path.map(([x]) => x),
  ).toEqual([1_000_000, 5_000_000]);
  expect(desk.undoLabel()).toBe('draw a channel');
});

test('what else is remembered with a project outlasts new locks', async () => {
  const { desk } = await openDesk();
  desk.keepView({ answers: { by: 'index-1.js' } });
  desk.lock(new Set(['channel:feed']));
  expect(desk.keptView()).toEqual({ answers: { by: 'index-1.js' }, locked: ['channel:feed'] });
});

test('answers known to hold stand until the chip is solved', async () => {
  const { desk, settle } = await openDesk();
  settle();
  const answers = [
    { question: 'Q', standing: 'yes', says: ['as kept'], margin: null, culprit: null },
  ] as const;
  const works: (() => void)[] = [];
  const solver = createSolver(heldThread(works));
  const again = createDesk(desk.client, solver, () => answers);
  const chip = desk.chip()!;
  await again.open(
    'Opening …',
    async () => ({ chip, notes: [], seq: 1, view: {} }) as unknown as ProjectState,
  );
  expect(solver.short.get()).toEqual(answers);
  expect(solver.solved.get().busy).toBe(true);
  for (let work = works.shift(); work; work = works.shift()) work();
  expect(solver.short.get()).toBeNull();
  expect(solver.solved.get().result).not.toBeNull();
});
