import Flatbush from 'flatbush';
import type { Finding } from '../problem/finding.ts';
import type { Channel, Chip } from './chip.ts';
import { type Body, loopsOverlap, outline } from './geometry/body.ts';
import { bodyBox } from './geometry/body-box.ts';
import { addCentreline } from './geometry/centreline.ts';
import { pointAt } from './geometry/curve.ts';
import { CURVATURE, Elements, H0, H1, S0, S1, STRIDE } from './geometry/elements.ts';
import { apart, CORNERS, corners, elementBox } from './geometry/packed.ts';
import { TOUCH } from './geometry/tolerance.ts';

export function layerNumbers(chip: Chip): Map<string, number> {
  return new Map(chip.layers.map((layer, i) => [layer.id, i]));
}

/** Elements of a drawing whose bodies are kept, being asked for again and again; more would take too much memory. */
const MOST_BODIES = 4000;

/**
 * Bodies of a channel's elements, for as long as it has the same place among the others: an edit elsewhere leaves
 * them the same objects, so that what was found of two of them need not be found again.
 */
const bodiesOf = new WeakMap<Channel, { readonly place: number; readonly bodies: Body[] }>();

const NONE: readonly number[] = [];
const ascending = (a: number, b: number): number => a - b;

/** Room round the box of an arc, nm, that neither rounding nor touching bridges. */
const ROOM = 10;

/** Whether two boxes of four numbers lie apart. */
function clear(boxes: Float64Array, a: number, b: number): boolean {
  return (
    boxes[a]! > boxes[b + 2]! ||
    boxes[b]! > boxes[a + 2]! ||
    boxes[a + 1]! > boxes[b + 3]! ||
    boxes[b + 1]! > boxes[a + 3]!
  );
}

/** The channels of a chip in the plan, with an index over what their elements cover. */
export class Drawing {
  readonly chip: Chip;
  readonly elements: Elements;
  /** Layer index of each channel. */
  readonly layerOf: Int32Array;
  /** Least x, least y, greatest x, greatest y of what each element covers. */
  readonly boxes: Float64Array;
  /** Over the boxes; absent where there are none. */
  readonly index: Flatbush | undefined;
  readonly #p = new Float64Array(CORNERS);
  readonly #q = new Float64Array(CORNERS);
  readonly #close = new Float64Array(8);
  readonly #near: (readonly number[])[] = [];

  /** What the bends had to say. */
  readonly findings: readonly Finding[];

