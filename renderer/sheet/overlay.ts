import type { Chip } from '../../solver/chip/chip.ts';
import type { PieceResult, Result } from '../../solver/chip/result.ts';
import { type Kind, metres } from '../../solver/chip/units.ts';
import type { ShownGraph } from '../solving/shown-graph.ts';
import { bandOf } from '../words/band.ts';
import { chamberValues } from './chamber-values.ts';
import { sitePressures } from './site-pressures.ts';

/** What the colour of the fluid shows. */
export const OVERLAYS = [
  'share',
  'speed',
  'pressure',
  'wall shear',
  'time',
  'off target',
  'depth',
  'findings',
] as const;
export type Overlay = (typeof OVERLAYS)[number];

/** A value and where along its channel it holds, nm. */
export interface Span {
  readonly start: number;
  readonly stop: number;
  readonly value: number | null;
  /** How far the value may be off, relative to it, where that is known. */
  readonly band?: number | null;
}

export interface Shown {
  readonly overlay: Overlay;
  readonly kind: Kind;
  /** "peak wall shear in each channel and junction" */
  readonly says: string;
  /** By channel id, in path order; null where there is no value. */
  readonly values: ReadonlyMap<string, readonly Span[]>;
  /** By chamber id; those without a value are not there. Speed and shear are shown as fields, from near. */
  readonly chambers: ReadonlyMap<string, number>;
  /** Solved junctions that have a value of their own: place (nm) and value. */
  readonly places: readonly { readonly at: readonly [number, number]; readonly value: number }[];
  /** Ends of the ramp. */
  readonly from: number;
  readonly to: number;
  readonly ramp: 'amount' | 'deviation';
  /** The limit that holds everywhere: what is beyond it misses it. */
  readonly limit: number | null;
  /** A limit to mark on the legend: that one, or where there is none the lowest that holds for some places. */
  readonly mark: { readonly at: number; readonly says: string } | null;
}

const SAYS: Readonly<Record<Overlay, string>> = {
  share: 'share of the flow that enters the chip',
  speed: 'mean speed of the flow, marks in its direction',
  pressure: 'pressure, over each channel and in chambers',
  'wall shear': 'peak wall shear in each channel and junction',
  time: 'time a liquid stays in each channel and chamber',
  'off target': 'how far each target is missed',
  depth: 'depth of the layer',
  findings: 'channels and chambers that a finding names',
};
const KINDS: Readonly<Record<Overlay, Kind>> = {
  share: 'share',
  speed: 'velocity',
  pressure: 'pressure',
  'wall shear': 'stress',
  time: 'time',
  'off target': 'share',
  depth: 'length',
  findings: 'number',
};

function pieceValue(
  overlay: Overlay,
  piece: PieceResult,
  total: number,
  pressures: ReadonlyMap<string, number>,
): number | null {
  switch (overlay) {
    case 'share':
      return piece.flow === null || total === 0 ? null : Math.abs(piece.flow) / total;
    case 'speed':
      return piece.meanVelocity === null ? null : Math.abs(piece.meanVelocity);
    case 'pressure': {
      const from = pressures.get(piece.from);
      return from === undefined ? null : from - piece.pressureDrop / 2;
    }
    case 'wall shear':
      return piece.peakWallShear;
    case 'time':
      return piece.residenceTime;
    default:
      return null;
  }
}

/** What to colour, for a chip, its result and its graph (null while unsolved). */
export function shown(
  overlay: Overlay,
  chip: Chip,
  result: Result | null,
  graph: ShownGraph | null = null,
): Shown {
  const values = new Map<string, Span[]>();
  if (overlay === 'depth') {
    const depths = new Map(chip.layers.map((layer) => [layer.id, layer.depth / 1e9]));
    for (const { id, layer, depth } of chip.channels)
      values.set(id, whole(depth === undefined ? (depths.get(layer) ?? null) : metres(depth)));
  } else if (overlay === 'findings') {
    for (const finding of result?.findings ?? []) {
      const id = finding.where.replace(/#\d+$/, '');
      if (chip.channels.some((channel) => channel.id === id))
        values.set(id, whole(finding.severity === 'note' ? 0.3 : 1));
    }
  } else if (result && overlay === 'off target') {
    for (const target of result.targets) {
      const off = target.got === null ? null : target.got / target.wanted - 1;
      const spans = whole(off, off === null ? null : target.band);
      if (target.channel !== undefined) values.set(target.channel, spans);
      else for (const id of channelsAt(chip, target.port!)) values.set(id, spans);
    }
  } else if (result) {
    const total = result.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);
    const pressures = overlay === 'pressure' ? sitePressures(result) : new Map<string, number>();
    for (const channel of result.channels)
      values.set(
        channel.id,
        channel.pieces.map((piece) => ({
          start: (piece.along?.[0] ?? 0) * 1e9,
          stop: (piece.along?.[1] ?? piece.length) * 1e9,
          value: pieceValue(overlay, piece, total, pressures),
          band:
            overlay === 'share' || overlay === 'wall shear'
              ? bandOf(result, overlay === 'share' ? 'share' : 'shear', piece)
              : null,
        })),
      );
  }
  const chambers = chamberValues(overlay, chip, result, graph);
  const limit = overlay === 'wall shear' ? shearLimit(chip) : null;
  const mark = overlay === 'wall shear' ? markOf(limit, chip) : null;
  const places = overlay === 'wall shear' ? junctionPeaks(result) : [];
  return {
    overlay,
    kind: KINDS[overlay],
    says: SAYS[overlay],
    values,
    chambers,
    places,
    ramp: overlay === 'off target' ? 'deviation' : 'amount',
    limit,
    mark,
    ...range(overlay, values, chambers, places, mark?.at ?? null, chip),
  };
}

