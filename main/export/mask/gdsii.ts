import type { Path64 } from 'clipper2-ts';
import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import { LINE, legend, letterHeight, PARTS, type Part } from './cells.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { escaped } from './names.ts';
import { circle, flatPaths } from './shapes.ts';
import { split } from './split.ts';

/**
 * Masks as a GDSII stream (release 6), by its published structure: user unit 1 µm, database unit 1 nm. Layer
 * n is the chip's n-th layer; datatype 0 holds its cavities, 1 marks, 2 outline, 3 lane. Polygons have no
 * holes and no more than 200 points; texts beyond ASCII are spelt \U+XXXX.
 */

export const RECORD = {
  HEADER: 0x0002,
  BGNLIB: 0x0102,
  LIBNAME: 0x0206,
  UNITS: 0x0305,
  ENDLIB: 0x0400,
  BGNSTR: 0x0502,
  STRNAME: 0x0606,
  ENDSTR: 0x0700,
  BOUNDARY: 0x0800,
  PATH: 0x0900,
  SREF: 0x0a00,
  AREF: 0x0b00,
  TEXT: 0x0c00,
  LAYER: 0x0d02,
  DATATYPE: 0x0e02,
  XY: 0x1003,
  ENDEL: 0x1100,
  SNAME: 0x1206,
  COLROW: 0x1302,
  TEXTTYPE: 0x1602,
  STRING: 0x1906,
} as const;

export const CHIP = 'CHIP';
const WAFER = 'WAFER';
/** Layer of the wafer's rim. */
const WAFER_LAYER = 0;
const RELEASE = 600;
/** Points of a boundary, the first one again at its end included. */
const MOST_POINTS = 200;
/** A string record holds this much. */
const MOST_TEXT = 500;

export const gdsiiLayer = (plane: { readonly number: number }, part: Part): string =>
  `${plane.number}/${PARTS.indexOf(part)}`;

class Stream {
  #bytes = new Uint8Array(1 << 16);
  #view = new DataView(this.#bytes.buffer);
  #at = 0;

