import type { Chip, Drive, Port } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { Kind } from '../../solver/chip/units.ts';
import type { Xy } from '../geometry/vector.ts';
import { bandOf, plusMinus } from '../words/band.ts';
import { capital, counted, figure, typed, unitFor } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';

/** What stands beside a port: its name and its most telling figure. */
export interface PortWords {
  readonly port: Port;
  readonly name: string;
  readonly figure: string;
  /** Where the words go: away from the channel. */
  readonly side: 'left' | 'right' | 'above' | 'below';
  /** The target here is missed. */
  readonly missed: boolean;
}

/** What a person gave has as many digits as they gave it. */
const asGiven = (value: number, kind: Kind): string =>
  typed(value, kind, unitFor(value, kind)).replace('-', '−');

export function driveText(drive: Drive): string {
  switch (drive.kind) {
    case 'pressure':
      return drive.pressure === 0 ? 'open' : asGiven(drive.pressure, 'pressure');
    case 'flow':
      return asGiven(drive.flow, 'flow');
    case 'head':
      return `${asGiven(drive.head, 'length')} high`;
    default:
      return 'closed';
  }
}

export function portWords(chip: Chip, result: Result | null): readonly PortWords[] {
  const flows = new Map(result?.ports.map((port) => [port.id, port]));
  const missed = new Set(result?.targets.filter((target) => !target.met).map((target) => target.port));
  const towards = directions(chip);
  return chip.ports.map((port, i) => {
    const solved = flows.get(port.id);
    const telling =
      port.drive.kind === 'closed'
        ? 'closed'
        : solved?.share == null
          ? driveText(port.drive)
          : port.drive.kind === 'flow'
            ? driveText(port.drive)
            : (solved.flow ?? 0) < 0
              ? `${figure(solved.share, 'share', { digits: 3, unit: '%' })}${plusMinus(bandOf(result, 'share', solved))}`
              : driveText(port.drive);
    return { port, name: port.id, figure: telling, side: sideOf(towards[i]!), missed: missed.has(port.id) };
  });
}

/** For each port the mean direction in which its channels leave it; [0, 0] where there is none. */
function directions(chip: Chip): readonly Xy[] {
  const out: [number, number][] = chip.ports.map(() => [0, 0]);
  const byPlace = new Map<string, number[]>();
  const key = (x: number, y: number): string => `${Math.round(x / 1000)} ${Math.round(y / 1000)}`;
  chip.ports.forEach((port, i) => {
    const place = key(port.at[0], port.at[1]);
    byPlace.set(place, [...(byPlace.get(place) ?? []), i]);
  });
  for (const { path } of chip.channels)
    for (const [end, next] of [
      [path[0]!, path[1]!],
      [path.at(-1)!, path.at(-2)!],
    ] as const)
      for (const i of byPlace.get(key(end[0], end[1])) ?? []) {
        const length = Math.hypot(next[0] - end[0], next[1] - end[1]) || 1;
        out[i]![0] += (next[0] - end[0]) / length;
        out[i]![1] += (next[1] - end[1]) / length;
      }
  return out;
}

function sideOf([x, y]: Xy): PortWords['side'] {
  if (Math.abs(x) >= Math.abs(y)) return x > 0 ? 'left' : 'right';
  return y > 0 ? 'below' : 'above';
}

/** What stands beside a place that a finding or a missed limit names. */
export interface PlaceWords {
  readonly at: Xy;
  readonly head: string;
  readonly more: string;
  readonly alarm: boolean;
  readonly where: string;
}

/** Missed limits and the findings that stop, each with a place; at most `most`. */
export function placeWords(
  chip: Chip,
  result: Result | null,
  places: (where: string) => Xy | null,
  most = 12,
): readonly PlaceWords[] {
  if (!result) return [];
  const out: PlaceWords[] = [];
  for (const judged of result.limits) {
    if (judged.met !== false) continue;
    const at = places(judged.where);
    const limit = chip.limits.find((entry) => entry.name === judged.name);
    const kind = limit && 'shear' in limit ? 'stress' : limit && 'curve' in limit ? 'number' : 'share';
    if (at)
      out.push({
        at,
        head: `${figure(judged.worst, kind, { digits: 3 })}${plusMinus(judged.band)} here`,
        more: `limit ${figure(judged.limit, kind, { digits: 3 })} · ${judged.name}`,
        alarm: true,
        where: judged.where,
      });
  }
  // one of a kind speaks for all of it: a hundred words side by side say nothing
  const alike = new Map<string, number>();
  const told = result.findings.filter(
    ({ severity, accepted }) => severity !== 'note' && accepted === undefined,
  );
  for (const { kind } of told) alike.set(kind, (alike.get(kind) ?? 0) + 1);
  for (const finding of told) {
    const count = alike.get(finding.kind);
    if (count === undefined || out.length >= most) continue;
    const at = finding.at ? ([finding.at[0] * 1e9, finding.at[1] * 1e9] as const) : places(finding.where);
    if (!at) continue;
    alike.delete(finding.kind);
    const more =
      count > 1 ? `${finding.do} ${capital(counted(count - 1, 'more', 'more'))} like it.` : finding.do;
    out.push({ at, head: spoken(finding.says), more: spoken(more), alarm: false, where: finding.where });
  }
  return out.slice(0, most);
}
