import { inUnit, type Kind, metres } from '../../../solver/chip/units.ts';
import { bestUnit, formatNumber, formatQuantity, unitInPrint } from '../../../solver/chip/units-format.ts';
import type { Cell } from '../csv.ts';
import type { Picture } from './picture.ts';

/** The parts that a note is set from: plain data, the same for every paper and every format. */

/** A run of a sentence. */
export type Run = string | { readonly strong: string };

export type Block =
  | { readonly kind: 'words'; readonly runs: readonly Run[]; readonly soft?: boolean }
  | {
      readonly kind: 'facts';
      readonly rows: readonly { readonly name: string; readonly value: readonly Run[] }[];
    }
  | { readonly kind: 'list'; readonly items: readonly (readonly Run[])[] }
  | { readonly kind: 'table'; readonly table: Table }
  | { readonly kind: 'pictures'; readonly pictures: readonly Picture[] }
  /** Lines to write on by hand. */
  | { readonly kind: 'lines'; readonly rows: readonly string[]; readonly heads: readonly string[] };

export interface Section {
  /** Kept with the words of bookmarks and file names. */
  readonly id: string;
  readonly title: string;
  readonly blocks: readonly Block[];
}

export interface Table {
  /** Ends the name of its file of comma-separated values. */
  readonly id: string;
  readonly title: string;
  readonly columns: readonly Column[];
  readonly rows: number;
  /** Rows that miss what was asked, by index. */
  readonly missed?: ReadonlySet<number>;
  /** What is to be said under it; '' for nothing. */
  readonly foot?: string;
  /** How many rows were left out of the pages; the comma-separated values hold them. */
  readonly more?: number;
}

export interface Column {
  readonly head: string;
  /** As in "uL/min"; '' where the column has none. */
  readonly unit: string;
  readonly kind: 'words' | 'figures' | 'verdict';
  /** As set on the page, one per row. */
  readonly texts: readonly string[];
  /** As in the comma-separated values. */
  readonly cells: readonly Cell[];
}

/** What stands for a number that is not defined. */
export const NONE = '–';

export const words = (head: string, texts: readonly string[]): Column => ({
  head,
  unit: '',
  kind: 'words',
  texts,
  cells: texts,
});

/** Yes, no or not judged, in the words given for the two. */
export function verdict(
  head: string,
  met: readonly (boolean | null | undefined)[],
  yes = 'met',
  no = 'missed',
): Column {
  const text = (value: boolean | null | undefined): string =>
    value === undefined ? NONE : value === null ? 'not judged' : value ? yes : no;
  return {
    head,
    unit: '',
    kind: 'verdict',
    texts: met.map(text),
    cells: met.map((value) => value ?? null),
  };
}

/** Fifteen digits: all that a double holds for certain. */
const exact = (value: number): number => Number(value.toPrecision(15));

export interface FigureStyle {
  /** Chosen by the largest value where absent. */
  readonly unit?: string;
  readonly digits?: number;
  readonly signed?: boolean;
}

/** Numbers of one kind (SI, null where not defined) in one unit: the same figures as on the command line. */
export function figures(
  head: string,
  kind: Kind,
  values: readonly (number | null)[],
  style: FigureStyle = {},
): Column {
  const { digits = 4 } = style;
  const largest = values.reduce<number>((most, value) => Math.max(most, Math.abs(value ?? 0)), 0);
  const unit = style.unit ?? bestUnit(largest, kind, digits);
  const text = (value: number | null): string => {
    if (value === null) return NONE;
    const number = inUnit(value, unit);
    const spelt = formatNumber(number, digits);
    return style.signed && value > 0 ? `+${spelt}` : spelt;
  };
  return {
    head,
    unit,
    kind: 'figures',
    texts: values.map(text),
    cells: values.map((value) => (value === null ? null : exact(inUnit(value, unit)))),
  };
}

/** Plan lengths in nm, with as many decimals as the finest of them needs, `most` at most. */
export function planFigures(head: string, nm: readonly number[], unit: 'mm' | 'um' = 'mm', most = 6): Column {
  const numbers = nm.map((value) => exact(inUnit(metres(value), unit)));
  let decimals = unit === 'mm' ? 3 : 0;
  while (decimals < most && numbers.some((value) => Math.abs(value - Number(value.toFixed(decimals))) > 1e-9))
    decimals += 1;
  return {
    head,
    unit,
    kind: 'figures',
    texts: numbers.map((value) => value.toFixed(decimals).replace('-', '−')),
    cells: numbers,
  };
}

/** A column to be filled in by hand. */
export const blank = (head: string, rows: number, unit = ''): Column => ({
  head,
  unit,
  kind: 'words',
  texts: Array.from({ length: rows }, () => ''),
  cells: Array.from({ length: rows }, () => null),
});

export const unitOf = ({ unit }: Column): string => unitInPrint(unit);

/** "2.000 kPa" for a sentence, its unit kept beside it. */
export function figure(value: number | null | undefined, kind: Kind, digits = 4, unit?: string): string {
  if (value === null || value === undefined) return 'not known';
  return formatQuantity(value, kind, { digits, ...(unit && { unit }) }).replaceAll(' ', '\u00a0');
}

/** As many decimals as a round number needs: "50 µm", "0.5 mm", "12.25 µL". */
export function plain(value: number, kind: Kind, unit?: string): string {
  const chosen = unit ?? bestUnit(value, kind, 6);
  const number = Number(inUnit(value, chosen).toPrecision(9));
  const print = unitInPrint(chosen);
  const text = String(number).replace('-', '−');
  return Math.abs(number) >= 1e6 || (number !== 0 && Math.abs(number) < 1e-4)
    ? figure(value, kind, 6, unit)
    : print === '' || print === '°'
      ? text + print
      : `${text}\u00a0${print}`;
}

export const strong = (text: string): Run => ({ strong: text });

export const plainText = (runs: readonly Run[]): string =>
  runs.map((run) => (typeof run === 'string' ? run : run.strong)).join('');

const UNITS = 'nm|µm|mm|cm|m|nL|µL|mL|Pa|kPa|MPa|mPa|s|min|h|ms|°C|°|%|mm/s|µL/min|nL/min|mPa·s|Pa·s';
const BEFORE_UNIT = new RegExp(`(?<=\\d) (?=(?:${UNITS})(?![\\p{L}\\d]))`, 'gu');

/** A sentence whose figures keep their units beside them where it is broken into lines. */
export const unbroken = (text: string): string => text.replaceAll(BEFORE_UNIT, '\u00a0');

export const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count.toLocaleString('en')} ${count === 1 ? one : many}`;

/** A place as results name it (a piece by its channel), for people, with its position on the chip where that is known. */
export function placed(where: string, at?: ReadonlyMap<string, readonly [number, number]>): string {
  const name =
    where === ''
      ? 'the chip'
      : where
          .replace(/^(?:port|chamber):/, '')
          .replace(/^(\w+):(?=.)/, '$1 ')
          .replace(/#\d+$/, '');
  const found = at?.get(where);
  if (!found) return name;
  const [x, y] = found.map((value) => inUnit(value, 'mm').toFixed(2).replace('-', '−'));
  return `${name} (x\u00a0${x}, y\u00a0${y}\u00a0mm)`;
}
