import { describe, expect, test } from 'vitest';
import { channel, chipOf } from '../../test/chip/drawings.ts';
import { randomDrawing } from '../../test/chip/random-drawing.ts';
import { twiceArea } from '../mesh/check-shape.ts';
import type { Shape } from '../mesh/mesh.ts';
import type { Channel } from './chip.ts';
import { type PlanBody, planShape } from './plan.ts';
import { unitedInParts } from './plan-parts.ts';
import { drawingOf } from './read-graph-drawing.ts';

/** A lattice with rounded and mitred bends, tapers and islands, turned a little so that nothing is level. */
function lattice(side: number, turn: number): Channel[] {
  const channels: Channel[] = [];
  const at = (x: number, y: number): [number, number] => [
    Number((x * Math.cos(turn) - y * Math.sin(turn)).toFixed(3)),
    Number((x * Math.sin(turn) + y * Math.cos(turn)).toFixed(3)),
  ];
  for (let j = 0; j <= side; j++) {
    for (let i = 0; i <= side; i++) {
      const [x, y] = [i * 900, j * 900];
      if (i < side)
        channels.push(channel(`h${i}.${j}`, [at(x, y), at(x + 900, y)], [50 + 5 * i, 40 + 5 * j]));
      if (j === side) continue;
      const path = [at(x, y), at(x, y + 300), at(x + 200, y + 300), at(x + 200, y + 900)];
      channels.push(channel(`v${i}.${j}`, path, 60, { bendRadius: i % 2 === 0 ? 80 : 0 }));
    }
  }
  return channels;
}

const bodiesOf = (channels: readonly Channel[]): PlanBody[] =>
  channels.map((_, index): PlanBody => {
    return { kind: 'strip', channel: index, from: 0, to: Infinity, tagFrom: 0, tagTo: 0 };
  });

/** Without islands that are only the rounding of ends to whole nanometres. */
const wide = (shape: Shape): Shape => shape.filter((loop) => Math.abs(twiceArea(loop)) > 1e5);
const area = (shape: Shape): number => shape.reduce((sum, loop) => sum + twiceArea(loop) / 2, 0);
const byPlace = (shape: Shape): string[] =>
  shape
    .map((loop) =>
      loop.map(({ x, y, bulge }) => `${x.toFixed(1)} ${y.toFixed(1)} ${bulge.toFixed(6)}`).join(', '),
    )
    .map((text) => text.replaceAll('-0.0', '0.0'))
    .sort();

describe('a union part by part', () => {
  // the same bodies united at once are what the outcome is held against
  test.each([0, 0.3])('is the union at once, corner by corner (turned by %f)', (turn) => {
    const chip = chipOf({ channels: lattice(5, turn) });
    const drawing = drawingOf(chip);
    const bodies = bodiesOf(chip.channels);
    const sizes: number[] = [];
    const shape = unitedInParts(drawing, bodies, (some) => {
      sizes.push(some.length);
      return planShape(drawing, some, 0).shapes;
    })!;
    expect(sizes.length).toBeGreaterThan(4);
    const [whole, ...none] = planShape(drawing, bodies, 0).shapes;
    expect(none).toEqual([]);
    expect(area(shape) / area(whole!)).toBeCloseTo(1, 8);
    expect(shape.every((loop) => loop.every(({ tag }) => tag === 0))).toBe(true);
    if (turn === 0) expect(byPlace(shape)).toEqual(byPlace(whole!));
    // at once, an island that touches the outline in one point becomes part of it: only the ground is the same
    else expect(wide(shape).length).toBeGreaterThanOrEqual(wide(whole!).length);
  });

  test('of crossing channels at random it is the same, or left to be united at once', () => {
    let inParts = 0;
    for (const seed of [6, 7]) {
      const drawn = randomDrawing(seed, 60);
      const thin = drawn.channels.map((c): Channel => ({ ...c, width: [c.width[0] / 20, c.width[1] / 20] }));
      const chip = { ...drawn, channels: thin };
      const drawing = drawingOf(chip);
      const bodies = bodiesOf(chip.channels);
      const shape = unitedInParts(drawing, bodies, (some) => planShape(drawing, some, 0).shapes);
      if (!shape) continue;
      inParts += 1;
      const whole = planShape(drawing, bodies, 0).shapes.reduce((sum, one) => sum + area(one), 0);
      expect(Math.abs(area(shape) / whole - 1), `seed ${seed}`).toBeLessThan(1e-7);
    }
    expect(inParts).toBeGreaterThan(0);
  });
});
