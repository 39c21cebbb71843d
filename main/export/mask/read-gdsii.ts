import { NM_PER_M } from '../../../solver/chip/units.ts';
import type { Edge } from '../../../solver/mesh/mesh.ts';
import { CHIP, RECORD } from './gdsii.ts';
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
  let points: [number, number][] = [];
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
        points = [];
        for (let k = body; k < at + size; k += 8) points.push([view.getInt32(k), view.getInt32(k + 4)]);
        break;
      case RECORD.ENDEL:
        if (element === RECORD.BOUNDARY && structure === CHIP)
          loops.add(`${layer}/${datatype}`, boundary(points));
        else if (element === RECORD.SREF || element === RECORD.AREF) {
          const [x, y] = points[0]!;
          const dx = element === RECORD.AREF ? (points[1]![0] - x) / columns : 0;
          const dy = element === RECORD.AREF ? (points[2]![1] - y) / rows : 0;
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

function boundary(points: readonly (readonly [number, number])[]): Edge[] {
  const [first, last] = [points[0]!, points[points.length - 1]!];
  if (points.length < 4 || first[0] !== last[0] || first[1] !== last[1])
    throw unreadable('a boundary is open');
  return points.slice(0, -1).map(([x, y]) => ({ x, y, bulge: 0, tag: 0 }));
}

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
