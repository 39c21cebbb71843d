import { ellipsePoints, nurbsPoints } from '../curves.ts';
import { circle, type Region, type Track, type Vertices } from '../drawing.ts';
import { fitSplinePoints } from './fit-spline.ts';
import { type Entity, needed, numberOf, numbersOf } from './pairs.ts';

/** What one entity draws in its own coordinates, or in words why it is not understood. */
export type Drawn =
  /** `assumed`: what its curve was taken to be, where the file does not say. */
  | { readonly track: Track; readonly assumed?: string }
  | { readonly loops: readonly Vertices[]; readonly how: Omit<Region, 'loops'> }
  | { readonly not: string };

const NONE = new Float64Array(0);
const DEGREE = Math.PI / 180;

/** Share of a curve's own size that its chords may lie off it. */
const CURVE_TOLERANCE = 1e-5;

const line = (vertices: ArrayLike<number>, closed = false): Drawn => ({
  track: { vertices: Float64Array.from(vertices), closed, widths: NONE },
});

/** Curves of entities that need no others: LINE, ARC, CIRCLE, ELLIPSE, SPLINE, LWPOLYLINE, SOLID. */
export function drawn(entity: Entity): Drawn | null {
  switch (entity.type) {
    case 'LINE':
      return line([needed(entity, 10), needed(entity, 20), 0, needed(entity, 11), needed(entity, 21), 0]);
    case 'ARC':
      return arc(entity);
    case 'CIRCLE': {
      const radius = needed(entity, 40);
      if (!(radius > 0)) return { not: 'circles of no radius' };
      return line(circle(needed(entity, 10), needed(entity, 20), radius), true);
    }
    case 'ELLIPSE':
      return ellipse(entity);
    case 'SPLINE':
      return spline(entity);
    case 'LWPOLYLINE':
      return lightPolyline(entity);
    case 'SOLID':
    case 'TRACE':
      return solid(entity);
    default:
      return null;
  }
}

function arc(entity: Entity): Drawn {
  const [x, y, radius] = [needed(entity, 10), needed(entity, 20), needed(entity, 40)];
  const from = needed(entity, 50) * DEGREE;
  let sweep = (needed(entity, 51) * DEGREE - from) % (2 * Math.PI);
  if (sweep <= 0) sweep += 2 * Math.PI;
  if (!(radius > 0)) return { not: 'arcs of no radius' };
  return line(arcVertices(x, y, radius, from, sweep));
}

/** An arc in two halves, so that even a whole turn has a bulge that can be written. */
export function arcVertices(x: number, y: number, radius: number, from: number, sweep: number): number[] {
  const bulge = Math.tan(sweep / 8);
  const at = (t: number): [number, number] => [x + radius * Math.cos(t), y + radius * Math.sin(t)];
  return [...at(from), bulge, ...at(from + sweep / 2), bulge, ...at(from + sweep), 0];
}

function ellipse(entity: Entity): Drawn {
  const [ax, ay] = [needed(entity, 11), needed(entity, 21)];
  // seen from below the other half axis lies on the other side
  const ratio = Math.sign(numberOf(entity, 230, 1)) * needed(entity, 40);
  const from = numberOf(entity, 41, 0);
  let to = numberOf(entity, 42, 2 * Math.PI);
  const size = Math.hypot(ax, ay);
  if (!(size > 0 && ratio !== 0 && Number.isFinite(to - from))) return { not: 'ellipses of no size' };
  to -= Math.floor((to - from) / (2 * Math.PI)) * 2 * Math.PI;
  if (to <= from + 1e-9) to += 2 * Math.PI;
  const whole = to - from > 2 * Math.PI - 1e-6;
  const points = ellipsePoints(
    needed(entity, 10),
    needed(entity, 20),
    ax,
    ay,
    ratio,
    from,
    to,
    size * CURVE_TOLERANCE,
  );
  return line(whole ? points.slice(0, -3) : points, whole);
}

function spline(entity: Entity): Drawn {
  const x = numbersOf(entity, 10);
  const y = numbersOf(entity, 20);
  if (x.length === 0) return fitted(entity);
  const weights = numbersOf(entity, 41);
  let [low, high] = [Infinity, 0];
  for (let i = 0; i < x.length; i += 1) {
    low = Math.min(low, Math.hypot(x[i] - x[0], y[i] - y[0]));
    high = Math.max(high, Math.hypot(x[i] - x[0], y[i] - y[0]));
  }
  const points =
    x.length === y.length && high > low
      ? nurbsPoints(
          {
            degree: numberOf(entity, 71, 3),
            knots: numbersOf(entity, 40),
            x,
            y,
            weights: weights.length > 0 ? weights : x.map(() => 1),
          },
          high * CURVE_TOLERANCE,
        )
      : null;
  if (!points) return { not: 'splines whose knots, weights and points do not fit together' };
  const last = points.length - 3;
  const closed = Math.hypot(points[last] - points[0], points[last + 1] - points[1]) <= 1e-9 * high;
  return line(closed ? points.slice(0, -3) : points, closed);
}

