import { BOUNDS } from './bounds.ts';
import type { Chamber, Channel, LengthUnit, Point } from './chip.ts';
import { at, Fault } from './schema-fault.ts';
import { readId, readKeys, readList, readPlan } from './schema-fields.ts';
import { readOwnTolerances } from './schema-tolerance.ts';
import { NM_PER_UNIT } from './units-write.ts';

/**
 * The long lists of a description, channels and chambers, read by hand: a chip may hold a hundred
 * thousand of them, and a general schema costs ten times as much. Everything else is read by zod
 * (description-parts.ts), by the same rules.
 */

const CHANNEL_KEYS = new Set(['id', 'layer', 'path', 'width', 'bendRadius', 'depth', 'tolerance']);
const CHANNEL_NEEDS = {
  id: '"feed"',
  layer: '"flow"',
  path: '[[1000, 13000], [20000, 13000]]',
  width: '200',
};
const CHAMBER_KEYS = new Set(['id', 'layer', 'outline']);
const CHAMBER_NEEDS = { id: '"well"', layer: '"flow"', outline: '[[0, 0], [4000, 0], [4000, 2000]]' };

/** Points left to read: counted before any is built. */
interface Budget {
  points: number;
}

/** A plan length; the ordinary number within the plan takes the short way. */
function planLength(value: unknown, unit: LengthUnit, scale: number): number {
  if (typeof value === 'number') {
    const nm = value * scale;
    if (nm >= 0 && nm <= BOUNDS.coordinate) return Math.round(nm);
  }
  return readPlan(value, unit);
}

export function readPoint(value: unknown, unit: LengthUnit, scale: number): Point {
  if (!Array.isArray(value) || value.length !== 2) {
    throw new Fault('quantity', 'takes a point.', 'Write a point as [x, y], such as [1000, 13000].');
  }
  try {
    return [planLength(value[0], unit, scale), planLength(value[1], unit, scale)];
  } catch (error) {
    // The short way does not note which of the two it was; it is found again here.
    at([0], () => readPlan(value[0], unit));
    at([1], () => readPlan(value[1], unit));
    throw error;
  }
}

function readPoints(value: unknown, key: string, unit: LengthUnit, scale: number, budget: Budget): Point[] {
  const raw = at([key], () => readList(value, BOUNDS.points));
  budget.points -= raw.length;
  if (budget.points < 0) {
    throw new Fault(
      'too-many',
      `takes the points of all paths and outlines together beyond ${BOUNDS.points.toLocaleString('en')}.`,
      'Draw with fewer points; a round bend takes one vertex and a bendRadius.',
      [key],
    );
  }
  const points = new Array<Point>(raw.length);
  let i = 0;
  try {
    for (; i < raw.length; i += 1) points[i] = readPoint(raw[i], unit, scale);
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(key, i);
    throw error;
  }
  return points;
}

function readWidth(value: unknown, unit: LengthUnit, scale: number): [number, number] {
  if (!Array.isArray(value)) {
    const width = planLength(value, unit, scale);
    return [width, width];
  }
  const [first, last] = readList(value, 2, 2);
  return [at([0], () => planLength(first, unit, scale)), at([1], () => planLength(last, unit, scale))];
}

function readChannel(value: unknown, unit: LengthUnit, scale: number, budget: Budget): Channel {
  const raw = readKeys(value, CHANNEL_KEYS, CHANNEL_NEEDS);
  return {
    id: at(['id'], () => readId(raw.id)),
    layer: at(['layer'], () => readId(raw.layer)),
    path: readPoints(raw.path, 'path', unit, scale, budget),
    width: at(['width'], () => readWidth(raw.width, unit, scale)),
    bendRadius:
      raw.bendRadius === undefined ? 0 : at(['bendRadius'], () => planLength(raw.bendRadius, unit, scale)),
    ...(raw.depth === undefined ? {} : { depth: at(['depth'], () => planLength(raw.depth, unit, scale)) }),
    ...(raw.tolerance === undefined
      ? {}
      : { tolerance: at(['tolerance'], () => readOwnTolerances(raw.tolerance)) }),
  };
}

function readChamber(value: unknown, unit: LengthUnit, scale: number, budget: Budget): Chamber {
  const raw = readKeys(value, CHAMBER_KEYS, CHAMBER_NEEDS);
  return {
    id: at(['id'], () => readId(raw.id)),
    layer: at(['layer'], () => readId(raw.layer)),
    outline: readPoints(raw.outline, 'outline', unit, scale, budget),
  };
}

function readEach<T>(list: 'channels' | 'chambers', value: unknown, read: (entry: unknown) => T): T[] {
  if (value === undefined) return [];
  const raw = at([list], () => readList(value, BOUNDS[list]));
  const entries = new Array<T>(raw.length);
  let i = 0;
  try {
    for (; i < raw.length; i += 1) entries[i] = read(raw[i]);
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(list, i);
    throw error;
  }
  return entries;
}

/** The channels and chambers of a description whose plan lengths are in `unit`. Throws `Fault`. */
export function readPlanLists(
  channels: unknown,
  chambers: unknown,
  unit: LengthUnit,
): { channels: Channel[]; chambers: Chamber[] } {
  const scale = NM_PER_UNIT[unit];
  const budget = { points: BOUNDS.points };
  return {
    channels: readEach('channels', channels, (entry) => readChannel(entry, unit, scale, budget)),
    chambers: readEach('chambers', chambers, (entry) => readChamber(entry, unit, scale, budget)),
  };
}
