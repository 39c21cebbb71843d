import type { Chip, Limit, Target } from '../../solver/chip/chip.ts';
import type { Making, Result } from '../../solver/chip/result.ts';
import { formatNumber, formatQuantity } from '../../solver/chip/units-format.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import { bandColumn } from './band-column.ts';
import { damageText, pumpsText, routesText } from './exposure-text.ts';
import { type Column, NONE, tableLines } from './table.ts';
import { wrapped } from './width.ts';

/** More rows than this are a matter for a file, not for a terminal. */
const MOST_ROWS = 200;

const FLUID_WORDS = {
  water: 'water',
  'glycerol-water': 'glycerol and water',
  saline: 'saline',
  'culture-medium': 'culture medium',
  plasma: 'plasma',
  blood: 'blood',
} as const;

const plural = (count: number, one: string): string => `${count} ${one}${count === 1 ? '' : 's'}`;

function fluidLine(chip: Chip, { fluid }: Result): string {
  const spec = chip.fluid;
  const name = 'name' in spec ? FLUID_WORDS[spec.name] : 'table' in spec ? 'a measured fluid' : 'a fluid';
  const at =
    'temperature' in spec ? ` at ${formatQuantity(spec.temperature, 'temperature', { digits: 3 })}` : '';
  const viscosity =
    fluid.viscosity === null
      ? 'viscosity by shear rate'
      : `viscosity ${formatQuantity(fluid.viscosity, 'viscosity')}`;
  return `Fluid: ${name}${at}, ${viscosity}, density ${formatQuantity(fluid.density, 'density')}.`;
}

const JUNCTIONS = {
  ideal: 'Junctions are ideal: no pressure is lost in them and their wall shear is not known.',
  mixed: 'Junctions are partly solved in three dimensions; the others are ideal.',
  solved: 'Junctions are solved in three dimensions.',
} as const;

function cut<T>(rows: readonly T[], what: string): { shown: readonly T[]; more: string[] } {
  if (rows.length <= MOST_ROWS) return { shown: rows, more: [] };
  return {
    shown: rows.slice(0, MOST_ROWS),
    more: [
      `  … and ${(rows.length - MOST_ROWS).toLocaleString('en')} more ${what}; --csv FILE holds them all.`,
    ],
  };
}

/** What does most of a band: "width of feed, 62 %". */
const chiefText = (making: Making | undefined): string =>
  making?.chief
    ? `${making.chief.what} of ${making.chief.id}, ${formatQuantity(making.chief.part, 'share', { digits: 2 })}`
    : NONE;

/** What tolerances of making do to shares, where any are given; a column of worst cases and what most comes from. */
function makingColumns(makings: readonly (Making | undefined)[]): Column[] {
  if (makings.every((making) => making === undefined)) return [];
  return [
    { head: '± making', kind: 'share', digits: 2, values: makings.map((making) => making?.likely ?? null) },
    { head: 'at worst', kind: 'share', digits: 2, values: makings.map((making) => making?.worst ?? null) },
    { head: 'most from', words: makings.map(chiefText) },
  ];
}

function ports({ ports: all }: Result): string[] {
  const { shown, more } = cut(all, 'ports');
  return [
    'Ports',
    ...tableLines([
      { head: 'port', words: shown.map(({ id }) => id) },
      { head: 'pressure', kind: 'pressure', values: shown.map(({ pressure }) => pressure) },
      { head: 'flow in', kind: 'flow', values: shown.map(({ flow }) => flow) },
      { head: 'share', kind: 'share', values: shown.map(({ share }) => share) },
      ...bandColumn(
        '± solving',
        shown.map(({ band }) => band?.share),
      ),
      ...makingColumns(shown.map(({ making }) => making?.share)),
    ]),
    ...more,
  ];
}

