import { type SVGCommand, SVGPathData, SVGPathDataParser } from 'svg-pathdata';
import { cutCurve } from '../curves.ts';
import type { Work } from '../work.ts';

export interface Subpath {
  /** x, y, bulge in threes. */
  readonly vertices: number[];
  closed: boolean;
}

interface Control {
  readonly x: number;
  readonly y: number;
  readonly cubic: boolean;
}

const CHUNK = 1 << 16;

/** The subpaths of path data, curves cut to chords within `tolerance`; null where the data breaks off. */
export function subpaths(data: string, tolerance: number, work: Work, where: string): Subpath[] | null {
  const parser = new SVGPathDataParser();
  const pen = new Pen(tolerance);
  let told = 0;
  try {
    for (let at = 0; at < data.length; at += CHUNK) {
      for (const command of parser.parse(data.slice(at, at + CHUNK), [])) pen.take(command);
      // Counted as it grows: what is refused must not be built first.
      work.room(pen.count, where);
      work.tick(pen.count - told);
      told = pen.count;
    }
    const rest: SVGCommand[] = [];
    parser.finish(rest);
    for (const command of rest) pen.take(command);
  } catch (error) {
    if (error instanceof SyntaxError) return null;
    throw error;
  }
  return pen.done;
}

/** Draws commands one after another. */
class Pen {
  readonly done: Subpath[] = [];
  count = 0;
  readonly #tolerance: number;
  #x = 0;
  #y = 0;
  #startX = 0;
  #startY = 0;
  #open: Subpath | null = null;
  /** Control point that a smooth curve mirrors, and the sort of curve it belongs to. */
  #control: Control | null = null;

  constructor(tolerance: number) {
    this.#tolerance = tolerance;
  }

