import { Problem } from '../problem/problem.ts';
import { decimalRatio, type Ratio, ratioToInteger, ratioToNumber } from './units-exact.ts';
import { type Dimensions, KINDS, type Kind, PLAIN, PREFIXED, PREFIXES, type Unit } from './units-table.ts';

export { KINDS, type Kind } from './units-table.ts';

/** What a text stands for, or what is wrong with it; `what` continues a sentence that begins with a name. */
export type Parsed =
  | { readonly ok: true; readonly exact: Ratio }
  | { readonly ok: false; readonly what: string; readonly remedy: string };

/** Longest text taken for a quantity, and largest power of ten: more is refused before it is computed. */
const MAX_TEXT = 80;
const MAX_POWER = 100;

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** Spaces, micro signs, minus signs, middle dots and superscripts to plain letters. */
function plain(text: string): string {
  return text
    .replace(/[\s\u00a0\u2000-\u200b\u202f\u2060\ufeff]+/g, ' ')
    .trim()
    .replace(/[µμ]/g, 'u')
    .replace(/[−–]/g, '-')
    .replace(/[·⋅∙•]/g, '.')
    .replace(/℃/g, 'degC')
    .replace(/℉/g, 'degF')
    .replace(/[°º] ?([CF])(?![a-zA-Z])/g, 'deg$1')
    .replace(/[°º]/g, 'deg')
    .replace(
      /([⁻⁺]?)([⁰¹²³⁴⁵⁶⁷⁸⁹]+)/g,
      (_, sign: string, digits: string) =>
        `^${sign === '⁻' ? '-' : ''}${[...digits].map((digit) => SUPERSCRIPTS.indexOf(digit)).join('')}`,
    );
}

function symbolUnit(symbol: string): Unit | undefined {
  if (Object.hasOwn(PLAIN, symbol)) return PLAIN[symbol];
  if (Object.hasOwn(PREFIXED, symbol)) return PREFIXED[symbol];
  if (symbol === 'C' || symbol === 'F') return PLAIN[`deg${symbol}`];
  const prefix = symbol.slice(0, 1);
  const base = symbol.slice(1);
  if (!Object.hasOwn(PREFIXES, prefix) || !Object.hasOwn(PREFIXED, base)) return undefined;
  const { num, den, dimensions } = PREFIXED[base]!;
  const power = PREFIXES[prefix]!;
  const scale = 10n ** BigInt(Math.abs(power));
  return power > 0 ? { num: num * scale, den, dimensions } : { num, den: den * scale, dimensions };
}

const known = new Map<string, Unit | string>();

