import Flatbush from 'flatbush';
import type { Chamber, Point } from '../chip/chip.ts';
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
    const neck = neckBelow(chamber, least.number);
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

/** The narrowest neck of a chamber below a width (nm), kept as long as the chamber; null where there is none. */
export function neckBelow(chamber: Chamber, below: number): Neck | null {
  const kept = known.get(chamber);
  if (kept?.below === below) return kept.neck;
  const neck = narrowest(chamber.outline, below);
  known.set(chamber, { below, neck });
  return neck;
}

function narrowest(outline: readonly Point[], below: number): Neck | null {
  const n = outline.length;
  const side = (i: number): [Point, Point] => [outline[i]!, outline[(i + 1) % n]!];
  const index = new Flatbush(n);
  for (let i = 0; i < n; i += 1) index.add(...box(side(i), 0));
  index.finish();
  let neck: Neck | null = null;
  for (let i = 0; i < n; i += 1) {
    const own = side(i);
    for (const j of index.search(...box(own, below))) {
      if (j <= i + 1 || (j + 1) % n === i || !facing(own, side(j))) continue;
      const [width, p, q] = apart(own, side(j));
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
