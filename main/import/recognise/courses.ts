import type { Point } from '../../../solver/chip/chip.ts';

/** A line or arc of a centreline; the next one begins where it ends. nm. */
export interface Step {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
  /** Signed sweep in radians; 0 is straight. */
  readonly sweep: number;
  readonly radius: number;
}

/** A channel as the chip draws it, without its name and layer. */
export interface Course {
  readonly path: readonly Point[];
  readonly width: readonly [number, number];
  readonly bendRadius: number;
}

/** Bends sharper than this are smooth joins. */
const SMOOTH = 2e-3;
/** Most radians of one rounded corner; wider bends get several. */
const WIDEST = 1.75;
/** Most radians of one step: its chord must say which way it goes. */
const LONGEST = 4.7;
/** Radii that differ by less are one, nm and share. */
const SAME_NM = 6;
const SAME_SHARE = 1e-3;

/**
 * A centreline of even width as channels: its arcs become corners with that bend radius. A channel has one
 * radius, so the line is cut, half way along a straight part where there is one, where another begins.
 */
export function coursesOf(steps: readonly Step[], width: number): Course[] {
  const builder = new Builder(width);
  const whole = merged(steps);
  if (whole.length === 0) return [];
  builder.begin(whole[0].x0, whole[0].y0);
  whole.forEach((step, k) => {
    const next = whole[k + 1];
    if (step.sweep !== 0) bend(builder, step);
    if (!next) {
      builder.end(step.x1, step.y1);
      return;
    }
    const turn = turnBetween(step, next);
    if (Math.abs(turn) <= SMOOTH) return;
    if (step.sweep === 0 && next.sweep === 0)
      builder.corner(step.x1, step.y1, 0, step.x1, step.y1, step.x1, step.y1);
    else builder.cut(step.x1, step.y1);
  });
  return builder.done;
}

function bend(builder: Builder, { x0, y0, sweep, radius, x1, y1 }: Step): void {
  const count = Math.ceil(Math.abs(sweep) / WIDEST - 1e-9);
  const by = sweep / count;
  const [cx, cy] = centreOf({ x0, y0, x1, y1, sweep, radius });
  let [ax, ay] = [x0, y0];
  for (let k = 1; k <= count; k += 1) {
    const angle = Math.atan2(y0 - cy, x0 - cx) + by * k;
    const last = k === count;
    const bx = last ? x1 : cx + radius * Math.cos(angle);
    const by1 = last ? y1 : cy + radius * Math.sin(angle);
    const [mx, my] = [(ax + bx) / 2 - cx, (ay + by1) / 2 - cy];
    const reach = (radius * radius) / (mx * mx + my * my);
    builder.corner(cx + mx * reach, cy + my * reach, radius, ax, ay, bx, by1);
    [ax, ay] = [bx, by1];
  }
}

/** Unit direction at the start of a step. */
function tangent({ x0, y0, x1, y1, sweep }: Omit<Step, 'radius'>): [number, number] {
  const angle = Math.atan2(y1 - y0, x1 - x0) - sweep / 2;
  return [Math.cos(angle), Math.sin(angle)];
}

function turnBetween(a: Step, b: Step): number {
  const out = Math.atan2(a.y1 - a.y0, a.x1 - a.x0) + a.sweep / 2;
  const into = Math.atan2(b.y1 - b.y0, b.x1 - b.x0) - b.sweep / 2;
  return Math.atan2(Math.sin(into - out), Math.cos(into - out));
}

/** Lines that go on straight become one; steps of no length go. */
function merged(steps: readonly Step[]): Step[] {
  const out: Step[] = [];
  for (const step of steps) {
    if (Math.hypot(step.x1 - step.x0, step.y1 - step.y0) < 0.5) continue;
    const last = out.at(-1);
    if (step.sweep !== 0 && goesOn(out, step)) continue;
    if (last && last.sweep === 0 && step.sweep === 0) {
      const [dx, dy] = [step.x1 - last.x0, step.y1 - last.y0];
      const length = Math.hypot(dx, dy);
      const off = Math.abs((step.x0 - last.x0) * dy - (step.y0 - last.y0) * dx) / length;
      const along = (step.x0 - last.x0) * dx + (step.y0 - last.y0) * dy;
      if (off <= 2 && along > 0 && along < length * length) {
        out[out.length - 1] = { ...last, x1: step.x1, y1: step.y1 };
        continue;
      }
    }
    out.push(step);
  }
  return out;
}

