import { inUnit, type Kind } from '../../solver/chip/units.ts';
import { bestUnit, formatNumber, unitInPrint } from '../../solver/chip/units-format.ts';

/** A space that does not break, between a figure and its unit. */
const SPACE = '\u00a0';

/** Units that a person chose to see, by kind; the ladder of the kind where there is none. */
export type UnitHabit = Readonly<Partial<Record<Kind, string>>>;
let habit: UnitHabit = {};

/** Sets the units in which figures are shown from now on. */
export function showIn(units: UnitHabit): void {
  habit = units;
}

export interface Style {
  /** Fixed unit; the person's habit or the ladder of the kind where absent. */
  readonly unit?: string;
  /** Significant digits, 4 where nothing limits them. */
  readonly digits?: number;
  /** Relative error of the value: no more digits are shown than it leaves standing. */
  readonly error?: number;
  /** Sign even where positive. */
  readonly signed?: boolean;
}

/** Significant digits that a relative error leaves standing: 2 at 5 %, 3 at 0.4 %; from 2 to 6. */
export function digitsFor(error: number): number {
  if (!(error > 0)) return 6;
  return Math.min(6, Math.max(2, Math.floor(-Math.log10(2 * error)) + 1));
}

/** The unit in which figures of a kind and about this size are shown. */
export const unitFor = (value: number, kind: Kind): string => habit[kind] ?? bestUnit(value, kind);

/** A plain number in significant digits, thousands parted. */
export function number(value: number, digits = 4): string {
  if (Number.isNaN(value)) return 'no number';
  const text = formatNumber(value, digits);
  const [wholePart, fraction] = text.split('.');
  if (!/^−?\d{5,}$/.test(wholePart!)) return text.replaceAll(' ', SPACE);
  const grouped = wholePart!.replace(/\B(?=(\d{3})+$)/g, ',');
  return fraction ? `${grouped}.${fraction}` : grouped;
}

/** "312 mbar", "2.464 µL/min", "1.83 Pa": an SI value of a kind, with its unit. */
export function figure(value: number | null | undefined, kind: Kind, style: Style = {}): string {
  if (value === null || value === undefined) return 'not known';
  const unit = style.unit ?? unitFor(value, kind);
  const text = figureIn(value, unit, style);
  if (unit === '') return text;
  return unit === 'deg' ? `${text}°` : `${text}${SPACE}${unitInPrint(unit)}`;
}

/** The figure alone, in a given unit, without it. */
export function figureIn(value: number, unit: string, style: Style = {}): string {
  const digits = style.digits ?? (style.error === undefined ? 4 : Math.min(4, digitsFor(style.error)));
  const text = number(inUnit(value, unit), digits);
  return style.signed && value > 0 ? `+${text}` : text;
}

/** A length of the plan, in nm. */
export const lengthFigure = (nm: number, style: Style = {}): string => figure(nm / 1e9, 'length', style);

/** A value as it would be typed: the shortest decimals that mean the same, with its unit. */
export function typed(value: number, kind: Kind, unit: string): string {
  // 12 digits hide the rounding of the conversion and nothing a person typed
  const text = String(Number(inUnit(value, unit).toPrecision(12)));
  return kind === 'number' || unit === '' ? text : `${text} ${unitInPrint(unit)}`;
}

const WORDS = [
  'no',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
];

/** A count in figures alone: "3", "12,040". */
export const tally = (n: number): string => number(n, String(n).length);

/** Small counts in words, larger ones in figures: "three", "1204". */
export const count = (n: number): string => WORDS[n] ?? tally(n);

/** "one well", "three wells". */
export const counted = (n: number, one: string, many = `${one}s`): string =>
  `${count(n)} ${n === 1 ? one : many}`;

export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
