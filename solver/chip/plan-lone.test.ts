import { expect, test } from 'vitest';
import { channel, chipOf } from '../../test/chip/drawings.ts';
import { random } from '../../test/chip/random-drawing.ts';
import type { Edge } from '../mesh/mesh.ts';
import { planShape } from './plan.ts';
import { loneOutline } from './plan-lone.ts';
import { drawingOf } from './read-graph-drawing.ts';

const WHOLE = { kind: 'strip', channel: 0, from: 0, to: Infinity, tagFrom: 0, tagTo: 0 } as const;
const spelt = (loop: readonly Edge[]): number[] => loop.flatMap(({ x, y, bulge }) => [x, y, 1e3 * bulge]);

test('a channel by itself has the outline that the union of its parts has, corner by corner', () => {
  const next = random(11);
  let alone = 0;
  for (let k = 0; k < 400; k += 1) {
    const turn = k % 3 === 0 ? 0 : next() * 6;
    const path: [number, number][] = [[0, 0]];
    let way = turn;
    for (let i = 0, count = 1 + Math.floor(next() * 6); i < count; i += 1) {
      const [x, y] = path[i]!;
      const far = 200 + 1500 * next();
      path.push([Number((x + far * Math.cos(way)).toFixed(3)), Number((y + far * Math.sin(way)).toFixed(3))]);
      if (next() < 0.8) way += (next() - 0.5) * 5;
    }
    const wide = 20 + 100 * next();
    const width: [number, number] = [wide, next() < 0.2 ? wide * 1.5 : wide];
    const chip = chipOf({ channels: [channel('a', path, width, { bendRadius: 40 + 150 * next() })] });
    const drawing = drawingOf(chip);
    const to = drawing.elements.total(0);
    const strip = { kind: 'strip', channel: 0, from: 0, to, tagFrom: 0, tagTo: 0 } as const;
    const lone = loneOutline(drawing, strip);
    if (!lone) continue;
    alone += 1;
    const { shapes } = planShape(drawing, [strip], 0);
    expect(shapes).toHaveLength(1);
    expect(shapes[0], `channel ${k}`).toHaveLength(1);
    const [wanted, got] = [spelt(shapes[0]![0]!), spelt(lone)];
    expect(got, `channel ${k}`).toHaveLength(wanted.length);
    const off = got.map((value, i) => Math.abs(value - wanted[i]!));
    expect(Math.max(...off), `channel ${k}`).toBeLessThan(0.05);
  }
  expect(alone).toBeGreaterThan(100);
});

test('what may meet itself, bends tighter than it is wide, or has mitred corners is left to the union', () => {
  const outline = (path: [number, number][], width: number | [number, number], bendRadius: number) =>
    loneOutline(drawingOf(chipOf({ channels: [channel('a', path, width, { bendRadius })] })), WHOLE);
  const hook: [number, number][] = [
    [0, 0],
    [1000, 0],
    [1000, 600],
    [500, 600],
    [500, -500],
  ];
  expect(outline(hook, 50, 100)).toBeUndefined();
  expect(outline(hook.slice(0, 4), 50, 100)).toHaveLength(12);
  expect(outline(hook.slice(0, 4), 50, 0)).toBeUndefined();
  expect(outline(hook.slice(0, 4), 250, 100)).toBeUndefined();
  expect(outline(hook.slice(0, 4), [50, 60], 100)).toBeUndefined();
  expect(outline(hook.slice(0, 2), [50, 60], 0)).toHaveLength(4);
});

test('a part of a channel, cut in straight stretches, has the outline and the labels that the union gives it', () => {
  const path: [number, number][] = [
    [0, 0],
    [900, 100],
    [1100, 900],
    [2000, 950],
    [2600, 400],
  ];
  const chip = chipOf({ channels: [channel('a', path, 60, { bendRadius: 150 })] });
  const drawing = drawingOf(chip);
  const { elements } = drawing;
  const middles: number[] = [];
  for (let id = elements.first[0]!; id < elements.first[1]!; id += 1) {
    const { curve, s0, s1 } = elements.at(id);
    if (curve.curvature === 0) middles.push((s0 + s1) / 2);
  }
  expect(middles).toHaveLength(4);
  for (let i = 0; i < middles.length; i += 1) {
    for (let j = i + 1; j < middles.length; j += 1) {
      const strip = { ...WHOLE, from: middles[i]!, to: middles[j]!, tagFrom: 1, tagTo: 2 };
      const [wanted] = planShape(drawing, [strip], 0).shapes[0]!;
      const got = loneOutline(drawing, strip)!;
      expect(got.map(({ tag }) => tag)).toEqual(wanted!.map(({ tag }) => tag));
      const off = spelt(got).map((value, k) => Math.abs(value - spelt(wanted!)[k]!));
      expect(Math.max(...off)).toBeLessThan(0.05);
    }
  }
});
