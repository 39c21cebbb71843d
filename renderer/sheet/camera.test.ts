import { expect, test } from 'vitest';
import { fitted, graduation, inView, panned, toPlan, toScreen, zoomed } from './camera.ts';

const size = { width: 1000, height: 500 };
const camera = { centre: [38e6, 13e6] as const, scale: 1e-5 };

test('screen and plan are each other the other way round, y upward', () => {
  expect(toScreen(camera, size, [38e6, 13e6])).toEqual([500, 250]);
  expect(toScreen(camera, size, [38e6, 14e6])[1]).toBeLessThan(250);
  const there = toPlan(camera, size, toScreen(camera, size, [12_345, 678]));
  expect(there[0]).toBeCloseTo(12_345, 3);
  expect(there[1]).toBeCloseTo(678, 3);
});
test('zooming keeps the place under the pointer', () => {
  const at = [120, 430] as const;
  const before = toPlan(camera, size, at);
  const after = toPlan(zoomed(camera, size, at, 1.7), size, at);
  expect(after[0]).toBeCloseTo(before[0], 2);
  expect(after[1]).toBeCloseTo(before[1], 2);
});
test('zooming ends at its bounds', () => {
  expect(zoomed(camera, size, [0, 0], 1e12).scale).toBe(1);
  expect(zoomed(camera, size, [0, 0], 1e-12).scale).toBe(2e-7);
});
test('a box is fitted with its insets free', () => {
  const box = { left: 0, right: 76e6, bottom: 0, top: 26e6 };
  const inset = { left: 40, right: 60, top: 30, bottom: 70 };
  const there = fitted(box, size, inset);
  const [left, top] = toScreen(there, size, [0, 26e6]);
  const [right, bottom] = toScreen(there, size, [76e6, 0]);
  expect(left).toBeGreaterThanOrEqual(40 - 1e-6);
  expect(right).toBeLessThanOrEqual(940 + 1e-6);
  expect(top).toBeGreaterThanOrEqual(30 - 1e-6);
  expect(bottom).toBeLessThanOrEqual(430 + 1e-6);
  expect(right - left).toBeCloseTo(900, 6);
});
test('panning moves the plan with the hand', () => {
  expect(toScreen(panned(camera, 30, -20), size, camera.centre)).toEqual([530, 230]);
});
test('what is in view', () => {
  const box = inView(camera, size);
  expect(box.right - box.left).toBeCloseTo(1e8, 3);
  expect(box.top).toBeGreaterThan(box.bottom);
});
test('graduations are round and far enough apart', () => {
  expect(graduation(1.2e-5, 60)).toEqual({ major: 5_000_000, minor: 1_000_000 });
  for (const scale of [3e-7, 1e-5, 4.4e-5, 1e-3, 0.5]) {
    const { major, minor } = graduation(scale, 60);
    expect(major * scale).toBeGreaterThanOrEqual(60);
    expect(major * scale).toBeLessThan(151);
    expect(Number.isInteger(Math.round((major / minor) * 1e6) / 1e6)).toBe(true);
  }
});
