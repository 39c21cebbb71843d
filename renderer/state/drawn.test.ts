import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { Solved } from '../solving/solver.ts';
import { emptyChip } from '../testing/chips.ts';
import type { Answer } from '../verdict/answer.ts';
import type { Project } from './desk.ts';
import { drawnChip, toldWithAnswer } from './drawn.ts';
import { createStore } from './store.ts';

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

const named = (name: string): Chip => ({ ...emptyChip(), name });
const holding = (chip: Chip): Project => ({ document: { chip, done: [], undone: [] } }) as unknown as Project;

/** A desk as far as this matters, with what was drawn and told of it. */
function bench(waits: () => boolean) {
  const project = createStore<Project | null>(null);
  const solved = createStore({ chip: emptyChip(), result: null, busy: false } as unknown as Solved);
  const short = createStore<readonly Answer[] | null>(null);
  const drawn = drawnChip(project, { solved }, waits);
  const names: string[] = [];
  drawn.subscribe(() => names.push(drawn.get()?.name ?? 'none'));
  const told: string[] = [];
  project.subscribe(() => told.push(project.get()?.document.chip.name ?? 'none'));
  return { project, solved, short, drawn, names, told };
}

test('what the hand does on the sheet is drawn at once, and being kept draws nothing anew', () => {
  const { project, names } = bench(() => false);
  const chip = named('a');
  project.set(holding(chip));
  project.set({ ...holding(chip), keeping: true });
  project.set(holding(named('b')));
  project.set(null);
  expect(names).toEqual(['a', 'b', 'none']);
});

test('an edit of a field is drawn with its answer, not when it is asked for', () => {
  const { project, solved, names, drawn } = bench(() => true);
  project.set(holding(named('a')));
  project.set(holding(named('b')));
  solved.patch({ busy: true });
  expect(names).toEqual(['a']);
  solved.patch({ chip: drawn.get(), result: {} as Result, busy: false });
  expect(names).toEqual(['a', 'b']);
  vi.advanceTimersByTime(1000);
  expect(names).toEqual(['a', 'b']);
});

test('a chip that is opened while the hand is at a field is drawn at once', () => {
  const { project, solved, names } = bench(() => true);
  project.set(holding(named('a')));
  solved.patch({ chip: null });
  project.set(holding(named('b')));
  expect(names.at(-1)).toBe('b');
});

test('an answer that takes long is not waited for, and of several edits the last is drawn', () => {
  const { project, names } = bench(() => true);
  project.set(holding(named('a')));
  project.set(holding(named('b')));
  vi.advanceTimersByTime(50);
  project.set(holding(named('c')));
  expect(names).toEqual(['a']);
  vi.advanceTimersByTime(10);
  expect(names).toEqual(['a', 'c']);
});

test('a project that is held is there at once and told of after the words of its answer', () => {
  const { project, solved, short, told } = bench(() => false);
  const held = toldWithAnswer(project, { solved, short });
  project.hold(holding(named('a')));
  held();
  expect(project.get()?.document.chip.name).toBe('a');
  short.set([]);
  expect(told).toEqual([]);
  vi.advanceTimersByTime(0);
  expect(told).toEqual(['a']);
  vi.advanceTimersByTime(1000);
  expect(told).toEqual(['a']);
});

test('a held project is told of within 40 ms without an answer, and at once with what is set or done next', () => {
  const { project, solved, short, told } = bench(() => false);
  const held = toldWithAnswer(project, { solved, short });
  project.hold(holding(named('a')));
  held();
  vi.advanceTimersByTime(39);
  expect(told).toEqual([]);
  vi.advanceTimersByTime(1);
  expect(told).toEqual(['a']);
  const b = holding(named('b'));
  project.hold(b);
  held();
  project.set(b);
  expect(told).toEqual(['a', 'b']);
  project.hold(holding(named('c')));
  held();
  project.tell();
  expect(told).toEqual(['a', 'b', 'c']);
  vi.advanceTimersByTime(1000);
  expect(told).toEqual(['a', 'b', 'c']);
});
