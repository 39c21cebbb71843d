import { type Course, coursesOf, type Step } from './courses.ts';
import { pointOn, widthOn } from './pairs.ts';
import type { Knot, Strip, StripEnd, Strips } from './strips.ts';

/** Widths that differ by less are one: nm and share. */
const SAME_NM = 4;
const SAME_SHARE = 2e-3;
/** Axes that are one: most sine between them, and offset as a share of the width. */
const IN_LINE = 2e-3;
const OFFSET = 0.02;
/** A centreline is led on at most this many widths to meet others. */
const FURTHEST = 4;
/** A knot larger than this many squares of the widest width is a chamber. */
const LARGEST = 5.5;
/** A step to the side between two channels is a chamber that reaches so many widths into either. */
const STEP = 0.5;
/** Share of its width by which a channel is led into a chamber. */
const INTO = 0.5;

interface EndPlace {
  x: number;
  y: number;
  /** The end of another strip that carries on from here in one channel. */
  mate: { strip: number; end: 0 | 1 } | null;
  /** Leads into a chamber, by this much. */
  into: number;
}

export interface Joined {
  readonly courses: Course[];
  /** For each course, how far either end is to be led on into a chamber; nm. */
  readonly into: (readonly [number, number])[];
}

const same = (a: number, b: number): boolean => Math.abs(a - b) <= SAME_NM + SAME_SHARE * Math.max(a, b);

/** Strips joined at their knots, as channels. */
export function joined({ strips, knots }: Strips): Joined {
  const places: [EndPlace, EndPlace][] = strips.map(({ ends: [a, b] }) => [placeOf(a), placeOf(b)]);
  for (const knot of knots) joinKnot(knot, strips, places);
  return chained(strips, places);
}

function placeOf({ x, y }: StripEnd): EndPlace {
  return { x, y, mate: null, into: 0 };
}

interface Arm {
  readonly end: StripEnd;
  readonly place: EndPlace;
  readonly of: { strip: number; end: 0 | 1 };
  /** Of even width, so that it may go on as the same channel. */
  readonly even: boolean;
  readonly straight: boolean;
  /** By how much a straight taper grows out of this end, per nm; 0 for others. */
  readonly growth: number;
  readonly length: number;
}

function joinKnot(knot: Knot, strips: readonly Strip[], places: readonly [EndPlace, EndPlace][]): void {
  const arms: Arm[] = knot.ends.map((of) => {
    const strip = strips[of.strip];
    const { axis } = strip;
    return {
      of,
      end: strip.ends[of.end],
      place: places[of.strip][of.end],
      even: axis !== null && axis.slope === 0,
      straight: axis?.kind === 'line',
      growth: axis?.kind === 'line' ? axis.slope * (of.end === 1 ? 1 : -1) : 0,
      length: strip.length,
    };
  });
  if (arms.length === 0) return;
  const widest = arms.reduce((most, { end }) => Math.max(most, end.width), 0);
  if (arms.length === 1 || knot.area > LARGEST * widest * widest) {
    const [only] = arms;
    // A soft strip stops short of the wall that closes it: the ground between is as long as its width says.
    if (arms.length === 1 && strips[only.of.strip].soft && knot.area <= 1.2 * widest * widest) {
      const by = knot.area / only.end.width;
      settle(only, only.end.x + by * only.end.ux, only.end.y + by * only.end.uy);
      return;
    }
    const room = Math.sqrt(knot.area) / 4;
    if (!(knot.area > 1.2 * widest * widest)) return;
    for (const arm of arms) {
      const { x, y, ux, uy, width, aslant } = arm.end;
      settle(arm, x + aslant * ux, y + aslant * uy);
      arm.place.into = Math.min(INTO * width, room);
    }
    return;
  }
  const left = new Set(arms);
  const through: Arm[] = [];
  for (const a of arms) {
    if (!left.has(a)) continue;
    const b = [...left].find(
      (other) => other !== a && inLine(a.end, other.end) && (matches(a, other) || tapersOn(a, other)),
    );
    if (!b || !a.straight || !b.straight) continue;
    left.delete(a);
    left.delete(b);
    const [x, y] = [(a.end.x + b.end.x) / 2, (a.end.y + b.end.y) / 2];
    settle(a, x, y);
    settle(b, x, y);
    mate(a, b);
    through.push(a);
  }
  const rest = [...left];
  if (rest.length === 0) return;
  if (through.length > 0) {
    for (const arm of rest) meetNearest(arm, through, widest);
    return;
  }
  if (rest.length === 2) joinTwo(rest[0], rest[1], widest);
  else joinMany(rest, widest);
}

