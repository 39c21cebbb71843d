import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Problem } from '../problem/problem.ts';
import {
  inUnit,
  KINDS,
  type Kind,
  metres,
  parseQuantity,
  quantityOrNull,
  readQuantity,
  unitSize,
  wholeNm,
} from './units.ts';
import { ratioToInteger, ratioToNumber } from './units-exact.ts';
import { bestUnit, formatNumber, formatQuantity, unitInPrint } from './units-format.ts';
import { planNm, planText, writeQuantity } from './units-write.ts';

/** Factors as printed in NIST Special Publication 811 (2008), appendix B.8; the rest by definition. */
const READS: [text: string, kind: Kind, si: number][] = [
  ['120 um', 'length', 120e-6],
  ['120um', 'length', 120e-6],
  ['120 µm', 'length', 120e-6],
  ['120\u00a0μm', 'length', 120e-6],
  ['50 nm', 'length', 50e-9],
  ['0.5 mm', 'length', 0.5e-3],
  ['.5 mm', 'length', 0.5e-3],
  ['5. mm', 'length', 5e-3],
  ['7.6 cm', 'length', 0.076],
  ['1 in', 'length', 0.0254],
  ['2 mil', 'length', 50.8e-6],
  ['+3 m', 'length', 3],
  ['2 mm^2', 'area', 2e-6],
  ['2 mm²', 'area', 2e-6],
  ['2mm2', 'area', 2e-6],
  ['5 uL', 'volume', 5e-9],
  ['5 mm³', 'volume', 5e-9],
  ['0.1 s', 'time', 0.1],
  ['2 min', 'time', 120],
  ['1.5 h', 'time', 5400],
  ['1 d', 'time', 86400],
  ['5 mm/s', 'velocity', 5e-3],
  ['5 mm.s^-1', 'velocity', 5e-3],
  ['10 uL/min', 'flow', 1e-8 / 60],
  ['10 µl / min', 'flow', 1e-8 / 60],
  ['0.1nL/s', 'flow', 1e-13],
  ['3.6 mL/h', 'flow', 1e-9],
  ['1 mm^3/s', 'flow', 1e-9],
  ['2.5 kPa', 'pressure', 2500],
  ['−2.5 kPa', 'pressure', -2500],
  ['1 mbar', 'pressure', 100],
  ['1 bar', 'pressure', 1e5],
  ['1 psi', 'pressure', 6894.757293168],
  ['15 dyn/cm²', 'stress', 1.5],
  ['15 dyn/cm^2', 'stress', 1.5],
  ['1 atm', 'pressure', 101325],
  ['760 Torr', 'pressure', 101325],
  ['1 mmHg', 'pressure', 133.322387415],
  ['10 cmH2O', 'pressure', 980.665],
  ['1 inHg', 'pressure', 3386.388640341],
  ['1 N/m2', 'pressure', 1],
  ['2 MPa', 'modulus', 2e6],
  ['1.002 mPa.s', 'viscosity', 1.002e-3],
  ['1.002 mPa·s', 'viscosity', 1.002e-3],
  ['1.002 mPa s', 'viscosity', 1.002e-3],
  ['1.002 mPa*s', 'viscosity', 1.002e-3],
  ['1.002 cP', 'viscosity', 1.002e-3],
  ['1 P', 'viscosity', 0.1],
  ['997.05 kg/m3', 'density', 997.05],
  ['1.05 g/mL', 'density', 1050],
  ['1.05 g/cm³', 'density', 1050],
  ['25 degC', 'temperature', 298.15],
  ['25 °C', 'temperature', 298.15],
  ['25°C', 'temperature', 298.15],
  ['25 C', 'temperature', 298.15],
  ['-40 degF', 'temperature', 233.15],
  ['98.6 °F', 'temperature', 310.15],
  ['310.15 K', 'temperature', 310.15],
  ['5 %', 'share', 0.05],
  ['5%', 'share', 0.05],
  ['200 ppm', 'share', 2e-4],
  ['3 ‰', 'share', 3e-3],
  ['54.74 deg', 'angle', 54.74],
  ['54.74°', 'angle', 54.74],
  ['1 rad', 'angle', 180 / Math.PI],
  ['4.06 × 10¹³ Pa·s/m³', 'resistance', 4.06e13],
  ['4.06e13 Pa.s/m^3', 'resistance', 4.06e13],
  ['4.06·10^13 Pa s / m^3', 'resistance', 4.06e13],
  ['1 mbar.min/uL', 'resistance', 6e12],
  ['100 1/s', 'shear rate', 100],
  ['100 s⁻¹', 'shear rate', 100],
  ['100 s^-1', 'shear rate', 100],
  ['2 uW', 'power', 2e-6],
  ['1e-3', 'number', 1e-3],
];

