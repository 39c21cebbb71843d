import { Fault } from './schema-fault.ts';
import type { Kind } from './units.ts';
import { formatQuantity } from './units-format.ts';

/** Ranges of single numbers; a fault lies at `key` of the part at hand. */

export function positive(value: number, key: string, kind: Kind): void {
  if (value > 0) return;
  const text = formatQuantity(value, kind);
  throw new Fault('range', `is ${text}; it must be above zero.`, `Give "${key}" a value above zero.`, [key]);
}

export function notNegative(value: number, key: string, kind: Kind): void {
  if (value >= 0) return;
  throw new Fault('range', `is ${formatQuantity(value, kind)}; it can't be negative.`, 'Give zero or more.', [
    key,
  ]);
}

export function between(value: number, key: string, low: number, high: number, open = false): void {
  if (value <= high && (open ? value > low : value >= low)) return;
  throw new Fault(
    'range',
    `is ${Number(value.toPrecision(6))}; it must ${open ? `be above ${low} and at most` : `lie from ${low} to`} ${high}.`,
    'Correct the number.',
    [key],
  );
}