  take(command: SVGCommand): void {
    this.count += 1;
    const before = this.#control;
    this.#control = null;
    const ox = 'relative' in command && command.relative ? this.#x : 0;
    const oy = 'relative' in command && command.relative ? this.#y : 0;
    switch (command.type) {
      case SVGPathData.MOVE_TO:
        this.#x = this.#startX = command.x + ox;
        this.#y = this.#startY = command.y + oy;
        this.#open = null;
        return;
      case SVGPathData.CLOSE_PATH:
        if (this.#open) this.#open.closed = true;
        this.#x = this.#startX;
        this.#y = this.#startY;
        this.#open = null;
        return;
      case SVGPathData.LINE_TO:
        this.#to(command.x + ox, command.y + oy);
        return;
      case SVGPathData.HORIZ_LINE_TO:
        this.#to(command.x + ox, this.#y);
        return;
      case SVGPathData.VERT_LINE_TO:
        this.#to(this.#x, command.y + oy);
        return;
      case SVGPathData.CURVE_TO:
        this.#cubic(
          command.x1 + ox,
          command.y1 + oy,
          command.x2 + ox,
          command.y2 + oy,
          command.x + ox,
          command.y + oy,
        );
        return;
      case SVGPathData.SMOOTH_CURVE_TO: {
        const [x1, y1] = this.#mirrored(before, true);
        this.#cubic(x1, y1, command.x2 + ox, command.y2 + oy, command.x + ox, command.y + oy);
        return;
      }
      case SVGPathData.QUAD_TO:
        this.#quadratic(command.x1 + ox, command.y1 + oy, command.x + ox, command.y + oy);
        return;
      case SVGPathData.SMOOTH_QUAD_TO: {
        const [x1, y1] = this.#mirrored(before, false);
        this.#quadratic(x1, y1, command.x + ox, command.y + oy);
        return;
      }
      case SVGPathData.ARC:
        this.#arc(
          command.rX,
          command.rY,
          (command.xRot * Math.PI) / 180,
          command.lArcFlag === 1,
          command.sweepFlag === 1,
          command.x + ox,
          command.y + oy,
        );
        return;
    }
  }

  #mirrored(before: Control | null, cubic: boolean): [number, number] {
    if (!before || before.cubic !== cubic) return [this.#x, this.#y];
    return [2 * this.#x - before.x, 2 * this.#y - before.y];
  }

  #vertices(): number[] {
    if (!this.#open) {
      this.#open = { vertices: [this.#x, this.#y, 0], closed: false };
      this.done.push(this.#open);
    }
    return this.#open.vertices;
  }

  #to(x: number, y: number, bulge = 0): void {
    const vertices = this.#vertices();
    if (x === this.#x && y === this.#y) return;
    vertices[vertices.length - 1] = bulge;
    vertices.push(x, y, 0);
    this.#x = x;
    this.#y = y;
  }

  #curve(at: (t: number) => [number, number], x: number, y: number): void {
    const vertices = this.#vertices();
    cutCurve(at, 0, 1, this.#tolerance, vertices, 2);
    this.#x = vertices[vertices.length - 3];
    this.#y = vertices[vertices.length - 2];
    this.#to(x, y);
  }

  #cubic(x1: number, y1: number, x2: number, y2: number, x: number, y: number): void {
    const [x0, y0] = [this.#x, this.#y];
    this.#curve(
      (t) => {
        const s = 1 - t;
        const [a, b, c, d] = [s * s * s, 3 * s * s * t, 3 * s * t * t, t * t * t];
        return [a * x0 + b * x1 + c * x2 + d * x, a * y0 + b * y1 + c * y2 + d * y];
      },
      x,
      y,
    );
    this.#control = { x: x2, y: y2, cubic: true };
  }

  #quadratic(x1: number, y1: number, x: number, y: number): void {
    const [x0, y0] = [this.#x, this.#y];
    this.#curve(
      (t) => {
        const s = 1 - t;
        return [s * s * x0 + 2 * s * t * x1 + t * t * x, s * s * y0 + 2 * s * t * y1 + t * t * y];
      },
      x,
      y,
    );
    this.#control = { x: x1, y: y1, cubic: false };
  }

  /** From end points to centre, by SVG 1.1 appendix F.6.5 (from memory). */
  #arc(rx: number, ry: number, turn: number, large: boolean, sweep: boolean, x: number, y: number): void {
    let [a, b] = [Math.abs(rx), Math.abs(ry)];
    const [x0, y0] = [this.#x, this.#y];
    if (!(a > 0 && b > 0)) {
      this.#to(x, y);
      return;
    }
    if (x === x0 && y === y0) return;
    const [cos, sin] = [Math.cos(turn), Math.sin(turn)];
    const px = (cos * (x0 - x) + sin * (y0 - y)) / 2;
    const py = (cos * (y0 - y) - sin * (x0 - x)) / 2;
    const reach = (px / a) ** 2 + (py / b) ** 2;
    if (reach > 1) {
      a *= Math.sqrt(reach);
      b *= Math.sqrt(reach);
    }
    const below = (a * py) ** 2 + (b * px) ** 2;
    const k = (large === sweep ? -1 : 1) * Math.sqrt(Math.max(0, ((a * b) ** 2 - below) / below));
    const cx1 = (k * a * py) / b;
    const cy1 = (-k * b * px) / a;
    const cx = cos * cx1 - sin * cy1 + (x0 + x) / 2;
    const cy = sin * cx1 + cos * cy1 + (y0 + y) / 2;
    const from = Math.atan2((py - cy1) / b, (px - cx1) / a);
    let by = Math.atan2((-py - cy1) / b, (-px - cx1) / a) - from;
    if (sweep && by < 0) by += 2 * Math.PI;
    if (!sweep && by > 0) by -= 2 * Math.PI;
    const at = (t: number): [number, number] => {
      const [u, v] = [a * Math.cos(from + by * t), b * Math.sin(from + by * t)];
      return [cx + cos * u - sin * v, cy + sin * u + cos * v];
    };
    if (Math.abs(a - b) <= 1e-9 * a) {
      const [mx, my] = at(0.5);
      const bulge = Math.tan(by / 8);
      this.#to(mx, my, bulge);
      this.#to(x, y, bulge);
    } else this.#curve(at, x, y);
  }
}
