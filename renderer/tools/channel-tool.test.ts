import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { toEdit } from '../edits/to-edit.ts';
import { Spatial } from '../sheet/spatial.ts';
import { emptyChip, teeChip } from '../testing/chips.ts';
import { FIRST_HABITS, type Scope, type ToolEvent, type ToolName } from './tool.ts';
import { take } from './tools.ts';

const scopeOf = (chip: Chip, selection: readonly string[] = []): Scope => ({
  chip,
  spatial: new Spatial(chip),
  layer: 'flow',
  selection,
  reach: 200_000,
  grid: 500_000,
  habits: FIRST_HABITS,
  centre: [38_000_000, 13_000_000],
});

/** The chip after a list of events with one tool, and what was said. */
function play(chip: Chip, tool: ToolName, events: readonly ToolEvent[], selected: readonly string[] = []) {
  let now = chip;
  let selection = selected;
  let says = '';
  let hand = take(tool, scopeOf(now, selection));
  for (const event of events) {
    const outcome = hand.on(event, scopeOf(now, selection));
    hand = outcome.hand;
    says = outcome.says ?? '';
    if (outcome.alter) now = applyEdit(now, toEdit(now, outcome.alter));
    if (outcome.select) selection = outcome.select;
  }
  return { chip: now, selection, says };
}

const mm = 1_000_000;
const typed = (text: string): ToolEvent[] => [...text].map((sign) => ({ kind: 'type', text: sign }));
const accept: ToolEvent = { kind: 'accept' };

test('typed: a place, "4 mm" and a direction, Enter', () => {
  const { chip, selection } = play(emptyChip(), 'channel', [
    ...typed('5, 13'),
    accept,
    ...typed('4 mm'),
    { kind: 'arrow', direction: [1, 0] },
    ...typed('2500 um'),
    { kind: 'arrow', direction: [0, 1] },
    accept,
  ]);
  expect(chip.channels).toMatchObject([
    {
      id: 'channel 1',
      path: [
        [5 * mm, 13 * mm],
        [9 * mm, 13 * mm],
        [9 * mm, 15.5 * mm],
      ],
      width: [200_000, 200_000],
    },
  ]);
  expect(selection).toEqual(['channel:channel 1']);
});

test('clicked: ends on another channel; nonsense typed is explained and not applied', () => {
  const at = (x: number, y: number): ToolEvent[] => [
    { kind: 'move', at: [x, y] },
    { kind: 'down', at: [x, y] },
    { kind: 'up', at: [x, y] },
  ];
  const joined = play(teeChip(), 'channel', [...at(10 * mm, 5 * mm), ...at(10 * mm, 13.05 * mm)]);
  expect(joined.chip.channels.at(-1)!.path).toEqual([
    [10 * mm, 5 * mm],
    [10 * mm, 13 * mm],
  ]);
  const wrong = play(emptyChip(), 'channel', [...at(10 * mm, 5 * mm), ...typed('3 kPa'), accept]);
  expect(wrong.chip.channels).toHaveLength(0);
  expect(wrong.says).toContain('is a pressure');
});

test('dragging a junction takes every arm along', () => {
  const tee = teeChip();
  const { chip } = play(
    tee,
    'select',
    [
      { kind: 'down', at: [20 * mm, 13 * mm] },
      { kind: 'move', at: [22 * mm, 13 * mm] },
      { kind: 'up', at: [22 * mm, 13 * mm] },
    ],
    ['channel:feed'],
  );
  expect(
    chip.channels.map((channel) => channel.path.some(([x, y]) => x === 22 * mm && y === 13 * mm)),
  ).toEqual([true, true, true]);
});

