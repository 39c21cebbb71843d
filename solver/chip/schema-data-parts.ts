import type { z } from 'zod';
import type { Profile } from '../section/profile.ts';
import { BOUNDS } from './bounds.ts';
import type { Chamber, Channel, Drive, KeepOut, Layer, Point, Port, Via } from './chip.ts';
import type { ListName, PartOf } from './schema-check.ts';
import { byKind, field, kind, nm, readNm, si } from './schema-data.ts';
import { at, Fault } from './schema-fault.ts';
import { choice, id, keyed, list, pair, readId, readKeys, readList, text } from './schema-fields.ts';
import { pumpData, reservoirData } from './schema-running.ts';
import { ownTolerancesData, tolerancesData } from './schema-tolerance.ts';

/**
 * Layers, channels, chambers, vias and ports that come as data, with exactly the keys of chip.ts. Channels
 * and chambers are read by hand, as in a description, because there may be a hundred thousand of them.
 */

export function readPoint(value: unknown): Point {
  if (!Array.isArray(value) || value.length !== 2) {
    throw new Fault('quantity', 'takes a point.', 'Give a point as [x, y] in nanometres.');
  }
  return [readNm(value[0]), readNm(value[1])];
}

function readPoints(value: unknown, key: string): Point[] {
  const raw = at([key], () => readList(value, BOUNDS.points));
  let i = 0;
  try {
    const points = new Array<Point>(raw.length);
    for (; i < raw.length; i += 1) points[i] = readPoint(raw[i]);
    return points;
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(key, i);
    throw error;
  }
}

const CHANNEL = {
  id: '"feed"',
  layer: '"flow"',
  path: '[[0, 0], [1000, 0]]',
  width: '[200, 200]',
  bendRadius: '0',
};
const CHANNEL_KEYS = new Set([...Object.keys(CHANNEL), 'depth', 'tolerance']);
const CHAMBER = { id: '"well"', layer: '"flow"', outline: '[[0, 0], [4000, 0], [4000, 2000]]' };
const CHAMBER_KEYS = new Set(Object.keys(CHAMBER));

function readChannel(value: unknown): Channel {
  const raw = readKeys(value, CHANNEL_KEYS, CHANNEL);
  return {
    id: at(['id'], () => readId(raw.id)),
    layer: at(['layer'], () => readId(raw.layer)),
    path: readPoints(raw.path, 'path'),
    width: at(['width'], () => {
      const [first, last] = readList(raw.width, 2, 2);
      return [readNm(first), readNm(last)];
    }),
    bendRadius: at(['bendRadius'], () => readNm(raw.bendRadius)),
    ...(raw.depth === undefined ? {} : { depth: at(['depth'], () => readNm(raw.depth)) }),
    ...(raw.tolerance === undefined
      ? {}
      : { tolerance: at(['tolerance'], () => ownTolerancesData(raw.tolerance)) }),
  };
}

function readChamber(value: unknown): Chamber {
  const raw = readKeys(value, CHAMBER_KEYS, CHAMBER);
  return {
    id: at(['id'], () => readId(raw.id)),
    layer: at(['layer'], () => readId(raw.layer)),
    outline: readPoints(raw.outline, 'outline'),
  };
}

const profile = byKind<Profile>({
  rectangle: keyed({ kind: kind('rectangle') }, {}),
  rounded: keyed({ kind: kind('rounded') }, {}),
  circle: keyed({ kind: kind('circle') }, {}),
  ellipse: keyed({ kind: kind('ellipse') }, {}),
  triangle: keyed({ kind: kind('triangle') }, {}),
  trapezoid: keyed({ kind: kind('trapezoid'), wallAngle: si }, { wallAngle: '54.74' }),
  polygon: keyed(
    { kind: kind('polygon'), points: list(pair(si), BOUNDS.profilePoints, 3) },
    { points: '[]' },
  ),
});

const drive = byKind<Drive>({
  pressure: keyed({ kind: kind('pressure'), pressure: si }, { pressure: '0' }),
  flow: keyed({ kind: kind('flow'), flow: si }, { flow: '0' }),
  head: keyed({ kind: kind('head'), head: si }, { head: '0' }),
  closed: keyed({ kind: kind('closed') }, {}),
});

const tolerance = field(tolerancesData);

const layer: z.ZodType<Layer> = keyed(
  {
    id: id(),
    depth: nm,
    profile,
    fillet: nm,
    tolerance: tolerance.exactOptional(),
    roof: keyed(
      {
        modulus: si,
        thickness: si,
        poisson: si,
        law: choice(['thick', 'plate']).exactOptional(),
        constant: si.exactOptional(),
      },
      { modulus: '2e6', thickness: '0.005', poisson: '0.5' },
    ).exactOptional(),
  },
  { id: '"flow"', depth: '50000', profile: '{ "kind": "rectangle" }', fillet: '0' },
);

const via: z.ZodType<Via> = keyed(
  { id: id(), at: field(readPoint), layers: pair(id()), diameter: nm },
  { id: '"v1"', at: '[0, 0]', layers: '["flow", "upper"]', diameter: '300000' },
);

const port: z.ZodType<Port> = keyed(
  {
    id: id(),
    at: field(readPoint),
    layer: id(),
    diameter: nm,
    drive,
    tubing: list(keyed({ bore: si, length: si }, { bore: '5e-4', length: '0.3' }), BOUNDS.tubing),
    pump: pumpData.exactOptional(),
    reservoir: reservoirData.exactOptional(),
  },
  { id: '"in"', at: '[0, 0]', layer: '"flow"', diameter: '0', drive: '{ "kind": "closed" }', tubing: '[]' },
);

const keepOut: z.ZodType<KeepOut> = keyed(
  {
    id: id(),
    layer: id().exactOptional(),
    outline: list(field(readPoint), BOUNDS.points),
    clearance: nm,
    note: text(BOUNDS.note, true).exactOptional(),
  },
  { id: '"clamp"', outline: '[[0, 0], [4000, 0], [4000, 2000]]', clearance: '0' },
);

export const PART: { readonly [L in ListName]: z.ZodType<PartOf[L]> } = {
  layers: layer,
  channels: field(readChannel),
  chambers: field(readChamber),
  vias: via,
  ports: port,
  keepOuts: keepOut,
};
