import { Problem } from '../../solver/problem/problem.ts';
import type { Note } from '../contract/bring-in.ts';
import { LIMITS, type Work } from './work.ts';

/**
 * A drawing as every reader gives it, whatever file it came from: layers with closed regions, paths
 * that have a width, and lines that have none. Coordinates are in drawing units, y up.
 */
export interface Drawing {
  readonly format: 'DXF' | 'SVG' | 'GDSII';
  /** Metres per drawing unit, null where the file does not say. */
  readonly unit: number | null;
  /** How the file says it, or what it says instead; a sentence. */
  readonly unitSays: string;
  readonly layers: readonly DrawnLayer[];
  /** The page, from (0, 0), where the format has one. */
  readonly page: { readonly width: number; readonly height: number } | null;
  readonly notUnderstood: readonly Note[];
  /** What was taken for granted where the file does not say, in sentences. */
  readonly assumed: readonly string[];
  /** Entities read, those of references counted as often as they are placed. */
  readonly entities: number;
}

export interface DrawnLayer {
  readonly name: string;
  readonly regions: Region[];
  readonly tracks: Track[];
  /** Open lines without a width that close to nothing. */
  readonly lines: Track[];
}

/** Vertices in threes: x, y, and the bulge (tangent of a quarter of the sweep) of the edge to the next. */
export type Vertices = Float64Array;

export interface Region {
  /** Closed by themselves, not by repetition. */
  readonly loops: readonly Vertices[];
  readonly fill: 'even-odd' | 'non-zero';
  /** Whether it stands for an outline only, so that one within another is a wall (a post) in it. */
  readonly nests: boolean;
}

export interface Track {
  readonly vertices: Vertices;
  readonly closed: boolean;
  /** Full width at the start and at the end of each edge, in twos; empty where it has none. */
  readonly widths: Float64Array;
  /** Whether half a disc stands at either end, beyond its last point. */
  readonly round?: boolean;
}

/** Gathers a drawing, within bounds. */
export class Gathering {
  readonly work: Work;
  readonly layers = new Map<string, DrawnLayer>();
  readonly #notes = new Map<string, { count: number; where: string }>();
  readonly #assumed = new Set<string>();

  constructor(work: Work) {
    this.work = work;
  }

  layer(name: string, where: string): DrawnLayer {
    const short = name.slice(0, LIMITS.name) || '0';
    let layer = this.layers.get(short);
    if (!layer) {
      if (this.layers.size >= LIMITS.layers) {
        throw new Problem(
          'too-many',
          `The drawing has more than ${LIMITS.layers} layers.`,
          where,
          'Merge layers, or leave out those that are not needed.',
        );
      }
      layer = { name: short, regions: [], tracks: [], lines: [] };
      this.layers.set(short, layer);
    }
    return layer;
  }

  note(what: string, where: string, count = 1): void {
    const known = this.#notes.get(what);
    if (known) known.count += count;
    else if (this.#notes.size < LIMITS.notes) this.#notes.set(what, { count, where });
    else this.note('further sorts of things', where, count);
  }

  /** A sentence on what was taken for granted. */
  assume(says: string): void {
    this.#assumed.add(says);
  }

  region(layer: string, loops: readonly Vertices[], how: Omit<Region, 'loops'>, where: string): void {
    const whole = loops.filter((loop) => this.#sound(loop, where) && encloses(loop));
    if (whole.length < loops.length) this.note('closed outlines that enclose nothing', where);
    if (whole.length > 0) this.layer(layer, where).regions.push({ loops: whole, ...how });
  }

  track(layer: string, track: Track, where: string): void {
    if (!this.#sound(track.vertices, where)) return;
    if (track.vertices.length < 6) {
      this.note('lines of no length', where);
      return;
    }
    const into = this.layer(layer, where);
    if (track.widths.length > 0 && track.widths.some((width) => width > 0)) into.tracks.push(track);
    else if (track.closed) this.region(layer, [track.vertices], OUTLINE, where);
    else into.lines.push(track);
  }

  /** Counts the vertices and refuses numbers that are none. */
  #sound(vertices: Vertices, where: string): boolean {
    this.work.points(vertices.length / 3, where);
    for (const value of vertices) {
      if (Math.abs(value) <= LIMITS.coordinate) continue;
      throw new Problem(
        'quantity',
        'A coordinate is not a number, or too large to be one.',
        where,
        'Mend the file, or save the drawing again.',
      );
    }
    return true;
  }

  done(rest: Pick<Drawing, 'format' | 'unit' | 'unitSays' | 'page'>): Drawing {
    return {
      ...rest,
      layers: [...this.layers.values()],
      notUnderstood: [...this.#notes].map(([what, { count, where }]) => ({ what, count, where })),
      assumed: [...this.#assumed],
      entities: this.work.entities,
    };
  }
}

/** How a bare closed outline is taken. */
export const OUTLINE = { fill: 'non-zero', nests: true } as const;
export const FILLED = { fill: 'non-zero', nests: false } as const;
export const EVEN_ODD = { fill: 'even-odd', nests: false } as const;

function encloses(loop: Vertices): boolean {
  const count = loop.length / 3;
  if (count < 2) return false;
  return count > 2 || loop[2] !== 0 || loop[5] !== 0;
}

/** The same width all along. */
export function evenWidths(vertices: Vertices, closed: boolean, width: number): Float64Array {
  if (!(width > 0)) return new Float64Array(0);
  return new Float64Array(2 * (vertices.length / 3 - (closed ? 0 : 1))).fill(width);
}

/** Moves the ends of an open path outwards along its first and last stretch, in place. */
export function extend(vertices: Vertices, first: number, last: number): void {
  const end = vertices.length - 3;
  if (end < 3) return;
  const push = (tip: number, next: number, by: number): void => {
    const [dx, dy] = [vertices[tip] - vertices[next], vertices[tip + 1] - vertices[next + 1]];
    const length = Math.hypot(dx, dy);
    if (length === 0) return;
    vertices[tip] += (dx / length) * by;
    vertices[tip + 1] += (dy / length) * by;
  };
  push(0, 3, first);
  push(end, end - 3, last);
}

/** A circle as two half turns. */
export function circle(x: number, y: number, radius: number): Vertices {
  return Float64Array.of(x - radius, y, 1, x + radius, y, 1);
}
