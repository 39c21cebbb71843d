import Flatbush from 'flatbush';
import type { Chamber, Chip, Point } from '../chip/chip.ts';
import { type Area, cuts, inArea } from '../chip/geometry/area.ts';
import { line, pointAt } from '../chip/geometry/curve.ts';
import { elementSolid, otherSolids, type Solid } from '../chip/plan-gaps.ts';
import { drawingOf } from '../chip/read-graph-drawing.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import { length, METRE, placeOf } from './words.ts';

/** The narrowest place inside an outline, between two of its sides that face each other. */
export interface Neck {
  /** nm */
  readonly width: number;
  readonly at: Point;
}

/** Sides face each other where they run against each other to within 60°. */
const FACING = -0.5;

const known = new WeakMap<Chamber, { readonly below: number; readonly neck: Neck | null }>();

/** Places inside chambers narrower than what the process holds. */
export function checkNecks({ chip, rules }: Drawn, found: Gathered): void {
  const least = rules?.leastWidth;
  if (!rules || !least) return;
  for (const chamber of chip.chambers) {
    // What is drawn over an edge takes the wall away there; that is looked into where it matters.
    const neck =
      neckBelow(chamber, least.number) && narrowest(bareSides(chip, chamber), least.number, chamber);
    if (!neck) continue;
    found.add({
      kind: 'chamber-neck',
      severity: 'stop',
      where: `chamber:${chamber.id}`,
      says: `${chamber.id} narrows to ${length(neck.width)}; ${rules.name} holds ${length(least.number)} (${least.source}).`,
      do: `Move its sides ${length(least.number - neck.width)} apart there, or choose a finer process.`,
      at: placeOf(...neck.at),
      value: neck.width / METRE,
      threshold: least.number / METRE,
      off: least.number / Math.max(1, neck.width),
    });
  }
}

/** The narrowest neck of a chamber alone below a width (nm), kept as long as the chamber; null where there is none. */
function neckBelow(chamber: Chamber, below: number): Neck | null {
  const kept = known.get(chamber);
  if (kept?.below === below) return kept.neck;
  const neck = narrowest(sidesOf(chamber), below, chamber);
  known.set(chamber, { below, neck });
  return neck;
}

/** A stretch of one side of a chamber where its wall stands, and the number of that side. */
interface Side {
  readonly of: number;
  readonly ends: readonly [Point, Point];
}

const sidesOf = ({ outline }: Chamber): Side[] =>
  outline.map((a, of) => ({ of, ends: [a, outline[(of + 1) % outline.length]!] }));

/** What of a chamber's sides nothing else on its layer is drawn over. */
function bareSides(chip: Chip, chamber: Chamber): Side[] {
  const drawing = drawingOf(chip);
  const layer = chip.layers.findIndex(({ id }) => id === chamber.layer);
  const xs = chamber.outline.map(([x]) => x);
  const ys = chamber.outline.map(([, y]) => y);
  const near =
    drawing.index?.search(Math.min(...xs), Math.min(...ys), Math.max(...xs), Math.max(...ys)) ?? [];
  const over: Area[] = [...near.map((e) => elementSolid(chip, drawing, e)), ...otherSolids(chip)]
    .filter((solid: Solid) => solid.layer === layer && solid.id !== chamber.id)
    .map(({ area }) => area);
  return sidesOf(chamber).flatMap(({ of, ends: [a, b] }): Side[] => {
    const side = line(a[0], a[1], b[0], b[1]);
    const marks = [0, ...over.flatMap((area) => cuts(area, side)), side.length].sort((p, q) => p - q);
    const bare: Side[] = [];
    for (let i = 0; i + 1 < marks.length; i += 1) {
      const [from, to] = [marks[i]!, marks[i + 1]!];
      if (to - from < 1) continue;
      const [x, y] = pointAt(side, (from + to) / 2);
      if (over.some((area) => inArea(area, x, y))) continue;
      bare.push({ of, ends: [pointAt(side, from), pointAt(side, to)] });
    }
    return bare;
  });
}

function narrowest(sides: readonly Side[], below: number, { outline }: Chamber): Neck | null {
  if (sides.length === 0) return null;
  const n = outline.length;
  const index = new Flatbush(sides.length);
  for (const { ends } of sides) index.add(...box(ends, 0));
  index.finish();
  let neck: Neck | null = null;
  for (const { of: i, ends: own } of sides) {
    for (const k of index.search(...box(own, below))) {
      const { of: j, ends: other } = sides[k]!;
      if (j <= i + 1 || (j + 1) % n === i || !facing(own, other)) continue;
      const [width, p, q] = apart(own, other);
      if (width >= (neck?.width ?? below)) continue;
      const at: Point = [(p[0] + q[0]) / 2, (p[1] + q[1]) / 2];
      if (width === 0 || inside(outline, at)) neck = { width, at };
    }
  }
  return neck;
}

type Box = [minX: number, minY: number, maxX: number, maxY: number];
const box = ([[ax, ay], [bx, by]]: readonly [Point, Point], by2: number): Box => [
  Math.min(ax, bx) - by2,
  Math.min(ay, by) - by2,
  Math.max(ax, bx) + by2,
  Math.max(ay, by) + by2,
];

function facing([a, b]: readonly [Point, Point], [c, d]: readonly [Point, Point]): boolean {
  const dot = (b[0] - a[0]) * (d[0] - c[0]) + (b[1] - a[1]) * (d[1] - c[1]);
  return dot < FACING * Math.hypot(b[0] - a[0], b[1] - a[1]) * Math.hypot(d[0] - c[0], d[1] - c[1]);
}

/** Distance of two sides that do not cross, with the nearest place of each. */
function apart(p: readonly [Point, Point], q: readonly [Point, Point]): [number, Point, Point] {
  let best: [number, Point, Point] = [Number.POSITIVE_INFINITY, p[0], q[0]];
  const see = (point: Point, [a, b]: readonly [Point, Point]): void => {
    const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
    const t = Math.min(
      1,
      Math.max(0, ((point[0] - a[0]) * dx + (point[1] - a[1]) * dy) / (dx * dx + dy * dy)),
    );
    const foot: Point = [a[0] + t * dx, a[1] + t * dy];
    const distance = Math.hypot(point[0] - foot[0], point[1] - foot[1]);
    if (distance < best[0]) best = [distance, point, foot];
  };
  for (const point of p) see(point, q);
  for (const point of q) see(point, p);
  return best;
}

function inside(outline: readonly Point[], [x, y]: Point): boolean {
  let within = false;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    const [ax, ay] = outline[i]!;
    const [bx, by] = outline[j]!;
    if (ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax) within = !within;
  }
  return within;
}