function channels(result: Result): string[] {
  const all = result.channels.flatMap(({ id, pieces }) =>
    pieces.map((piece, i) => ({ name: pieces.length === 1 ? id : `${id}#${i + 1}`, ...piece })),
  );
  const { shown, more } = cut(all, 'pieces of channels');
  return [
    'Channels',
    ...tableLines([
      { head: 'channel', words: shown.map(({ name }) => name) },
      { head: 'from', words: shown.map(({ from }) => from) },
      { head: 'to', words: shown.map(({ to }) => to) },
      { head: 'flow', kind: 'flow', values: shown.map(({ flow }) => flow) },
      { head: 'pressure drop', kind: 'pressure', values: shown.map(({ pressureDrop }) => pressureDrop) },
      { head: 'mean velocity', kind: 'velocity', values: shown.map(({ meanVelocity }) => meanVelocity) },
      { head: 'peak wall shear', kind: 'stress', values: shown.map(({ peakWallShear }) => peakWallShear) },
      // In large chips the worst of the chip stands for each.
      ...bandColumn(
        '± solving',
        shown.map(({ band, peakWallShear }) =>
          peakWallShear === null ? null : (band?.shear ?? result.bands?.shear),
        ),
      ),
      ...(shown.some(({ making }) => making)
        ? ([
            {
              head: '± making',
              kind: 'share',
              digits: 2,
              values: shown.map(({ making }) => making?.shear.likely ?? null),
            },
          ] as const)
        : []),
      { head: 'residence time', kind: 'time', values: shown.map(({ residenceTime }) => residenceTime) },
    ]),
    ...more,
  ];
}

/** Relative, nought where only rounding is left of it. */
function offBy(got: number, wanted: number): number {
  const off = got / Math.abs(wanted) - 1;
  return Math.abs(off) < 1e-9 ? 0 : off;
}

const verdict = (met: boolean | null): string => (met === null ? 'not judged' : met ? 'met' : 'MISSED');

function targets(chip: Chip, { targets: all }: Result): string[] {
  if (all.length === 0) return [];
  const { shown, more } = cut(all, 'targets');
  const spelt = (value: number | null, target: Target): string =>
    value === null
      ? NONE
      : 'share' in target
        ? formatQuantity(value, 'share')
        : formatQuantity(value, 'flow');
  return [
    'Targets',
    ...tableLines([
      { head: 'target', words: shown.map(({ port, channel }) => port ?? channel ?? '') },
      { head: 'wanted', words: shown.map(({ wanted }, i) => spelt(wanted, chip.targets[i]!)) },
      { head: 'got', words: shown.map(({ got }, i) => spelt(got, chip.targets[i]!)) },
      {
        head: 'off by',
        kind: 'share',
        digits: 2,
        values: shown.map(({ wanted, got }) => (got === null ? null : offBy(got, wanted))),
      },
      { head: 'within', kind: 'share', digits: 2, values: shown.map((_, i) => chip.targets[i]!.within) },
      ...bandColumn(
        '± solving',
        shown.map(({ band }) => band),
      ),
      ...(shown.some(({ making }) => making)
        ? ([
            {
              head: '± making',
              kind: 'share',
              digits: 2,
              values: shown.map(({ making }) => making?.likely ?? null),
            },
          ] as const)
        : []),
      { head: '', words: shown.map(({ met }) => verdict(met)) },
    ]),
    ...more,
  ];
}

/** A limit's figure in what it counts in: a stress, a share of floor, a damage. */
function limitFigure(value: number | null, limit: Limit): string {
  if (value === null) return NONE;
  if ('shear' in limit) return formatQuantity(value, 'stress');
  return 'curve' in limit ? formatNumber(value) : formatQuantity(value, 'share');
}

function limits(chip: Chip, { limits: all }: Result): string[] {
  if (all.length === 0) return [];
  const { shown, more } = cut(all, 'limits');
  return [
    'Limits',
    ...tableLines([
      { head: 'limit', words: shown.map(({ name }) => name) },
      { head: 'bearable', words: shown.map(({ limit }, i) => limitFigure(limit, chip.limits[i]!)) },
      { head: 'worst', words: shown.map(({ worst }, i) => limitFigure(worst, chip.limits[i]!)) },
      ...bandColumn(
        '± solving',
        shown.map(({ band }) => band),
      ),
      { head: 'where', words: shown.map(({ where }) => where) },
      { head: '', words: shown.map(({ met }) => verdict(met)) },
    ]),
    ...more,
  ];
}

const SEVERITY = { stop: 'stop', warn: 'warning', note: 'note' } as const;

