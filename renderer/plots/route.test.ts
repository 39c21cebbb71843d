import { expect, test } from 'vitest';
import { solve } from '../../solver/solve.ts';
import { teeChip } from '../testing/chips.ts';
import { legsOf, profileOf, routeEnds } from './route.ts';
import { answersOf } from './sweep-answers.ts';

const result = solve(teeChip(), { junctions: 'ideal' });

test('routes lead from each port that lets in to each that lets out', () => {
  expect(routeEnds(result)).toEqual([
    { from: 'in', to: 'well 1' },
    { from: 'in', to: 'well 2' },
  ]);
});

test('along a route lengths add up and the pressure falls from port to port', () => {
  const legs = legsOf(result, 'in', 'well 1');
  expect(legs.map((leg) => leg.channel)).toEqual(['feed', 'up']);
  const { along, pressure, shear } = profileOf(result, legs);
  // 15 mm of feed, then 7 mm up and 20 mm on
  expect(along.at(-1)).toBeCloseTo(0.042, 9);
  const known = pressure as number[];
  expect(known[0]).toBeCloseTo(result.ports.find((port) => port.id === 'in')!.pressure, 6);
  expect(known.at(-1)).toBeCloseTo(0, 9);
  for (let i = 1; i < known.length; i += 1) expect(known[i]!).toBeLessThanOrEqual(known[i - 1]! + 1e-9);
  expect(shear.every((value) => value !== null && value > 0)).toBe(true);
});

test('where nothing leads there is no route', () => {
  expect(legsOf(result, 'well 1', 'well 2')).toEqual([]);
});

test('a variant that cannot be solved leaves a gap, not a nought', () => {
  expect(answersOf({ ok: false, problem: { what: '', where: '', remedy: '' } })).toEqual({
    off: null,
    shear: null,
    pressure: null,
  });
  const solved = answersOf({ ok: true, result });
  expect(solved.off).toBeNull();
  expect(solved.pressure).toBeCloseTo(result.ports[0]!.pressure, 6);
  expect(solved.shear).toBeGreaterThan(0);
});
