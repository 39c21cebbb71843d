import type { Chip } from '../../solver/chip/chip.ts';
import type { LimitResult, Making, Result } from '../../solver/chip/result.ts';
import { pathLength } from '../geometry/path.ts';
import { driveText } from '../sheet/words.ts';
import type { ShownGraph } from '../solving/shown-graph.ts';
import type { Tab } from '../state/view.ts';
import { placeName, placeRef } from '../verdict/answer.ts';
import { limitKind } from '../verdict/cells.ts';
import { bandOf } from '../words/band.ts';
import { capital, figure } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';
import type { Cell, Column, Row, Table } from './table.ts';

export { csvOf } from './table.ts';

/** The table of a tab, from the chip and what was solved of it. */
export function tableOf(tab: Tab, chip: Chip, result: Result | null, graph: ShownGraph | null): Table {
  switch (tab) {
    case 'ports':
      return ports(chip, result);
    case 'channels':
      return channels(chip, result);
    case 'routes':
      return routes(result);
    case 'junctions':
      return junctions(result, graph);
    default:
      return findings(chip, result);
  }
}

/** How many rows a tab has, without making them. */
export function countOf(tab: Tab, chip: Chip, result: Result | null, graph: ShownGraph | null): number {
  switch (tab) {
    case 'ports':
      return chip.ports.length;
    case 'channels':
      return chip.channels.length;
    case 'routes':
      return result?.routes.length ?? 0;
    case 'junctions':
      return graph?.sites.filter((site) => site.kind !== 'port' && site.kind !== 'end').length ?? 0;
    default:
      return (
        (result?.findings.length ?? 0) + (result?.limits.filter((limit) => limit.met === false).length ?? 0)
      );
  }
}

const NAME = { id: 'name', edits: 'name' } as const;

function ports(chip: Chip, result: Result | null): Table {
  const solved = new Map(result?.ports.map((port) => [port.id, port]));
  const got = new Map(
    result?.targets.flatMap((target) => (target.port === undefined ? [] : [[target.port, target]])),
  );
  const wanted = new Map(chip.targets.flatMap((target) => ('port' in target ? [[target.port, target]] : [])));
  const byFlow = [...wanted.values()].some((target) => 'flow' in target);
  const wish = byFlow ? ({ kind: 'flow' } as const) : ({ kind: 'share', unit: '%' } as const);
  const columns: Column[] = [
    { ...NAME, head: 'port' },
    { id: 'drive', head: 'drive', edits: 'drive' },
    { id: 'wanted', head: 'wanted', ...wish, edits: 'wanted' },
    { id: 'got', head: 'got', ...wish },
    { id: 'off', head: 'off', kind: 'share', unit: '%', signed: true },
    { id: 'share', head: 'share', kind: 'share', unit: '%' },
    { id: 'share band', head: '± share', kind: 'share', unit: '%', digits: 2 },
    { id: 'flow', head: 'flow in', kind: 'flow', signed: false },
    { id: 'pressure', head: 'pressure', kind: 'pressure' },
    { id: 'hole', head: 'hole', kind: 'length', unit: 'um', edits: 'hole' },
    ...(result?.making
      ? ([
          { id: 'making', head: '± making', kind: 'share', unit: '%', digits: 2 },
          { id: 'chief', head: 'most of it from' },
        ] as const)
      : []),
  ];
  const rows = chip.ports.map((port): Row => {
    const wants = wanted.get(port.id);
    const gets = got.get(port.id);
    const there = solved.get(port.id);
    const off = gets && gets.got !== null ? beyondNoise(gets.got / gets.wanted - 1) : null;
    // where wishes are of both kinds, shares are left to their own column
    const asked = wants && ('flow' in wants ? wants.flow : byFlow ? null : wants.share);
    return {
      ref: `port:${port.id}`,
      cells: [
        port.id,
        driveText(port.drive),
        asked ?? null,
        asked == null ? null : (gets?.got ?? null),
        off,
        there?.share ?? null,
        there?.share == null ? null : bandOf(result, 'share', there) || null,
        there?.flow ?? null,
        there?.pressure ?? null,
        port.diameter / 1e9,
        ...(result?.making ? [there?.making?.share.likely || null, chiefWords(there?.making?.share)] : []),
      ],
      ...(gets && !gets.met && { missed: [3, 4] }),
    };
  });
  return { columns, rows };
}