/** The unit that a text such as "uL/min" or "Pa.s/m^3" spells, read left to right, or what it stumbles over. */
function unitOf(text: string): Unit | string {
  const cached = known.get(text);
  if (cached !== undefined) return cached;
  let num = 1n;
  let den = 1n;
  const dimensions: [number, number, number, number, number, number] = [0, 0, 0, 0, 0, 0];
  let found: Unit | string | undefined;
  let rest = text.replace(/^1 ?\//, '/');
  let first = true;
  while (rest !== '' && found === undefined) {
    const match = /^( ?\/ ?| ?[.*] ?| )?((?:[cm]m|in)H2O|[a-zA-Z%‰]+)(?:\^?([+-]?\d))?(?!\d)/.exec(rest);
    const unit = match ? symbolUnit(match[2]!) : undefined;
    const below = match?.[1]?.includes('/') === true;
    if (!match || !unit || (first ? match[1] !== undefined && !below : match[1] === undefined)) {
      found = match?.[2] && !unit ? match[2] : rest.trim();
      break;
    }
    const power = Number(match[3] ?? 1) * (below ? -1 : 1);
    if (unit.offsetHundredths !== undefined) {
      // A temperature with its own zero can't be part of a product.
      found = match[0] === text ? unit : text;
      break;
    }
    for (let i = 0; i < 6; i += 1) dimensions[i]! += unit.dimensions[i]! * power;
    const size = BigInt(Math.abs(power));
    num *= (power > 0 ? unit.num : unit.den) ** size;
    den *= (power > 0 ? unit.den : unit.num) ** size;
    rest = rest.slice(match[0].length);
    first = false;
  }
  const result = found ?? { num, den, dimensions };
  if (known.size < 2000) known.set(text, result);
  return result;
}

const sameDimensions = (a: Dimensions, b: Dimensions): boolean => a.every((power, i) => power === b[i]);

function nounOf(dimensions: Dimensions): string {
  for (const kind of Object.keys(KINDS) as Kind[]) {
    if (sameDimensions(KINDS[kind].dimensions, dimensions)) return KINDS[kind].noun;
  }
  return 'a quantity of another kind';
}

function suggestion(symbol: string, kind: Kind): string | undefined {
  const folded = symbol.toLowerCase();
  const units: readonly string[] = KINDS[kind].units;
  return units.find((unit) => unit !== '' && unit.toLowerCase().replace('^', '') === folded.replace('^', ''));
}

/**
 * Reads "2.5 kPa", "0.1uL/min", "4.06 × 10¹³ Pa·s/m³" as a quantity of `kind`. A text without a unit is
 * refused unless `bareUnit` says which unit it then has ('' for SI, and for plain numbers).
 */
export function parseQuantity(text: string, kind: Kind, bareUnit?: string): Parsed {
  const { noun, example, dimensions } = KINDS[kind];
  const remedy = `Write ${noun}${kind === 'number' ? '' : ' with its unit'}, such as "${example}".`;
  const shown = text.length > 40 ? `${text.slice(0, 40)}…` : text;
  const wrong = (what: string, other = remedy): Parsed => ({
    ok: false,
    what: `takes ${noun}; ${what}`,
    remedy: other,
  });
  if (text.length > MAX_TEXT) return wrong(`"${shown}" is too long a text.`);
  const match =
    /^([+-]?)(?:(\d+)(?:\.(\d*))?|\.(\d+))(?:[eE]([+-]?\d+)|(?: ?[×x*.] ?| )10\^([+-]?\d+))?(?![\d,]) ?(.*)$/.exec(
      plain(text),
    );
  if (!match) {
    if (/^[+-]?\d+,\d/.test(text.trim())) {
      return wrong(`"${shown}" has a comma.`, `Use a point as the decimal mark, such as "${example}".`);
    }
    return wrong(text.trim() === '' ? 'the text is empty.' : `"${shown}" is none.`);
  }
  const [, sign, whole = '', fraction = match[4] ?? '', , e, times, spelt] = match;
  const power = Number(e ?? times ?? 0);
  if (Math.abs(power) > MAX_POWER) return wrong(`"${shown}" has a power of ten out of range.`);
  const unitText = spelt === '' ? (bareUnit ?? (kind === 'number' ? '' : undefined)) : spelt!;
  if (unitText === undefined) return wrong(`"${shown}" has no unit.`);
  const value = decimalRatio(sign!, whole, fraction, power);
  if (unitText === '') return { ok: true, exact: value };
  const unit = unitOf(plain(unitText));
  if (typeof unit === 'string') {
    const better = suggestion(plain(unitText), kind);
    return wrong(
      `no unit "${unit}" is known (in "${shown}").`,
      better ? `Write it as "${better}"; capital and small letters differ.` : remedy,
    );
  }
  if (!sameDimensions(unit.dimensions, dimensions)) {
    return wrong(`${shown.trim()} is ${nounOf(unit.dimensions)}.`);
  }
  const offset = unit.offsetHundredths ?? 0n;
  return {
    ok: true,
    exact: {
      num: (value.num * 100n + offset * value.den) * unit.num,
      den: value.den * 100n * unit.den,
    },
  };
}

/** The SI value of a text, or null where it is no quantity of that kind. */
export function quantityOrNull(text: string, kind: Kind, bareUnit?: string): number | null {
  const parsed = parseQuantity(text, kind, bareUnit);
  return parsed.ok ? ratioToNumber(parsed.exact) : null;
}

/** The SI value of a text; `name` opens the message of the `Problem` where it has none: "width takes a length; …". */
export function readQuantity(text: string, kind: Kind, name: string, bareUnit?: string): number {
  const parsed = parseQuantity(text, kind, bareUnit);
  if (!parsed.ok) throw new Problem('quantity', `${name} ${parsed.what}`, '', parsed.remedy);
  return ratioToNumber(parsed.exact);
}

/** Whole nanometres of an exact length in metres, halves away from zero. */
export function wholeNm(exact: Ratio): number {
  return Number(ratioToInteger({ num: exact.num * 1_000_000_000n, den: exact.den }));
}

/** SI value of one `unit` (a temperature's zero aside): for axes and steps. Throws on an unknown unit. */
export function unitSize(unit: string): number {
  if (unit === '') return 1;
  const found = unitOf(plain(unit));
  if (typeof found === 'string') throw new RangeError(`no unit "${unit}"`);
  return ratioToNumber(found);
}

/** The number that stands before `unit` when `value` (SI) is given in it. */
export function inUnit(value: number, unit: string): number {
  if (unit === '') return value;
  const found = unitOf(plain(unit));
  if (typeof found === 'string') throw new RangeError(`no unit "${unit}"`);
  const { num, den, offsetHundredths } = found;
  // Division by a factor of at least one keeps decimal values decimal: 200e-6 m is 200 um.
  const scaled =
    num >= den ? value / ratioToNumber({ num, den }) : value * ratioToNumber({ num: den, den: num });
  return offsetHundredths === undefined ? scaled : scaled - Number(offsetHundredths) / 100;
}

/** Nanometres in one metre; plan lengths meet the physics by these two and nothing else. */
export const NM_PER_M = 1e9;
export const metres = (nm: number): number => nm / NM_PER_M;
