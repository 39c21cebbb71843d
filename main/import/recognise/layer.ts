import type { Path64, Paths64 } from 'clipper2-ts';
import type { Point } from '../../../solver/chip/chip.ts';
import type { Track } from '../drawing.ts';
import type { Work } from '../work.ts';
import { type Course, coursesOf, type Step } from './courses.ts';
import { type Joined, joined } from './joints.ts';
import { pairOf, placeOn, pointOn } from './pairs.ts';
import { type Area, type Frame, toNm } from './plane.ts';
import { ribbonStrips } from './ribbon.ts';
import { stripsOf } from './strips.ts';
import { triangulate } from './triangles.ts';
import { type Wall, wallsOf } from './walls.ts';

export interface Found {
  readonly course: Course;
  /** How far either end is to be led on into a chamber, nm. */
  readonly into: readonly [number, number];
  /** Number of the area that it is a part of, -1 where it was drawn as a path. */
  readonly area: number;
}

/** Shapes that are kept for those like them to come: most vertices of one, and of all. */
const KEPT_SHAPE = 1000;
const KEPT_ALL = 300_000;

/** Channels that regions are made of; what they do not cover is left to chambers. */
export function recognise(areas: readonly Area[], work: Work, told: (share: number) => void): Found[] {
  const found: Found[] = [];
  const known = new Map<string, Joined | null>();
  let kept = 0;
  areas.forEach((area, i) => {
    told(i / areas.length);
    // Found about its own corner, so that shapes that are alike are found alike, wherever they lie.
    const [{ x, y }] = area.outer;
    const { outer, holes } = {
      outer: shifted(area.outer, x, y),
      holes: area.holes.map((h) => shifted(h, x, y)),
    };
    const size = holes.reduce((sum, hole) => sum + hole.length, outer.length);
    const key = size <= KEPT_SHAPE ? keyOf([outer, ...holes]) : '';
    let of = key === '' ? undefined : known.get(key);
    if (of === undefined) {
      of = coursesIn({ outer, holes }, work);
      kept += size;
      if (key !== '' && kept <= KEPT_ALL) known.set(key, of);
    }
    of?.courses.forEach((course, k) => {
      const path = course.path.map(([px, py]): Point => [px + x, py + y]);
      found.push({ course: { ...course, path }, into: of.into[k], area: i });
    });
  });
  return found;
}

function shifted(path: Path64, x: number, y: number): Path64 {
  return path.map((p) => ({ x: p.x - x, y: p.y - y }));
}

function keyOf(paths: Paths64): string {
  let key = '';
  for (const path of paths) {
    for (const { x, y } of path) key += `${x},${y} `;
    key += ';';
  }
  return key;
}

/** null where its walls cross. */
function coursesIn(area: Area, work: Work): Joined | null {
  const loops = wallsOf(area);
  const plain = plainStrip(loops);
  if (plain) return { courses: [plain], into: [[0, 0]] };
  const ribbon = ribbonStrips(loops);
  if (ribbon) return joined(alone(ribbon));
  const triangles = triangulate(loops, work);
  return triangles && joined(alone(stripsOf(loops.flat(), triangles)));
}

/** The channel that a four-sided area with a long pair of even sides is; most drawings hold many of them. */
function plainStrip(loops: readonly (readonly Wall[])[]): Course | null {
  const [walls] = loops;
  if (loops.length !== 1 || walls.length !== 4 || walls.some(({ sweep }) => sweep !== 0)) return null;
  for (const k of [0, 1]) {
    const pair = pairOf(walls[k], walls[k + 2]);
    if (pair?.axis.kind !== 'line' || pair.axis.slope !== 0) continue;
    const { axis, from, to } = pair;
    if (to - from < SHORT_ALONE * axis.width) continue;
    // Square ends only: where walls end apart the triangles tell more.
    const ends = [walls[k].x0, walls[k].x1, walls[k + 2].x0, walls[k + 2].x1].map((x, i) => {
      const y = [walls[k].y0, walls[k].y1, walls[k + 2].y0, walls[k + 2].y1][i];
      return placeOn(axis, x, y, 0);
    });
    if (ends.some((s) => Math.min(Math.abs(s - from), Math.abs(s - to)) > 2)) continue;
    const [[x0, y0], [x1, y1]] = [pointOn(axis, from), pointOn(axis, to)];
    return coursesOf([{ x0, y0, x1, y1, sweep: 0, radius: 0 }], axis.width)[0] ?? null;
  }
  return null;
}

/** A stretch shorter than this many widths between much narrower ones, or by itself, is a chamber. */
const SHORT_ROOM = 3;
const SHORT_ALONE = 4;
const NARROWER = 0.6;

/** A stretch shorter than this many widths says nothing of what those beside it are. */
const STUB = 1;
/** A taper shorter than this many widths that goes on along neither of its neighbours is the corner between them. */
const SHORT_CORNER = 1.5;
/** Most sine between a taper and the channel that it goes on to. */
const GOES_ON = 0.05;

