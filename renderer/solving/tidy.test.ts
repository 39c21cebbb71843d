import { expect, test } from 'vitest';
import { LARGE, TIDIED_AFTER, tidying } from './tidy.ts';

/** A clock that runs when told to, and how often was tidied up. */
function sitDown(idle = () => true) {
  const due: { readonly at: number; readonly work: () => void }[] = [];
  let now = 0;
  let times = 0;
  const tidy = tidying(
    idle,
    (work, ms) => due.push({ at: now + ms, work }),
    () => {
      times += 1;
    },
  );
  return {
    tidy,
    times: () => times,
    pass(ms: number) {
      now += ms;
      for (const one of due.splice(0)) {
        if (one.at <= now) one.work();
        else due.push(one);
      }
    },
  };
}

test('what answers to a large chip leave is collected once, a while after the last of them', () => {
  const { tidy, times, pass } = sitDown();
  tidy.later(LARGE);
  pass(TIDIED_AFTER / 2);
  tidy.later(LARGE);
  pass(TIDIED_AFTER / 2);
  expect(times()).toBe(0);
  pass(TIDIED_AFTER / 2);
  expect(times()).toBe(1);
  pass(10 * TIDIED_AFTER);
  expect(times()).toBe(1);
});

test('a small chip leaves little, and nobody who waits is kept waiting', () => {
  const small = sitDown();
  small.tidy.later(LARGE - 1);
  small.pass(TIDIED_AFTER);
  expect(small.times()).toBe(0);
  const busy = sitDown(() => false);
  busy.tidy.later(LARGE);
  busy.pass(TIDIED_AFTER);
  expect(busy.times()).toBe(0);
});