/** "width of arm 3, 51 %": what does most of a band. */
const chiefWords = (making: Making | undefined): string | null =>
  making?.chief
    ? `${making.chief.what} of ${making.chief.id}, ${figure(making.chief.part, 'share', { unit: '%', digits: 2 })}`
    : null;

/** Rounding of doubles is no deviation. */
const beyondNoise = (off: number): number => (Math.abs(off) < 1e-9 ? 0 : off);

function channels(chip: Chip, result: Result | null): Table {
  const columns: Column[] = [
    { ...NAME, head: 'channel' },
    { id: 'layer', head: 'layer' },
    { id: 'width', head: 'width', kind: 'length', unit: 'um', edits: 'width' },
    { id: 'length', head: 'length', kind: 'length', unit: 'mm', edits: 'length' },
    { id: 'flow', head: 'flow', kind: 'flow' },
    { id: 'share', head: 'share', kind: 'share', unit: '%' },
    { id: 'share band', head: '± share', kind: 'share', unit: '%', digits: 2 },
    { id: 'drop', head: 'drop', kind: 'pressure' },
    { id: 'speed', head: 'speed', kind: 'velocity' },
    { id: 'shear', head: 'peak shear', kind: 'stress' },
    { id: 'shear band', head: '± shear', kind: 'share', unit: '%', digits: 2 },
    { id: 'reynolds', head: 'Re', kind: 'number', digits: 2 },
    { id: 'time', head: 'time', kind: 'time', unit: 's' },
    ...(result?.making
      ? ([{ id: 'making', head: '± making', kind: 'share', unit: '%', digits: 2 }] as const)
      : []),
  ];
  const solved = new Map(result?.channels.map((channel) => [channel.id, channel]));
  const total = result?.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0) ?? 0;
  const limit = chip.limits.reduce(
    (least, entry) => ('shear' in entry && entry.where === undefined ? Math.min(least, entry.shear) : least),
    Number.POSITIVE_INFINITY,
  );
  const rows = chip.channels.map((channel): Row => {
    const pieces = solved.get(channel.id)?.pieces ?? [];
    let flow: number | null = null;
    let drop: number | null = pieces.length > 0 ? 0 : null;
    let speed: number | null = null;
    let shear: number | null = null;
    let reynolds: number | null = null;
    let time: number | null = pieces.length > 0 ? 0 : null;
    // Of the piece with the highest shear.
    let making: number | null = null;
    let [shareBand, shearBand]: (number | null)[] = [null, null];
    for (const piece of pieces) {
      if (piece.flow !== null && Math.abs(piece.flow) > Math.abs(flow ?? 0)) {
        flow = piece.flow;
        shareBand = bandOf(result, 'share', piece);
      }
      flow ??= piece.flow;
      drop = drop === null ? null : drop + piece.pressureDrop;
      speed = larger(speed, piece.meanVelocity);
      if (piece.making && (piece.peakWallShear ?? 0) > (shear ?? 0)) making = piece.making.shear.likely;
      if ((piece.peakWallShear ?? 0) > (shear ?? 0)) shearBand = bandOf(result, 'shear', piece);
      shear = larger(shear, piece.peakWallShear);
      reynolds = larger(reynolds, piece.reynolds);
      time = time === null || piece.residenceTime === null ? null : time + piece.residenceTime;
    }
    return {
      ref: `channel:${channel.id}`,
      cells: [
        channel.id,
        // of one layer there is nothing to tell
        chip.layers.length > 1 ? channel.layer : null,
        Math.min(...channel.width) / 1e9,
        pathLength(channel.path, channel.bendRadius) / 1e9,
        flow,
        flow === null || total === 0 ? null : Math.abs(flow) / total,
        shareBand || null,
        drop,
        speed,
        shear,
        shearBand || null,
        reynolds,
        time,
        ...(result?.making ? [making] : []),
      ],
      ...(shear !== null && shear > limit && { missed: [9] }),
    };
  });
  return { columns, rows };
}

const larger = (a: number | null, b: number | null): number | null =>
  b === null ? a : a === null ? b : Math.max(a, b);

