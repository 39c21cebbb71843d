import { expect, test } from 'vitest';
import type { ShapeSolution } from '../../solver/cell/cell.ts';
import { keeping } from './keep.ts';

test('what was solved is handed over once it is quiet, sooner where much waits, and never while something goes on', () => {
  const timers: (() => void)[] = [];
  const given: string[] = [];
  let quiet = 0;
  const kept = keeping(
    (key) => given.push(key),
    () => quiet,
    (work) => timers.push(work),
  );
  const elapse = (): void => {
    for (const timer of timers.splice(0)) timer();
  };
  const solution = {} as ShapeSolution;
  for (let i = 0; i < 66; i += 1) kept.later(`${i}`, solution);
  expect(timers.length).toBe(1);
  elapse();
  expect(given).toEqual([]);
  quiet = 300;
  elapse();
  elapse();
  elapse();
  // 64 are left, for which it is not quiet enough
  expect(given).toEqual(['0', '1']);
  quiet = 1000;
  while (timers.length > 0) elapse();
  expect(given.length).toBe(66);
});