function findings({ findings: all }: Result, width: number): string[] {
  if (all.length === 0) return [];
  const order = ['stop', 'warn', 'note'] as const;
  const sorted = order.flatMap((severity) => all.filter((finding) => finding.severity === severity));
  const { shown, more } = cut(sorted, 'findings');
  const lines = (finding: Finding): string[] =>
    wrapped(
      `  ${SEVERITY[finding.severity]}${finding.where ? `, ${finding.where}` : ''}: ${finding.says} ${finding.do}`,
      width,
      '    ',
    );
  return [
    'Findings',
    ...shown.flatMap(lines).map((line) => (line.startsWith(' ') ? line : `  ${line}`)),
    ...more,
  ];
}

/** How far the numbers may be off by what the solver knows of its own errors. */
function trustLine({ bands, junctions }: Result): string[] {
  if (!bands) return [];
  const within = (share: number): string =>
    share === 0 ? 'as imposed' : `within ${formatQuantity(share, 'share', { digits: 2 })}`;
  const corners = junctions === 'solved' ? '' : ' (in channels; corners of ideal junctions are not known)';
  return [
    `Solving: shares are right ${within(bands.share)}, flows ${within(bands.flow)}, pressures ${within(bands.pressure)}, wall shear ${within(bands.shear)}${corners}, by the sum of what the solver knows of its own errors.`,
  ];
}

/** What the bands of making mean, where there are any. */
function makingLine({ making }: Result): string[] {
  if (!making) return [];
  return [
    'Making: ± is relative to its figure and as likely to hold as the tolerances are (root of the sum of squares); at worst all are used up against it.',
  ];
}

function balanceLine({ balance }: Result): string {
  const { conservationResidual, powerIn, dissipation } = balance;
  const power = formatQuantity(powerIn, 'power');
  return `Balance: flow kept to ${formatNumber(conservationResidual, 2)} of the throughput; power in ${power}, dissipated ${formatQuantity(dissipation, 'power')}.`;
}

function lastLine(result: Result): string {
  const asked = [
    ...(result.targets.length > 0 ? [plural(result.targets.length, 'target')] : []),
    ...(result.limits.length > 0 ? [plural(result.limits.length, 'limit')] : []),
  ].join(' and ');
  if (asked === '') return 'No target and no limit is set.';
  const missed = [
    ...result.targets.filter(({ met }) => !met).map(({ port, channel }) => port ?? channel ?? ''),
    ...result.limits.filter(({ met }) => met === false).map(({ name }) => name),
  ];
  const open = result.limits.filter(({ met }) => met === null).map(({ name }) => name);
  if (missed.length === 0 && open.length === 0) return `All met: ${asked}.`;
  const said = [
    ...(missed.length > 0
      ? [`Missed: ${missed.slice(0, 10).join(', ')}${missed.length > 10 ? ', …' : ''}.`]
      : []),
    ...(open.length > 0 ? [`Not judged: ${open.slice(0, 10).join(', ')}.`] : []),
  ];
  return said.join(' ');
}

/** Whether all that was asked of the chip is met; what could not be judged is not. */
export const allMet = (result: Result): boolean =>
  result.targets.every(({ met }) => met) && result.limits.every(({ met }) => met === true);

/** The result for people, as lines of text: tables aligned, units said once, what to do beside what was found. */
export function reportText(chip: Chip, result: Result, width = 100): string {
  const blocks: string[][] = [
    [chip.name, ...(chip.note === '' ? [] : wrapped(chip.note, width))],
    [...wrapped(fluidLine(chip, result), width), ...wrapped(JUNCTIONS[result.junctions], width)],
    ports(result),
    channels(result),
    routesText(result),
    damageText(result),
    pumpsText(result),
    targets(chip, result),
    limits(chip, result),
    findings(result, width),
    [
      ...[...trustLine(result), ...makingLine(result)].flatMap((line) => wrapped(line, width)),
      ...wrapped(balanceLine(result), width),
      lastLine(result),
    ],
  ];
  return `${blocks
    .filter((block) => block.length > 0)
    .map((block) => block.join('\n'))
    .join('\n\n')}\n`;
}
