import type { BringInOutcome, BringInSettings } from '../../main/contract/bring-in.ts';
import { bringIn } from '../../main/import/bring-in.ts';
import type { Drawing, DrawnLayer } from '../../main/import/drawing.ts';
import { readDrawing } from '../../main/import/read-drawing.ts';
import { Work } from '../../main/import/work.ts';

export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);

export function drawingOf(file: string | Uint8Array): Drawing {
  return readDrawing(typeof file === 'string' ? bytesOf(file) : file, new Work());
}

export function layerOf(drawing: Drawing, name: string): DrawnLayer {
  const layer = drawing.layers.find((one) => one.name === name);
  if (!layer) throw new Error(`no layer ${name}: ${drawing.layers.map((one) => one.name).join()}`);
  return layer;
}

/** x, y and bulge, each to a millionth. */
export const rounded = (vertices: Float64Array): number[] =>
  Array.from(vertices, (value) => Math.round(value * 1e6) / 1e6 + 0);

export const USUAL: BringInSettings = {
  unit: null,
  depth: 50_000,
  roles: {},
  lineWidth: null,
  portsAtEnds: true,
};

export function chipOf(file: string | Uint8Array, settings: Partial<BringInSettings> = {}): BringInOutcome {
  const bytes = typeof file === 'string' ? bytesOf(file) : file;
  return bringIn(bytes, 'drawing', { ...USUAL, ...settings }, new Work());
}

/** A DXF of entities given as pairs; `head` pairs go into the header, `blocks` between the two. */
export function dxf(
  entities: readonly (string | number)[],
  blocks: readonly (string | number)[] = [],
  unit = 13,
): string {
  const header = unit === 0 ? [] : [9, '$INSUNITS', 70, unit];
  return [
    ...[0, 'SECTION', 2, 'HEADER', ...header, 0, 'ENDSEC'],
    ...(blocks.length > 0 ? [0, 'SECTION', 2, 'BLOCKS', ...blocks, 0, 'ENDSEC'] : []),
    ...[0, 'SECTION', 2, 'ENTITIES', ...entities, 0, 'ENDSEC', 0, 'EOF'],
  ].join('\n');
}

/** A closed polyline of points x, y or x, y, bulge. */
export function outline(points: readonly (readonly number[])[], layer = 'FLOW'): (string | number)[] {
  return [
    ...[0, 'LWPOLYLINE', 8, layer, 90, points.length, 70, 1],
    ...points.flatMap(([x, y, bulge]) => [10, x, 20, y, ...(bulge ? [42, bulge] : [])]),
  ];
}

/** GDSII records: type and data type, then the data. */
export function record(type: number, data: number, values: readonly number[] | string = []): number[] {
  const bytes: number[] = [];
  if (typeof values === 'string') {
    for (const c of values) bytes.push(c.charCodeAt(0));
    if (bytes.length % 2 === 1) bytes.push(0);
  } else if (data === 2) for (const v of values) bytes.push((v >> 8) & 255, v & 255);
  else if (data === 3)
    for (const v of values) bytes.push((v >> 24) & 255, (v >> 16) & 255, (v >> 8) & 255, v & 255);
  else bytes.push(...values);
  const length = bytes.length + 4;
  return [length >> 8, length & 255, type, data, ...bytes];
}

/** 1e-3 and 1e-9 as the format's eight-byte reals: bytes computed by hand from their definition. */
const UNITS = [
  0x3e, 0x41, 0x89, 0x37, 0x4b, 0xc6, 0xa7, 0xf0, 0x39, 0x44, 0xb8, 0x2f, 0xa0, 0x9b, 0x5a, 0x54,
];
export const REAL = {
  one: [0x41, 0x10, 0, 0, 0, 0, 0, 0],
  two: [0x41, 0x20, 0, 0, 0, 0, 0, 0],
  ninety: [0x42, 0x5a, 0, 0, 0, 0, 0, 0],
};

export function gds(structures: Readonly<Record<string, readonly number[][]>>): Uint8Array {
  const dates = Array<number>(12).fill(0);
  return Uint8Array.from([
    ...record(0x00, 2, [600]),
    ...record(0x01, 2, dates),
    ...record(0x02, 6, 'LIB'),
    ...record(0x03, 5, UNITS),
    ...Object.entries(structures).flatMap(([name, elements]) => [
      ...record(0x05, 2, dates),
      ...record(0x06, 6, name),
      ...elements.flat(),
      ...record(0x07, 0),
    ]),
    ...record(0x04, 0),
  ]);
}

export function boundary(xy: readonly number[], layer = 1): number[] {
  return [
    ...record(0x08, 0),
    ...record(0x0d, 2, [layer]),
    ...record(0x0e, 2, [0]),
    ...record(0x10, 3, [...xy, xy[0], xy[1]]),
    ...record(0x11, 0),
  ];
}
