import type { Kind } from '../../solver/chip/units.ts';
import { inUnit } from '../../solver/chip/units.ts';
import { bestUnit, formatNumber, unitInPrint } from '../../solver/chip/units-format.ts';
import { padEnd, padStart, textWidth } from './width.ts';

/** A column of words, or of numbers of one kind in one unit, aligned on the decimal point. */
export type Column =
  | { readonly head: string; readonly words: readonly string[] }
  | {
      readonly head: string;
      readonly kind: Kind;
      /** SI; null where not defined. */
      readonly values: readonly (number | null)[];
      /** Chosen by the largest value where absent. */
      readonly unit?: string;
      readonly digits?: number;
    };

interface Spelt {
  readonly head: string;
  readonly unit: string;
  readonly texts: readonly string[];
  readonly width: number;
  readonly left: boolean;
}

/** What stands for a number that is not defined. */
export const NONE = '–';

function wordsColumn(head: string, words: readonly string[]): Spelt {
  const width = Math.max(textWidth(head), ...words.map(textWidth));
  return { head, unit: '', texts: words, width, left: true };
}

function numbersColumn(column: Exclude<Column, { words: unknown }>): Spelt {
  const { head, kind, values, digits = 4 } = column;
  const largest = values.reduce<number>((most, value) => Math.max(most, Math.abs(value ?? 0)), 0);
  const unit = column.unit ?? bestUnit(largest, kind, digits);
  const texts = values.map((value) => (value === null ? NONE : formatNumber(inUnit(value, unit), digits)));
  // A number without a point ends where the others have theirs.
  const split = texts.map((text) => {
    const end = /^[−\d]+/.exec(text)?.[0].length ?? text.length;
    return [text.slice(0, end), text.slice(end)] as const;
  });
  const before = Math.max(0, ...split.map(([whole]) => textWidth(whole)));
  const after = Math.max(0, ...split.map(([, rest]) => textWidth(rest)));
  const print = unitInPrint(unit);
  const width = Math.max(textWidth(head), textWidth(print), before + after);
  const aligned = split.map(([whole, rest]) =>
    padStart(padStart(whole, before) + padEnd(rest, after), width),
  );
  return { head, unit: print, texts: aligned, width, left: false };
}

/** Lines of a table: heads, units where a column has one, rows; each line behind two spaces. */
export function tableLines(columns: readonly Column[]): string[] {
  const spelt = columns.map((column) =>
    'words' in column ? wordsColumn(column.head, column.words) : numbersColumn(column),
  );
  const line = (text: (column: Spelt) => string): string =>
    `  ${spelt.map((column) => (column.left ? padEnd : padStart)(text(column), column.width)).join('   ')}`.trimEnd();
  const rows = spelt[0]?.texts.length ?? 0;
  return [
    line(({ head }) => head),
    ...(spelt.some(({ unit }) => unit !== '') ? [line(({ unit }) => unit)] : []),
    ...Array.from({ length: rows }, (_, i) => line(({ texts }) => texts[i]!)),
  ];
}
