import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { pathLength } from '../geometry/path.ts';
import { channel, emptyChip, teeChip } from '../testing/chips.ts';
import {
  align,
  array,
  copyId,
  join,
  mirror,
  offset,
  remove,
  type Shaping,
  split,
  turn,
  widen,
} from './shape.ts';
import { toEdit } from './to-edit.ts';

/** The chip after a shaping that must be one. */
function shaped(chip: Chip, shaping: Shaping): Chip {
  if (typeof shaping === 'string') throw new Error(shaping);
  return applyEdit(chip, toEdit(chip, shaping));
}
const line = (y: number, id = 'a'): Chip => ({
  ...emptyChip(),
  channels: [
    channel(id, [
      [0, y],
      [10_000, y],
    ]),
  ],
});
const pathOf = (chip: Chip, id: string) => chip.channels.find((part) => part.id === id)!.path;

test('four quarter turns and two mirrors bring everything back to the nanometre', () => {
  const chip = teeChip();
  const refs = ['channel:up', 'channel:down', 'port:well 1'];
  let turned = chip;
  for (let i = 0; i < 4; i += 1) turned = shaped(turned, turn(turned, refs, 90));
  expect(turned).toEqual(chip);
  for (const way of ['upright', 'level'] as const) {
    const once = shaped(chip, mirror(chip, refs, way));
    expect(once).not.toEqual(chip);
    expect(shaped(once, mirror(once, refs, way))).toEqual(chip);
  }
});

test('parts turn by any angle about their common middle, lengths kept, and the step is named', () => {
  const chip = { ...line(0), channels: [...line(0).channels, ...line(20_000, 'b').channels] };
  const refs = chip.channels.map(({ id }) => `channel:${id}`);
  const shaping = turn(chip, refs, 30);
  expect(shaping).toMatchObject({ label: 'turn two channels by 30°' });
  const turned = shaped(chip, shaping);
  // by hand: the lower channel runs from (0, 0) to (10, 0) µm, about (5, 10) µm; cos 30° and sin 30°
  const [c, s] = [Math.sqrt(3) / 2, 1 / 2];
  const by = (x: number, y: number) => [
    Math.round(5000 + c * (x - 5000) - s * (y - 10_000)),
    Math.round(10_000 + s * (x - 5000) + c * (y - 10_000)),
  ];
  expect(turned.channels[0]!.path).toEqual([by(0, 0), by(10_000, 0)]);
  expect(turned.channels[1]!.path).toEqual([by(0, 20_000), by(10_000, 20_000)]);
});

test('parts are aligned on the edge of them all', () => {
  const chip = teeChip();
  const made = shaped(chip, align(chip, ['channel:up', 'channel:down'], 'top'));
  const tops = ['up', 'down'].map((id) => Math.max(...pathOf(made, id).map(([, y]) => y)));
  expect(tops).toEqual([20_000_000, 20_000_000]);
  expect(align(chip, ['channel:up'], 'top')).toBe('Choose at least two parts to align.');
});

test('an array stands at its pitch, under ids of its own', () => {
  const chip = line(0, 'lane 1');
  const made = shaped(chip, array(chip, ['channel:lane 1'], 4, [0, 500_000]));
  expect(made.channels.map((part) => [part.id, part.path[0]![1]])).toEqual([
    ['lane 1', 0],
    ['lane 2', 500_000],
    ['lane 3', 1_000_000],
    ['lane 4', 1_500_000],
  ]);
  expect(array(chip, ['channel:lane 1'], 1, [0, 1])).toMatch(/from 2 to 1000/);
  expect(array(chip, ['channel:lane 1'], 3, [0, 0])).toMatch(/not be nought/);
  expect(copyId('lane 2', new Set(['lane 2', 'lane 3']))).toBe('lane 4');
});

test('an offset lies beside its channel at the same distance all along', () => {
  const chip = teeChip();
  const made = shaped(chip, offset(chip, ['channel:feed'], 300_000));
  const copy = made.channels.at(-1)!;
  expect(copy.path.map(([, y]) => y)).toEqual([13_300_000, 13_300_000]);
  expect(pathLength(copy.path)).toBe(pathLength(pathOf(chip, 'feed')));
});

test('a split keeps length and widths, and joining takes it back', () => {
  const chip: Chip = {
    ...emptyChip(),
    channels: [
      {
        ...channel('a', [
          [0, 0],
          [4000, 0],
          [4000, 6000],
        ]),
        width: [200_000, 100_000],
      },
    ],
  };
  const parted = shaped(chip, split(chip, ['channel:a'], [4000, 1000]));
  expect(parted.channels.map((part) => pathLength(part.path))).toEqual([5000, 5000]);
  expect(parted.channels.map((part) => part.width)).toEqual([
    [200_000, 150_000],
    [150_000, 100_000],
  ]);
  const again = shaped(
    parted,
    join(
      parted,
      parted.channels.map((part) => `channel:${part.id}`),
    ),
  );
  expect(again.channels).toHaveLength(1);
  expect(again.channels[0]!.path).toEqual(chip.channels[0]!.path);
  expect(split(chip, ['channel:a'], [0, 0])).toMatch(/ends already/);
});

test('what speaks of a part goes with it', () => {
  const chip: Chip = {
    ...teeChip(),
    targets: [{ port: 'well 1', share: 0.5, within: 0.02 }],
    limits: [{ name: 'here', shear: 1, where: 'up' }],
  };
  const made = shaped(chip, remove(chip, ['channel:up', 'port:well 1']));
  expect(made.channels.map((part) => part.id)).toEqual(['feed', 'down']);
  expect(made.targets).toEqual([]);
  expect(made.limits).toEqual([]);
});

test('widening names how many, and nothing chosen is told in words', () => {
  const chip = teeChip();
  const made = widen(chip, ['channel:up', 'channel:down'], 90_000);
  expect(typeof made === 'string' ? made : made.label).toContain('two channels');
  expect(shaped(chip, made).channels.map((part) => part.width[0])).toEqual([200_000, 90_000, 90_000]);
  for (const none of [turn(chip, [], 90), mirror(chip, [], 'level'), join(chip, []), offset(chip, [], 1)])
    expect(typeof none).toBe('string');
});
