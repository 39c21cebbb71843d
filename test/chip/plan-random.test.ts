import { area, FillRule, type Paths64, union } from 'clipper2-ts';
import { expect, test } from 'vitest';
import { flatten, type PlanBody, planShape } from '../../solver/chip/plan.ts';
import { drawingOf } from '../../solver/chip/read-graph-drawing.ts';
import { twiceArea } from '../../solver/mesh/check-shape.ts';
import type { Edge, Shape } from '../../solver/mesh/mesh.ts';
import { random, randomDrawing } from './random-drawing.ts';

const SEEDS = 60;

function bodiesOf(seed: number): { drawing: ReturnType<typeof drawingOf>; bodies: PlanBody[] } {
  const chip = randomDrawing(seed, 6);
  const next = random(seed + 500);
  const bodies = chip.channels.map((_, channel): PlanBody => {
    return { kind: 'strip', channel, from: 0, to: Infinity, tagFrom: 0, tagTo: 0 };
  });
  for (let k = 0; k < 4; k++) {
    // some discs in the open, some round a vertex, some as wide as the channel
    const c = chip.channels[Math.floor(next() * chip.channels.length)]!;
    const [x, y] = next() < 0.5 ? c.path[0]! : [Math.round(next() * 4e6), Math.round(next() * 4e6)];
    bodies.push({
      kind: 'disc',
      x,
      y,
      radius: next() < 0.3 ? c.width[0] / 2 : 30e3 + next() * 300e3,
      tag: 0,
    });
  }
  return { drawing: drawingOf(chip), bodies };
}

/** Exact area, arcs included. */
function areaOf(shapes: readonly Shape[]): number {
  return shapes.reduce((sum, s) => sum + s.reduce((t, loop) => t + twiceArea(loop) / 2, 0), 0);
}

function aroundOf(shapes: readonly Shape[]): number {
  const chord = (e: Edge, next: Edge) => Math.hypot(next.x - e.x, next.y - e.y);
  return shapes
    .flat()
    .reduce((sum, loop) => sum + loop.reduce((t, e, k) => t + chord(e, loop[(k + 1) % loop.length]!), 0), 0);
}

function polygonsOf(shapes: readonly Shape[]): Paths64 {
  return shapes.flatMap((s) => s.map((loop) => flatten(loop, 1).map(([x, y]) => ({ x, y }))));
}

test('the union with true arcs has the area of the union of its bodies as fine polygons', () => {
  for (let seed = 1; seed <= SEEDS; seed++) {
    const { drawing, bodies } = bodiesOf(seed);
    const whole = planShape(drawing, bodies, 0).shapes;
    const parts = bodies.flatMap((b) => polygonsOf(planShape(drawing, [b], 0).shapes));
    const flat = union(parts, FillRule.NonZero).reduce((sum, p) => sum + area(p), 0);
    // polygons are in whole nanometres: what they may differ by is half of one all round
    expect(Math.abs(areaOf(whole) - flat) / aroundOf(whole), `seed ${seed}`).toBeLessThan(0.5);
  }
});

/** Direction in which an edge leaves its start, and in which it arrives at its end. */
function directions(e: Edge, next: Edge): [number, number] {
  const chord = Math.atan2(next.y - e.y, next.x - e.x);
  const half = 2 * Math.atan(e.bulge);
  return [chord - half, chord + half];
}

function turnBetween(a: number, b: number): number {
  const turn = (b - a) % (2 * Math.PI);
  return turn > Math.PI ? turn - 2 * Math.PI : turn < -Math.PI ? turn + 2 * Math.PI : turn;
}

test('fillets leave no re-entrant corner where they fit, only add ground, and are tangent', () => {
  let corners = 0;
  let rounded = 0;
  for (let seed = 1; seed <= SEEDS; seed++) {
    const { drawing, bodies } = bodiesOf(seed);
    const sharp = planShape(drawing, bodies, 0);
    const soft = planShape(drawing, bodies, 4e3);
    expect(areaOf(soft.shapes)).toBeGreaterThanOrEqual(areaOf(sharp.shapes) * (1 - 1e-12));
    const reentrant = (shapes: readonly Shape[]) =>
      shapes.flatMap((s) =>
        s.flatMap((loop) =>
          loop.filter((e, k) => {
            const n = loop.length;
            const before = loop[(k + n - 1) % n]!;
            const [, arrives] = directions(before, e);
            const [leaves] = directions(e, loop[(k + 1) % n]!);
            return turnBetween(arrives, leaves) < -0.02;
          }),
        ),
      ).length;
    corners += reentrant(sharp.shapes);
    rounded += reentrant(sharp.shapes) - reentrant(soft.shapes);
    expect(reentrant(soft.shapes), `seed ${seed}`).toBeLessThanOrEqual(soft.reduced.length);
  }
  expect(rounded / corners).toBeGreaterThan(0.97);
});