  constructor(chip: Chip) {
    const findings: Finding[] = [];
    this.findings = findings;
    const numbers = layerNumbers(chip);
    const count = chip.channels.length;
    this.chip = chip;
    let room = 0;
    for (const c of chip.channels) room += (c.path.length - 1) * (c.bendRadius > 0 ? 2 : 1);
    this.elements = new Elements(count, room);
    this.layerOf = new Int32Array(count);
    for (let i = 0; i < count; i++) {
      const channel = chip.channels[i]!;
      this.layerOf[i] = numbers.get(channel.layer)!;
      addCentreline(this.elements, channel, i, findings);
    }
    const total = this.elements.count;
    this.boxes = new Float64Array(4 * total);
    if (total === 0) {
      this.index = undefined;
      return;
    }
    const index = new Flatbush(total);
    const b = this.boxes;
    for (let id = 0; id < total; id++) {
      elementBox(this.elements, id, this.#p, b, 4 * id);
      index.add(b[4 * id]! - TOUCH, b[4 * id + 1]! - TOUCH, b[4 * id + 2]! + TOUCH, b[4 * id + 3]! + TOUCH);
    }
    index.finish();
    this.index = index;
  }

  /** Whether bodies are kept: the same object for the same element of the same channel, in this drawing and others. */
  get keeps(): boolean {
    return this.elements.count <= MOST_BODIES;
  }

  /** Later elements whose boxes meet that of element `i`, in order; searched for once where there are few. */
  near(i: number): readonly number[] {
    const known = this.#near[i];
    if (known || !this.index) return known ?? NONE;
    const b = this.boxes;
    const later = (j: number): boolean => j > i;
    const found = this.index.search(b[4 * i]!, b[4 * i + 1]!, b[4 * i + 2]!, b[4 * i + 3]!, later);
    if (found.length > 1) found.sort(ascending);
    if (this.keeps) this.#near[i] = found;
    return found;
  }

  body(id: number): Body {
    if (!this.keeps) return this.#body(id);
    const place = this.elements.channel[id]!;
    const channel = this.chip.channels[place]!;
    let known = bodiesOf.get(channel);
    if (known?.place !== place) {
      known = { place, bodies: [] };
      bodiesOf.set(channel, known);
    }
    const index = id - this.elements.first[place]!;
    known.bodies[index] ??= this.#body(id);
    return known.bodies[index];
  }

  #body(id: number): Body {
    const b = this.boxes;
    const element = this.elements.at(id);
    return {
      element,
      minX: b[4 * id]!,
      minY: b[4 * id + 1]!,
      maxX: b[4 * id + 2]!,
      maxY: b[4 * id + 3]!,
      corners:
        element.curve.curvature === 0
          ? Array.from(this.#p.subarray(0, corners(this.elements, id, this.#p)))
          : [],
    };
  }

  /** Whether the covered areas of two elements overlap or touch, to TOUCH. */
  overlap(i: number, j: number): boolean {
    const { data } = this.elements;
    if (data[i * STRIDE + CURVATURE] === 0 && data[j * STRIDE + CURVATURE] === 0) {
      const p = this.#p;
      const q = this.#q;
      const n = corners(this.elements, i, p);
      const m = corners(this.elements, j, q);
      return !apart(p, n, q, m) && !apart(q, m, p, n);
    }
    this.#closeBox(i, 0);
    this.#closeBox(j, 4);
    if (clear(this.#close, 0, 4)) return false;
    return loopsOverlap(outline(this.body(i)), outline(this.body(j)));
  }

  /** The box of an element, that of an arc by its own walls and not by its whole circle, into #close[at … at + 3]. */
  #closeBox(id: number, at: number): void {
    const d = this.elements.data;
    const k = id * STRIDE;
    if (d[k + CURVATURE] !== 0) {
      bodyBox(this.elements.curve(id), Math.max(d[k + H0]!, d[k + H1]!), ROOM, this.#close, at);
      return;
    }
    for (let side = 0; side < 4; side++) this.#close[at + side] = this.boxes[4 * id + side]!;
  }

  /** Number of the element of a channel at a distance along it. */
  elementAt(channel: number, s: number): number {
    const { data, first } = this.elements;
    let low = first[channel]!;
    let high = first[channel + 1]! - 1;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (data[middle * STRIDE + S1]! < s) low = middle + 1;
      else high = middle;
    }
    return low;
  }

  /** Place on a channel's centreline. */
  placeAt(channel: number, s: number): [number, number] {
    const id = this.elementAt(channel, s);
    return pointAt(this.elements.curve(id), s - this.elements.data[id * STRIDE + S0]!);
  }

  /** The same, but at a vertex the element that starts there. */
  elementAfter(channel: number, s: number): number {
    const id = this.elementAt(channel, s);
    const last = this.elements.first[channel + 1]! - 1;
    return id < last && this.elements.data[id * STRIDE + S1]! <= s + TOUCH ? id + 1 : id;
  }
}

const drawings = new WeakMap<Chip, Drawing>();

/** The drawing of a chip, made once: a chip never changes, an edit makes another. */
export function drawingOf(chip: Chip): Drawing {
  let drawing = drawings.get(chip);
  if (!drawing) {
    drawing = new Drawing(chip);
    drawings.set(chip, drawing);
  }
  return drawing;
}