test('the chamber verb again changes its form; arrows move what is chosen', () => {
  const round = play(emptyChip(), 'chamber', [
    { kind: 'again' },
    ...typed('20, 13'),
    accept,
    ...typed('3 mm'),
    accept,
  ]);
  expect(round.chip.chambers[0]!.outline.length).toBeGreaterThanOrEqual(16);
  const moved = play(teeChip(), 'select', [{ kind: 'arrow', direction: [0, 1] }], ['port:in']);
  expect(moved.chip.ports[0]!.at).toEqual([5 * mm, 13.5 * mm]);
  expect(moved.chip.channels[0]!.path[0]).toEqual([5 * mm, 13.5 * mm]);
});

const down = (x: number, y: number, more = {}): ToolEvent => ({ kind: 'down', at: [x, y], ...more });
const move = (x: number, y: number, more = {}): ToolEvent => ({ kind: 'move', at: [x, y], ...more });
const up = (x: number, y: number, more = {}): ToolEvent => ({ kind: 'up', at: [x, y], ...more });
const click = (x: number, y: number): ToolEvent[] => [move(x, y), down(x, y), up(x, y)];
const next: ToolEvent = { kind: 'next' };
const right: ToolEvent = { kind: 'arrow', direction: [1, 0] };

test('what was typed holds however the point is set: by a click, by an arrow, by Enter', () => {
  const clicked = play(emptyChip(), 'channel', [
    ...click(10 * mm, 13 * mm),
    ...typed('4 mm'),
    ...click(20 * mm, 13 * mm),
    accept,
  ]);
  expect(clicked.chip.channels[0]!.path).toEqual([
    [10 * mm, 13 * mm],
    [14 * mm, 13 * mm],
  ]);
  const width = [next, next, ...typed('150')];
  const byClick = play(emptyChip(), 'channel', [
    ...click(10 * mm, 13 * mm),
    ...width,
    ...click(20 * mm, 13 * mm),
    accept,
  ]);
  const byArrow = play(emptyChip(), 'channel', [
    ...click(10 * mm, 13 * mm),
    ...typed('4 mm'),
    ...width,
    right,
    accept,
  ]);
  const byEnter = play(emptyChip(), 'channel', [
    ...click(10 * mm, 13 * mm),
    ...typed('4 mm'),
    ...width,
    accept,
    accept,
  ]);
  for (const { chip } of [byClick, byArrow, byEnter])
    expect(chip.channels[0]!.width).toEqual([150_000, 150_000]);
});

test('widths along a line: it is one channel for each width, and a taper is one of its own', () => {
  const { chip, selection } = play(emptyChip(), 'channel', [
    ...typed('5, 13'),
    accept,
    ...typed('4 mm'),
    right,
    ...typed('2 mm'),
    next,
    next,
    ...typed('200 to 100'),
    right,
    ...typed('3 mm'),
    { kind: 'arrow', direction: [0, 1] },
    ...typed('3 mm'),
    right,
    accept,
  ]);
  expect(chip.channels.map(({ id, width, path }) => [id, width, path[0], path.at(-1)])).toEqual([
    ['channel 1', [200_000, 200_000], [5 * mm, 13 * mm], [9 * mm, 13 * mm]],
    ['channel 2', [200_000, 100_000], [9 * mm, 13 * mm], [11 * mm, 13 * mm]],
    ['channel 3', [100_000, 100_000], [11 * mm, 13 * mm], [14 * mm, 16 * mm]],
  ]);
  expect(selection).toHaveLength(3);
});

test('the radius of bends is typed while drawing, and is that of the next channel too', () => {
  const { chip } = play(emptyChip(), 'channel', [
    ...typed('5, 13'),
    accept,
    ...typed('4 mm'),
    right,
    ...typed('3 mm'),
    next,
    next,
    next,
    ...typed('500'),
    { kind: 'arrow', direction: [0, 1] },
    accept,
  ]);
  expect(chip.channels[0]!.bendRadius).toBe(500_000);
});

