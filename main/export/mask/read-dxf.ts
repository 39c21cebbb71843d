import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import { numberIn } from './bytes.ts';
import type { Loops } from './loops.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';
import { circle } from './shapes.ts';

/** Reads DXF as `writeDxf` writes it: its unit, closed polylines, circles, one block and where it is inserted. */
export function readDxf(bytes: Uint8Array): ReadMask {
  const reader = new Reader(bytes);
  reader.read();
  if (reader.kind !== 'EOF') throw unreadable('it does not end');
  if (reader.unit === 0) throw unreadable('it has no unit');
  const { loops, shifts, inserted } = reader;
  return { loops: loops.map, shifts: inserted ? shifts : [[0, 0]], offArc: 0 };
}

const LINE_FEED = 0x0a;
const RETURN = 0x0d;
/** Bytes of a point: two codes and two numbers on lines of their own. */
const LEAST_POINT = 14;

class Reader {
  unit = 0;
  /** Of the entity that is being read. */
  kind = '';
  inserted = false;
  readonly loops = new LoopsByLayer();
  readonly shifts: [number, number][] = [];
  readonly #bytes: Buffer;
  #section = '';
  #block = '';
  /** Group codes of the entity, of a polyline less those of its points, and where their values begin and end. */
  readonly #codes: number[] = [];
  readonly #from: number[] = [];
  readonly #to: number[] = [];
  /** Where the points of a polyline go, while they come. */
  #line: Loops | undefined;
  #x = Number.NaN;

  constructor(bytes: Uint8Array) {
    this.#bytes = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length);
  }

  /** Group by group: a line with the code, a line with the value. */
  read(): void {
    const bytes = this.#bytes;
    for (let at = 0; ; ) {
      const codeEnd = lineEnd(bytes, at);
      const from = codeEnd + 1;
      if (from >= bytes.length) return;
      const end = lineEnd(bytes, from);
      this.#take(numberIn(bytes, at, trimmed(bytes, codeEnd)), from, trimmed(bytes, end));
      at = end + 1;
    }
  }

  #take(code: number, from: number, to: number): void {
    const bytes = this.#bytes;
    const line = this.#line;
    if (line && code === 10) this.#x = numberIn(bytes, from, to) * this.unit;
    else if (line && code === 20) line.add(this.#x, numberIn(bytes, from, to) * this.unit, 0);
    else if (line && code === 42) line.bend(numberIn(bytes, from, to));
    else if (code === 0) {
      this.#end();
      this.kind = this.#text(from, to);
      this.#clear();
    } else {
      if (code === 9) this.#clear();
      this.#codes.push(code);
      this.#from.push(from);
      this.#to.push(to);
      if (code === 2 && this.kind === 'SECTION') this.#section = this.#text(from, to);
      else if (code === 70 && this.kind === 'SECTION') this.#variable();
      else if (code === 8 && this.kind === 'LWPOLYLINE' && this.#inChip())
        this.#line = this.loops.of(this.#text(from, to), (bytes.length - to) / LEAST_POINT);
    }
  }

  /** The groups of the next entity, or of the next variable of the header, stand by themselves. */
  #clear(): void {
    this.#codes.length = 0;
    this.#from.length = 0;
    this.#to.length = 0;
  }

  #variable(): void {
    if (this.#value(9) !== '$INSUNITS') return;
    if (this.#value(70) !== '13') throw unreadable('its unit is not the micrometre');
    this.unit = unitSize('um') * NM_PER_M;
  }

  #inChip(): boolean {
    return this.#section === 'ENTITIES' || (this.#section === 'BLOCKS' && this.#block === 'CHIP');
  }

  #text(from: number, to: number): string {
    return this.#bytes.toString('latin1', from, to);
  }

  #value(code: number): string {
    const at = this.#codes.indexOf(code);
    return at < 0 ? '' : this.#text(this.#from[at]!, this.#to[at]!);
  }

  #number(code: number): number {
    const at = this.#codes.indexOf(code);
    return at < 0 ? Number.NaN : numberIn(this.#bytes, this.#from[at]!, this.#to[at]!);
  }

  /** What the entity that is over now stands for. */
  #end(): void {
    if (this.kind === 'BLOCK') this.#block = this.#value(2);
    else if (this.#line) {
      if (this.#value(70) !== '1') throw unreadable('an outline is open');
      this.#line.close();
      this.#line = undefined;
    } else if (this.kind === 'CIRCLE' && this.#inChip()) {
      const { unit } = this;
      const [x, y, r] = [this.#number(10) * unit, this.#number(20) * unit, this.#number(40) * unit] as const;
      const loops = this.loops.of(this.#value(8), 0);
      for (const e of circle(x, y, r)) loops.add(e.x, e.y, e.bulge);
      loops.close();
    } else if (this.kind === 'INSERT' && this.#inChip()) this.#insert();
  }

  #insert(): void {
    this.inserted = true;
    const { unit } = this;
    const [x, y] = [this.#number(10) * unit, this.#number(20) * unit];
    const [columns, rows] = [this.#number(70) || 1, this.#number(71) || 1];
    const [dx, dy] = [(this.#number(44) || 0) * unit, (this.#number(45) || 0) * unit];
    for (let j = 0; j < rows; j++) {
      for (let i = 0; i < columns; i++) this.shifts.push([x + i * dx, y + j * dy]);
    }
  }
}

function lineEnd(bytes: Uint8Array, from: number): number {
  let at = from;
  while (at < bytes.length && bytes[at] !== LINE_FEED) at++;
  return at;
}

/** Where a line ends that may have a return before its line feed. */
const trimmed = (bytes: Uint8Array, end: number): number =>
  end > 0 && bytes[end - 1] === RETURN ? end - 1 : end;
