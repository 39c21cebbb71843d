import type { Result } from '../../solver/chip/result.ts';
import { sitePressures } from '../sheet/overlay.ts';

/** A stretch of a route, in the direction of its flow. */
export interface Leg {
  readonly channel: string;
  readonly piece: number;
  readonly from: string;
  readonly to: string;
  readonly length: number;
  readonly flow: number;
  readonly shear: number | null;
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

/** Pressure (Pa) and wall shear (Pa) against distance from the start (m), at both ends of each leg. */
export function profileOf(
  result: Result,
  legs: readonly Leg[],
): {
  readonly along: number[];
  readonly pressure: (number | null)[];
  readonly shear: (number | null)[];
  readonly names: string[];
} {
  const pressures = sitePressures(result);
  const along: number[] = [];
  const pressure: (number | null)[] = [];
  const shear: (number | null)[] = [];
  const names: string[] = [];
  let at = 0;
  for (const leg of legs) {
    along.push(at, at + leg.length);
    pressure.push(pressures.get(leg.from) ?? null, pressures.get(leg.to) ?? null);
    shear.push(leg.shear, leg.shear);
    names.push(leg.channel, leg.channel);
    at += leg.length;
  }
  return { along, pressure, shear, names };
}