function mate(a: Arm, b: Arm): void {
  a.place.mate = b.of;
  b.place.mate = a.of;
}

const matches = (a: Arm, b: Arm): boolean => a.even && b.even && same(a.end.width, b.end.width);

/** Whether two straight tapers on one line are one that something opens into on its way. */
function tapersOn(a: Arm, b: Arm): boolean {
  if (a.growth === 0 || b.growth === 0) return false;
  const gap = Math.hypot(b.end.x - a.end.x, b.end.y - a.end.y);
  if (!same(a.end.width + a.growth * gap, b.end.width)) return false;
  const unlike = Math.abs(a.growth + b.growth) * Math.min(a.length, b.length);
  return unlike <= SAME_NM + SAME_SHARE * Math.max(a.end.width, b.end.width);
}

/** Whether two ends look at each other along one line. */
function inLine(a: StripEnd, b: StripEnd): boolean {
  if (a.ux * b.ux + a.uy * b.uy > -0.9) return false;
  if (Math.abs(a.ux * b.uy - a.uy * b.ux) > IN_LINE) return false;
  const off = Math.abs((b.x - a.x) * a.uy - (b.y - a.y) * a.ux);
  return off <= OFFSET * Math.min(a.width, b.width) + 3;
}

function settle({ place }: Arm, x: number, y: number): void {
  place.x = x;
  place.y = y;
}

/** How far along its own direction an end must be led to be level with a point. */
const levelWith = ({ end }: Arm, x: number, y: number): number => (x - end.x) * end.ux + (y - end.y) * end.uy;

function meetNearest(arm: Arm, through: readonly Arm[], widest: number): void {
  let best = Infinity;
  const { x, y, ux, uy, width } = arm.end;
  for (const { end } of through) {
    const sine = ux * end.uy - uy * end.ux;
    if (Math.abs(sine) < 0.05) continue;
    const t = ((end.x - x) * end.uy - (end.y - y) * end.ux) / sine;
    if (t > -0.6 * width && t < best) best = t;
  }
  if (best <= FURTHEST * widest) settle(arm, x + best * ux, y + best * uy);
}

function joinTwo(a: Arm, b: Arm, widest: number): void {
  const [p, q] = [a.end, b.end];
  const gap = Math.hypot(q.x - p.x, q.y - p.y);
  const sine = p.ux * q.uy - p.uy * q.ux;
  if (a.straight !== b.straight && gap <= 0.1 * widest) {
    // A line goes on from where the arc ends: that point is the sharper one of the two.
    const [arc] = a.straight ? [b] : [a];
    meetAt(a, b, arc.end.x, arc.end.y);
    return;
  }
  if (Math.abs(sine) < 0.02 && besides(a, b)) {
    if (Math.min(a.length, b.length) < 2 * STEP * widest) return;
    for (const arm of [a, b]) if (arm.straight) drawBack(arm, STEP * widest);
    return;
  }
  if (Math.abs(sine) < 0.02 || gap <= 2) {
    meetAt(a, b, (p.x + q.x) / 2, (p.y + q.y) / 2);
    return;
  }
  const t = ((q.x - p.x) * q.uy - (q.y - p.y) * q.ux) / sine;
  const [x, y] = [p.x + t * p.ux, p.y + t * p.uy];
  const s = levelWith(b, x, y);
  if (t < -0.6 * p.width || s < -0.6 * q.width || Math.max(t, s) > FURTHEST * widest) {
    meetAt(a, b, (p.x + q.x) / 2, (p.y + q.y) / 2);
    return;
  }
  meetAt(a, b, x, y);
}

/** Whether two ends look at each other past each other: their channels meet in a step to the side. */
function besides({ end: p, straight }: Arm, { end: q, straight: other }: Arm): boolean {
  if (!(straight || other) || p.ux * q.ux + p.uy * q.uy > -0.9) return false;
  const off = Math.abs((q.x - p.x) * p.uy - (q.y - p.y) * p.ux);
  return off > OFFSET * Math.min(p.width, q.width) + 3;
}

