import { inUnit, KINDS, type Kind } from './units.ts';

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

const raised = (power: number | string): string =>
  [...String(power)].map((sign) => (sign === '-' ? '⁻' : SUPERSCRIPTS[Number(sign)]!)).join('');

/** A unit in print: "uL/min" is µL/min, "Pa.s/m^3" is Pa·s/m³. */
export function unitInPrint(unit: string): string {
  return unit
    .replace(/\bu(?=[a-zA-Z])/g, 'µ')
    .replace(/\./g, '·')
    .replace(/\^(-?\d)/g, (_, power: string) => raised(power))
    .replace(/^deg(?=[CF]$)/, '°')
    .replace(/^deg$/, '°');
}

/**
 * `value` to `digits` significant digits in plain decimals, or as 4.06 × 10¹³ where it is 1e6 and more,
 * or below 1e-4.
 */
export function formatNumber(value: number, digits = 4): string {
  if (value === 0) return '0';
  if (!Number.isFinite(value)) return Number.isNaN(value) ? 'not a number' : value > 0 ? '∞' : '−∞';
  const [mantissa, exponent] = value.toExponential(digits - 1).split('e') as [string, string];
  const power = Number(exponent);
  if (power >= 6 || power < -4) return `${mantissa.replace('-', '−')} × 10${raised(power)}`;
  // Digits left of the point beyond the significant ones are rounded away too: 12345 to three is 12300.
  const rounded = Number(`${mantissa}e${exponent}`);
  return rounded.toFixed(Math.max(0, digits - 1 - power)).replace('-', '−');
}

/** The unit of the kind in which `value` (SI) reads best when given to `digits` significant digits. */
export function bestUnit(value: number, kind: Kind, digits = 4): string {
  const row = KINDS[kind];
  if (value === 0 || !Number.isFinite(value)) return row.example.replace(/^\S+ ?/, '');
  const size = Math.abs(Number(value.toPrecision(digits))) * (1 + 1e-12);
  let best: string = row.ladder[0][0];
  for (const [unit, from] of row.ladder) if (size >= from) best = unit;
  return best;
}

/**
 * `value` (SI) for people to read: "10.00 µL/min", "25.00 °C", "4.060 × 10¹³ Pa·s/m³". Reading it back
 * gives the value to the digits shown.
 */
export function formatQuantity(
  value: number,
  kind: Kind,
  options: { readonly unit?: string; readonly digits?: number } = {},
): string {
  const digits = options.digits ?? 4;
  const unit = options.unit ?? bestUnit(value, kind, digits);
  const print = unitInPrint(unit);
  const number = formatNumber(inUnit(value, unit), digits);
  return print === '' ? number : print === '°' ? `${number}°` : `${number} ${print}`;
}
