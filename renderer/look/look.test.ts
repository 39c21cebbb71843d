import { describe, expect, test } from 'vitest';
import { contrast, hex, luminance, oklch, parseHex } from './oklch.ts';
import { amount, deviation, SHADES, shades } from './ramp.ts';
import { PALETTES, type Scheme, SIZES, step } from './tokens.ts';

const SCHEMES: readonly Scheme[] = ['light', 'dark'];

describe('contrast of the tokens', () => {
  const grounds = ['ground', 'sheet', 'chip', 'card', 'field'] as const;
  const texts = ['ink', 'soft', 'alarm'] as const;
  for (const scheme of SCHEMES) {
    const palette = PALETTES[scheme];
    for (const ground of grounds) {
      for (const text of texts) {
        // WCAG 2.2, 1.4.3 asks 4.5; we hold 5.0
        test(`${scheme}: ${text} on ${ground}`, () => {
          expect(contrast(parseHex(palette[text]), parseHex(palette[ground]))).toBeGreaterThanOrEqual(5);
        });
      }
    }
    test(`${scheme}: a button of ink carries text of the card`, () => {
      expect(contrast(parseHex(palette.ink), parseHex(palette.card))).toBeGreaterThanOrEqual(7);
    });
  }

  test('black on white is 21 (WCAG 2.2, definition of contrast ratio)', () => {
    expect(contrast([0, 0, 0], [255, 255, 255])).toBeCloseTo(21, 10);
  });
});

describe('OKLCH', () => {
  // CSS Color 4, sample conversions: white, black, and sRGB red = oklch(0.62796 0.25768 29.234)
  test('gives the sRGB primaries', () => {
    expect(oklch(1, 0, 0)).toEqual([255, 255, 255]);
    expect(oklch(0, 0, 0)).toEqual([0, 0, 0]);
    expect(oklch(0.62796, 0.25768, 29.234)).toEqual([255, 0, 0]);
  });
  test('hex reads back', () => {
    expect(hex(parseHex('#b3261e'))).toBe('#b3261e');
  });
});

describe('ramps', () => {
  for (const scheme of SCHEMES) {
    const order = scheme === 'light' ? -1 : 1;
    test(`${scheme}: lightness alone orders an amount`, () => {
      const values = shades(scheme, 'amount').map((colour) => order * luminance(parseHex(colour)));
      expect(values).toHaveLength(SHADES);
      for (let i = 1; i < values.length; i += 1) expect(values[i]!).toBeGreaterThan(values[i - 1]!);
    });
    test(`${scheme}: a deviation leaves its neutral middle on both sides`, () => {
      const middle = luminance(parseHex(deviation(scheme, 0)));
      for (const sign of [-1, 1]) {
        let before = order * middle;
        for (const t of [0.25, 0.5, 0.75, 1]) {
          const now = order * luminance(parseHex(deviation(scheme, sign * t)));
          expect(now).toBeGreaterThan(before);
          before = now;
        }
      }
      expect(deviation(scheme, -1)).not.toBe(deviation(scheme, 1));
    });
    test(`${scheme}: the alarm colour is no colour of data`, () => {
      expect(shades(scheme, 'amount')).not.toContain(PALETTES[scheme].alarm);
      expect(shades(scheme, 'deviation')).not.toContain(PALETTES[scheme].alarm);
    });
  }
  test('amounts beyond the ends keep the end colour', () => {
    expect(amount('light', -1)).toBe(amount('light', 0));
    expect(amount('dark', 2)).toBe(amount('dark', 1));
  });
});

test('type sizes and steps', () => {
  expect(Object.values(SIZES)).toEqual([10.5, 12, 13, 15, 17, 20]);
  expect(step(3)).toBe(12);
});