  #room(size: number): number {
    if (this.#at + size > this.#bytes.length) {
      const more = new Uint8Array(Math.max(2 * this.#bytes.length, this.#at + size));
      more.set(this.#bytes.subarray(0, this.#at));
      this.#bytes = more;
      this.#view = new DataView(more.buffer);
    }
    const at = this.#at;
    this.#at += size;
    return at;
  }

  #head(record: number, size: number): number {
    const at = this.#room(4 + size);
    this.#view.setUint16(at, 4 + size);
    this.#view.setUint16(at + 2, record);
    return at + 4;
  }

  none(record: number): void {
    this.#head(record, 0);
  }

  short(record: number, ...values: readonly number[]): void {
    const at = this.#head(record, 2 * values.length);
    for (let i = 0; i < values.length; i++) this.#view.setInt16(at + 2 * i, values[i]!);
  }

  points(points: readonly { readonly x: number; readonly y: number }[], closed: boolean): void {
    const count = points.length + (closed ? 1 : 0);
    const at = this.#head(RECORD.XY, 8 * count);
    const view = this.#view;
    for (let i = 0; i < count; i++) {
      const { x, y } = points[i === points.length ? 0 : i]!;
      view.setInt32(at + 8 * i, Math.round(x));
      view.setInt32(at + 8 * i + 4, Math.round(y));
    }
  }

  inverses(record: number, ...values: readonly number[]): void {
    const at = this.#head(record, 8 * values.length);
    values.forEach((value, i) => {
      this.#bytes.set(inverse8(value), at + 8 * i);
    });
  }

  ascii(record: number, text: string): void {
    const size = text.length + (text.length % 2);
    const at = this.#head(record, size);
    for (let i = 0; i < text.length; i++) this.#bytes[at + i] = text.charCodeAt(i);
    if (size > text.length) this.#bytes[at + text.length] = 0;
  }

  get bytes(): Uint8Array {
    return this.#bytes.slice(0, this.#at);
  }
}

/**
 * One over `whole` as excess-64 base-16 floating point: sign, 7 bits of exponent, 56 bits of fraction in
 * [1/16, 1), rounded from the exact value (a double has three bits less).
 */
export function inverse8(whole: number): Uint8Array {
  const den = BigInt(whole);
  let exponent = 65;
  // 2^56 in the fraction's place stands for 1
  let scaled = 1n << 52n;
  while (scaled / den < 1n << 52n) {
    scaled <<= 4n;
    exponent -= 1;
  }
  const fraction = (2n * scaled + den) / (2n * den);
  const out = new Uint8Array(8);
  new DataView(out.buffer).setBigUint64(0, (BigInt(exponent) << 56n) | fraction);
  return out;
}

export function writeGdsii(model: MaskModel): Uint8Array {
  const { planes, wafer, centre, made, settings } = model;
  const stream = new Stream();
  const time = [made.getUTCFullYear(), made.getUTCMonth() + 1, made.getUTCDate()];
  const stamp = [...time, made.getUTCHours(), made.getUTCMinutes(), made.getUTCSeconds()];
  stream.short(RECORD.HEADER, RELEASE);
  stream.short(RECORD.BGNLIB, ...stamp, ...stamp);
  stream.ascii(RECORD.LIBNAME, 'CHANNELWRIGHT');
  // database unit in user units (1 µm), database unit in m
  stream.inverses(RECORD.UNITS, NM_PER_M * unitSize('um'), NM_PER_M);
  const structure = (name: string, elements: () => void): void => {
    stream.short(RECORD.BGNSTR, ...stamp, ...stamp);
    stream.ascii(RECORD.STRNAME, name);
    elements();
    stream.none(RECORD.ENDSTR);
  };
  structure(CHIP, () => {
    for (const plane of planes) putPlane(stream, plane, settings.chordError, settings.labels);
    if (!wafer) putNotes(stream, model, model.field.x0, model.field.y0);
  });
  if (wafer) {
    structure(WAFER, () => {
      const { pitch, blocks, diameter, edge } = wafer;
      for (const { x, y, columns, rows } of blocks) {
        const [x0, y0] = [x - centre[0], y - centre[1]];
        const many = columns * rows > 1;
        stream.none(many ? RECORD.AREF : RECORD.SREF);
        stream.ascii(RECORD.SNAME, CHIP);
        const points = [{ x: x0, y: y0 }];
        if (many) {
          stream.short(RECORD.COLROW, columns, rows);
          points.push({ x: x0 + columns * pitch[0], y: y0 }, { x: x0, y: y0 + rows * pitch[1] });
        }
        stream.points(points, false);
        stream.none(RECORD.ENDEL);
      }
      for (const radius of [diameter / 2, ...(edge > 0 ? [diameter / 2 - edge] : [])]) putRim(stream, radius);
      putNotes(stream, model, -diameter / 2, -diameter / 2);
    });
  }
  stream.none(RECORD.ENDLIB);
  return stream.bytes;
}

function putPlane(stream: Stream, plane: MaskPlane, chordError: number, labels: boolean): void {
  for (const part of PARTS) {
    const datatype = PARTS.indexOf(part);
    for (const shape of plane[part]) {
      for (const polygon of split(flatPaths(shape, chordError), MOST_POINTS - 1)) {
        stream.none(RECORD.BOUNDARY);
        stream.short(RECORD.LAYER, plane.number);
        stream.short(RECORD.DATATYPE, datatype);
        stream.points(polygon, true);
        stream.none(RECORD.ENDEL);
      }
    }
  }
  if (labels) for (const { text, x, y } of plane.labels) putText(stream, plane.number, x, y, text);
}

/** A line without width: seen, not exposed. Its corners lie on the circle. */
function putRim(stream: Stream, radius: number): void {
  const [loop] = flatPaths([circle(0, 0, radius)], radius * 2e-4);
  stream.none(RECORD.PATH);
  stream.short(RECORD.LAYER, WAFER_LAYER);
  stream.short(RECORD.DATATYPE, 0);
  stream.points(loop as Path64, true);
  stream.none(RECORD.ENDEL);
}

function putNotes(stream: Stream, model: MaskModel, x: number, y: number): void {
  if (!model.settings.labels) return;
  const height = letterHeight(model.field);
  const unit = 'Unit: 1 user unit = 1 micrometre (um), database unit 1 nanometre.';
  const lines = legend(model, model.planes, unit, 70);
  lines.forEach((line, i) => {
    putText(stream, WAFER_LAYER, x, y - (2 + i) * LINE * height, line);
  });
}

function putText(stream: Stream, layer: number, x: number, y: number, text: string): void {
  stream.none(RECORD.TEXT);
  stream.short(RECORD.LAYER, layer);
  stream.short(RECORD.TEXTTYPE, 0);
  stream.points([{ x, y }], false);
  stream.ascii(RECORD.STRING, escaped(text).slice(0, MOST_TEXT));
  stream.none(RECORD.ENDEL);
}
