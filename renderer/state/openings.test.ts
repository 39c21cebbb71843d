import { expect, test } from 'vitest';
import type { Client } from '../../main/contract/client.ts';
import type { ProjectState } from '../../main/contract/contract.ts';
import { createSolver, type Thread } from '../solving/solver.ts';
import { teeChip } from '../testing/chips.ts';
import { solvesEarly } from './early.ts';
import { followOpenings } from './openings.ts';
import { createStore } from './store.ts';

const stateOf = (opening: number, name: string): ProjectState =>
  ({ opening, name, chip: teeChip() }) as unknown as ProjectState;

/** A desk that notes what it shows, and a host that tells and answers as it is made to. */
function bench() {
  const shown: string[] = [];
  const said: string[] = [];
  const desk = {
    opening: createStore(''),
    say: (text: string) => said.push(text),
    open: async (_label: string, request: () => Promise<ProjectState>) => {
      shown.push((await request()).name);
    },
  };
  let tell: (data: { opening: number }) => void = () => undefined;
  let asked = 0;
  const answers: (ProjectState | null)[] = [];
  const client = {
    on: (_name: string, listener: typeof tell) => {
      tell = listener;
    },
    call: async () => {
      asked += 1;
      return { state: answers.shift() ?? null };
    },
  } as unknown as Client;
  return {
    desk,
    client,
    shown,
    said,
    answers,
    asked: () => asked,
    tell: (n: number) => tell({ opening: n }),
  };
}
const turn = () => new Promise((done) => setTimeout(done, 0));

test('what was open from the start is shown once, told of or not', async () => {
  const { desk, client, shown, asked, tell } = bench();
  let answer: (state: ProjectState) => void = () => undefined;
  const first = new Promise<ProjectState>((done) => (answer = done));
  const begun = followOpenings(client, desk, first);
  expect(desk.opening.get()).not.toBe('');
  // the host tells of it before its answer is there
  tell(1);
  answer(stateOf(1, 'first'));
  await begun;
  await turn();
  expect(shown).toEqual(['first']);
  expect(asked()).toBe(0);
  expect(desk.opening.get()).toBe('');
});

test('what is opened later is asked for, each once and in its order', async () => {
  const { desk, client, shown, answers, asked, tell } = bench();
  await followOpenings(client, desk, Promise.resolve(null));
  expect(shown).toEqual([]);
  answers.push(stateOf(2, 'second'), stateOf(3, 'third'));
  tell(2);
  tell(2);
  tell(3);
  await turn();
  expect(shown).toEqual(['second', 'third']);
  expect(asked()).toBe(2);
});

test('a host that does not answer is said, and what it opens later is shown', async () => {
  const { desk, client, shown, said, answers, tell } = bench();
  await followOpenings(client, desk, Promise.reject(new Error('The program does not answer.')));
  expect(said).toEqual(['The program does not answer.']);
  expect(desk.opening.get()).toBe('');
  answers.push(stateOf(1, 'later'));
  tell(1);
  await turn();
  expect(shown).toEqual(['later']);
});

test('a chip given early is solved once, when the page loads it; another is loaded as ever', () => {
  const loaded: unknown[] = [];
  const thread: Thread = {
    post: (order) => order.kind === 'load' && loaded.push(order.chip),
    listen: () => undefined,
    end: () => undefined,
  };
  const { solver, early } = solvesEarly(createSolver(thread));
  const [one, other] = [teeChip(), teeChip()];
  early(one);
  solver.load(one, {});
  expect(loaded).toEqual([one]);
  solver.load(other, {});
  // the same again is an opening of its own
  solver.load(one, {});
  expect(loaded).toHaveLength(3);
  early(one);
  solver.load(other, {});
  expect(loaded).toHaveLength(5);
  expect(loaded[4]).toBe(other);
});