/** Strips without those that are rooms or corners rather than channels; their ground goes to the knots beside them. */
function alone(all: ReturnType<typeof stripsOf>): ReturnType<typeof stripsOf> {
  const { strips, knots } = all;
  const rooms = new Set<number>();
  const widthOf = (s: number): number => Math.max(...strips[s].ends.map(({ width }) => width));
  const stub = (s: number): boolean => strips[s].length < STUB * widthOf(s);
  const shortTaper = (s: number): boolean => {
    const { axis, length } = strips[s];
    return axis?.kind === 'line' && axis.slope !== 0 && length < SHORT_CORNER * widthOf(s);
  };
  strips.forEach(({ ends, length, axis }, s) => {
    if (axis?.kind !== 'line') return;
    const width = widthOf(s);
    const others = ends.map((mine) =>
      mine.knot < 0 ? [] : knots[mine.knot].ends.filter(({ strip }) => strip !== s),
    );
    const sides = others.flat();
    const sure =
      stub(s) && sides.some(({ strip }) => !stub(strip)) ? sides.filter(({ strip }) => !stub(strip)) : sides;
    const narrow = sure.every(({ strip, end }) => strips[strip].ends[end].width <= NARROWER * width);
    if (narrow && length < (sides.length > 0 ? SHORT_ROOM : SHORT_ALONE) * width) rooms.add(s);
    if (axis.slope === 0 || length >= SHORT_CORNER * width || sides.length === 0) return;
    const goesOn = ends.some((mine, k) =>
      others[k].some(({ strip, end }) => {
        if (shortTaper(strip)) return false;
        const { ux, uy } = strips[strip].ends[end];
        return mine.ux * ux + mine.uy * uy < 0 && Math.abs(mine.ux * uy - mine.uy * ux) < GOES_ON;
      }),
    );
    if (!goesOn) rooms.add(s);
  });
  if (rooms.size === 0) return all;
  // The knots at both ends of a room become one, with the room's ground in it.
  const parent = knots.map((_, k) => k);
  const find = (k: number): number => {
    while (parent[k] !== k) k = parent[k];
    return k;
  };
  const extra = new Map<number, number>();
  for (const s of rooms) {
    const { ends, length } = strips[s];
    const [a, b] = ends.map(({ knot }) => knot).filter((knot) => knot >= 0);
    if (a === undefined) continue;
    if (b !== undefined) parent[find(a)] = find(b);
    extra.set(a, (extra.get(a) ?? 0) + (length * (ends[0].width + ends[1].width)) / 2);
  }
  const numbers = new Map<number, number>();
  strips.forEach((_, s) => {
    if (!rooms.has(s)) numbers.set(s, numbers.size);
  });
  const merged = knots.map(() => ({ ends: [] as { strip: number; end: 0 | 1 }[], area: 0 }));
  knots.forEach((knot, k) => {
    const into = merged[find(k)];
    into.area += knot.area + (extra.get(k) ?? 0);
    for (const { strip, end } of knot.ends) {
      const number = numbers.get(strip);
      if (number !== undefined) into.ends.push({ strip: number, end });
    }
  });
  return { strips: strips.filter((_, s) => !rooms.has(s)), knots: merged };
}

/** Channels of a path that has a width. */
export function trackCourses({ vertices, closed, widths }: Track, frame: Frame): Course[] {
  const nm = toNm(vertices, frame);
  const count = nm.length / 3;
  const edges = closed ? count : count - 1;
  const steps: Step[] = [];
  for (let i = 0; i < edges; i += 1) {
    const k = 3 * i;
    const next = 3 * ((i + 1) % count);
    steps.push(...arcSteps(nm[k], nm[k + 1], nm[next], nm[next + 1], nm[k + 2]));
  }
  const scaled = widths.map((width) => width * frame.scale);
  const even = scaled.every((width) => Math.abs(width - scaled[0]) <= 1);
  if (even) return coursesOf(steps, scaled[0]);
  const out: Course[] = [];
  for (let i = 0; i < edges; i += 1) {
    const k = 3 * i;
    const next = 3 * ((i + 1) % count);
    const own = arcSteps(nm[k], nm[k + 1], nm[next], nm[next + 1], nm[k + 2]);
    const [w0, w1] = [scaled[2 * i], scaled[2 * i + 1]].map((width) => Math.max(1, Math.round(width)));
    for (const course of coursesOf(own, w0)) out.push({ ...course, width: [w0, w1] });
  }
  return out;
}

/** An edge with a bulge as steps of at most half a turn. */
function arcSteps(x0: number, y0: number, x1: number, y1: number, bulge: number): Step[] {
  if (bulge === 0) return [{ x0, y0, x1, y1, sweep: 0, radius: 0 }];
  const sweep = 4 * Math.atan(bulge);
  const chord = Math.hypot(x1 - x0, y1 - y0);
  const radius = Math.abs(chord / (2 * Math.sin(sweep / 2)));
  if (Math.abs(sweep) <= 3) return [{ x0, y0, x1, y1, sweep, radius }];
  const [mx, my] = [(x0 + x1) / 2 + (bulge * (y1 - y0)) / 2, (y0 + y1) / 2 - (bulge * (x1 - x0)) / 2];
  return [
    { x0, y0, x1: mx, y1: my, sweep: sweep / 2, radius },
    { x0: mx, y0: my, x1, y1, sweep: sweep / 2, radius },
  ];
}
