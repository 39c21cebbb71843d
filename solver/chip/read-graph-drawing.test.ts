import { expect, test } from 'vitest';
import { channel, chipOf } from '../../test/chip/drawings.ts';
import { drawingOf } from './read-graph-drawing.ts';

const across = channel(
  'across',
  [
    [1000, 5000],
    [3000, 5000],
    [3000, 7000],
  ],
  100,
);
const other = channel(
  'other',
  [
    [2000, 5000],
    [2000, 8000],
  ],
  80,
);

test('an edit of one channel leaves the bodies of the others the same, but where their place is another', () => {
  const chip = chipOf({ channels: [across, other] });
  const before = drawingOf(chip);
  const bodies = [0, 1, 2].map((id) => before.body(id));
  const wider = drawingOf({ ...chip, channels: [across, { ...other, width: [90_000, 90_000] }] });
  expect(wider.body(0)).toBe(bodies[0]);
  expect(wider.body(1)).toBe(bodies[1]);
  expect(wider.body(2)).not.toEqual(bodies[2]);
  expect(wider.body(2).element.h0).toBe(45_000);
  const turned = drawingOf({ ...chip, channels: [other, across] });
  expect(turned.body(0)).toEqual({ ...bodies[2], element: { ...bodies[2]!.element, channel: 0 } });
  expect(turned.body(2).element).toEqual({ ...bodies[1]!.element, channel: 1 });
});
