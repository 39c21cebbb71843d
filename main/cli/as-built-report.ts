import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Restored, Setting } from '../../solver/asbuilt/restore.ts';
import type { Chip, Drive } from '../../solver/chip/chip.ts';
import type { Making } from '../../solver/chip/result.ts';
import { formatQuantity } from '../../solver/chip/units-format.ts';
import { tableLines } from './table.ts';
import { wrapped } from './width.ts';

const driveText = (drive: Drive): string => {
  switch (drive.kind) {
    case 'pressure':
      return drive.pressure === 0 ? 'open' : formatQuantity(drive.pressure, 'pressure', { digits: 5 });
    case 'flow':
      return formatQuantity(drive.flow, 'flow', { digits: 5 });
    case 'head':
      return `${formatQuantity(drive.head, 'length', { digits: 5 })} above the chip`;
    case 'closed':
      return 'closed';
  }
};

const HELD = {
  pump: 'at what its pump can do',
  rating: 'at what the chip is rated for',
  sign: 'at nought',
} as const;

/** Relative changes smaller than this are rounding: the solve resolves no more. */
const RESOLVED = 1e-9;

function off(now: number | null | undefined, before: number | null | undefined): number | null {
  if (now == null || before == null || before === 0) return null;
  const change = now / before - 1;
  return Math.abs(change) < RESOLVED ? 0 : change;
}

const likely = (making: Making | undefined): number | null => making?.likely ?? null;

function ports({ drawn, result }: AsBuilt): string[] {
  const rows = result.ports;
  const before = new Map(drawn.ports.map((port) => [port.id, port]));
  return [
    'Ports, drawn and made',
    ...tableLines([
      { head: 'port', words: rows.map(({ id }) => id) },
      { head: 'flow drawn', kind: 'flow', values: rows.map(({ id }) => before.get(id)?.flow ?? null) },
      { head: 'flow made', kind: 'flow', values: rows.map(({ flow }) => flow) },
      { head: 'share drawn', kind: 'share', values: rows.map(({ id }) => before.get(id)?.share ?? null) },
      { head: 'share made', kind: 'share', values: rows.map(({ share }) => share) },
      {
        head: 'changed by',
        kind: 'share',
        digits: 2,
        values: rows.map(({ id, share }) => off(share, before.get(id)?.share)),
      },
      { head: '± of it', kind: 'share', digits: 2, values: rows.map(({ making }) => likely(making?.share)) },
      { head: 'pressure made', kind: 'pressure', values: rows.map(({ pressure }) => pressure) },
    ]),
  ];
}

/** The channels with the highest shear: all of them are in the JSON. */
const MOST_CHANNELS = 12;

function shears({ drawn, result }: AsBuilt): string[] {
  const rows = result.channels
    .flatMap(({ id, pieces }, c) =>
      pieces.map((piece, p) => ({
        name: pieces.length === 1 ? id : `${id}#${p + 1}`,
        made: piece.peakWallShear,
        making: piece.making?.shear,
        drawn: drawn.channels[c]?.pieces[p]?.peakWallShear ?? null,
      })),
    )
    .filter(({ made }) => made !== null)
    .sort((a, b) => b.made! - a.made!)
    .slice(0, MOST_CHANNELS);
  if (rows.length === 0) return [];
  return [
    'Highest wall shear, drawn and made',
    ...tableLines([
      { head: 'channel', words: rows.map(({ name }) => name) },
      { head: 'drawn', kind: 'stress', values: rows.map((row) => row.drawn) },
      { head: 'made', kind: 'stress', values: rows.map(({ made }) => made) },
      { head: 'changed by', kind: 'share', digits: 2, values: rows.map((row) => off(row.made, row.drawn)) },
      { head: '± of it', kind: 'share', digits: 2, values: rows.map(({ making }) => likely(making)) },
    ]),
  ];
}

