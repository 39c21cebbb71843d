import type { Chip, Limit } from '../../../solver/chip/chip.ts';
import type { Result } from '../../../solver/chip/result.ts';
import { formatNumber, formatQuantity } from '../../../solver/chip/units-format.ts';
import {
  type Column,
  figures,
  NONE,
  placed,
  plain,
  type Section,
  type Table,
  verdict,
  words,
} from './blocks.ts';

/** Pressure and shear per route, and the limits. */

const placesOf = ({ cells }: Result): Map<string, readonly [number, number]> =>
  new Map(cells.map(({ id, at }) => [id, at]));

/** How far the solution may be off, beside what it is of; no column where that is not known. */
function bands(head: string, all: readonly (number | null | undefined)[]): Column[] {
  if (all.every((band) => band == null)) return [];
  return [
    figures(
      head,
      'share',
      all.map((band) => band ?? null),
      { digits: 2, unit: '%' },
    ),
  ];
}

export function routesTable(result: Result): Table {
  const { routes, ports } = result;
  const places = placesOf(result);
  const cell = routes.some(({ wallHugging }) => wallHugging);
  const pressure = new Map(ports.map((port) => [port.id, port.pressure]));
  return {
    id: 'routes',
    title: 'Routes',
    rows: routes.length,
    columns: [
      words(
        'from',
        routes.map(({ from }) => from),
      ),
      words(
        'to',
        routes.map(({ to }) => to),
      ),
      figures(
        'share',
        'share',
        routes.map(({ share }) => share),
      ),
      ...bands(
        'share\u00a0±',
        routes.map(({ band }) => band?.share),
      ),
      figures(
        'pressure, end to end',
        'pressure',
        routes.map(({ from, to }) => (pressure.get(from) ?? 0) - (pressure.get(to) ?? 0)),
      ),
      figures(
        'residence time',
        'time',
        routes.map(({ residenceTime }) => residenceTime),
      ),
      ...bands(
        'time\u00a0±',
        routes.map(({ band }) => band?.time),
      ),
      figures(
        'peak wall shear',
        'stress',
        routes.map(({ peakWallShear }) => peakWallShear),
      ),
      ...bands(
        'shear\u00a0±',
        routes.map(({ band, peakWallShear }) => (peakWallShear === null ? null : band?.shear)),
      ),
      words(
        'at',
        routes.map(({ peakAt }) => (peakAt ? placed(peakAt, places) : NONE)),
      ),
      ...(cell
        ? [
            figures(
              'time at the wall',
              'time',
              routes.map(({ wallHugging }) => wallHugging?.residenceTime ?? null),
            ),
            figures(
              'peak there',
              'stress',
              routes.map(({ wallHugging }) => wallHugging?.peakShear ?? null),
            ),
            ...bands(
              'wall\u00a0±',
              routes.map(({ band, wallHugging }) => wallHugging && band?.wall),
            ),
          ]
        : []),
    ],
    foot: [
      '±: how far the solution can be off, relative to the figure before it.',
      ...(cell ? ['At the wall: of a ball of the diameter that the limits name, rolling along it.'] : []),
    ].join(' '),
  };
}

/** Damage by each law on each route, side by side: laws differ by a hundredfold and are never averaged. */
export function damageTable({ routes }: Result): Table | null {
  const rows = routes.flatMap(({ from, to, damage }) => damage.map((entry) => ({ from, to, ...entry })));
  if (rows.length === 0) return null;
  return {
    id: 'damage',
    title: 'Damage by the laws that the limits name',
    rows: rows.length,
    columns: [
      words(
        'law',
        rows.map(({ limit }) => limit),
      ),
      words(
        'from',
        rows.map(({ from }) => from),
      ),
      words(
        'to',
        rows.map(({ to }) => to),
      ),
      figures(
        'mean path',
        'share',
        rows.map(({ mean }) => mean),
      ),
      figures(
        'along the wall',
        'share',
        rows.map(({ wallHugging }) => wallHugging),
      ),
      ...bands(
        'numerics\u00a0±',
        rows.map(({ band }) => band),
      ),
    ],
  };
}

function limitFigure(value: number | null, limit: Limit): string {
  if (value === null) return NONE;
  if ('shear' in limit) return formatQuantity(value, 'stress');
  return 'curve' in limit ? formatNumber(value) : formatQuantity(value, 'share');
}

function limitWords(limit: Limit): string {
  if ('shear' in limit) return `wall shear at most ${plain(limit.shear, 'stress')}`;
  if ('floor' in limit) {
    const [least, most] = limit.floor;
    return `${plain(limit.area, 'share', '%')} of the floor between ${plain(least, 'stress')} and ${plain(most, 'stress')}`;
  }
  if ('curve' in limit) return 'stress against time, at most 1 of the curve';
  const { constant, stress, time } = limit.law;
  return `${plain(limit.damage, 'share', '%')} damage by ${constant} τ^${stress} t^${time}, ${limit.passes === 1 ? 'one pass' : `${limit.passes} passes`}`;
}

export function limitsTable(chip: Chip, result: Result): Table {
  const { limits } = result;
  const places = placesOf(result);
  return {
    id: 'limits',
    title: 'Limits',
    rows: limits.length,
    missed: new Set(limits.flatMap(({ met }, i) => (met === false ? [i] : []))),
    columns: [
      words(
        'limit',
        limits.map(({ name }) => name),
      ),
      words('asks for', chip.limits.map(limitWords)),
      words(
        'bearable',
        limits.map(({ limit }, i) => limitFigure(limit, chip.limits[i]!)),
      ),
      words(
        'worst',
        limits.map(({ worst }, i) => limitFigure(worst, chip.limits[i]!)),
      ),
      ...bands(
        'numerics\u00a0±',
        limits.map(({ band }) => band),
      ),
      words(
        'where',
        limits.map(({ where }) => placed(where, places)),
      ),
      verdict(
        '',
        limits.map(({ met }) => met),
      ),
    ],
  };
}

export function routesSection(chip: Chip, result: Result): Section {
  const damage = damageTable(result);
  return {
    id: 'routes',
    title: 'Pressure and shear by route',
    blocks: [
      chip.limits.length === 0
        ? { kind: 'words', runs: ['No limit is given: nothing says what the cells bear.'] }
        : { kind: 'table', table: limitsTable(chip, result) },
      ...(result.routes.length > 0 ? [{ kind: 'table', table: routesTable(result) } as const] : []),
      ...(damage ? [{ kind: 'table', table: damage } as const] : []),
    ],
  };
}
