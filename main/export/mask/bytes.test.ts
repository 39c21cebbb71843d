import { describe, expect, test } from 'vitest';
import { inUnit, metres } from '../../../solver/chip/units.ts';
import { random } from '../../../test/chip/random-drawing.ts';
import { numberIn, TextBytes } from './bytes.ts';

const inUm = (nm: number): number => inUnit(metres(nm), 'um');

function fixed(value: number, shift: number, decimals: number, exact: (value: number) => number): string {
  const out = new TextBytes();
  out.fixed(value, shift, decimals, exact);
  return out.toString();
}

describe('numbers as text', () => {
  // held against the runtime's own rounding and spelling
  test('are what toFixed rounds, without zeros at the end', () => {
    const next = random(7);
    const some = [
      0, -0, 0.5, -0.5, 1, -1, 0.0004, -0.0004, 0.0005, 0.0015, 999.9995, 1e9, -123456789.0625, 40_000_000,
    ];
    for (let k = 0; k < 4000; k += 1) {
      const size = 10 ** (9 * next());
      // whole, quarters and eighths of a picometre (where rounding is by a hair), and any
      const value = (next() - 0.5) * size;
      some.push(Math.round(value), Math.round(value * 8000) / 8000, value);
    }
    for (const nm of some) {
      const wanted = Number(inUm(nm).toFixed(6));
      expect(fixed(nm, -3, 6, inUm)).toBe(wanted === 0 ? '0' : plain(wanted, 6));
    }
    for (let k = 0; k < 2000; k += 1) {
      const bulge = Math.tan(3 * (next() - 0.5));
      expect(fixed(bulge, 0, 12, (value) => value)).toBe(plain(Number(bulge.toFixed(12)), 12));
    }
  });

  test('are never spelt with a power of ten', () => {
    expect(fixed(0.3, -6, 7, (nm) => inUnit(metres(nm), 'mm'))).toBe('0.0000003');
    expect(fixed(-2e-12, 0, 12, (value) => value)).toBe('-0.000000000002');
  });

  test('are read as the runtime reads them', () => {
    const next = random(8);
    const texts = [
      '0',
      '-0',
      '1',
      '-1',
      '.5',
      '5.',
      '12.250',
      '0.123456789012',
      '1e3',
      ' 7',
      '123456789012345678',
      '',
    ];
    texts.push('.', '-', '1.2.3', 'a', '--1');
    for (let k = 0; k < 4000; k += 1) {
      const value = (next() - 0.5) * 10 ** Math.round(14 * next() - 4);
      texts.push(String(value), value.toFixed(Math.floor(9 * next())));
    }
    for (const text of texts) {
      const bytes = new TextEncoder().encode(`[${text}]`);
      const found = numberIn(bytes, 1, bytes.length - 1);
      expect(Object.is(found, text === '' ? Number.NaN : Number(text)), text).toBe(true);
    }
  });
});

/** A number without a power of ten. */
const plain = (value: number, decimals: number): string =>
  String(value).includes('e') ? value.toFixed(decimals).replace(/0+$/, '') : String(value);