describe('reading', () => {
  test.each(READS)('%s', (text, kind, si) => {
    expect(quantityOrNull(text, kind)).toBeCloseTo(si, 15 - Math.ceil(Math.log10(Math.abs(si)) + 2));
    expect(Math.abs(quantityOrNull(text, kind)! - si)).toBeLessThanOrEqual(Math.abs(si) * 1e-13);
  });

  test('is exact: the same quantity in whichever unit is the same double', () => {
    for (const [kind, ...texts] of [
      ['flow', '10 uL/min', '0.01 mL/min', '10000 nL/min', '0.6 mL/h', '10 mm^3/min'],
      ['length', '0.3 mm', '300 um', '300000 nm', '3e-4 m', '0.03 cm'],
      ['temperature', '37 degC', '98.6 degF', '310.15 K'],
      ['pressure', '0.1 psi', '100e-3 psi'],
    ] as [Kind, ...string[]][]) {
      expect(new Set(texts.map((text) => quantityOrNull(text, kind))).size).toBe(1);
    }
    expect(quantityOrNull('0.3 mm', 'length')).toBe(3e-4);
    expect(quantityOrNull('37 degC', 'temperature')).toBe(310.15);
  });

  const REFUSED: [text: string, kind: Kind, what: string][] = [
    ['3 kPa', 'length', 'takes a length; 3 kPa is a pressure.'],
    ['3 mm', 'pressure', 'takes a pressure; 3 mm is a length.'],
    ['3 uL', 'flow', 'takes a flow; 3 uL is a volume.'],
    ['5 %', 'length', 'takes a length; 5 % is a share.'],
    ['5 kg', 'share', 'takes a share; 5 kg is a quantity of another kind.'],
    ['5', 'length', 'takes a length; "5" has no unit.'],
    ['', 'length', 'takes a length; the text is empty.'],
    ['wide', 'length', 'takes a length; "wide" is none.'],
    ['NaN um', 'length', 'takes a length; "NaN um" is none.'],
    ['Infinity', 'length', 'takes a length; "Infinity" is none.'],
    ['2,5 kPa', 'pressure', 'takes a pressure; "2,5 kPa" has a comma.'],
    ['2.5 kpa', 'pressure', 'takes a pressure; no unit "kpa" is known (in "2.5 kpa").'],
    ['1e9999 um', 'length', 'takes a length; "1e9999 um" has a power of ten out of range.'],
    ['1 degC/min', 'temperature', 'takes a temperature; no unit "degC/min" is known (in "1 degC/min").'],
    ['1 um/', 'length', 'takes a length; no unit "/" is known (in "1 um/").'],
    ['1 um um', 'length', 'takes a length; 1 um um is an area.'],
    ['12 3 um', 'length', 'takes a length; no unit "3 um" is known (in "12 3 um").'],
    ['1.2.3 um', 'length', 'takes a length; no unit ".3 um" is known (in "1.2.3 um").'],
    ['1 constructor', 'length', 'takes a length; no unit "constructor" is known (in "1 constructor").'],
  ];
  test.each(REFUSED)('refuses %s as %s', (text, kind, what) => {
    const parsed = parseQuantity(text, kind);
    expect(parsed).toMatchObject({ ok: false, what });
    expect((parsed as { remedy: string }).remedy).toMatch(/^(Write|Use) .+\.$/);
  });

  test('says what was expected, and how else to write it', () => {
    expect(() => readQuantity('3 kPa', 'length', 'width')).toThrow(
      new Problem(
        'quantity',
        'width takes a length; 3 kPa is a pressure.',
        '',
        'Write a length with its unit, such as "120 um".',
      ),
    );
    expect(parseQuantity('1 UL/MIN', 'flow')).toMatchObject({
      remedy: 'Write it as "uL/min"; capital and small letters differ.',
    });
  });

  test('takes a bare number where a unit is understood', () => {
    expect(readQuantity('120', 'length', 'width', 'um')).toBe(120e-6);
    expect(readQuantity('2 mm', 'length', 'width', 'um')).toBe(2e-3);
    expect(readQuantity('0.25', 'share', 'share', '')).toBe(0.25);
  });

  test('never throws, whatever the text', () => {
    fc.assert(
      fc.property(
        fc.string({ unit: 'binary' }),
        fc.constantFrom(...(Object.keys(KINDS) as Kind[])),
        (text, kind) => {
          const parsed = parseQuantity(text, kind);
          if (parsed.ok) expect(Number.isFinite(ratioToNumber(parsed.exact))).toBe(true);
        },
      ),
      { numRuns: 2000 },
    );
  });
});