/** Leaves the ground before an end to a chamber, which the end then leads into. */
function drawBack(arm: Arm, by: number): void {
  const { x, y, ux, uy } = arm.end;
  settle(arm, x - by * ux, y - by * uy);
  arm.place.into = by / 2;
}

function meetAt(a: Arm, b: Arm, x: number, y: number): void {
  settle(a, x, y);
  settle(b, x, y);
  if (matches(a, b)) mate(a, b);
}

/** The point nearest to all axes; each end is led to where it passes it. */
function joinMany(arms: readonly Arm[], widest: number): void {
  let [a11, a12, a22, b1, b2] = [0, 0, 0, 0, 0];
  for (const { end } of arms) {
    const [nx, ny] = [-end.uy, end.ux];
    const d = nx * end.x + ny * end.y;
    a11 += nx * nx;
    a12 += nx * ny;
    a22 += ny * ny;
    b1 += nx * d;
    b2 += ny * d;
  }
  const det = a11 * a22 - a12 * a12;
  if (Math.abs(det) < 1e-6) return;
  const x = (a22 * b1 - a12 * b2) / det;
  const y = (a11 * b2 - a12 * b1) / det;
  for (const arm of arms) {
    const { end } = arm;
    const t = levelWith(arm, x, y);
    if (t < -0.6 * end.width || t > FURTHEST * widest) continue;
    const [px, py] = [end.x + t * end.ux, end.y + t * end.uy];
    const near = Math.hypot(px - x, py - y) <= 0.02 * end.width + 5;
    settle(arm, near ? x : px, near ? y : py);
  }
}

function chained(strips: readonly Strip[], places: readonly [EndPlace, EndPlace][]): Joined {
  const used = new Uint8Array(strips.length);
  const out: Joined = { courses: [], into: [] };
  const walk = (first: number, firstEnd: 0 | 1): void => {
    const steps: Step[] = [];
    let width = 0;
    let length = 0;
    let strip = first;
    let enter: 0 | 1 = firstEnd;
    const start = places[first][firstEnd];
    let stop = start;
    for (;;) {
      used[strip] = 1;
      const leave = enter === 0 ? 1 : 0;
      steps.push(...stepsOf(strips[strip], places[strip], enter));
      width += widthOn(strips[strip].axis!, strips[strip].from) * strips[strip].length;
      length += strips[strip].length;
      stop = places[strip][leave];
      if (!stop.mate || used[stop.mate.strip]) break;
      [strip, enter] = [stop.mate.strip, stop.mate.end];
    }
    const courses = coursesOf(steps, width / length);
    courses.forEach((course, k) => {
      out.courses.push(course);
      out.into.push([k === 0 ? start.into : 0, k === courses.length - 1 ? stop.into : 0]);
    });
  };
  strips.forEach((strip, s) => {
    if (used[s]) return;
    if (strip.soft) softCourses(strip.soft, places[s], out);
    else if (!strip.axis || strip.axis.slope === 0) return;
    else if (strip.axis.kind === 'line') {
      const ends = ([0, 1] as const).map((first) => {
        let end: 0 | 1 = first;
        let last = s;
        for (let { mate } = places[s][end]; mate && !used[mate.strip]; { mate } = places[last][end]) {
          last = mate.strip;
          end = mate.end === 0 ? 1 : 0;
          used[last] = 1;
        }
        return { strip: strips[last], end, place: places[last][end] };
      });
      taperCourse(ends, out);
    } else taperedBend(strip, places[s], out);
    used[s] = 1;
  });
  for (const open of [true, false]) {
    for (let s = 0; s < strips.length; s += 1) {
      if (used[s]) continue;
      if (!places[s][0].mate || !open) walk(s, 0);
      else if (!places[s][1].mate) walk(s, 1);
    }
  }
  return out;
}

