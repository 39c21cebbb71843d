import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import type { Edge } from '../../../solver/mesh/mesh.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';
import { circle } from './shapes.ts';

interface Entity {
  readonly kind: string;
  readonly codes: readonly number[];
  readonly values: readonly string[];
}

/** Reads DXF as `writeDxf` writes it: its unit, closed polylines, circles, one block and where it is inserted. */
export function readDxf(text: string): ReadMask {
  const pairs = text.split(/\r?\n/);
  let unit = 0;
  let section = '';
  let block = '';
  const loops = new LoopsByLayer();
  const shifts: [number, number][] = [];
  let inserted = false;
  const take = (e: Entity): void => {
    if (e.kind === 'BLOCK') block = e.values[e.codes.indexOf(2)] ?? '';
    if (section !== 'ENTITIES' && !(section === 'BLOCKS' && block === 'CHIP')) return;
    const one = (code: number): number => {
      const at = e.codes.indexOf(code);
      return at < 0 ? Number.NaN : Number(e.values[at]);
    };
    const layer = e.values[e.codes.indexOf(8)] ?? '';
    if (e.kind === 'LWPOLYLINE') loops.add(layer, polyline(e, unit));
    else if (e.kind === 'CIRCLE') {
      const [x, y, r] = [one(10) * unit, one(20) * unit, one(40) * unit] as const;
      loops.add(layer, circle(x, y, r));
    } else if (e.kind === 'INSERT') {
      inserted = true;
      const [columns, rows] = [one(70) || 1, one(71) || 1];
      const [dx, dy] = [(one(44) || 0) * unit, (one(45) || 0) * unit];
      for (let j = 0; j < rows; j++) {
        for (let i = 0; i < columns; i++) shifts.push([one(10) * unit + i * dx, one(20) * unit + j * dy]);
      }
    }
  };
  let codes: number[] = [];
  let values: string[] = [];
  let kind = '';
  for (let k = 0; k + 1 < pairs.length; k += 2) {
    const code = Number(pairs[k]);
    const value = pairs[k + 1]!;
    if (code === 9 && value === '$INSUNITS') {
      if (pairs[k + 3] !== '13') throw unreadable('its unit is not the micrometre');
      unit = unitSize('um') * NM_PER_M;
    }
    if (code !== 0) {
      if (kind === 'SECTION' && code === 2) section = value;
      codes.push(code);
      values.push(value);
      continue;
    }
    if (kind !== '') take({ kind, codes, values });
    kind = value;
    codes = [];
    values = [];
  }
  if (kind !== 'EOF') throw unreadable('it does not end');
  if (unit === 0) throw unreadable('it has no unit');
  return { loops: loops.map, shifts: inserted ? shifts : [[0, 0]], offArc: 0 };
}

function polyline({ codes, values }: Entity, unit: number): Edge[] {
  const points: { x: number; y: number; bulge: number; tag: number }[] = [];
  codes.forEach((code, i) => {
    const value = Number(values[i]);
    if (code === 10) points.push({ x: value * unit, y: Number.NaN, bulge: 0, tag: 0 });
    else if (code === 20) points[points.length - 1]!.y = value * unit;
    else if (code === 42) points[points.length - 1]!.bulge = value;
  });
  if (codes.indexOf(70) < 0 || values[codes.indexOf(70)] !== '1') throw unreadable('an outline is open');
  return points;
}
