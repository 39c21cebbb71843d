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

/** What goes along through the lists. */
interface Along {
  /** Points left to read: counted before any is built. */
  points: number;
  /** Channels of one width share one pair: a hundred thousand small lists less to keep. */
  readonly widths: Map<number, readonly [number, number]>;
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

/**
 * The points of a path or outline, put in the place of what was read: the value is of this description
 * alone, and a second tree of small lists is what a long one would spend most of its time on.
 */
function readPoints(value: unknown, unit: LengthUnit, scale: number, along: Along): Point[] {
  const raw = readList(value, BOUNDS.points);
  along.points -= raw.length;
  if (along.points < 0) {
    throw new Fault(
      'too-many',
      `takes the points of all paths and outlines together beyond ${BOUNDS.points.toLocaleString('en')}.`,
      'Draw with fewer points; a round bend takes one vertex and a bendRadius.',
    );
  }
  let i = 0;
  try {
    for (; i < raw.length; i += 1) toNanometres(raw, i, unit, scale);
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(i);
    throw error;
  }
  return raw as Point[];
}

function toNanometres(raw: unknown[], i: number, unit: LengthUnit, scale: number): void {
  const value = raw[i];
  if (Array.isArray(value) && value.length === 2) {
    const x: unknown = value[0];
    const y: unknown = value[1];
    if (typeof x === 'number' && typeof y === 'number') {
      const nmX = x * scale;
      const nmY = y * scale;
      if (nmX >= 0 && nmX <= BOUNDS.coordinate && nmY >= 0 && nmY <= BOUNDS.coordinate) {
        value[0] = Math.round(nmX);
        value[1] = Math.round(nmY);
        return;
      }
    }
  }
  raw[i] = readPoint(value, unit, scale);
}

function readWidth(value: unknown, unit: LengthUnit, scale: number, along: Along): readonly [number, number] {
  if (!Array.isArray(value)) {
    const width = planLength(value, unit, scale);
    let pair = along.widths.get(width);
    if (pair === undefined) {
      pair = [width, width];
      along.widths.set(width, pair);
    }
    return pair;
  }
  const [first, last] = readList(value, 2, 2);
  return [at([0], () => planLength(first, unit, scale)), at([1], () => planLength(last, unit, scale))];
}

/**
 * One channel, without the closures and lists that the general way takes for each field: they would be
 * most of what the reading of a large description leaves to be cleared away.
 */
function readChannel(value: unknown, unit: LengthUnit, scale: number, along: Along): Channel {
  const raw = readKeys(value, CHANNEL_KEYS, CHANNEL_NEEDS);
  let key = 'id';
  try {
    const id = readId(raw.id);
    key = 'layer';
    const layer = readId(raw.layer);
    key = 'path';
    const path = readPoints(raw.path, unit, scale, along);
    key = 'width';
    const width = readWidth(raw.width, unit, scale, along);
    key = 'bendRadius';
    const bendRadius = raw.bendRadius === undefined ? 0 : planLength(raw.bendRadius, unit, scale);
    if (raw.depth === undefined && raw.tolerance === undefined) return { id, layer, path, width, bendRadius };
    key = 'depth';
    const depth = raw.depth === undefined ? {} : { depth: planLength(raw.depth, unit, scale) };
    key = 'tolerance';
    const tolerance = raw.tolerance === undefined ? {} : { tolerance: readOwnTolerances(raw.tolerance) };
    return { id, layer, path, width, bendRadius, ...depth, ...tolerance };
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(key);
    throw error;
  }
}

function readChamber(value: unknown, unit: LengthUnit, scale: number, along: Along): Chamber {
  const raw = readKeys(value, CHAMBER_KEYS, CHAMBER_NEEDS);
  return {
    id: at(['id'], () => readId(raw.id)),
    layer: at(['layer'], () => readId(raw.layer)),
    outline: at(['outline'], () => readPoints(raw.outline, unit, scale, along)),
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
  const along: Along = { points: BOUNDS.points, widths: new Map() };
  return {
    channels: readEach('channels', channels, (entry) => readChannel(entry, unit, scale, along)),
    chambers: readEach('chambers', chambers, (entry) => readChamber(entry, unit, scale, along)),
  };
}
