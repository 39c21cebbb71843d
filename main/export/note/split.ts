import type { Chip, Target } from '../../../solver/chip/chip.ts';
import type { Making, Result } from '../../../solver/chip/result.ts';
import { formatQuantity } from '../../../solver/chip/units-format.ts';
import { type Block, type Column, figures, NONE, strong, type Table, verdict, words } from './blocks.ts';

/** How the flow divides, against what was wanted. */

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
      band: entry.band ?? null,
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

export function splitWords({ targets }: Result): Block {
  if (targets.length === 0) return { kind: 'words', runs: ['No target is set; this is what flows.'] };
  const missed = targets.filter(({ met }) => !met).length;
  if (missed === 0) {
    const all = targets.length === 1 ? 'The target is' : `All ${targets.length} targets are`;
    return { kind: 'words', runs: [strong(`${all} met`), '.'] };
  }
  return { kind: 'words', runs: [strong(`${missed} of ${targets.length} targets missed`), '.'] };
}
