import { describe, expect, test } from 'vitest';
import {
  capital,
  count,
  counted,
  digitsFor,
  figure,
  lengthFigure,
  number,
  showIn,
  typed,
  unitFor,
} from './figure.ts';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');

describe('figures', () => {
  test.each([
    [31_200, 'pressure', {}, '31.20 kPa'],
    [31_200, 'pressure', { unit: 'mbar', digits: 3 }, '312 mbar'],
    [1.83, 'stress', { digits: 3 }, '1.83 Pa'],
    [2.464e-9 / 60, 'flow', {}, '2.464 µL/min'],
    [140e-6, 'length', { digits: 3 }, '140 µm'],
    [4.06e13, 'resistance', {}, '4.060 × 10¹³ Pa·s/m³'],
    [-0.014, 'share', { digits: 2, signed: true }, '−1.4 %'],
    [0.008, 'share', { digits: 1, signed: true }, '+0.8 %'],
    [298.15, 'temperature', { digits: 3 }, '25.0 °C'],
    [0, 'stress', {}, '0 Pa'],
  ] as const)('%s as %s', (value, kind, style, text) => expect(plain(figure(value, kind, style))).toBe(text));

  test('no more digits than the error leaves', () => {
    expect(digitsFor(0.05)).toBe(2);
    expect(digitsFor(0.004)).toBe(3);
    expect(digitsFor(0)).toBe(6);
    expect(plain(figure(2.4637e-9 / 60, 'flow', { error: 0.02 }))).toBe('2.5 µL/min');
  });
  test('what is not known says so', () => {
    expect(figure(null, 'flow')).toBe('not known');
    expect(number(Number.NaN)).toBe('no number');
  });
  test('plain numbers', () => {
    expect(number(1000, 4)).toBe('1000');
    expect(number(12345, 5)).toBe('12,345');
    expect(number(-0.5, 2)).toBe('−0.50');
    expect(plain(number(1.2e-7, 2))).toBe('1.2 × 10⁻⁷');
  });
  test('units that a person chose come first', () => {
    expect(unitFor(2e-4, 'length')).toBe('um');
    showIn({ pressure: 'mbar' });
    expect(plain(figure(31_200, 'pressure', { digits: 3 }))).toBe('312 mbar');
    showIn({});
  });
  test('as typed', () => {
    expect(typed(120e-6, 'length', 'um')).toBe('120 µm');
    expect(typed(0.3, 'number', '')).toBe('0.3');
    expect(typed(1 / 3, 'share', '%')).toBe('33.3333333333 %');
    expect(plain(lengthFigure(41_200_000))).toBe('41.20 mm');
  });
});

test('counts in words', () => {
  expect([count(0), count(8), count(12), count(13), count(1204)]).toEqual([
    'no',
    'eight',
    'twelve',
    '13',
    '1204',
  ]);
  expect(counted(1, 'well')).toBe('one well');
  expect(counted(2, 'junction')).toBe('two junctions');
  expect(capital('all eight')).toBe('All eight');
});
