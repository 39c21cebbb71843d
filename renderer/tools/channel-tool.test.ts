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
