import { NM_PER_M } from '../../../solver/chip/units.ts';
import { CHIP, RECORD } from './gdsii.ts';
import type { Loops } from './loops.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';

/** Reads a GDSII stream as `writeGdsii` writes it: boundaries of the chip's structure, and where it is set. */
export function readGdsii(bytes: Uint8Array): ReadMask {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const loops = new LoopsByLayer();
  const shifts: [number, number][] = [];
  let unit = 0;
  let structure = '';
  let element = 0;
  let layer = 0;
  let datatype = 0;
  let columns = 1;
  let rows = 1;
  /** Where the element's points begin and end. */
  let points = 0;
  let pointsEnd = 0;
  let ended = false;
  for (let at = 0; at + 4 <= bytes.length && !ended; ) {
    const size = view.getUint16(at);
    const record = view.getUint16(at + 2);
    if (size < 4 || at + size > bytes.length) throw unreadable('a record is cut short');
    const body = at + 4;
    switch (record) {
      case RECORD.UNITS:
        unit = realOf(bytes, body + 8) * NM_PER_M;
        if (!(Math.abs(unit - 1) < 1e-12)) throw unreadable('its database unit is not the nanometre');
        break;
      case RECORD.STRNAME:
        structure = textOf(bytes, body, size - 4);
        break;
      case RECORD.BOUNDARY:
      case RECORD.PATH:
      case RECORD.SREF:
      case RECORD.AREF:
      case RECORD.TEXT:
        element = record;
        columns = 1;
        rows = 1;
        break;
      case RECORD.LAYER:
        layer = view.getInt16(body);
        break;
      case RECORD.DATATYPE:
        datatype = view.getInt16(body);
        break;
      case RECORD.COLROW:
        columns = view.getInt16(body);
        rows = view.getInt16(body + 2);
        break;
      case RECORD.XY:
        points = body;
        pointsEnd = at + size;
        break;
      case RECORD.ENDEL:
        if (element === RECORD.BOUNDARY && structure === CHIP)
          addBoundary(
            loops.of(`${layer}/${datatype}`, (bytes.length - points) / POINT),
            view,
            points,
            pointsEnd,
          );
        else if (element === RECORD.SREF || element === RECORD.AREF) {
          const [x, y] = [view.getInt32(points), view.getInt32(points + 4)];
          const dx = element === RECORD.AREF ? (view.getInt32(points + 8) - x) / columns : 0;
          const dy = element === RECORD.AREF ? (view.getInt32(points + 20) - y) / rows : 0;
          for (let j = 0; j < rows; j++)
            for (let i = 0; i < columns; i++) shifts.push([x + i * dx, y + j * dy]);
        }
        element = 0;
        break;
      case RECORD.ENDLIB:
        ended = true;
        break;
    }
    at += size;
  }
  if (!ended) throw unreadable('it does not end');
  if (unit === 0) throw unreadable('it has no unit');
  return { loops: loops.map, shifts: shifts.length > 0 ? shifts : [[0, 0]], offArc: 0 };
}

function addBoundary(loops: Loops, view: DataView, from: number, end: number): void {
  const last = end - POINT;
  if (end - from < 4 * POINT || view.getInt32(last) !== view.getInt32(from)) throw unreadable(OPEN);
  if (view.getInt32(last + 4) !== view.getInt32(from + 4)) throw unreadable(OPEN);
  for (let k = from; k < last; k += POINT) loops.add(view.getInt32(k), view.getInt32(k + 4), 0);
  loops.close();
}

/** Bytes of a point. */
const POINT = 8;
const OPEN = 'a boundary is open';

function textOf(bytes: Uint8Array, at: number, size: number): string {
  let text = '';
  for (let i = at; i < at + size && bytes[i] !== 0; i++) text += String.fromCharCode(bytes[i]!);
  return text;
}

function realOf(bytes: Uint8Array, at: number): number {
  let fraction = 0;
  for (let i = 7; i > 0; i--) fraction = (fraction + bytes[at + i]!) / 256;
  const value = fraction * 16 ** ((bytes[at]! & 0x7f) - 64);
  return (bytes[at]! & 0x80) === 0 ? value : -value;
}