/** Takes an arc into the one before it, if both lie on one circle with next to nothing between them. */
function goesOn(out: Step[], step: Step): boolean {
  const before = out.at(-1)?.sweep === 0 ? out.at(-2) : out.at(-1);
  if (!before || before.sweep * step.sweep <= 0) return false;
  const [ax, ay] = centreOf(before);
  const [bx, by] = centreOf(step);
  const near = 4 * (SAME_NM + SAME_SHARE * step.radius);
  if (Math.hypot(ax - bx, ay - by) > near || Math.abs(before.radius - step.radius) > near) return false;
  const gap = Math.hypot(step.x0 - before.x1, step.y0 - before.y1);
  if (gap > 0.1 * step.radius || Math.abs(before.sweep) + Math.abs(step.sweep) > LONGEST) return false;
  if (out.at(-1) !== before) out.pop();
  const sweep = before.sweep + step.sweep + (Math.sign(step.sweep) * gap) / step.radius;
  const longer = Math.abs(before.sweep) > Math.abs(step.sweep) ? before.radius : step.radius;
  out[out.length - 1] = { ...before, x1: step.x1, y1: step.y1, sweep, radius: longer };
  return true;
}

function centreOf({ x0, y0, x1, y1, sweep, radius }: Step): [number, number] {
  const [tx, ty] = tangent({ x0, y0, x1, y1, sweep });
  const sign = Math.sign(sweep);
  return [x0 - sign * radius * ty, y0 + sign * radius * tx];
}

class Builder {
  readonly done: Course[] = [];
  readonly #width: number;
  #path: Point[] = [];
  #radius: number | null = null;
  /** Where the straight part behind the last corner begins. */
  #x = 0;
  #y = 0;

  constructor(width: number) {
    this.#width = Math.max(1, Math.round(width));
  }

  begin(x: number, y: number): void {
    this.#path = [];
    this.#radius = null;
    this.#add(x, y);
    this.#x = x;
    this.#y = y;
  }

  /** A corner at (vx, vy), its bend from (ax, ay) to (bx, by). */
  corner(vx: number, vy: number, radius: number, ax: number, ay: number, bx: number, by: number): void {
    const own = this.#radius;
    if (own !== null && Math.abs(own - radius) > SAME_NM + SAME_SHARE * Math.max(own, radius)) {
      this.cut((this.#x + ax) / 2, (this.#y + ay) / 2);
    }
    this.#radius ??= radius;
    this.#add(vx, vy);
    this.#x = bx;
    this.#y = by;
  }

  cut(x: number, y: number): void {
    this.end(x, y);
    this.begin(x, y);
  }

  end(x: number, y: number): void {
    this.#add(x, y);
    const path = this.#path;
    if (path.length < 2) return;
    // A closed ring is two channels: one that ends on itself would have no ends.
    const [first, last] = [path[0], path[path.length - 1]];
    if (path.length > 3 && first[0] === last[0] && first[1] === last[1]) {
      const k = path.length >> 1;
      const middle: Point = [
        Math.round((path[k - 1][0] + path[k][0]) / 2),
        Math.round((path[k - 1][1] + path[k][1]) / 2),
      ];
      this.#finish([...path.slice(0, k), middle]);
      this.#finish([middle, ...path.slice(k)]);
    } else this.#finish(path);
  }

  #finish(path: readonly Point[]): void {
    const bendRadius = fitting(path, Math.round(this.#radius ?? 0));
    this.done.push({ path, width: [this.#width, this.#width], bendRadius });
  }

  #add(x: number, y: number): void {
    const point: Point = [Math.round(x), Math.round(y)];
    const last = this.#path.at(-1);
    if (last && last[0] === point[0] && last[1] === point[1]) return;
    this.#path.push(point);
  }
}

/** The radius, less the nanometres by which rounded corners are too close for it. */
function fitting(path: readonly Point[], radius: number): number {
  if (radius === 0 || path.length < 3) return 0;
  let fits = radius;
  let before = 0;
  for (let i = 1; i < path.length; i += 1) {
    const [a, b] = [path[i - 1], path[i]];
    const c = path[i + 1];
    const [ux, uy] = [b[0] - a[0], b[1] - a[1]];
    let tan = 0;
    if (c) {
      const [vx, vy] = [c[0] - b[0], c[1] - b[1]];
      tan = Math.tan(Math.abs(Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy)) / 2);
    }
    if (before + tan > 0) fits = Math.min(fits, Math.hypot(ux, uy) / (before + tan));
    before = tan;
  }
  return Math.max(0, Math.floor(fits));
}