test('nonsense that was typed keeps a click from setting a point, and is kept', () => {
  const { chip, says } = play(emptyChip(), 'channel', [
    ...click(10 * mm, 13 * mm),
    next,
    next,
    ...typed('200 to '),
    ...click(20 * mm, 13 * mm),
    accept,
  ]);
  expect(chip.channels).toHaveLength(0);
  expect(says).toBe('Takes one width, or two for a taper, such as "200 to 100".');
});

test('a chamber takes its typed size on the side where the hand is; a polygon closes on its first corner', () => {
  const { chip } = play(emptyChip(), 'chamber', [
    ...click(40 * mm, 15 * mm),
    ...typed('3 mm'),
    next,
    ...typed('2 mm'),
    ...click(38 * mm, 14.5 * mm),
  ]);
  expect(chip.chambers[0]!.outline).toEqual([
    [37 * mm, 13 * mm],
    [40 * mm, 13 * mm],
    [40 * mm, 15 * mm],
    [37 * mm, 15 * mm],
  ]);
  const again: ToolEvent = { kind: 'again' };
  const corners = [...click(60 * mm, 15 * mm), ...click(64 * mm, 15 * mm), ...click(62 * mm, 18 * mm)];
  for (const last of [[accept], click(60 * mm, 15 * mm)])
    expect(
      play(emptyChip(), 'chamber', [again, again, ...corners, ...last]).chip.chambers[0]!.outline,
    ).toEqual([
      [60 * mm, 15 * mm],
      [64 * mm, 15 * mm],
      [62 * mm, 18 * mm],
    ]);
});

test('the box of a maker is typed as its size or as its other corner', () => {
  const box = (events: readonly ToolEvent[]) => {
    const { chip } = play(emptyChip(), 'serpentine', [...click(20 * mm, 5 * mm), ...events]);
    const xs = chip.channels[0]!.path.map(([x]) => x);
    return [Math.min(...xs), Math.max(...xs)];
  };
  const size = [...typed('15 mm'), next, ...typed('6 mm')];
  expect(box([...size, accept])).toEqual([20 * mm, 35 * mm]);
  expect(box([...size, ...click(10 * mm, 10 * mm)])).toEqual([5 * mm, 20 * mm]);
  expect(box([...typed('30 mm, 11 mm'), accept])).toEqual([20 * mm, 30 * mm]);
});

test('what is dragged comes to lie on the grid wherever it was taken, and Alt holds that off', () => {
  const drag = (more = {}) =>
    play(
      teeChip(),
      'select',
      [down(30.13 * mm, 20.05 * mm), move(31.2 * mm, 21.21 * mm, more), up(31.2 * mm, 21.21 * mm, more)],
      ['channel:up', 'port:well 1'],
    ).chip.channels[1]!.path.at(-1);
  expect(drag()).toEqual([41 * mm, 21 * mm]);
  expect(drag({ free: true })).toEqual([41.07 * mm, 21.16 * mm]);
});

test('a corner that is dragged straightens with its neighbours', () => {
  const { chip } = play(
    teeChip(),
    'select',
    [down(40 * mm, 20 * mm), move(33.06 * mm, 33.13 * mm), up(33.06 * mm, 33.13 * mm)],
    ['channel:up'],
  );
  const [, corner, end] = chip.channels[1]!.path;
  expect(end![0] - corner![0]).toBe(end![1] - corner![1]);
});

test('a side that is dragged comes to lie on the grid, also where it did not', () => {
  const tee = teeChip();
  const off = {
    ...tee,
    channels: tee.channels.map((one) =>
      one.id === 'up'
        ? { ...one, path: one.path.map(([x, y]) => [x, y === 20 * mm ? 20.13 * mm : y] as const) }
        : one,
    ),
  };
  const { chip } = play(
    off,
    'select',
    [down(30 * mm, 20.13 * mm), move(30 * mm, 18.2 * mm), up(30 * mm, 18.2 * mm)],
    ['channel:up'],
  );
  expect(chip.channels[1]!.path.map(([, y]) => y)).toEqual([13 * mm, 18 * mm, 18 * mm]);
});