describe('exact arithmetic', () => {
  test('a decimal rounds as the language itself rounds it', () => {
    fc.assert(
      fc.property(fc.bigInt(-(10n ** 25n), 10n ** 25n), fc.integer({ min: 0, max: 60 }), (num, power) => {
        const value = ratioToNumber({ num, den: 10n ** BigInt(power) });
        expect(value).toBe(Number(`${num}e-${power}`) + 0);
      }),
      { numRuns: 3000 },
    );
  });

  test('any ratio rounds to the nearest double', () => {
    const asRatio = (value: number): [bigint, bigint] => {
      const scale = 2 ** 200;
      return [BigInt(value * scale), BigInt(scale)];
    };
    fc.assert(
      fc.property(fc.bigInt(1n, 10n ** 20n), fc.bigInt(1n, 10n ** 20n), (num, den) => {
        const value = ratioToNumber({ num, den });
        const distance = (x: number): bigint => {
          const [n, d] = asRatio(x);
          const gap = n * den - num * d;
          return gap < 0n ? -gap : gap;
        };
        const step = 2 ** (Math.floor(Math.log2(value)) - 52);
        expect(distance(value) <= distance(value + step)).toBe(true);
        expect(distance(value) <= distance(value - step)).toBe(true);
      }),
      { numRuns: 2000 },
    );
  });

  test('halves go away from zero', () => {
    expect(ratioToInteger({ num: 5n, den: 2n })).toBe(3n);
    expect(ratioToInteger({ num: -5n, den: 2n })).toBe(-3n);
    expect(ratioToInteger({ num: 7n, den: 3n })).toBe(2n);
  });
});

describe('plan lengths', () => {
  test('decimal text becomes whole nanometres without floating error', () => {
    const nm = (text: string): number => {
      const parsed = parseQuantity(text, 'length');
      if (!parsed.ok) throw new Error(text);
      return wholeNm(parsed.exact);
    };
    expect(nm('1000.005 um')).toBe(1_000_005);
    expect(nm('1.000000005 m')).toBe(1_000_000_005);
    expect(nm('0.1 mil')).toBe(2540);
    expect(nm('0.0005 um')).toBe(1);
    expect(nm('-0.3 nm')).toBe(0);
    expect(planNm(1000.005, 'um')).toBe(1_000_005);
    expect(Object.is(planNm(-0.0001, 'um'), 0)).toBe(true);
    expect(metres(50_000)).toBe(50e-6);
  });

  test('are written as the shortest exact decimals and read back the same', () => {
    expect(planText(1_000_005, 'um')).toBe('1000.005');
    expect(planText(76_000_000, 'mm')).toBe('76');
    fc.assert(
      fc.property(
        fc.integer({ min: -1e9, max: 1e9 }),
        fc.constantFrom('nm' as const, 'um' as const, 'mm' as const, 'cm' as const, 'm' as const),
        (value, unit) => {
          const text = planText(value, unit);
          expect(planNm(Number(text), unit)).toBe(value);
          const parsed = parseQuantity(`${text} ${unit}`, 'length');
          expect(parsed.ok && wholeNm(parsed.exact)).toBe(value);
        },
      ),
      { numRuns: 3000 },
    );
  });
});

