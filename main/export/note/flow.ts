import type { Chip, Drive, Limit, Target } from '../../../solver/chip/chip.ts';
import type { Making, Result } from '../../../solver/chip/result.ts';
import { formatNumber, formatQuantity } from '../../../solver/chip/units-format.ts';
import {
  type Block,
  type Column,
  figure,
  figures,
  NONE,
  placed,
  plain,
  type Section,
  strong,
  type Table,
  verdict,
  words,
} from './blocks.ts';

/** What flows: the split, the drives, the routes, the limits. */

/** Relative, nought where only rounding is left of it. */
function offBy(got: number, wanted: number): number {
  const off = got / Math.abs(wanted) - 1;
  return Math.abs(off) < 1e-9 ? 0 : off;
}

interface SplitRow {
  readonly name: string;
  readonly target: Target | null;
  readonly wanted: number | null;
  readonly got: number | null;
  readonly share: number | null;
  readonly flow: number | null;
  readonly band: number | null;
  /** What tolerances of making do: likely, and at worst. */
  readonly making: Making | null;
  readonly met: boolean | undefined;
}

/** Every target in the chip's order, then the outlets that none names. */
function splitRows(chip: Chip, result: Result): SplitRow[] {
  const ports = new Map(result.ports.map((port) => [port.id, port]));
  const total = result.ports.reduce((sum, { flow }) => sum + Math.max(0, flow ?? 0), 0);
  const asked = new Set<string>();
  const rows = result.targets.map((entry, i): SplitRow => {
    const target = chip.targets[i]!;
    const share = 'share' in target;
    const port = entry.port === undefined ? undefined : ports.get(entry.port);
    if (port) asked.add(port.id);
    return {
      name: entry.port ?? `channel ${entry.channel}`,
      target,
      wanted: Math.abs(entry.wanted),
      got: entry.got,
      share: share ? entry.got : entry.got === null || total === 0 ? null : entry.got / total,
      flow: share ? (entry.got === null ? null : entry.got * total) : entry.got,
      band: port?.band ? (share ? port.band.share : port.band.flow) : null,
      making: entry.making ?? null,
      met: entry.met,
    };
  });
  for (const { id, flow, share, band, making } of result.ports) {
    if (asked.has(id) || flow === null || flow >= 0) continue;
    rows.push({
      name: id,
      target: null,
      wanted: null,
      got: null,
      share,
      flow: -flow,
      band: band?.share ?? null,
      making: making?.share ?? null,
      met: undefined,
    });
  }
  return rows;
}

function wishes(rows: readonly SplitRow[]): Column[] {
  const kinds = new Set(rows.flatMap(({ target }) => (target ? ['share' in target] : [])));
  if (kinds.size === 0) return [];
  if (kinds.size === 1) {
    const [share] = kinds;
    const kind = share ? 'share' : 'flow';
    const got = rows.map((row) => (share ? row.share : row.flow));
    const wanted = rows.map((row) => row.wanted);
    // one unit for both, so that they compare at a glance
    const { unit } = figures('', kind, [...got, ...wanted]);
    return [figures('wanted', kind, wanted, { unit }), figures('got', kind, got, { unit })];
  }
  const spelt = (value: number | null, { target }: SplitRow): string =>
    value === null || !target ? NONE : formatQuantity(value, 'share' in target ? 'share' : 'flow');
  return [
    words(
      'wanted',
      rows.map((row) => spelt(row.wanted, row)),
    ),
    words(
      'got',
      rows.map((row) => spelt(row.got, row)),
    ),
  ];
}

