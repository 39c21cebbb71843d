import type { Chip } from '../chip/chip.ts';
import { nearest } from '../chip/schema-nearest.ts';
import { type Kind, metres, parseQuantity, quantityOrNull } from '../chip/units.ts';
import { ratioToNumber } from '../chip/units-exact.ts';
import { formatQuantity } from '../chip/units-format.ts';
import { Problem, type ProblemKind } from '../problem/problem.ts';
import { COLUMNS, type Column, type Measured, type MeasuredTable, MOST_ROWS } from './measured.ts';
import { lengthAlong } from './place.ts';

interface Head {
  /** Index of each column, −1 where the table has none. */
  readonly at: Readonly<Record<Column, number>>;
  /** Its unit where the head names one: "value (um)", "value, um". */
  readonly unit: Readonly<Partial<Record<Column, string>>>;
}

const WHATS = ['depth', 'width', 'bias'] as const;
/** Sizes beyond these are slips of a unit. */
const LEAST = 1e-8;
const MOST = 0.1;

/** Where a fault lies, as people count: the head is row 1. */
const placeOf = (row: number, column?: string): string =>
  column === undefined ? `row ${row}` : `row ${row}, column ${column}`;

function refuse(kind: ProblemKind, what: string, where: string, remedy: string): never {
  throw new Problem(kind, what, where, remedy);
}

const shown = (text: string): string => `"${text.length > 40 ? `${text.slice(0, 40)}…` : text}"`;

/**
 * Measurements from a table whose first row names its columns: part (a channel or a layer), what (depth, width,
 * bias), value, and where given uncertainty, along (distance along the channel) or x and y (place on the chip), note.
 * A number without a unit is in its column's unit, else in the chip's length unit. Throws `Problem` with row and column.
 */
export function readMeasured({ rows, lines }: MeasuredTable, chip: Chip): Measured[] {
  const blank = (row: readonly string[]): boolean => row.every((cell) => cell.trim() === '');
  const first = rows.findIndex((row) => !blank(row));
  if (first < 0) {
    refuse(
      'missing',
      'The table is empty.',
      placeOf(1),
      'Begin with a row that names the columns: part, what, value.',
    );
  }
  if (rows.length - first > MOST_ROWS + 1) {
    refuse(
      'too-many',
      `The table has more than ${MOST_ROWS.toLocaleString('en')} rows.`,
      placeOf(lines[first]),
      'Keep the rows that are about this chip.',
    );
  }
  const head = readHead(rows[first], lines[first]);
  const found: Measured[] = [];
  for (let i = first + 1; i < rows.length; i += 1) {
    if (blank(rows[i])) continue;
    if (
      rows[i].length > rows[first].length &&
      rows[i].slice(rows[first].length).some((cell) => cell.trim() !== '')
    ) {
      refuse(
        'shape',
        `The row has ${rows[i].length} cells under ${rows[first].length} heads.`,
        placeOf(lines[i]),
        'Quote a cell that holds the separator, or name the column.',
      );
    }
    if (open(rows[i], head)) continue;
    found.push(readRow(rows[i], lines[i], head, chip));
  }
  if (found.length === 0) {
    refuse(
      'missing',
      'The table has a head but no measurement.',
      placeOf(lines[first]),
      'Give one measurement to a row.',
    );
  }
  return found;
}

/** Whether a row is one of a table to be filled in, and was not. */
const open = (row: readonly string[], { at }: Head): boolean =>
  at.drawn >= 0 &&
  (row[at.drawn] ?? '').trim() !== '' &&
  [at.value, at.uncertainty].every((column) => column < 0 || (row[column] ?? '').trim() === '');