function targets(chip: Chip, { drawn, result, restored }: AsBuilt): string[] {
  const rows = result.targets;
  if (rows.length === 0) return [];
  const spelt = (value: number | null | undefined, i: number): string =>
    value == null ? '–' : formatQuantity(value, 'share' in chip.targets[i]! ? 'share' : 'flow');
  return [
    'Targets',
    ...tableLines([
      { head: 'target', words: rows.map(({ port, channel }) => port ?? channel ?? '') },
      { head: 'wanted', words: rows.map(({ wanted }, i) => spelt(wanted, i)) },
      { head: 'drawn', words: rows.map((_, i) => spelt(drawn.targets[i]?.got, i)) },
      { head: 'made', words: rows.map(({ got }, i) => spelt(got, i)) },
      {
        head: 'off by',
        kind: 'share',
        digits: 2,
        values: rows.map(({ got, wanted }) => off(got, Math.abs(wanted))),
      },
      { head: '± of it', kind: 'share', digits: 2, values: rows.map(({ making }) => likely(making)) },
      { head: '', words: rows.map(({ met }) => (met ? 'met' : 'MISSED')) },
      ...(restored
        ? [
            { head: 'restored', words: rows.map((_, i) => spelt(restored.result.targets[i]?.got, i)) },
            { head: '', words: restored.result.targets.map(({ met }) => (met ? 'met' : 'MISSED')) },
          ]
        : []),
    ]),
  ];
}

const settingLine = ({ port, from, to, held }: Setting): string =>
  `  ${port}: ${driveText(to)} in place of ${driveText(from)}${held ? `, ${HELD[held]}` : ''}`;

/** How near drives come: "the worst target 1.7 % off, 1 % is allowed". */
function nearest(chip: Chip, { result }: Restored): string {
  const worst = result.targets
    .flatMap(({ got, wanted, port, channel }, i) =>
      got === null
        ? []
        : [
            {
              name: port ?? channel ?? '',
              off: Math.abs(got / Math.abs(wanted) - 1),
              within: chip.targets[i]!.within,
            },
          ],
    )
    .reduce<{ name: string; off: number; within: number } | null>(
      (a, b) => (a && a.off / a.within >= b.off / b.within ? a : b),
      null,
    );
  if (!worst) return 'no target can be resolved';
  const per = (share: number): string => formatQuantity(share, 'share', { digits: 2 });
  return `the worst is ${worst.name}, ${per(worst.off)} off where ${per(worst.within)} is allowed`;
}

function drives(chip: Chip, { restored, wider, result }: AsBuilt, width: number): string[] {
  if (!restored) return ['No target is given, so there is nothing that drives could restore.'];
  const lines: string[] = [];
  if (restored.settings.length === 0) {
    lines.push(
      ...wrapped(
        restored.met
          ? 'The made chip meets its targets as it is driven.'
          : `No setting of the drives brings the made chip nearer to its targets: ${nearest(chip, restored)}. The channels themselves divide the flow.`,
        width,
      ),
    );
  } else {
    lines.push(
      ...wrapped(
        restored.met
          ? result.targets.every(({ met }) => met)
            ? 'The made chip meets its targets as it is driven; drives that bring them nearer still'
            : 'Drives that restore the targets'
          : `Drives alone do not restore the targets; nearest (${nearest(chip, restored)})`,
        width,
      ),
      ...restored.settings.map(settingLine),
    );
    const missed = restored.result.limits.filter(({ met }) => met === false).map(({ name }) => name);
    if (missed.length > 0)
      lines.push(...wrapped(`With them a limit is missed: ${missed.join(', ')}.`, width));
  }
  if (wider) {
    lines.push(
      ...wrapped(
        wider.met
          ? 'The targets would be met if open ports were held at a pressure too'
          : `Nearer still if open ports were held at a pressure too (${nearest(chip, wider)})`,
        width,
      ),
      ...wider.settings.map(settingLine),
    );
  }
  if (restored.settings.length > 0 || wider) {
    lines.push(
      ...wrapped(
        'Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.',
        width,
      ),
    );
  }
  return lines;
}

/** The made chip beside the drawn one, for people. */
export function asBuiltText(chip: Chip, built: AsBuilt, width = 100): string {
  const { measured, assumed, says } = built;
  const counted = (n: number, one: string): string => `${n} ${one}${n === 1 ? '' : 's'}`;
  const blocks: string[][] = [
    [
      built.chip.name,
      ...wrapped(
        `The width of ${counted(measured, 'channel')} was measured${assumed > 0 ? `; ${assumed} more ${assumed === 1 ? 'counts' : 'count'} as drawn, with what is tolerated` : ''}.`,
        width,
      ),
      ...says.flatMap((line) => wrapped(line, width)),
    ],
    ports(built),
    shears(built),
    targets(chip, built),
    drives(chip, built, width),
  ];
  return `${blocks
    .filter((block) => block.length > 0)
    .map((block) => block.join('\n'))
    .join('\n\n')}\n`;
}