/** A strip as steps from one end to the other, with the lines that lead on to its places. */
function stepsOf(
  { axis, from, to, ends }: Strip,
  places: readonly [EndPlace, EndPlace],
  enter: 0 | 1,
): Step[] {
  const leave = enter === 0 ? 1 : 0;
  const [a, b] = [places[enter], places[leave]];
  if (axis?.kind !== 'arc') return [{ x0: a.x, y0: a.y, x1: b.x, y1: b.y, sweep: 0, radius: 0 }];
  const [p, q] = [ends[enter], ends[leave]];
  const sweep = (to - from) * (enter === 0 ? 1 : -1);
  const steps: Step[] = [];
  if (Math.hypot(p.x - a.x, p.y - a.y) > 2)
    steps.push({ x0: a.x, y0: a.y, x1: p.x, y1: p.y, sweep: 0, radius: 0 });
  // More than half a turn is cut in two, so that the chord always says the direction.
  const parts = Math.ceil(Math.abs(sweep) / 3);
  let [x0, y0] = [p.x, p.y];
  for (let k = 1; k <= parts; k += 1) {
    const s = enter === 0 ? from + ((to - from) * k) / parts : to - ((to - from) * k) / parts;
    const [x1, y1] = k === parts ? [q.x, q.y] : pointOn(axis, s);
    steps.push({ x0, y0, x1, y1, sweep: sweep / parts, radius: axis.radius });
    [x0, y0] = [x1, y1];
  }
  if (Math.hypot(q.x - b.x, q.y - b.y) > 2)
    steps.push({ x0: q.x, y0: q.y, x1: b.x, y1: b.y, sweep: 0, radius: 0 });
  return steps;
}

/** A straight taper from one end to the other, of one strip or of several that carry on from each other. */
function taperCourse(
  ends: readonly { readonly strip: Strip; readonly end: 0 | 1; readonly place: EndPlace }[],
  out: Joined,
): void {
  const width = ends.map(({ strip, end, place: { x, y } }) => {
    const { axis } = strip;
    if (axis?.kind !== 'line') return 1;
    const s = (x - axis.x) * axis.ux + (y - axis.y) * axis.uy;
    return Math.max(1, Math.round(Math.min(widthOn(axis, s), 2 * strip.ends[end].width + 1)));
  });
  const path = ends.map(({ place: { x, y } }) => [Math.round(x), Math.round(y)] as const);
  if (path[0][0] === path[1][0] && path[0][1] === path[1][1]) return;
  out.courses.push({ path, width: [width[0], width[1]], bendRadius: 0 });
  out.into.push([ends[0].place.into, ends[1].place.into]);
}

/** A bend whose width changes along it, as channels that do so too. */
function taperedBend(strip: Strip, places: readonly [EndPlace, EndPlace], out: Joined): void {
  const [start, end] = strip.ends.map(({ width }) => width);
  const courses = coursesOf(stepsOf(strip, places, 0), (start + end) / 2);
  courses.forEach((course, k) => {
    const width = [k, k + 1].map((i) =>
      Math.max(1, Math.round(start + ((end - start) * i) / courses.length)),
    );
    out.courses.push({ ...course, width: [width[0], width[1]] });
    out.into.push([k === 0 ? places[0].into : 0, k === courses.length - 1 ? places[1].into : 0]);
  });
}

function softCourses(
  samples: readonly { readonly x: number; readonly y: number; readonly width: number }[],
  places: readonly [EndPlace, EndPlace],
  out: Joined,
): void {
  // An end that was led on far keeps the point where the walls told the way.
  const led = places.map(({ x, y }, k) => {
    const end = samples[k === 0 ? 0 : samples.length - 1];
    return Math.hypot(x - end.x, y - end.y) > 0.1 * end.width ? [{ x, y, width: end.width }] : [];
  });
  const points = [...led[0], ...samples, ...led[1]].map(({ x, y, width }, k, all) => {
    const at = k === 0 ? places[0] : k === all.length - 1 ? places[1] : { x, y };
    return { x: Math.round(at.x), y: Math.round(at.y), width: Math.max(1, Math.round(width)) };
  });
  const evenEnough = (a: number, b: number): boolean => Math.abs(a - b) <= 0.01 * Math.max(a, b);
  for (let k = 0; k + 1 < points.length; ) {
    let to = k + 1;
    if (evenEnough(points[k].width, points[k + 1].width)) {
      while (to + 1 < points.length && evenEnough(points[k].width, points[to + 1].width)) to += 1;
    }
    const part = points.slice(k, to + 1);
    const path = part
      .map(({ x, y }) => [x, y] as const)
      .filter(([x, y], i, all) => i === 0 || x !== all[i - 1][0] || y !== all[i - 1][1]);
    if (path.length > 1) {
      out.courses.push({ path, width: [part[0].width, part[part.length - 1].width], bendRadius: 0 });
      out.into.push([k === 0 ? places[0].into : 0, to === points.length - 1 ? places[1].into : 0]);
    }
    k = to;
  }
}