function readHead(cells: readonly string[], row: number): Head {
  const at: Record<Column, number> = {
    part: -1,
    what: -1,
    value: -1,
    uncertainty: -1,
    along: -1,
    x: -1,
    y: -1,
    drawn: -1,
    note: -1,
  };
  const unit: Partial<Record<Column, string>> = {};
  const words = Object.entries(COLUMNS).flatMap(([column, names]) =>
    names.map((name) => [name, column as Column] as const),
  );
  cells.forEach((cell, index) => {
    const text = cell.trim();
    if (text === '') return;
    const match = /^(.*?)\s*(?:[([]\s*([^)\]]*?)\s*[)\]]|,\s*(\S+))?$/.exec(text)!;
    const name = match[1].toLowerCase();
    const column = words.find(([word]) => word === name)?.[1];
    if (column === undefined) {
      const close = nearest(name, Object.keys(COLUMNS));
      refuse(
        'unknown-key',
        `${shown(text)} is no column known here.`,
        placeOf(row, String(index + 1)),
        `${close === undefined ? '' : `Did you mean "${close}"? `}Known: ${Object.keys(COLUMNS).join(', ')}.`,
      );
    }
    if (at[column] >= 0) {
      refuse(
        'duplicate',
        `Two columns are the ${column}.`,
        placeOf(row, String(index + 1)),
        'Take one of them away.',
      );
    }
    at[column] = index;
    const spelt = match[2] ?? match[3];
    if (spelt === undefined || spelt === '') return;
    if (quantityOrNull(`1 ${spelt}`, 'length') === null && !(column === 'uncertainty' && spelt === '%')) {
      refuse(
        'quantity',
        `${shown(spelt)} is no unit of length.`,
        placeOf(row, text),
        'Write the unit as in "value (um)".',
      );
    }
    unit[column] = spelt;
  });
  for (const column of ['part', 'what', 'value'] as const) {
    if (at[column] >= 0) continue;
    refuse(
      'missing',
      `No column is the ${column}.`,
      placeOf(row),
      'The first row names the columns: part, what, value; and where known uncertainty, along, x, y.',
    );
  }
  return { at, unit };
}

function readRow(cells: readonly string[], row: number, head: Head, chip: Chip): Measured {
  const cell = (column: Column): string => (head.at[column] < 0 ? '' : (cells[head.at[column]] ?? '').trim());
  const number = (column: Column, kind: Kind = 'length'): number => {
    const parsed = parseQuantity(cell(column), kind, head.unit[column] ?? chip.lengthUnit);
    if (!parsed.ok) refuse('quantity', `The ${column} ${parsed.what}`, placeOf(row, column), parsed.remedy);
    return ratioToNumber(parsed.exact);
  };
  const { of, id } = partOf(cell('part'), row, chip);
  const what = WHATS.find((word) => word === cell('what').toLowerCase());
  if (what === undefined) {
    refuse(
      'quantity',
      cell('what') === ''
        ? 'It is not said what was measured.'
        : `${shown(cell('what'))} is nothing measured here.`,
      placeOf(row, 'what'),
      'Write depth, width, or bias (by how much the widths of a layer came out larger).',
    );
  }
  if (cell('value') === '')
    refuse(
      'missing',
      'The value is missing.',
      placeOf(row, 'value'),
      'Write what was measured, such as "48.6 um".',
    );
  const value = number('value');
  if (what === 'bias' ? Math.abs(value) > MOST : !(value >= LEAST && value <= MOST)) {
    refuse(
      'range',
      `A ${what} of ${formatQuantity(value, 'length')} is none that a channel has.`,
      placeOf(row, 'value'),
      'Check the number and its unit.',
    );
  }
  checkFit(what, of, id, row, chip);
  const along = cell('along') === '' ? null : number('along');
  const [x, y] = [cell('x'), cell('y')];
  if ((x === '') !== (y === '')) {
    refuse(
      'missing',
      `A place needs x and y; ${x === '' ? 'x' : 'y'} is missing.`,
      placeOf(row, x === '' ? 'x' : 'y'),
      'Give both, or neither.',
    );
  }
  const at = x === '' ? null : ([number('x'), number('y')] as const);
  checkPlace(along, at, of, id, row, chip);
  return {
    what,
    of,
    id,
    value,
    uncertainty: uncertaintyOf(cell('uncertainty'), head, what === 'bias' ? MOST : value, row, chip),
    along,
    at,
    row,
  };
}

