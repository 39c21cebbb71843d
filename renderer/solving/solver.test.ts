import { expect, test } from 'vitest';
import { solve } from '../../solver/solve.ts';
import { teeChip } from '../testing/chips.ts';
import type { Answer } from '../verdict/answer.ts';
import type { News, Order, Outcome } from './messages.ts';
import { createSolver } from './solver.ts';

const chip = teeChip();
const outcome: Outcome = { ok: true, result: solve(chip, { junctions: 'ideal' }) };
const answersOf = (says: string): readonly Answer[] => [
  { question: 'Q', standing: 'yes', says: [says], margin: null, culprit: null },
];

/** A solver whose thread says what the test lets it say. */
function bench() {
  let tell: (news: News) => void = () => undefined;
  const orders: Order[] = [];
  const thread = {
    post: (order: Order) => orders.push(order),
    listen: (listener: typeof tell) => {
      tell = listener;
    },
    end: () => undefined,
  };
  const solver = createSolver(thread, undefined, (then) => then());
  const answer = (id: number, waiting: number, of: Outcome = outcome): void => {
    tell({
      kind: 'short',
      id,
      answers: answersOf(`answer ${id}`),
      waiting: 0,
      times: { began: 0, ready: 0 },
    });
    tell({ kind: 'solved', id, graph: null, outcome: of, waiting });
  };
  return { solver, answer, tell };
}

test('answers that are presumed stand until all junctions are solved', () => {
  const { solver, answer } = bench();
  solver.load(chip, {});
  solver.presume(answersOf('as kept'));
  answer(1, 3);
  expect(solver.short.get()).toEqual(answersOf('as kept'));
  expect(solver.solved.get()).toMatchObject({ chip, waiting: 3 });
  answer(1, 0);
  expect(solver.short.get()).toBeNull();
});

test('what is presumed gives way to an edit and to a chip that cannot be solved', () => {
  const edited = bench();
  edited.solver.load(chip, {});
  edited.solver.presume(answersOf('as kept'));
  edited.solver.edit({ label: 'nothing', changes: [] }, { ...chip });
  edited.tell({
    kind: 'short',
    id: 2,
    answers: answersOf('of the edit'),
    waiting: 0,
    times: { began: 0, ready: 0 },
  });
  expect(edited.solver.short.get()).toEqual(answersOf('of the edit'));

  const stuck = bench();
  stuck.solver.load(chip, {});
  stuck.solver.presume(answersOf('as kept'));
  stuck.answer(1, 0, { ok: false, problem: { what: 'No.', where: '', remedy: '' } });
  expect(stuck.solver.short.get()).toBeNull();
  expect(stuck.solver.solved.get().problem?.what).toBe('No.');
});

test('nothing is presumed of a chip that is solved already, nor of the one after', () => {
  const { solver, answer } = bench();
  solver.load(chip, {});
  answer(1, 0);
  solver.presume(answersOf('as kept'));
  expect(solver.short.get()).toBeNull();

  const other = bench();
  other.solver.load(chip, {});
  other.solver.presume(answersOf('as kept'));
  other.solver.load({ ...chip }, {});
  expect(other.solver.short.get()).toBeNull();
});
