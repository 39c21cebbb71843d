import type { Tolerance } from './chip.ts';
import { readNm } from './schema-data.ts';
import { at, Fault, valueInWords } from './schema-fault.ts';
import { readKeys } from './schema-fields.ts';
import type { OwnTolerances, Tolerances } from './tolerance.ts';
import { parseQuantity, wholeNm } from './units.ts';
import { ratioToNumber } from './units-exact.ts';

/** How far depths and widths may be off, in a description and as data. */

const KEYS = new Set(['depth', 'width']);
const LAYER_KEYS = new Set([...KEYS, 'common']);

function spelt(value: unknown): Tolerance {
  const remedy = 'Write a share or a length with its unit, such as "5 %" or "2 um".';
  if (typeof value !== 'string') {
    throw new Fault('quantity', `takes a share or a length with its unit; ${valueInWords(value)}.`, remedy);
  }
  const share = parseQuantity(value, 'share');
  if (share.ok) return { share: ratioToNumber(share.exact) };
  const length = parseQuantity(value, 'length');
  if (length.ok) return { length: wholeNm(length.exact) };
  throw new Fault('quantity', length.what.replace('a length', 'a share or a length'), remedy);
}

function data(value: unknown): Tolerance {
  const raw = readKeys(value, new Set(['share', 'length']), {});
  const [first, ...more] = Object.keys(raw);
  if (first === undefined || more.length > 0) {
    throw new Fault('quantity', 'takes a share or a length.', 'Give one of "share" and "length".');
  }
  if (first === 'length') return { length: at(['length'], () => readNm(raw.length)) };
  if (typeof raw.share === 'number' && Number.isFinite(raw.share)) return { share: raw.share };
  throw new Fault('quantity', `takes a number; ${valueInWords(raw.share)}.`, 'Give a share from 0 to 1.', [
    'share',
  ]);
}

function shareOf(value: unknown, texts: boolean): number {
  if (typeof value === 'number' && Number.isFinite(value)) return value;
  const parsed = texts && typeof value === 'string' ? parseQuantity(value, 'share') : null;
  if (parsed?.ok) return ratioToNumber(parsed.exact);
  throw new Fault('quantity', `takes a share; ${valueInWords(value)}.`, 'Write a share, such as "50 %".');
}

function read(value: unknown, keys: ReadonlySet<string>, texts: boolean): Tolerances {
  const raw = readKeys(value, keys, {});
  const one = texts ? spelt : data;
  return {
    ...(raw.depth === undefined ? {} : { depth: at(['depth'], () => one(raw.depth)) }),
    ...(raw.width === undefined ? {} : { width: at(['width'], () => one(raw.width)) }),
    ...(raw.common === undefined ? {} : { common: at(['common'], () => shareOf(raw.common, texts)) }),
  };
}

/** As a description spells them: "5 %", "2 um". */
export const readTolerances = (value: unknown): Tolerances => read(value, LAYER_KEYS, true);
export const readOwnTolerances = (value: unknown): OwnTolerances => read(value, KEYS, true);
/** As data, with exactly the keys of chip.ts. */
export const tolerancesData = (value: unknown): Tolerances => read(value, LAYER_KEYS, false);
export const ownTolerancesData = (value: unknown): OwnTolerances => read(value, KEYS, false);
