import type { Chip, Drive } from '../../../solver/chip/chip.ts';
import type { Result } from '../../../solver/chip/result.ts';
import {
  type Block,
  type Column,
  figure,
  figures,
  plain,
  strong,
  type Table,
  verdict,
  words,
} from './blocks.ts';

/** What the pumps are set to, how it drifts, how long it takes to start. */

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
