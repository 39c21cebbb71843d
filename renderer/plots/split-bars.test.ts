import { expect, test } from 'vitest';
import { solve } from '../../solver/solve.ts';
import { teeChip } from '../testing/chips.ts';
import { splitBars } from './split-bars.ts';

const solved = (chip: ReturnType<typeof teeChip>) => splitBars(chip, solve(chip, { junctions: 'ideal' }));

test('every outlet has its bar, and its target where one is asked for', () => {
  const { kind, bars } = solved({
    ...teeChip(),
    targets: [{ port: 'well 1', share: 0.6, within: 0.02 }],
  });
  expect(kind).toBe('share');
  // two equal ways: a half each
  expect(bars.map(({ name, wanted, met }) => [name, wanted, met])).toEqual([
    ['well 1', 0.6, false],
    ['well 2', null, true],
  ]);
  for (const { got } of bars) expect(got).toBeCloseTo(0.5, 9);
});

test('where a flow is asked for all are flows, shares among them: 10 µL/min divide', () => {
  const { kind, bars } = solved({
    ...teeChip(),
    targets: [
      { port: 'well 1', flow: 5e-9 / 60, within: 0.02 },
      { port: 'well 2', share: 0.5, within: 0.02 },
      { channel: 'feed', share: 1, within: 0.02 },
    ],
  });
  expect(kind).toBe('flow');
  expect(bars.map(({ name }) => name)).toEqual(['well 1', 'well 2', 'feed']);
  for (const { got, wanted } of bars) expect(got! / wanted!).toBeCloseTo(1, 6);
});