function routes(result: Result | null): Table {
  const columns: Column[] = [
    { id: 'from', head: 'from' },
    { id: 'to', head: 'to' },
    { id: 'share', head: 'share', kind: 'share', unit: '%' },
    { id: 'share band', head: '± share', kind: 'share', unit: '%', digits: 2 },
    { id: 'time', head: 'time', kind: 'time', unit: 's' },
    { id: 'time band', head: '± time', kind: 'share', unit: '%', digits: 2 },
    { id: 'shear', head: 'peak shear', kind: 'stress' },
    { id: 'shear band', head: '± shear', kind: 'share', unit: '%', digits: 2 },
    { id: 'hug time', head: 'time at the wall', kind: 'time', unit: 's' },
    { id: 'hug shear', head: 'shear at the wall', kind: 'stress' },
    { id: 'hug band', head: '± at the wall', kind: 'share', unit: '%', digits: 2 },
  ];
  const rows = (result?.routes ?? []).map(
    (route): Row => ({
      ref: `route:${route.from}>${route.to}`,
      cells: [
        route.from,
        route.to,
        route.share,
        route.band?.share || null,
        route.residenceTime,
        route.residenceTime === null ? null : route.band?.time || null,
        route.peakWallShear,
        route.peakWallShear === null ? null : route.band?.shear || null,
        route.wallHugging?.residenceTime ?? null,
        route.wallHugging?.peakShear ?? null,
        route.wallHugging ? route.band?.wall || null : null,
      ],
    }),
  );
  return { columns, rows };
}

function junctions(result: Result | null, graph: ShownGraph | null): Table {
  const columns: Column[] = [
    { id: 'name', head: 'place' },
    { id: 'kind', head: 'kind' },
    { id: 'arms', head: 'arms', kind: 'number', digits: 1 },
    { id: 'x', head: 'right', kind: 'length', unit: 'mm' },
    { id: 'y', head: 'up', kind: 'length', unit: 'mm' },
    { id: 'solved', head: 'taken as' },
    { id: 'shear', head: 'peak shear', kind: 'stress' },
    { id: 'shear band', head: '± shear', kind: 'share', unit: '%', digits: 2 },
    { id: 'accuracy', head: 'accuracy', kind: 'share', unit: '%' },
  ];
  const cells = new Map(result?.cells.map((cell) => [cell.id, cell]));
  const rows = (graph?.sites ?? [])
    .filter((site) => site.kind !== 'port' && site.kind !== 'end')
    .map((site): Row => {
      const cell = cells.get(site.name);
      return {
        ref: site.name,
        cells: [
          site.name.replace(':', ' '),
          site.kind,
          site.arms.length,
          site.at[0] / 1e9,
          site.at[1] / 1e9,
          cell ? 'solved' : 'ideal',
          cell?.peakWallShear ?? null,
          cell?.peakWallShear == null ? null : bandOf(result, 'shear', cell) || null,
          cell?.accuracy ?? null,
        ],
      };
    });
  return { columns, rows };
}

const SEVERITY = { stop: 'stop', warn: 'take care', note: 'note' } as const;

/** "Suspended cells: 2.56 Pa, at most 1.50 Pa wanted." */
export function missedWords(
  { name, worst, limit }: Pick<LimitResult, 'name' | 'worst' | 'limit'>,
  chip: Chip,
): string {
  const given = chip.limits.find((found) => found.name === name);
  const say = (value: number | null): string => figure(value, limitKind(given), { digits: 3 });
  const way = given && 'floor' in given ? 'at least' : 'at most';
  return `${capital(name)}: ${say(worst)}, ${way} ${say(limit)} wanted.`;
}

function findings(chip: Chip, result: Result | null): Table {
  const columns: Column[] = [
    { id: 'severity', head: 'weight' },
    { id: 'where', head: 'where' },
    { id: 'says', head: 'what was found', sentence: true },
    { id: 'do', head: 'what to do', sentence: true },
  ];
  const missed = (result?.limits ?? [])
    .filter((limit) => limit.met === false)
    .map(
      (limit): Row => ({
        ref: placeRef(limit.where, chip) ?? 'chip',
        cells: [
          'missed',
          placeName(limit.where),
          missedWords(limit, chip),
          'Widen it, or let less flow.',
        ] as Cell[],
        missed: [0],
      }),
    );
  const rows = (result?.findings ?? []).map(
    (finding): Row => ({
      ref: placeRef(finding.where, chip) ?? 'chip',
      cells: [
        finding.accepted === undefined ? SEVERITY[finding.severity] : 'accepted',
        placeName(finding.where),
        capital(spoken(finding.says)),
        finding.accepted === undefined ? spoken(finding.do) : `Accepted: ${finding.accepted}`,
      ],
    }),
  );
  return { columns, rows: [...missed, ...rows] };
}
