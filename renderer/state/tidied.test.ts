import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { LARGE } from '../solving/tidy.ts';
import type { Desk } from './desk.ts';
import { createStore } from './store.ts';
import { tidiedWhenOpened } from './tidied.ts';

const chip = { channels: Array.from({ length: LARGE }) } as unknown as Chip;

test('the page is tidied when what was opened is answered, and not after edits', () => {
  const project = createStore<unknown>(null);
  const solved = createStore<{ chip: Chip | null; busy: boolean }>({ chip: null, busy: true });
  let times = 0;
  tidiedWhenOpened(
    { project, solver: { solved } } as unknown as Desk,
    (work) => work(),
    () => {
      times += 1;
    },
  );
  project.set({ document: { chip, done: [], undone: [] } });
  solved.set({ chip: null, busy: true });
  expect(times).toBe(0);
  solved.set({ chip, busy: false });
  expect(times).toBe(1);
  project.set({ document: { chip, done: [{}], undone: [] } });
  solved.set({ chip, busy: true });
  solved.set({ chip, busy: false });
  expect(times).toBe(1);
});
