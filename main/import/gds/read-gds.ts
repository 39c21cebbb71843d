import { inUnit } from '../../../solver/chip/units.ts';
import { Problem } from '../../../solver/problem/problem.ts';
import { type Affine, compose, growth, moved, SAME, scaling, shift, turning } from '../affine.ts';
import { type Drawing, evenWidths, extend, FILLED, Gathering } from '../drawing.ts';
import { LIMITS, type Work } from '../work.ts';
import { ascii, int16, int32, RECORD, real8, records, type StreamRecord } from './records.ts';

type Kind = 'boundary' | 'path' | 'box' | 'sref' | 'aref' | 'text' | 'node';

interface Element {
  readonly kind: Kind;
  readonly at: number;
  layer: number;
  type: number;
  width: number;
  pathtype: number;
  extensions: [number, number];
  xy: Float64Array;
  name: string;
  strans: number;
  mag: number;
  angle: number;
  columns: number;
  rows: number;
}

const KINDS: Readonly<Record<number, Kind>> = {
  [RECORD.BOUNDARY]: 'boundary',
  [RECORD.PATH]: 'path',
  [RECORD.BOX]: 'box',
  [RECORD.SREF]: 'sref',
  [RECORD.AREF]: 'aref',
  [RECORD.TEXT]: 'text',
  [RECORD.NODE]: 'node',
};

/** Records that hold nothing of the shape: dates, names, properties and the like. */
const PLAIN = new Set([
  0x00, 0x01, 0x02, 0x16, 0x17, 0x19, 0x1f, 0x20, 0x22, 0x23, 0x26, 0x2a, 0x2b, 0x2c, 0x2f, 0x32, 0x33, 0x36,
  0x37, 0x38, 0x39, 0x3a, 0x3b,
]);

/** Structures told by name where there are several to begin with. */
const MOST_NAMED = 5;

interface Library {
  readonly structures: Map<string, Element[]>;
  /** Metres of a database unit. */
  unit: number;
}

/** A GDSII stream file as a drawing in database units. Throws `Problem`. */
export function readGds(bytes: Uint8Array, work: Work): Drawing {
  const gathering = new Gathering(work);
  const library = readLibrary(bytes, gathering);
  const called = new Set<string>();
  for (const elements of library.structures.values()) {
    for (const { name } of elements) if (name !== '') called.add(name);
  }
  const tops = [...library.structures.keys()].filter((name) => !called.has(name));
  if (tops.length === 0 && library.structures.size > 0) {
    throw new Problem(
      'reference',
      'Every structure is placed inside another: the references go round in a circle.',
      '',
      'Take the reference out that closes the circle.',
    );
  }
  if (tops.length > 1) {
    const some = tops.slice(0, MOST_NAMED).map((name) => `"${name.slice(0, LIMITS.name)}"`);
    const more = tops.length > MOST_NAMED ? ` and ${tops.length - MOST_NAMED} more` : '';
    gathering.assume(
      `No structure places ${some.join(', ')}${more}: all were taken, each where its own coordinates have it.`,
    );
  }
  const placer = new Placer(gathering, library.structures);
  tops.forEach((name, i) => {
    work.at(0.6 + (0.4 * i) / tops.length);
    placer.structure(name, SAME, []);
  });
  return gathering.done({
    format: 'GDSII',
    unit: library.unit,
    unitSays: `The database unit is ${Number(inUnit(library.unit, 'nm').toPrecision(6))} nm.`,
    page: null,
  });
}

function readLibrary(bytes: Uint8Array, to: Gathering): Library {
  if (bytes.length < 6 || bytes[2] !== RECORD.HEADER || bytes[3] !== 0x02) {
    throw new Problem(
      'format',
      'This is not a GDSII stream file.',
      'byte 0',
      'Check that it is the right file.',
    );
  }
  const library: Library = { structures: new Map(), unit: 0 };
  let open: Element[] | null = null;
  let element: Element | null = null;
  for (const record of records(bytes)) {
    const { type, at } = record;
    to.work.at((0.6 * at) / bytes.length);
    if (Object.hasOwn(KINDS, type)) {
      to.work.entity(`byte ${at}`);
      element = newElement(KINDS[type], at);
    } else if (type === RECORD.ENDEL) {
      if (element && open) open.push(element);
      element = null;
    } else if (type === RECORD.UNITS) library.unit = real8(record, 1);
    else if (type === RECORD.STRNAME) {
      const name = ascii(record);
      if (library.structures.has(name))
        to.note('structures of a name that stood before (added to it)', `byte ${at}`);
      open = library.structures.get(name) ?? [];
      library.structures.set(name, open);
    } else if (type === RECORD.ENDSTR) open = null;
    else if (element) readInto(element, record, to);
    else if (!PLAIN.has(type) && type !== RECORD.BGNSTR && type !== RECORD.ENDLIB) {
      to.note(`records of type ${type}`, `byte ${at}`);
    }
  }
  if (!(library.unit > 1e-15 && library.unit < 1)) {
    throw new Problem(
      'quantity',
      'The file gives no sensible database unit.',
      '',
      'Save it again with its UNITS record.',
    );
  }
  return library;
}

function newElement(kind: Kind, at: number): Element {
  return {
    kind,
    at,
    layer: 0,
    type: 0,
    width: 0,
    pathtype: 0,
    extensions: [0, 0],
    xy: new Float64Array(0),
    name: '',
    strans: 0,
    mag: 1,
    angle: 0,
    columns: 1,
    rows: 1,
  };
}

