import type { Limit } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { sitePressures } from '../sheet/site-pressures.ts';
import { bandOf } from '../words/band.ts';

/** A stretch of a route, in the direction of its flow. */
export interface Leg {
  readonly channel: string;
  readonly piece: number;
  readonly from: string;
  readonly to: string;
  readonly length: number;
  readonly flow: number;
  readonly shear: number | null;
  /** How far the shear may be off, relative to it. */
  readonly band: number | null;
}

/** The ways fluid goes: from each port that lets it in to each that lets it out, where there is a way. */
export function routeEnds(result: Result): readonly { readonly from: string; readonly to: string }[] {
  const into = result.ports.filter((port) => (port.flow ?? 0) > 0);
  const out = result.ports.filter((port) => (port.flow ?? 0) < 0);
  return into.flatMap((from) => out.map((to) => ({ from: from.id, to: to.id }))).slice(0, 2000);
}

/** The way that carries most from one port to another: at each place back up the strongest arm that leads to the start. */
export function legsOf(result: Result, from: string, to: string): readonly Leg[] {
  const arriving = new Map<string, Leg[]>();
  for (const { id, pieces } of result.channels)
    pieces.forEach((piece, i) => {
      if (piece.flow === null || piece.flow === 0) return;
      const ahead = piece.flow > 0;
      const leg: Leg = {
        channel: id,
        piece: i,
        from: ahead ? piece.from : piece.to,
        to: ahead ? piece.to : piece.from,
        length: piece.length,
        flow: Math.abs(piece.flow),
        shear: piece.peakWallShear,
        band: bandOf(result, 'shear', piece),
      };
      arriving.set(leg.to, [...(arriving.get(leg.to) ?? []), leg]);
    });
  const start = `port:${from}`;
  const legs: Leg[] = [];
  const seen = new Set<string>();
  const back = (place: string): boolean => {
    if (place === start) return true;
    if (seen.has(place)) return false;
    seen.add(place);
    const arms = [...(arriving.get(place) ?? [])].sort((a, b) => b.flow - a.flow);
    for (const leg of arms) {
      if (!back(leg.from)) continue;
      legs.push(leg);
      return true;
    }
    return false;
  };
  return back(`port:${to}`) ? legs : [];
}

/** Solved junctions on the way with their own peak: distance from the start (m), wall shear (Pa), name. */
export function peaksAlong(
  result: Result,
  legs: readonly Leg[],
): readonly {
  readonly at: number;
  readonly shear: number;
  readonly name: string;
  readonly band: number | null;
}[] {
  const cells = new Map(result.cells.map((cell) => [cell.id, cell]));
  const out: { at: number; shear: number; name: string; band: number | null }[] = [];
  let at = 0;
  for (const leg of legs) {
    at += leg.length;
    const cell = cells.get(leg.to);
    const shear = cell?.peakWallShear;
    if (shear != null) out.push({ at, shear, name: leg.to, band: bandOf(result, 'shear', cell) });
  }
  return out;
}

/** The lowest stress that a limit allows on the way from one port to another, with its name; null without one. */
export function limitAlong(
  limits: readonly Limit[],
  legs: readonly Leg[],
  from: string,
  to: string,
): { readonly shear: number; readonly name: string } | null {
  const channels = new Set(legs.map((leg) => leg.channel));
  let lowest: { shear: number; name: string } | null = null;
  for (const limit of limits) {
    if (!('shear' in limit)) continue;
    const { where } = limit;
    const holds =
      where === undefined ||
      (typeof where === 'string' ? channels.has(where) : where[0] === from && where[1] === to);
    if (holds && (!lowest || limit.shear < lowest.shear)) lowest = { shear: limit.shear, name: limit.name };
  }
  return lowest;
}

/** Pressure (Pa) and wall shear (Pa) against distance from the start (m), at both ends of each leg. */
export function profileOf(
  result: Result,
  legs: readonly Leg[],
): {
  readonly along: number[];
  readonly pressure: (number | null)[];
  readonly shear: (number | null)[];
  readonly names: string[];
  readonly bands: (number | null)[];
} {
  const pressures = sitePressures(result);
  const along: number[] = [];
  const pressure: (number | null)[] = [];
  const shear: (number | null)[] = [];
  const names: string[] = [];
  const bands: (number | null)[] = [];
  let at = 0;
  for (const leg of legs) {
    along.push(at, at + leg.length);
    pressure.push(pressures.get(leg.from) ?? null, pressures.get(leg.to) ?? null);
    shear.push(leg.shear, leg.shear);
    names.push(leg.channel, leg.channel);
    bands.push(leg.band, leg.band);
    at += leg.length;
  }
  return { along, pressure, shear, names, bands };
}
