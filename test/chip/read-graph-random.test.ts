import { area, EndType, FillRule, inflatePaths, intersect, JoinType, type Paths64 } from 'clipper2-ts';
import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Graph } from '../../solver/chip/graph.ts';
import { flatten, planShape } from '../../solver/chip/plan.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { drawingOf } from '../../solver/chip/read-graph-drawing.ts';
import { randomDrawing } from './random-drawing.ts';

const SEEDS = 200;

/** The covered area of one channel as polygons in whole nm. */
function covered(chip: Chip, channel: number): Paths64 {
  const strip = { kind: 'strip', channel, from: 0, to: Infinity, tagFrom: 0, tagTo: 0 } as const;
  const { shapes } = planShape(drawingOf(chip), [strip], 0);
  return shapes.flatMap((shape) => shape.map((loop) => flatten(loop, 100).map(([x, y]) => ({ x, y }))));
}

function overlapArea(a: Paths64, b: Paths64): number {
  return intersect(a, b, FillRule.NonZero).reduce((sum, path) => sum + area(path), 0);
}

/** Sets of channels that are one cavity, as sorted lines. */
function groupsOf(ids: readonly string[], cavity: ArrayLike<number>): string[] {
  const lists = new Map<number, string[]>();
  for (let i = 0; i < ids.length; i++) lists.set(cavity[i]!, [...(lists.get(cavity[i]!) ?? []), ids[i]!]);
  return [...lists.values()].map((l) => l.join(' ')).sort();
}

function unitedBy(count: number, joined: (i: number, j: number) => boolean): number[] {
  const parent = Array.from({ length: count }, (_, i) => i);
  const root = (i: number): number => (parent[i] === i ? i : root(parent[i]!));
  for (let i = 0; i < count; i++) {
    for (let j = i + 1; j < count; j++) if (joined(i, j)) parent[root(j)] = root(i);
  }
  return parent.map((_, i) => root(i));
}

function cavities(chip: Chip, graph: Graph): string[] {
  return groupsOf(
    chip.channels.map((c) => c.id),
    graph.channelCavity,
  );
}

test('200 random networks: one cavity is what overlaps, by a polygon library over all pairs', () => {
  let undecided = 0;
  let joins = 0;
  for (let seed = 1; seed <= SEEDS; seed++) {
    const chip = randomDrawing(seed, 12);
    const { channels } = chip;
    const areas = channels.map((_, i) => covered(chip, i));
    const grown = areas.map((a) => inflatePaths(a, 200, JoinType.Miter, EndType.Polygon));
    const verdict = channels.map((a, i) =>
      channels.map((b, j) => {
        if (i >= j || a.layer !== b.layer) return false;
        if (overlapArea(areas[i]!, areas[j]!) > 1e6) return true;
        // areas that neither overlap clearly nor stay clear by 0.4 um leave the seed undecided
        return overlapArea(grown[i]!, grown[j]!) > 0 ? undefined : false;
      }),
    );
    if (verdict.flat().includes(undefined)) {
      undecided++;
      continue;
    }
    const slow = unitedBy(channels.length, (i, j) => verdict[i]![j] === true);
    joins += channels.length - new Set(slow).size;
    expect(cavities(chip, readGraph(chip)), `seed ${seed}`).toEqual(
      groupsOf(
        channels.map((c) => c.id),
        slow,
      ),
    );
  }
  expect(undecided).toBeLessThan(SEEDS / 10);
  expect(joins).toBeGreaterThan(SEEDS);
});
