import type { Path64, Paths64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import { arcPoints } from '../curves.ts';
import type { Track } from '../drawing.ts';
import { Ground, type Round } from '../ports.ts';
import type { Course } from './courses.ts';
import { type Frame, toNm } from './plane.ts';

/** A course, and the path of the drawing that it is of. */
export interface Drawn {
  readonly course: Course;
  readonly track: number;
}

/** Ends of paths that are drawn round. */
export interface RoundEnd extends Round {
  readonly track: number;
}

/** What rounding moves a point by, nm. */
const ROUNDING = 2;

/** Both ends of a path. */
export function roundEnds({ vertices, widths }: Track, frame: Frame, track: number): RoundEnd[] {
  const nm = toNm(vertices, frame);
  const last = nm.length - 3;
  const radius = (k: number): number => (widths[k] * frame.scale) / 2;
  return [
    { x: Math.round(nm[0]), y: Math.round(nm[1]), radius: radius(0), track },
    { x: Math.round(nm[last]), y: Math.round(nm[last + 1]), radius: radius(widths.length - 1), track },
  ];
}

/**
 * The round ends that stand free: not those that lie within another channel or within a region, nor those where
 * another path ends at the same point, which then goes on there.
 */
export function freeEnds(ends: readonly RoundEnd[], drawn: readonly Drawn[], regions: Paths64): Round[] {
  if (ends.length === 0) return [];
  const segments = drawn.flatMap(({ course: { path, width }, track }) =>
    path.slice(1).map(([bx, by], i) => {
      const [ax, ay] = path[i];
      const last = i + 2 === path.length;
      return { ax, ay, bx, by, half: Math.min(...width) / 2, track, first: i === 0, last };
    }),
  );
  const index = new Flatbush(segments.length);
  for (const { ax, ay, bx, by, half } of segments) {
    const reach = half + ROUNDING;
    index.add(
      Math.min(ax, bx) - reach,
      Math.min(ay, by) - reach,
      Math.max(ax, bx) + reach,
      Math.max(ay, by) + reach,
    );
  }
  index.finish();
  const ground = new Ground(regions);
  return ends.filter(({ x, y, radius, track }) => {
    if (ground.holds(x, y)) return false;
    return index.search(x, y, x, y).every((k) => {
      const { ax, ay, bx, by, half, track: other, first, last } = segments[k];
      if (other !== track) {
        if (first && Math.hypot(ax - x, ay - y) <= ROUNDING) return false;
        if (last && Math.hypot(bx - x, by - y) <= ROUNDING) return false;
      }
      const [dx, dy] = [bx - ax, by - ay];
      const t = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
      return Math.hypot(x - ax - t * dx, y - ay - t * dy) + radius > half + ROUNDING || t === 0 || t === 1;
    });
  });
}

/** A circle as a polygon whose chords lie within `error` of it, nm. */
export function discPath({ x, y, radius }: Round, error: number): Path64 {
  const points: number[] = [x - radius, y, 0];
  arcPoints(x - radius, y, x + radius, y, 1, error, points);
  points.push(x + radius, y, 0);
  arcPoints(x + radius, y, x - radius, y, 1, error, points);
  const path: Path64 = [];
  for (let k = 0; k < points.length; k += 3)
    path.push({ x: Math.round(points[k]), y: Math.round(points[k + 1]) });
  return path;
}