/** The flow-split table: what each outlet was to get, what it gets, and how sure that is. */
export function splitTable(chip: Chip, result: Result): Table {
  const rows = splitRows(chip, result);
  const known = rows.some(({ making }) => making !== null);
  const asked = rows.some(({ target }) => target);
  const allShares = rows.every(({ target }) => !target || 'share' in target);
  const missed = new Set(rows.flatMap(({ met }, i) => (met === false ? [i] : [])));
  return {
    id: 'flow-split',
    title: 'Flow split',
    rows: rows.length,
    missed,
    columns: [
      words(
        'outlet',
        rows.map(({ name }) => name),
      ),
      ...wishes(rows),
      ...(asked
        ? [
            figures(
              'off by',
              'share',
              rows.map(({ wanted, got }) => (wanted === null || got === null ? null : offBy(got, wanted))),
              { digits: 2, signed: true },
            ),
            figures(
              'allowed\u00a0±',
              'share',
              rows.map(({ target }) => target?.within ?? null),
              { digits: 2 },
            ),
          ]
        : []),
      ...(asked && allShares
        ? []
        : [
            figures(
              'share',
              'share',
              rows.map(({ share }) => share),
            ),
          ]),
      figures(
        'flow',
        'flow',
        rows.map(({ flow }) => flow),
      ),
      figures(
        'numerics\u00a0±',
        'share',
        rows.map(({ band }) => band),
        { digits: 2, unit: '%' },
      ),
      ...(known
        ? [
            figures(
              'making\u00a0±',
              'share',
              rows.map(({ making }) => making?.likely ?? null),
              { digits: 2, unit: '%' },
            ),
            figures(
              'at worst\u00a0±',
              'share',
              rows.map(({ making }) => making?.worst ?? null),
              { digits: 2, unit: '%' },
            ),
          ]
        : []),
      ...(asked
        ? [
            verdict(
              '',
              rows.map(({ met }) => met),
            ),
          ]
        : []),
    ],
    foot: [
      'Shares are of all that enters the chip. Off by, allowed and ± are relative to the figure itself.',
      'Numerics: how far the solution can be off.',
      known
        ? 'Making: what the tolerances of depth and width do to it, as likely to hold as they are; at worst, all of them used up against it.'
        : 'What the tolerances of making do to the split is not in these figures.',
    ].join(' '),
  };
}

const placesOf = ({ cells }: Result): Map<string, readonly [number, number]> =>
  new Map(cells.map(({ id, at }) => [id, at]));

export function splitWords({ targets }: Result): Block {
  if (targets.length === 0) return { kind: 'words', runs: ['No target is set; this is what flows.'] };
  const missed = targets.filter(({ met }) => !met).length;
  if (missed === 0) {
    const all = targets.length === 1 ? 'The target is' : `All ${targets.length} targets are`;
    return { kind: 'words', runs: [strong(`${all} met`), '.'] };
  }
  return { kind: 'words', runs: [strong(`${missed} of ${targets.length} targets missed`), '.'] };
}

export function driveWords(drive: Drive): string {
  switch (drive.kind) {
    case 'pressure':
      return drive.pressure === 0 ? 'open to the air' : `pressure ${plain(drive.pressure, 'pressure')}`;
    case 'flow':
      return drive.flow >= 0
        ? `flow ${plain(drive.flow, 'flow')} in`
        : `flow ${plain(-drive.flow, 'flow')} out`;
    case 'head':
      return `reservoir ${plain(drive.head, 'length', 'mm')} above the chip`;
    default:
      return 'closed';
  }
}

export function drivesTable(chip: Chip, result: Result): Table {
  const pumps = new Map(result.pumps?.map((pump) => [pump.port, pump]));
  const solved = new Map(result.ports.map((port) => [port.id, port]));
  const { ports } = chip;
  const some = (has: (id: string) => unknown): boolean => ports.some(({ id }) => has(id) !== undefined);
  const met = ports.map(({ id }) => pumps.get(id)?.met ?? null);
  const stated = some((id) => pumps.get(id)?.met ?? undefined);
  const column = (
    head: string,
    kind: 'pressure' | 'flow' | 'velocity' | 'time',
    value: (id: string) => number | null | undefined,
  ): Column =>
    figures(
      head,
      kind,
      ports.map(({ id }) => value(id) ?? null),
    );
  return {
    id: 'drives',
    title: 'Drives and pump settings',
    rows: ports.length,
    missed: new Set(met.flatMap((value, i) => (value === false ? [i] : []))),
    columns: [
      words(
        'port',
        ports.map(({ id }) => id),
      ),
      words(
        'set to',
        ports.map(({ drive }) => driveWords(drive)),
      ),
      column('flow in', 'flow', (id) => solved.get(id)?.flow),
      column('pressure on the chip', 'pressure', (id) => solved.get(id)?.pressure),
      column('at the tubing’s end', 'pressure', (id) => pumps.get(id)?.pressure),
      ...(some((id) => pumps.get(id)?.ratedPressure)
        ? [column('pump can hold', 'pressure', (id) => pumps.get(id)?.ratedPressure)]
        : []),
      ...(some((id) => pumps.get(id)?.ratedFlow)
        ? [column('can move', 'flow', (id) => pumps.get(id)?.ratedFlow)]
        : []),
      ...(some((id) => pumps.get(id)?.plungerSpeed)
        ? [column('plunger', 'velocity', (id) => pumps.get(id)?.plungerSpeed)]
        : []),
      ...(some((id) => pumps.get(id)?.runTime ?? undefined)
        ? [column('runs for', 'time', (id) => pumps.get(id)?.runTime)]
        : []),
      ...(stated ? [verdict('', met, 'can', 'cannot')] : []),
    ],
    foot: 'Flow into the chip is positive. Pressures are gauge.',
  };
}

