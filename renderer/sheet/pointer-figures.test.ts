import { expect, test } from 'vitest';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { solve } from '../../solver/solve.ts';
import type { Answer } from '../state/live.ts';
import { wouldBe } from '../state/live.ts';
import { channel, teeChip } from '../testing/chips.ts';
import type { PartValue } from '../tools/tool.ts';
import { pointerFigures, pointerSays } from './pointer-figures.ts';

const mm = 1_000_000;
const plain = (text: string): string => text.replaceAll('\u00a0', ' ');
const drawn = (path: readonly (readonly [number, number])[], width = 120_000): PartValue => ({
  kind: 'channel',
  value: { ...channel('channel 1', path, width) },
});

function answerTo(part: PartValue): Answer {
  const { chip } = wouldBe(teeChip(), [part])!;
  return {
    chip,
    result: solve(chip, { junctions: 'ideal' }),
    problem: null,
    graph: readGraph(chip),
    graphChip: chip,
    waiting: 0,
    busy: true,
    preview: true,
  };
}
const NOTHING: Answer = {
  chip: null,
  result: null,
  problem: null,
  graph: null,
  graphChip: null,
  waiting: 0,
  busy: false,
  preview: false,
};

test('resistance stands at the pointer before any answer, and shear for a telling flow', () => {
  const part = drawn([
    [30 * mm, 2 * mm],
    [40 * mm, 2 * mm],
  ]);
  const lines = pointerFigures(teeChip(), [part], NOTHING);
  expect(lines.map((line) => plain(line.name))).toEqual(['resistance', 'shear at 1 µL/min']);
  // R = 12 µ L / (w h³ (1 - 0.63 h/w)), good to about 1 % at h/w = 0.42 (Bruus, Theoretical Microfluidics, 2008)
  const expected = (12 * 0.89e-3 * 0.01) / (120e-6 * 50e-6 ** 3 * (1 - (0.63 * 50) / 120));
  const shown = Number(/([\d.]+)/.exec(lines[0]!.figure)![1]);
  expect(shown / (expected / 10 ** Math.floor(Math.log10(expected)))).toBeCloseTo(1, 1);
});

test('flow, share and running wall shear are those of the chip as it would be', () => {
  // from the feed's own end into a well of its own: a third way out
  const path = [
    [20 * mm, 13 * mm],
    [40 * mm, 13 * mm],
    [40 * mm, 20 * mm],
  ] as const;
  const part = drawn(path);
  const answer = answerTo(part);
  const lines = new Map(
    pointerFigures(teeChip(), [part], answer).map((line) => [line.name, plain(line.figure)]),
  );
  const last = answer.result!.channels.find((found) => found.id === part.value.id)!.pieces.at(-1)!;
  expect(last.flow).toBeGreaterThan(0);
  expect(lines.get('flow')).toBe(
    `${(last.flow! * 6e10).toPrecision(3)} µL/min, ${((last.flow! / (1e-8 / 60)) * 100).toPrecision(3)} % ± ${(100 * last.band!.share).toPrecision(2)} %`,
  );
  expect(lines.get('wall shear')).toMatch(/ m?Pa ± [\d.]+ %$/);
  expect(lines.has('wall shear at 1 µL/min')).toBe(false);
});

test('a join is said as it arises; one that was there already is not', () => {
  const part = drawn([
    [30 * mm, 2 * mm],
    [30 * mm, 6 * mm],
  ]);
  const answer = answerTo(part);
  const before = { result: null, graph: readGraph(teeChip()) };
  expect(pointerSays([part], answer, before)).toContain('Joins channel down.');
  expect(pointerSays([part], answer, answer)).toEqual([]);
});

test('a wall that the mask cannot hold is said as it arises', () => {
  const chip = { ...teeChip(), process: { kind: 'film-mask' as const } };
  // 15 µm beside the arm, which is 120 µm wide
  const part = drawn([
    [25 * mm, 6 * mm - 135_000],
    [35 * mm, 6 * mm - 135_000],
  ]);
  const would = wouldBe(chip, [part])!;
  const answer: Answer = {
    ...answerTo(part),
    chip: would.chip,
    result: solve(would.chip, { junctions: 'ideal' }),
  };
  const says = pointerSays([part], answer, { result: solve(chip, { junctions: 'ideal' }), graph: null });
  expect(says[0]).toMatch(/^The wall between .*down.* is 15(\.0)?\sµm thick/);
});

test('what makes no chip has no answer', () => {
  expect(
    wouldBe(teeChip(), [
      drawn([
        [1, 1],
        [1, 1],
      ]),
    ]),
  ).toBeNull();
  expect(wouldBe(teeChip(), [])).toBeNull();
});