describe('writing', () => {
  const kinds = (Object.keys(KINDS) as Kind[]).filter((kind) => kind !== 'number');
  test('a quantity reads back to the same double', () => {
    expect(writeQuantity(1e-8 / 60, 'flow')).toBe('10 uL/min');
    expect(writeQuantity(298.15, 'temperature')).toBe('25 degC');
    expect(writeQuantity(2500, 'pressure')).toBe('2.5 kPa');
    expect(writeQuantity(0, 'pressure')).toBe('0 Pa');
    expect(writeQuantity(0.05, 'share')).toBe('5 %');
    fc.assert(
      fc.property(
        fc.constantFrom(...kinds),
        fc.double({ min: 1e-20, max: 1e20, noNaN: true }),
        fc.boolean(),
        (kind, size, negative) => {
          const value = negative ? -size : size;
          const text = writeQuantity(value, kind);
          expect(quantityOrNull(text, kind)).toBe(value);
        },
      ),
      { numRuns: 3000 },
    );
  });

  test('for people: micro signs, middle dots, superscripts', () => {
    expect(formatQuantity(4.06e13, 'resistance', { digits: 3 })).toBe('4.06 × 10¹³ Pa·s/m³');
    expect(formatQuantity(1e-8 / 60, 'flow')).toBe('10.00 µL/min');
    expect(formatQuantity(298.15, 'temperature')).toBe('25.00 °C');
    expect(formatQuantity(1.002e-3, 'viscosity')).toBe('1.002 mPa·s');
    expect(formatQuantity(1.5, 'stress', { unit: 'dyn/cm^2', digits: 3 })).toBe('15.0 dyn/cm²');
    expect(formatQuantity(-2500, 'pressure', { digits: 2 })).toBe('−2.5 kPa');
    expect(formatQuantity(0.05, 'share', { digits: 2 })).toBe('5.0 %');
    expect(formatQuantity(54.74, 'angle')).toBe('54.74°');
    expect(formatQuantity(100, 'shear rate', { digits: 3 })).toBe('100 s⁻¹');
    expect(formatQuantity(0, 'flow')).toBe('0 µL/min');
    expect(formatNumber(12345, 3)).toBe('12300');
    expect(formatNumber(Number.NaN)).toBe('not a number');
    expect(unitInPrint('uL/min')).toBe('µL/min');
  });

  test('the best unit is chosen after rounding', () => {
    expect(bestUnit(999.96e-9, 'length', 4)).toBe('um');
    expect(formatQuantity(999.96e-9, 'length')).toBe('1.000 µm');
    expect(formatQuantity(999.94e-9, 'length')).toBe('999.9 nm');
    expect(formatQuantity(75, 'time', { digits: 2 })).toBe('75 s');
  });

  test('what is formatted reads back to the digits shown', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...(Object.keys(KINDS) as Kind[])),
        fc.double({ min: 1e-18, max: 1e18, noNaN: true }),
        fc.boolean(),
        fc.integer({ min: 1, max: 9 }),
        fc.nat(20),
        (kind, size, negative, digits, pick) => {
          const value = negative ? -size : size;
          const units: readonly string[] = KINDS[kind].units;
          for (const unit of [undefined, units[pick % units.length]!]) {
            const options = unit === undefined ? { digits } : { unit, digits };
            const text = formatQuantity(value, kind, options);
            const back = quantityOrNull(text, kind, '');
            expect(back, text).not.toBeNull();
            const shown = unit ?? bestUnit(value, kind, digits);
            const half = 0.5 * 10 ** (Math.floor(Math.log10(Math.abs(inUnit(value, shown)))) - digits + 1);
            expect(Math.abs(inUnit(back!, shown) - inUnit(value, shown)), text).toBeLessThanOrEqual(
              half * 1.0001 + 1e-13 * 300,
            );
          }
        },
      ),
      { numRuns: 2000 },
    );
  });

  test('every offered unit, ladder and example is of its kind', () => {
    for (const kind of Object.keys(KINDS) as Kind[]) {
      const row = KINDS[kind];
      expect(quantityOrNull(row.example, kind)).not.toBeNull();
      for (const unit of [...row.units, ...row.ladder.map(([name]) => name)]) {
        expect(quantityOrNull(`1 ${unitInPrint(unit)}`, kind, ''), `${kind} ${unit}`).not.toBeNull();
        expect(unitSize(unit)).toBeGreaterThan(0);
      }
      const steps: readonly (readonly [string, number])[] = row.ladder;
      for (let i = 1; i < steps.length; i += 1) expect(steps[i]![1]).toBeGreaterThan(steps[i - 1]![1]);
    }
  });
});