/** A name that a spreadsheet would run as a formula, without the apostrophe that keeps it text. */
const unkept = (text: string): string => text.replace(/^'(?=[=+\-@\uff1d\uff0b\uff0d\uff20])/, '');

function partOf(
  written: string,
  row: number,
  chip: Chip,
): { readonly of: 'layer' | 'channel'; readonly id: string } {
  const known = [...chip.channels, ...chip.layers].some(({ id }) => id === written);
  const text = known ? written : unkept(written);
  if (text === '')
    refuse(
      'missing',
      'It is not said which part was measured.',
      placeOf(row, 'part'),
      'Name a channel or a layer.',
    );
  const channel = chip.channels.some(({ id }) => id === text);
  const layer = chip.layers.some(({ id }) => id === text);
  if (channel && layer) {
    refuse(
      'reference',
      `${shown(text)} is a channel and a layer.`,
      placeOf(row, 'part'),
      'Rename one of the two in the chip.',
    );
  }
  if (channel) return { of: 'channel', id: text };
  if (layer) return { of: 'layer', id: text };
  const close = nearest(
    text,
    [...chip.layers, ...chip.channels].map(({ id }) => id),
  );
  return refuse(
    'reference',
    `The chip has no channel and no layer ${shown(text)}.`,
    placeOf(row, 'part'),
    close === undefined ? 'Name a channel or a layer of the chip.' : `Did you mean "${close}"?`,
  );
}

function checkFit(what: Measured['what'], of: Measured['of'], id: string, row: number, chip: Chip): void {
  if (what === 'width' && of === 'layer') {
    refuse(
      'quantity',
      `Layer ${shown(id)} has no width of its own.`,
      placeOf(row, 'what'),
      'Name the channel, or write bias for what all widths of the layer came out larger.',
    );
  }
  if (what === 'bias' && of === 'channel') {
    refuse(
      'quantity',
      `Channel ${shown(id)} is given a bias.`,
      placeOf(row, 'what'),
      'Give its width, or name the layer.',
    );
  }
  const layerId = of === 'layer' ? id : chip.channels.find((channel) => channel.id === id)!.layer;
  const { profile } = chip.layers.find((layer) => layer.id === layerId)!;
  if (what !== 'depth' && profile.kind === 'polygon') {
    refuse(
      'profile',
      `The cross-section on layer ${shown(layerId)} is a measured outline, which no width scales.`,
      placeOf(row, 'what'),
      'Measure the outline anew, or leave the width out.',
    );
  }
}

function checkPlace(
  along: number | null,
  at: readonly [number, number] | null,
  of: Measured['of'],
  id: string,
  row: number,
  chip: Chip,
): void {
  if (along !== null && of === 'layer') {
    refuse(
      'quantity',
      `A layer has nothing to go along.`,
      placeOf(row, 'along'),
      'Give x and y, or name the channel.',
    );
  }
  if (along !== null && at !== null) {
    refuse(
      'duplicate',
      'The place is given twice, along the channel and on the chip.',
      placeOf(row, 'along'),
      'Give one of the two.',
    );
  }
  if (along !== null) {
    const length = metres(lengthAlong(chip.channels.find((channel) => channel.id === id)!));
    if (along < 0 || along > length * (1 + 1e-9)) {
      refuse(
        'range',
        `${formatQuantity(along, 'length')} along is beyond channel ${shown(id)}, which is ${formatQuantity(length, 'length')} long.`,
        placeOf(row, 'along'),
        'Count from the first point of the channel.',
      );
    }
  }
  const { width, height } = chip.outline;
  if (at && !(at[0] >= 0 && at[0] <= metres(width) && at[1] >= 0 && at[1] <= metres(height))) {
    refuse(
      'range',
      `The place lies outside the chip, which is ${formatQuantity(metres(width), 'length')} by ${formatQuantity(metres(height), 'length')}.`,
      placeOf(row, 'x'),
      'Count from the lower left corner of the chip; check the unit.',
    );
  }
}

/** A length, or a share of the value; below `value`. */
function uncertaintyOf(text: string, head: Head, value: number, row: number, chip: Chip): number | null {
  const plain = text.replace(/^(±|\+\/-)\s*/, '');
  if (plain === '') return null;
  const bare = head.unit.uncertainty ?? head.unit.value ?? chip.lengthUnit;
  const share = parseQuantity(plain, 'share', bare === '%' ? '%' : undefined);
  const parsed = share.ok && /[%‰]/.test(plain + bare) ? share : parseQuantity(plain, 'length', bare);
  if (!parsed.ok) {
    refuse(
      'quantity',
      `The uncertainty ${parsed.what}`,
      placeOf(row, 'uncertainty'),
      'Write it as "0.5 um" or "2 %".',
    );
  }
  const size = ratioToNumber(parsed.exact) * (parsed === share ? value : 1);
  if (!(size >= 0 && size < value)) {
    refuse(
      'range',
      size < 0 ? 'The uncertainty is negative.' : 'The uncertainty is as large as what was measured.',
      placeOf(row, 'uncertainty'),
      'Give the ± of the value.',
    );
  }
  return size;
}
