import type { Making, PieceResult, Result } from '../../solver/chip/result.ts';
import { inUnit } from '../../solver/chip/units.ts';
import { type Cell, csvText } from './csv.ts';

/** Columns in the order of the file, each with the unit that its numbers are given in ('' for none). */
const COLUMNS = {
  kind: null,
  id: null,
  from: null,
  to: null,
  length: 'mm',
  pressure: 'Pa',
  flow: 'uL/min',
  share: '%',
  'pressure drop': 'Pa',
  resistance: 'Pa.s/m^3',
  'mean velocity': 'mm/s',
  'peak velocity': 'mm/s',
  'Reynolds number': '',
  'peak wall shear': 'Pa',
  'mean wall shear': 'Pa',
  'residence time': 's',
  wanted: null,
  got: null,
  met: null,
  'making likely': '%',
  'making worst': '%',
  'making mostly': null,
  '± share': '%',
  '± flow': '%',
  '± residence time': '%',
  '± wall shear': '%',
  '± got': '%',
} as const;
type Column = keyof typeof COLUMNS;

type Row = { readonly [K in Column]?: Cell };

const PERCENT = '%';

/** Relative to the figure that the row is about: a port's share, a piece's peak wall shear, what a target got. */
const makingCells = (making: Making | undefined): Row =>
  making
    ? {
        'making likely': making.likely,
        'making worst': making.worst,
        'making mostly': making.chief ? `${making.chief.what} of ${making.chief.id}` : null,
      }
    : {};

interface Bands {
  readonly share?: number;
  readonly flow?: number;
  readonly time?: number;
  readonly shear?: number;
}

/** How far figures of the row may be off by what the solver knows of its errors, relative to them. */
const bandCells = (band: Bands | undefined): Row =>
  band
    ? {
        '± share': band.share ?? null,
        '± flow': band.flow ?? null,
        '± residence time': band.time ?? null,
        '± wall shear': band.shear ?? null,
      }
    : {};

function pieceRow(id: string, piece: PieceResult): Row {
  return {
    kind: 'piece',
    id,
    from: piece.from,
    to: piece.to,
    length: piece.length,
    flow: piece.flow,
    'pressure drop': piece.pressureDrop,
    resistance: piece.resistance,
    'mean velocity': piece.meanVelocity,
    'peak velocity': piece.peakVelocity,
    'Reynolds number': piece.reynolds,
    'peak wall shear': piece.peakWallShear,
    'mean wall shear': piece.meanWallShear,
    'residence time': piece.residenceTime,
    ...makingCells(piece.making?.shear),
    ...bandCells(piece.band),
  };
}

/** A share is wanted and got in per cent, a flow in microlitres a minute. */
function targetRow(target: Result['targets'][number], isShare: boolean): Row {
  const unit = isShare ? PERCENT : COLUMNS.flow;
  const spelt = (value: number | null): number | null =>
    value === null ? null : figure(inUnit(value, unit));
  return {
    kind: isShare ? `target share (${PERCENT})` : `target flow (${unit})`,
    id: target.port ?? target.channel ?? '',
    wanted: spelt(target.wanted),
    got: spelt(target.got),
    met: target.met,
    '± got': target.band ?? null,
    ...makingCells(target.making),
  };
}

/** Fifteen digits: all that a double holds for certain, without the noise of the sixteenth. */
const figure = (value: number): number => Number(value.toPrecision(15));

function cells(row: Row): Cell[] {
  return (Object.keys(COLUMNS) as Column[]).map((column) => {
    const value = row[column] ?? null;
    const unit = COLUMNS[column];
    return typeof value === 'number' ? figure(unit === null ? value : inUnit(value, unit)) : value;
  });
}

/**
 * The result as one table: a row for every port, piece of channel, route, target and limit, told apart
 * by the first column. What does not apply to a row, or is not defined, is empty.
 *
 * @param isShare whether target i asks for a share; else it asks for a flow
 */
export function resultCsv(result: Result, isShare: (target: number) => boolean): string {
  const rows: Row[] = [
    ...result.ports.map(({ id, pressure, flow, share, making, band }) => ({
      kind: 'port',
      id,
      pressure,
      flow,
      share,
      ...makingCells(making?.share),
      ...bandCells(band),
    })),
    ...result.channels.flatMap(({ id, pieces }) =>
      pieces.map((piece, i) => pieceRow(`${id}#${i + 1}`, piece)),
    ),
    ...result.routes.map(({ from, to, share, residenceTime, peakWallShear, band }) => ({
      kind: 'route',
      from,
      to,
      share,
      'peak wall shear': peakWallShear,
      'residence time': residenceTime,
      ...bandCells(band),
    })),
    ...result.targets.map((target, i) => targetRow(target, isShare(i))),
    ...result.limits.map(({ name, where, limit, worst, met, band }) => ({
      kind: 'limit (SI)',
      id: name,
      from: where,
      wanted: limit,
      got: worst,
      met,
      '± got': band ?? null,
    })),
  ];
  const header = Object.entries(COLUMNS).map(([column, unit]) => (unit ? `${column} (${unit})` : column));
  return csvText(header, rows.map(cells));
}
