import type { Result } from '../../solver/chip/result.ts';
import { formatQuantity } from '../../solver/chip/units-format.ts';
import { bandColumn } from './band-column.ts';
import { type Column, NONE, tableLines } from './table.ts';

/** Routes that carry most: as many as a terminal shows at a glance. */
const MOST_SHOWN = 30;

function topRoutes({ routes: all }: Result): { shown: Result['routes']; more: string[] } {
  if (all.length <= MOST_SHOWN) return { shown: all, more: [] };
  const rest = (all.length - MOST_SHOWN).toLocaleString('en');
  return {
    shown: all.toSorted((a, b) => b.share - a.share).slice(0, MOST_SHOWN),
    more: [`  … and ${rest} more routes that carry no more than these; --csv FILE holds them all.`],
  };
}

export function routesText(result: Result): string[] {
  if (result.routes.length === 0) return [];
  const { shown, more } = topRoutes(result);
  const along: Column[] = [
    {
      head: 'cell at the wall',
      kind: 'time',
      values: shown.map(({ wallHugging }) => wallHugging?.residenceTime ?? null),
    },
    {
      head: 'its peak',
      kind: 'stress',
      values: shown.map(({ wallHugging }) => wallHugging?.peakShear ?? null),
    },
    ...bandColumn(
      '±',
      shown.map(({ wallHugging, band }) => wallHugging && band?.wall),
    ),
  ];
  return [
    'Routes',
    ...tableLines([
      { head: 'from', words: shown.map(({ from }) => from) },
      { head: 'to', words: shown.map(({ to }) => to) },
      { head: 'share', kind: 'share', values: shown.map(({ share }) => share) },
      ...bandColumn(
        '±',
        shown.map(({ band }) => band?.share),
      ),
      { head: 'residence time', kind: 'time', values: shown.map(({ residenceTime }) => residenceTime) },
      { head: 'fastest 1 %', kind: 'time', values: shown.map(({ fastest }) => fastest ?? null) },
      { head: 'slowest 1 %', kind: 'time', values: shown.map(({ slowest }) => slowest ?? null) },
      ...bandColumn(
        '±',
        shown.map(({ band }) => band?.time),
      ),
      { head: 'peak wall shear', kind: 'stress', values: shown.map(({ peakWallShear }) => peakWallShear) },
      ...bandColumn(
        '±',
        shown.map(({ band, peakWallShear }) => (peakWallShear === null ? null : band?.shear)),
      ),
      { head: 'at', words: shown.map(({ peakAt }) => peakAt || NONE) },
      ...(shown.some(({ wallHugging }) => wallHugging !== undefined) ? along : []),
    ]),
    ...more,
  ];
}

/** Damage by each law on each route, side by side: laws differ by a hundredfold and are never averaged. */
export function damageText(result: Result): string[] {
  const { shown, more } = topRoutes(result);
  const rows = shown.flatMap(({ from, to, damage }) => damage.map((entry) => ({ from, to, ...entry })));
  if (rows.length === 0) return [];
  return [
    'Damage',
    ...tableLines([
      { head: 'law', words: rows.map(({ limit }) => limit) },
      { head: 'from', words: rows.map(({ from }) => from) },
      { head: 'to', words: rows.map(({ to }) => to) },
      { head: 'mean path', kind: 'share', values: rows.map(({ mean }) => mean) },
      { head: 'along the wall', kind: 'share', values: rows.map(({ wallHugging }) => wallHugging) },
      ...bandColumn(
        '±',
        rows.map(({ band }) => band),
      ),
    ]),
    ...more,
  ];
}

/** More rows than this are a matter for a file. */
const MOST_PUMPS = 200;

export function pumpsText({ pumps = [], drift }: Result): string[] {
  if (pumps.length === 0) return [];
  const shown = pumps.slice(0, MOST_PUMPS);
  const stated: Column[] = [
    { head: 'can hold', kind: 'pressure', values: shown.map(({ ratedPressure }) => ratedPressure ?? null) },
    { head: 'can move', kind: 'flow', values: shown.map(({ ratedFlow }) => ratedFlow ?? null) },
    { head: 'plunger', kind: 'velocity', values: shown.map(({ plungerSpeed }) => plungerSpeed ?? null) },
    { head: 'runs for', kind: 'time', values: shown.map(({ runTime }) => runTime) },
    {
      head: '',
      words: shown.map(({ met }) => (met === null ? 'not stated' : met ? 'can' : 'CANNOT')),
    },
  ];
  const lines = [
    'Pumps',
    ...tableLines([
      { head: 'port', words: shown.map(({ port }) => port) },
      { head: 'pressure', kind: 'pressure', values: shown.map(({ pressure }) => pressure) },
      { head: 'flow in', kind: 'flow', values: shown.map(({ flow }) => flow) },
      ...(shown.some(({ met, runTime, plungerSpeed }) => met !== null || runTime !== null || plungerSpeed)
        ? stated
        : []),
    ]),
    ...(pumps.length > MOST_PUMPS ? [`  … and ${pumps.length - MOST_PUMPS} more.`] : []),
  ];
  if (!drift) return lines;
  return [
    ...lines,
    `  After ${formatQuantity(drift.time, 'time')}, as reservoirs empty:`,
    ...tableLines([
      { head: 'port', words: drift.ports.map(({ port }) => port) },
      { head: 'flow in', kind: 'flow', values: drift.ports.map(({ flow }) => flow) },
      { head: 'share', kind: 'share', values: drift.ports.map(({ share }) => share) },
      { head: 'drift', kind: 'share', digits: 2, values: drift.ports.map((entry) => entry.drift) },
    ]),
  ];
}
