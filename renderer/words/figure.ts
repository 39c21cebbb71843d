import { inUnit, KINDS, type Kind } from '../../solver/chip/units.ts';

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const MINUS = '−';
/** A space that neither breaks nor stretches, between a figure and its unit. */
const THIN = '\u202f';

/** Units as people read them: "uL/min" is "µL/min", "Pa.s/m^3" is "Pa·s/m³". */
export function unitText(unit: string): string {
  return unit
    .replace(/\bu(?=[A-Za-z])/g, 'µ')
    .replace('deg', '°')
    .replace(/\./g, '·')
    .replace(
      /\^(-?)(\d)/g,
      (_, sign: string, digit: string) => `${sign && '⁻'}${SUPERSCRIPTS[Number(digit)]}`,
    );
}

export interface Style {
  /** Fixed unit; the ladder of the kind where absent. */
  readonly unit?: string;
  /** Significant digits, 4 where nothing limits them. */
  readonly digits?: number;
  /** Relative error of the value: no more digits are shown than it leaves standing. */
  readonly error?: number;
  /** Sign even where positive. */
  readonly signed?: boolean;
}

/** Significant digits that a relative error leaves standing: 2 at 5 %, 3 at 0.5 %; from 2 to 6. */
export function digitsFor(error: number): number {
  if (!(error > 0)) return 6;
  return Math.min(6, Math.max(2, Math.floor(-Math.log10(2 * error)) + 1));
}

/** The unit of the kind's ladder that suits a magnitude. */
export function unitFor(value: number, kind: Kind): string {
  const size = Math.abs(value);
  let unit: string = KINDS[kind].ladder[0]![0];
  for (const [name, from] of KINDS[kind].ladder) if (size >= from * (1 - 1e-12)) unit = name;
  return size === 0 ? KINDS[kind].units[1 % KINDS[kind].units.length]! : unit;
}

/** A plain number in `digits` significant digits, with a true minus and powers of ten beyond 1e5 and 1e-3. */
export function number(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return value > 0 ? 'beyond all' : value < 0 ? 'below all' : 'no number';
  if (value === 0) return '0';
  const size = Math.abs(value);
  const sign = value < 0 ? MINUS : '';
  if (size >= 1e6 || size < 1e-3) {
    const [mantissa, exponent] = size.toExponential(Math.min(digits, 3) - 1).split('e');
    const power = Number(exponent);
    const raised = [...String(Math.abs(power))].map((digit) => SUPERSCRIPTS[Number(digit)]).join('');
    return `${sign}${mantissa}\u202f×\u202f10${power < 0 ? '⁻' : ''}${raised}`;
  }
  const places = Math.max(0, digits - 1 - Math.floor(Math.log10(size)));
  const text = places > 0 ? size.toFixed(Math.min(places, 12)) : size.toFixed(0);
  const [wholePart, fraction] = text.split('.');
  const grouped = wholePart!.length > 4 ? wholePart!.replace(/\B(?=(\d{3})+$)/g, ',') : wholePart!;
  return `${sign}${grouped}${fraction ? `.${fraction}` : ''}`;
}

/** "312 mbar", "2.464 µL/min", "1.83 Pa": an SI value of a kind, with its unit. */
export function figure(value: number | null | undefined, kind: Kind, style: Style = {}): string {
  if (value === null || value === undefined) return 'not known';
  const unit = style.unit ?? unitFor(value, kind);
  const text = figureIn(value, unit, style);
  return unit === '' ? text : `${text}${THIN}${unitText(unit)}`;
}

/** The figure alone, in a given unit, without it. */
export function figureIn(value: number, unit: string, style: Style = {}): string {
  const digits = style.digits ?? (style.error === undefined ? 4 : Math.min(4, digitsFor(style.error)));
  const text = number(inUnit(value, unit), digits);
  return style.signed && value > 0 ? `+${text}` : text;
}

/** A length of the plan, in nm. */
export const lengthFigure = (nm: number, style: Style = {}): string => figure(nm / 1e9, 'length', style);

/** A value as it would be typed: shortest decimals that mean the same, plain letters, with its unit. */
export function typed(value: number, kind: Kind, unit: string): string {
  const inside = inUnit(value, unit);
  // 12 digits hide the rounding of the conversion and nothing a person typed
  const text = String(Number(inside.toPrecision(12)));
  return kind === 'number' || unit === '' ? text : `${text} ${unitText(unit)}`;
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

/** Small counts in words, larger ones in figures: "three", "1,204". */
export const count = (n: number): string => WORDS[n] ?? number(n, String(n).length);

/** "one well", "three wells". */
export const counted = (n: number, one: string, many = `${one}s`): string =>
  `${count(n)} ${n === 1 ? one : many}`;

export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