function readInto(element: Element, record: StreamRecord, to: Gathering): void {
  switch (record.type) {
    case RECORD.LAYER:
      element.layer = int16(record);
      return;
    case RECORD.DATATYPE:
    case RECORD.BOXTYPE:
      element.type = int16(record);
      return;
    case RECORD.WIDTH:
      element.width = int32(record);
      return;
    case RECORD.PATHTYPE:
      element.pathtype = int16(record);
      return;
    case RECORD.BGNEXTN:
      element.extensions[0] = int32(record);
      return;
    case RECORD.ENDEXTN:
      element.extensions[1] = int32(record);
      return;
    case RECORD.SNAME:
      element.name = ascii(record);
      return;
    case RECORD.STRANS:
      element.strans = int16(record) & 0xffff;
      return;
    case RECORD.MAG:
      element.mag = real8(record);
      return;
    case RECORD.ANGLE:
      element.angle = real8(record);
      return;
    case RECORD.COLROW:
      element.columns = int16(record, 0);
      element.rows = int16(record, 1);
      return;
    case RECORD.XY: {
      const count = Math.floor(record.data.byteLength / 4);
      element.xy = Float64Array.from({ length: count & ~1 }, (_, k) => int32(record, k));
      return;
    }
    default:
      if (!PLAIN.has(record.type)) to.note(`records of type ${record.type}`, `byte ${record.at}`);
  }
}

class Placer {
  readonly #to: Gathering;
  readonly #structures: ReadonlyMap<string, Element[]>;

  constructor(to: Gathering, structures: ReadonlyMap<string, Element[]>) {
    this.#to = to;
    this.#structures = structures;
  }

  structure(name: string, by: Affine, stack: readonly string[]): void {
    for (const element of this.#structures.get(name) ?? []) {
      const where = `byte ${element.at}`;
      if (stack.length > 0) this.#to.work.entity(where);
      this.#element(element, by, [...stack, name], where);
    }
  }

  #element(element: Element, by: Affine, stack: readonly string[], where: string): void {
    const { kind, xy } = element;
    const layer = `${element.layer}/${element.type}`;
    if (kind === 'text' || kind === 'node') {
      this.#to.note(kind === 'text' ? 'TEXT' : 'NODE', where);
      return;
    }
    if (xy.length < 2) {
      this.#to.note('elements without coordinates', where);
      return;
    }
    if (kind === 'sref' || kind === 'aref') this.#reference(element, by, stack, where);
    else if (kind === 'path') this.#path(element, by, layer, where);
    else this.#to.region(layer, [moved(withoutRepeat(xy), by, true)], FILLED, where);
  }

  #path({ xy, width, pathtype, extensions }: Element, by: Affine, layer: string, where: string): void {
    // A width below zero is meant as it is, whatever the magnification.
    const full = width < 0 ? -width / growth(by) : width;
    const vertices = withBulges(xy);
    if (pathtype === 2) extend(vertices, full / 2, full / 2);
    else if (pathtype === 4) extend(vertices, extensions[0], extensions[1]);
    const own = moved(vertices, by, false);
    this.#to.track(
      layer,
      {
        vertices: own,
        closed: false,
        widths: evenWidths(own, false, full * growth(by)),
        ...(pathtype === 1 && { round: true }),
      },
      where,
    );
  }

  #reference(element: Element, by: Affine, stack: readonly string[], where: string): void {
    const { name, xy, strans, mag, angle } = element;
    if (!this.#structures.has(name)) {
      this.#to.note(
        `references to the structure "${name.slice(0, LIMITS.name)}", which the file does not hold`,
        where,
      );
      return;
    }
    if (stack.includes(name)) {
      throw new Problem(
        'reference',
        `The structure "${name.slice(0, LIMITS.name)}" holds a reference to itself.`,
        where,
        'Take the reference out of it.',
      );
    }
    if (stack.length > LIMITS.depth) {
      throw new Problem(
        'too-many',
        `Structures are nested more than ${LIMITS.depth} deep.`,
        where,
        'Flatten the inner ones.',
      );
    }
    if (strans & 6) this.#to.note('absolute magnification or angle (taken as relative)', where);
    // Mirrored about x first, then magnified, turned and put in its place.
    const own = compose(
      turning((angle * Math.PI) / 180),
      compose(scaling(mag, mag), strans & 0x8000 ? scaling(1, -1) : SAME),
    );
    const array = element.kind === 'aref';
    const columns = array ? element.columns : 1;
    const rows = array ? element.rows : 1;
    if (array && (xy.length < 6 || columns < 1 || rows < 1)) {
      this.#to.note('arrays without rows and columns', where);
      return;
    }
    if (this.#structures.get(name)!.length === 0) return;
    for (let row = 0; row < rows; row += 1) {
      for (let column = 0; column < columns; column += 1) {
        const [u, v] = [column / columns, row / rows];
        const x = array ? xy[0] + (xy[2] - xy[0]) * u + (xy[4] - xy[0]) * v : xy[0];
        const y = array ? xy[1] + (xy[3] - xy[1]) * u + (xy[5] - xy[1]) * v : xy[1];
        this.structure(name, compose(by, compose(shift(x, y), own)), stack);
      }
    }
  }
}

function withBulges(xy: Float64Array): Float64Array {
  const out: number[] = [];
  for (let k = 0; k < xy.length; k += 2) {
    const last = out.length - 3;
    if (last >= 0 && out[last] === xy[k] && out[last + 1] === xy[k + 1]) continue;
    out.push(xy[k], xy[k + 1], 0);
  }
  return Float64Array.from(out);
}

/** Outline without its first point repeated last. */
function withoutRepeat(xy: Float64Array): Float64Array {
  const all = withBulges(xy);
  const last = all.length - 3;
  return last > 0 && all[0] === all[last] && all[1] === all[last + 1] ? all.subarray(0, last) : all;
}
