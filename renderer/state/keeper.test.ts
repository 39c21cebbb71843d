import { expect, test, vi } from 'vitest';
import type { Client } from '../../main/contract/client.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { Keeper } from './keeper.ts';

const edit = { label: 'one', changes: [] };

/** A host that answers when told to, and what it was asked. */
function slowHost() {
  const asked: { method: string; input: unknown }[] = [];
  const answers: { done: (value: unknown) => void; fail: (error: unknown) => void }[] = [];
  const client = {
    call: (method: string, input: unknown) => {
      asked.push({ method, input });
      return new Promise((done, fail) => answers.push({ done, fail }));
    },
  } as unknown as Client;
  const turn = (): Promise<void> => new Promise((done) => setTimeout(done));
  return {
    client,
    asked,
    answer: async (seq: number) => {
      answers.shift()!.done({ seq, undo: null, redo: null });
      await turn();
    },
    refuse: async (error: unknown) => {
      answers.shift()!.fail(error);
      await turn();
    },
  };
}

test('deeds are handed over one after the other, each at the position of the one before', async () => {
  const host = slowHost();
  const busy: boolean[] = [];
  const keeper: Keeper = new Keeper(host.client, {
    kept: () => busy.push(keeper.busy),
    refused: () => busy.push(true),
  });
  keeper.start(7);
  keeper.add({ kind: 'edit', edit });
  keeper.add({ kind: 'undo' });
  expect(keeper.busy).toBe(true);
  // what answers the deed has the processor first
  expect(host.asked).toEqual([]);
  await vi.waitFor(() => expect(host.asked).toHaveLength(1));
  expect(host.asked).toEqual([{ method: 'project.edit', input: { edit, seq: 7 } }]);
  await host.answer(8);
  expect(host.asked.at(-1)).toEqual({ method: 'project.undo', input: {} });
  await host.answer(9);
  // when the last is acknowledged nothing is being kept any more, and the page says so
  expect(busy).toEqual([true, false]);
  expect(keeper.busy).toBe(false);
  expect(keeper.position).toBe(9);
  await keeper.settled();
});

test('what waits goes at once when the page is left or something needs it kept, else in its own time', async () => {
  const host = slowHost();
  const keeper = new Keeper(host.client, { kept: () => undefined, refused: () => undefined });
  keeper.start(1);
  // nothing waits: nothing is hurried
  keeper.hurry();
  await keeper.settled();
  keeper.add({ kind: 'edit', edit });
  const quiet = keeper.quiet();
  expect(host.asked).toHaveLength(0);
  const settled = keeper.settled();
  expect(host.asked).toHaveLength(1);
  await host.answer(2);
  await Promise.all([quiet, settled]);
  keeper.add({ kind: 'undo' });
  // a page that is left does nothing later any more
  keeper.hurry();
  expect(host.asked).toHaveLength(2);
  await host.answer(3);
  expect(keeper.busy).toBe(false);
});

test('a refusal drops what was done after it, and says why', async () => {
  const host = slowHost();
  const said: string[] = [];
  const keeper = new Keeper(host.client, {
    kept: () => said.push('kept'),
    refused: (problem) => said.push(problem.what),
  });
  keeper.start(1);
  keeper.add({ kind: 'edit', edit });
  keeper.add({ kind: 'edit', edit });
  keeper.hurry();
  await host.refuse(new Problem('output', 'The disk is full.', '', 'Make room.'));
  expect(said).toEqual(['The disk is full.']);
  expect(host.asked).toHaveLength(1);
  expect(keeper.busy).toBe(false);
  // and what comes later is kept again
  keeper.add({ kind: 'redo' });
  keeper.hurry();
  await host.answer(2);
  expect(said.at(-1)).toBe('kept');
  // anything else that goes wrong is told in words as well
  keeper.add({ kind: 'redo' });
  keeper.hurry();
  await host.refuse(new TypeError('network'));
  expect(said.at(-1)).toBe('The last change could not be kept.');
});