/** A spline of which the file holds only the points that it goes through. */
function fitted(entity: Entity): Drawn {
  const [x, y] = [numbersOf(entity, 11), numbersOf(entity, 21)];
  const way = (code: number): [number, number] | null =>
    entity.find(code) < 0 ? null : [needed(entity, code), needed(entity, code + 10)];
  const closed = (numberOf(entity, 70, 0) & 1) === 1;
  const size = x.reduce((most, value, i) => Math.max(most, Math.hypot(value - x[0], y[i] - y[0])), 0);
  const points =
    x.length === y.length && size > 0
      ? fitSplinePoints({ x, y, start: way(12), end: way(13), closed }, size * CURVE_TOLERANCE)
      : null;
  if (!points) return { not: 'splines whose points do not make a curve' };
  const last = points.length - 3;
  const meets = !closed && points[0] === points[last] && points[1] === points[last + 1];
  return {
    track: {
      vertices: Float64Array.from(meets ? points.slice(0, -3) : points),
      closed: closed || meets,
      widths: NONE,
    },
    assumed:
      'Splines given only by the points they go through were taken as cubic, with continuous curvature and the length of the chords as parameter; ends without a tangent have no curvature.',
  };
}

function lightPolyline(entity: Entity): Drawn {
  const vertices: number[] = [];
  const widths: number[] = [];
  let constant = 0;
  let flags = 0;
  for (let k = 0; k < entity.count; k += 1) {
    const code = entity.code(k);
    const last = vertices.length - 3;
    if (code === 70) flags = entity.number(k);
    else if (code === 43) constant = entity.number(k);
    else if (code === 10) {
      vertices.push(entity.number(k), Number.NaN, 0);
      widths.push(constant, constant);
    } else if (last < 0) continue;
    else if (code === 20) vertices[last + 1] = entity.number(k);
    else if (code === 42) vertices[last + 2] = entity.number(k);
    else if (code === 40) widths[widths.length - 2] = entity.number(k);
    else if (code === 41) widths[widths.length - 1] = entity.number(k);
  }
  return polyline(vertices, widths, (flags & 1) === 1);
}

/** A polyline with one pair of widths per vertex, for the edge that begins there; doubled vertices are merged. */
export function polyline(vertices: readonly number[], widths: readonly number[], closed: boolean): Drawn {
  const points: number[] = [];
  const kept: number[] = [];
  for (let k = 0; k < vertices.length; k += 3) {
    const last = points.length - 3;
    if (last >= 0 && vertices[k] === points[last] && vertices[k + 1] === points[last + 1]) {
      points[last + 2] = vertices[k + 2];
      kept.splice(-2, 2, widths[(2 * k) / 3], widths[(2 * k) / 3 + 1]);
      continue;
    }
    points.push(vertices[k], vertices[k + 1], vertices[k + 2]);
    kept.push(widths[(2 * k) / 3], widths[(2 * k) / 3 + 1]);
  }
  let round = closed;
  const last = points.length - 3;
  if (last >= 6 && points[0] === points[last] && points[1] === points[last + 1]) {
    points.length = last;
    kept.length -= 2;
    round = true;
  }
  const wide = kept.some((width) => width > 0);
  if (wide && !round) kept.length -= 2;
  return {
    track: {
      vertices: Float64Array.from(points),
      closed: round,
      widths: wide ? Float64Array.from(kept) : NONE,
    },
  };
}

function solid(entity: Entity): Drawn {
  const corners: number[] = [];
  // The third and the fourth corner are given across.
  for (const k of [0, 1, 3, 2]) {
    const x = numberOf(entity, 10 + k, Number.NaN);
    const y = numberOf(entity, 20 + k, Number.NaN);
    if (Number.isNaN(x) || Number.isNaN(y)) continue;
    const last = corners.length - 3;
    if (last >= 0 && corners[last] === x && corners[last + 1] === y) continue;
    corners.push(x, y, 0);
  }
  if (corners.length < 9) return { not: 'filled pieces of fewer than three corners' };
  return { loops: [Float64Array.from(corners)], how: { fill: 'even-odd', nests: false } };
}
