import type { Chip } from '../../solver/chip/chip.ts';
import { add, distance, dot, nearestOnSegment, rayMeets, sub, times, type Xy } from '../geometry/vector.ts';
import type { Spatial } from '../sheet/spatial.ts';

/** What a snapped place was caught by, said at the pointer. */
export type Caught =
  | 'end'
  | 'corner'
  | 'port'
  | 'via'
  | 'centreline'
  | 'in line'
  | 'equal spacing'
  | 'grid'
  | 'free';

export interface Snapped {
  readonly at: Xy;
  readonly by: Caught;
  /** A line to draw that explains it, or null. */
  readonly guide: readonly [Xy, Xy] | null;
}

export interface SnapWishes {
  /** nm: how near the pointer must come. */
  readonly reach: number;
  /** nm, 0 for none. */
  readonly grid: number;
  /** The point the line comes from, or its neighbours: 45 degree directions are offered from each. */
  readonly from?: Xy | readonly Xy[];
  /** True while the hand holds snapping off. */
  readonly free?: boolean;
  /** Parts that are being moved and must not catch themselves. */
  readonly without?: ReadonlySet<string>;
}

const RAYS: readonly Xy[] = [0, 45, 90, 135].map((degrees) => [
  degrees === 90 ? 0 : degrees === 0 ? 1 : degrees === 45 ? Math.SQRT1_2 : -Math.SQRT1_2,
  degrees === 0 ? 0 : degrees === 90 ? 1 : Math.SQRT1_2,
]);

/**
 * The place the pointer means, best first: ends, corners, ports and vias; where a 45 degree line from the
 * last point crosses a centreline; centrelines; the 45 degree lines themselves; equal spacing between
 * neighbours; the grid.
 */
export function snap(p: Xy, spatial: Spatial, wishes: SnapWishes): Snapped {
  if (wishes.free) return { at: p, by: 'free', guide: null };
  const { chip } = spatial;
  const point = nearestPoint(p, chip, spatial, wishes);
  if (point) return point;
  const line = nearestLine(p, chip, spatial, wishes);
  const ray = nearestRay(p, origins(wishes.from), wishes.reach);
  if (line && ray) {
    const both = rayMeets(ray.from, ray.unit, line.a, line.b);
    if (both && distance(both, p) <= 2 * wishes.reach)
      return { at: both, by: 'centreline', guide: [ray.from, both] };
  }
  if (line) return { at: line.at, by: 'centreline', guide: null };
  if (ray) {
    // a step of the grid across and up, so that slanting lines end on it too
    const step = wishes.grid / Math.max(Math.abs(ray.unit[0]), Math.abs(ray.unit[1]));
    const along = wishes.grid > 0 ? Math.round(ray.along / step) * step : ray.along;
    const at = add(ray.from, times(ray.unit, along));
    return { at, by: 'in line', guide: [ray.from, at] };
  }
  const even = equalSpacing(p, chip, wishes);
  if (even) return even;
  if (wishes.grid > 0) {
    const { grid } = wishes;
    return { at: [Math.round(p[0] / grid) * grid, Math.round(p[1] / grid) * grid], by: 'grid', guide: null };
  }
  return { at: p, by: 'free', guide: null };
}

/** A round step of 1, 2 or 5 tens of nm that is about `pixels` wide on screen. */
export function gridFor(nmPerPixel: number, pixels = 10): number {
  const wanted = nmPerPixel * pixels;
  const power = 10 ** Math.floor(Math.log10(wanted));
  const factor = [1, 2, 5, 10].find((f) => f * power >= wanted) ?? 10;
  return Math.max(1, Math.round(factor * power));
}