export function driftTable({ drift }: Result): Table | null {
  if (!drift) return null;
  const { ports } = drift;
  return {
    id: 'drift',
    title: `After ${plain(drift.time, 'time')}, as reservoirs empty and fill`,
    rows: ports.length,
    columns: [
      words(
        'port',
        ports.map(({ port }) => port),
      ),
      figures(
        'flow in',
        'flow',
        ports.map(({ flow }) => flow),
      ),
      figures(
        'share',
        'share',
        ports.map(({ share }) => share),
      ),
      figures(
        'share changed by',
        'share',
        ports.map((entry) => entry.drift),
        { digits: 2, signed: true },
      ),
    ],
  };
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
      figures(
        'peak wall shear',
        'stress',
        routes.map(({ peakWallShear }) => peakWallShear),
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
          ]
        : []),
    ],
    ...(cell && {
      foot: 'At the wall: of a ball of the diameter that the limits name, rolling along it.',
    }),
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

/** Time until what is in the tubing has been pushed through it, by port, s; null where nothing flows. */
export function tubingTime({ tubing }: Chip['ports'][number], flow: number | null): number | null {
  if (flow === null || flow === 0) return null;
  const volume = tubing.reduce((sum, { bore, length }) => sum + (Math.PI / 4) * bore * bore * length, 0);
  return volume / Math.abs(flow);
}

/** How long until the outlets give what was fed, and how long the drives last. */
export function startWords(chip: Chip, result: Result): Block {
  const flows = new Map(result.ports.map(({ id, flow }) => [id, flow]));
  const tubing = new Map(
    chip.ports.map((port) => [port.id, tubingTime(port, flows.get(port.id) ?? null) ?? 0]),
  );
  let first = Number.POSITIVE_INFINITY;
  let last = 0;
  for (const { from, to, fastest, slowest } of result.routes) {
    if (fastest === undefined || slowest === undefined) continue;
    const outside = (tubing.get(from) ?? 0) + (tubing.get(to) ?? 0);
    first = Math.min(first, outside + fastest);
    last = Math.max(last, outside + slowest);
  }
  const run = (result.pumps ?? []).flatMap(({ port, runTime }) =>
    runTime === null ? [] : [{ port, runTime }],
  );
  const shortest = run.reduce<(typeof run)[0] | null>((a, b) => (a && a.runTime <= b.runTime ? a : b), null);
  const assay = chip.assay ? ` The assay takes ${plain(chip.assay.time, 'time')}.` : '';
  const start =
    last > 0
      ? [
          'Start-up, chip and tubing already full: the first of what is fed comes out after ',
          strong(figure(first, 'time', 3)),
          ', and all but the slowest hundredth has been replaced after ',
          strong(figure(last, 'time', 3)),
          ', tubing included.',
        ]
      : ['Start-up: not known, since no route carries a flow that can be followed.'];
  const runs = shortest
    ? [
        ' Run time: ',
        strong(figure(shortest.runTime, 'time', 3)),
        `, until ${shortest.port} is empty or full.`,
      ]
    : [' Run time: not limited by what is stated of pumps and reservoirs.'];
  return { kind: 'words', runs: [...start, ...runs, assay].filter((run) => run !== '') };
}
