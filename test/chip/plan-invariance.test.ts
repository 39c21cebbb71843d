import { area, FillRule, type Path64, union, xor } from 'clipper2-ts';
import { describe, expect, test } from 'vitest';
import type { Channel, Chip, Point } from '../../solver/chip/chip.ts';
import { flatten, type PlanPolygon, planPolygons, planShape } from '../../solver/chip/plan.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { drawingOf } from '../../solver/chip/read-graph-drawing.ts';
import { channel, chipOf } from './drawings.ts';
import { random, randomDrawing } from './random-drawing.ts';

type Move = (p: Point) => Point;

const MOVES: Record<string, Move> = {
  'a quarter turn': ([x, y]) => [-y, x],
  'half a turn': ([x, y]) => [-x, -y],
  'a mirror': ([x, y]) => [-x, y],
  'a mirror across the diagonal': ([x, y]) => [y, x],
  'a shift to the edge of the range': ([x, y]) => [x + 990_000_001, y - 777_777_777],
};

function moved(chip: Chip, move: Move): Chip {
  return { ...chip, channels: chip.channels.map((c) => ({ ...c, path: c.path.map(move) })) };
}

/** What must not change: lengths by piece name, which pieces meet, cavities, kinds of finding. */
function essence(chip: Chip): unknown {
  const graph = readGraph(chip);
  const name = (i: number) => `${graph.pieces[i]!.channel}#${graph.pieces[i]!.number}`;
  return {
    pieces: graph.pieces
      .map(
        (p) => `${p.channel}#${p.number} ${(p.length / 1000).toFixed(5)} ${p.width.map((w) => w.toFixed(2))}`,
      )
      .sort(),
    sites: graph.sites.map((s) => `${s.kind} ${s.arms.map((a) => name(a.piece)).sort()}`).sort(),
    findings: graph.findings.map((f) => f.kind).sort(),
    cavities: new Set(graph.cavity).size,
  };
}

function polygons(chip: Chip, fillets = false): PlanPolygon[] {
  return planPolygons(chip, readGraph(chip), 'flow', { chordError: 2, fillets, holes: true });
}

function paths(found: readonly PlanPolygon[]): Path64[] {
  return found.flatMap((p) => [p.outer, ...p.holes].map((loop) => loop.map(([x, y]) => ({ x, y }))));
}

function strip(chip: Chip, index: number): Path64[] {
  const body = { kind: 'strip', channel: index, from: 0, to: Infinity, tagFrom: 0, tagTo: 0 } as const;
  const { shapes } = planShape(drawingOf(chip), [body], 0);
  return shapes.flatMap((shape) => shape.map((loop) => flatten(loop, 2).map(([x, y]) => ({ x, y }))));
}

function totalArea(found: readonly Path64[]): number {
  return found.reduce((sum, p) => sum + area(p), 0);
}

describe.each(Object.keys(MOVES))('under %s', (key) => {
  test('lengths, joins and polygons stay', () => {
    for (let seed = 1; seed <= 15; seed++) {
      const chip = randomDrawing(seed);
      const other = moved(chip, MOVES[key]!);
      expect(essence(other), `seed ${seed}`).toEqual(essence(chip));
      const before = totalArea(paths(polygons(chip)));
      // a nanometre along every edge of some millimetres
      expect(Math.abs(totalArea(paths(polygons(other))) - before) / before).toBeLessThan(1e-5);
    }
  });
});

test('the order of channels changes names only', () => {
  for (let seed = 1; seed <= 15; seed++) {
    const chip = randomDrawing(seed);
    const next = random(seed + 1000);
    const channels = [...chip.channels]
      .map((c) => ({ c, key: next() }))
      .sort((a, b) => a.key - b.key)
      .map(({ c }) => c);
    expect(essence({ ...chip, channels }), `seed ${seed}`).toEqual(essence(chip));
  }
});

test('the drawn area is the union of channels, whatever is read from it', () => {
  for (let seed = 1; seed <= 15; seed++) {
    const chip = randomDrawing(seed);
    const together = paths(polygons(chip));
    const apart = chip.channels
      .filter((c) => c.layer === 'flow')
      .flatMap((c) => strip(chip, chip.channels.indexOf(c)));
    const flat = union(apart, FillRule.NonZero);
    // corners where ends meet are in the whole only; nothing may be lost
    const lost = totalArea(xor(together, union([...apart, ...together], FillRule.NonZero), FillRule.NonZero));
    expect(lost / totalArea(flat), `seed ${seed}`).toBeLessThan(1e-5);
    expect(totalArea(together) / totalArea(flat)).toBeLessThan(1.02);
  }
});

describe('a path cut in two at a vertex', () => {
  const path: [number, number][] = [
    [0, 0],
    [1000, 0],
    [1700, 700],
    [1400, 1600],
    [2400, 2000],
  ];
  const pieces = (whole: Channel, at: number): Channel[] => [
    { ...whole, id: 'p', path: whole.path.slice(0, at + 1) },
    { ...whole, id: 'q', path: whole.path.slice(at) },
  ];
  const whole = channel('w', path, 150);

  test.each([1, 2, 3])('vertex %i: same polygon, same length', (at) => {
    const one = chipOf({ channels: [whole] });
    const two = chipOf({ channels: pieces(whole, at) });
    expect(polygons(two).map((p) => p.outer)).toEqual(polygons(one).map((p) => p.outer));
    const length = (chip: Chip) => readGraph(chip).pieces.reduce((sum, p) => sum + p.length, 0);
    expect(length(two)).toBeCloseTo(length(one), 6);
  });

  test('a bend beyond the mitre bound is bevelled alike', () => {
    const sharp = channel('w', [
      [0, 0],
      [1000, 0],
      [200, 300],
    ]);
    const one = polygons(chipOf({ channels: [sharp] }));
    const two = polygons(chipOf({ channels: pieces(sharp, 1) }));
    expect(two.map((p) => p.outer)).toEqual(one.map((p) => p.outer));
  });

  test('in the middle of a side: the same outline', () => {
    const a = channel('a', [
      [0, 0],
      [1000, 0],
    ]);
    const b = channel('b', [
      [1000, 0],
      [2500, 0],
    ]);
    const c = channel('c', [
      [0, 0],
      [2500, 0],
    ]);
    expect(polygons(chipOf({ channels: [a, b] }))).toEqual(polygons(chipOf({ channels: [c] })));
  });
});