function nearestPoint(p: Xy, chip: Chip, spatial: Spatial, wishes: SnapWishes): Snapped | null {
  let best: Snapped | null = null;
  let nearest = wishes.reach;
  const offer = (at: Xy, by: Caught): void => {
    const away = distance(p, at);
    if (away > nearest || (away === nearest && best)) return;
    nearest = away;
    best = { at, by, guide: null };
  };
  for (const port of chip.ports) if (!wishes.without?.has(`port:${port.id}`)) offer(port.at, 'port');
  for (const via of chip.vias) if (!wishes.without?.has(`via:${via.id}`)) offer(via.at, 'via');
  for (const { channel, segment } of spatial.segmentsNear(p, wishes.reach)) {
    const { id, path } = chip.channels[channel]!;
    if (wishes.without?.has(`channel:${id}`)) continue;
    for (const i of [segment, segment + 1])
      offer(path[i]!, i === 0 || i === path.length - 1 ? 'end' : 'corner');
  }
  return best;
}

function nearestLine(
  p: Xy,
  chip: Chip,
  spatial: Spatial,
  wishes: SnapWishes,
): { readonly at: Xy; readonly a: Xy; readonly b: Xy } | null {
  let best: { at: Xy; a: Xy; b: Xy } | null = null;
  let nearest = wishes.reach;
  for (const { channel, segment } of spatial.segmentsNear(p, wishes.reach)) {
    const { id, path } = chip.channels[channel]!;
    if (wishes.without?.has(`channel:${id}`)) continue;
    const a = path[segment]!;
    const b = path[segment + 1]!;
    const near = nearestOnSegment(p, a, b);
    const away = distance(p, near.at);
    if (away <= nearest) {
      nearest = away;
      best = { at: near.at, a, b };
    }
  }
  return best;
}

const origins = (from: SnapWishes['from']): readonly Xy[] =>
  from === undefined ? [] : isPlace(from) ? [from] : from;
const isPlace = (from: Xy | readonly Xy[]): from is Xy => typeof from[0] === 'number';

interface Ray {
  readonly from: Xy;
  readonly unit: Xy;
  readonly along: number;
}

function nearestRay(p: Xy, origins: readonly Xy[], reach: number): Ray | null {
  let best: (Ray & { readonly away: number }) | null = null;
  for (const from of origins) {
    const d = sub(p, from);
    for (const unit of RAYS) {
      const along = dot(d, unit);
      const away = distance(d, times(unit, along));
      if (along !== 0 && away <= reach && (!best || away < best.away)) best = { from, unit, along, away };
    }
  }
  if (!best) return null;
  // a whole direction, so that straight lines come out exactly straight
  return best.along < 0 ? { ...best, unit: times(best.unit, -1), along: -best.along } : best;
}

/** Above this many channels their ends are no neighbours to keep a distance by. */
const MOST_ENDS = 200;

/** A place as far from one port, via or end of a channel as that is from the next, in a row or a column. */
function equalSpacing(p: Xy, chip: Chip, wishes: SnapWishes): Snapped | null {
  const without = (ref: string): boolean => wishes.without?.has(ref) ?? false;
  const holes = [
    ...chip.ports.filter(({ id }) => !without(`port:${id}`)),
    ...chip.vias.filter(({ id }) => !without(`via:${id}`)),
  ].map(({ at }) => at);
  const ends =
    chip.channels.length > MOST_ENDS
      ? []
      : chip.channels
          .filter(({ id }) => !without(`channel:${id}`))
          .flatMap(({ path }) => [path[0]!, path.at(-1)!]);
  const places = [...holes, ...ends];
  if (places.length < 2 || holes.length > 400) return null;
  for (const axis of [0, 1] as const) {
    const row = places
      .filter((q) => Math.abs(q[1 - axis]! - p[1 - axis]!) <= wishes.reach)
      .sort((a, b) => a[axis] - b[axis]);
    for (let i = 0; i + 1 < row.length; i += 1) {
      const [a, b] = [row[i]!, row[i + 1]!];
      if (a[1 - axis] !== b[1 - axis]) continue;
      const gap = b[axis] - a[axis];
      for (const value of [a[axis] - gap, b[axis] + gap, a[axis] + gap / 2]) {
        if (gap === 0 || Math.abs(value - p[axis]!) > wishes.reach) continue;
        const at: Xy = axis === 0 ? [value, a[1]] : [a[0], value];
        return { at, by: 'equal spacing', guide: [a, at] };
      }
    }
  }
  return null;
}