const whole = (value: number | null, band: number | null = null): Span[] => [
  { start: 0, stop: Number.POSITIVE_INFINITY, value, band },
];

function junctionPeaks(result: Result | null): Shown['places'] {
  return (result?.cells ?? []).flatMap(({ peakWallShear, peakAt }) =>
    peakWallShear !== null && peakAt
      ? [{ at: [peakAt[0] * 1e9, peakAt[1] * 1e9] as const, value: peakWallShear }]
      : [],
  );
}

/** The value that holds for most of a stretch of a channel; where it has none, that of the nearest piece. */
export const valueOn = (shown: Shown, id: string, start: number, stop: number): number | null =>
  spanOn(shown, id, start, stop)?.value ?? null;

/** The same with its band. */
export function spanOn(shown: Shown, id: string, start: number, stop: number): Span | null {
  let best: Span | null = null;
  let most = Number.NEGATIVE_INFINITY;
  for (const span of shown.values.get(id) ?? []) {
    // below nothing it is how far apart they are
    const overlap = Math.min(stop, span.stop) - Math.max(start, span.start);
    if (overlap > most) {
      most = overlap;
      best = span;
    }
  }
  return best;
}

/** The lowest stress that holds for the whole chip. */
function shearLimit(chip: Chip): number | null {
  let lowest: number | null = null;
  for (const limit of chip.limits)
    if ('shear' in limit && limit.where === undefined && (lowest === null || limit.shear < lowest))
      lowest = limit.shear;
  return lowest;
}

function markOf(everywhere: number | null, chip: Chip): Shown['mark'] {
  if (everywhere !== null) return { at: everywhere, says: 'limit' };
  const stresses = chip.limits.flatMap((limit) => ('shear' in limit ? [limit.shear] : []));
  return stresses.length > 0 ? { at: Math.min(...stresses), says: 'limit in places' } : null;
}

/** Channels that end at a port. */
function channelsAt(chip: Chip, id: string): string[] {
  const port = chip.ports.find((part) => part.id === id);
  if (!port) return [];
  const reach = Math.max(1, port.diameter / 2);
  return chip.channels
    .filter(({ path, layer }) => {
      const near = (p: readonly [number, number]): boolean =>
        Math.hypot(p[0] - port.at[0], p[1] - port.at[1]) <= reach;
      return layer === port.layer && (near(path[0]!) || near(path.at(-1)!));
    })
    .map((channel) => channel.id);
}

function range(
  overlay: Overlay,
  values: Shown['values'],
  chambers: Shown['chambers'],
  places: Shown['places'],
  limit: number | null,
  chip: Chip,
): { readonly from: number; readonly to: number } {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const list of values.values())
    for (const { value } of list)
      if (value !== null) {
        low = Math.min(low, value);
        high = Math.max(high, value);
      }
  for (const value of chambers.values()) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  for (const { value } of places) high = Math.max(high, value);
  if (high < low) return { from: 0, to: 1 };
  if (overlay === 'off target') {
    const within = Math.max(0.01, ...chip.targets.map((target) => target.within));
    const end = Math.max(within, Math.abs(low), Math.abs(high));
    return { from: -end, to: end };
  }
  if (overlay === 'findings') return { from: 0, to: 1 };
  // amounts begin at nothing; pressures below the outside begin where they are lowest
  const from = Math.min(0, low);
  const to = Math.max(high, limit ?? 0);
  return { from, to: to > from ? to : from + 1 };
}

/** Place on the ramp, 0 to 1. */
export const placeOn = ({ from, to }: Pick<Shown, 'from' | 'to'>, value: number): number =>
  Math.min(1, Math.max(0, (value - from) / (to - from)));
