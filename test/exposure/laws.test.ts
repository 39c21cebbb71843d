import { describe, expect, test } from 'vitest';
import { bearableTime, curveUse, type StressCurve } from '../../solver/exposure/curve.ts';
import { type DamageLaw, damageOf, doseExponent, doseOf, type History } from '../../solver/exposure/laws.ts';
import {
  mixedLaw,
  REFERENCE_LAWS,
  REFERENCE_LIMITS,
  referenceOf,
} from '../../solver/exposure/reference-limits.ts';
import { seeded } from '../chips/random-edit.ts';
import { verify } from '../verify/row.ts';

const law = (name: string): DamageLaw => REFERENCE_LAWS.find((entry) => entry.name === name)!.law;
const history = (...pairs: readonly (readonly [stress: number, time: number])[]): History => ({
  stress: Float64Array.from(pairs, ([stress]) => stress),
  time: Float64Array.from(pairs, ([, time]) => time),
});
/** Per cent of a path by a law. */
const percent = (of: DamageLaw, path: History): number => 100 * damageOf(of, doseOf(path, doseExponent(of)));

describe('damage laws', () => {
  const ONE = history([100, 0.1]);
  const TWO = history([100, 0.05], [200, 0.02]);
  // Digits printed; the last one may be off by one.
  const WORKED: [name: string, path: History, at: string, percent: number, digits: number][] = [
    ['Giersiepen', ONE, '100 Pa for 0.1 s', 0.40337462, 1e-8],
    ['Heuser and Opitz', ONE, '100 Pa for 0.1 s', 0.0029666923, 1e-10],
    ['Zhang', ONE, '100 Pa for 0.1 s', 0.025834399, 1e-9],
    ['Giersiepen', TWO, '100 Pa for 0.05 s, then 200 Pa for 0.02 s', 0.74598537, 1e-8],
    ['Heuser and Opitz', TWO, '100 Pa for 0.05 s, then 200 Pa for 0.02 s', 0.0044816765, 1e-10],
  ];
  for (const [name, path, at, wanted, digits] of WORKED) {
    verify(
      {
        quantity: `haemolysis by the law of ${name}`,
        check: 'published',
        at,
        source: `${REFERENCE_LAWS.find((entry) => entry.name === name)!.source}; dose form of Grigioni et al. 2005`,
        tolerance: digits / wanted,
      },
      () => percent(law(name), path) / wanted - 1,
    );
  }

  verify(
    {
      quantity: 'dose of a path cut into halves, 12 times over',
      check: 'invariant',
      at: 'random stresses, all laws',
      source: 'Grigioni et al. 2005, Biomech. Model. Mechanobiol. 4, 249',
      tolerance: 1e-12,
    },
    () => {
      const next = seeded(7);
      const pairs = Array.from({ length: 40 }, () => [300 * next(), next()] as const);
      let worst = 0;
      for (const { law: one } of REFERENCE_LAWS) {
        const whole = percent(one, history(...pairs));
        let cut = pairs.slice();
        for (let round = 0; round < 6; round += 1) {
          cut = cut.flatMap(([stress, time]) => [[stress, time / 2] as const, [stress, time / 2] as const]);
        }
        worst = Math.max(worst, Math.abs(percent(one, history(...cut)) / whole - 1));
      }
      return worst;
    },
  );

  verify(
    {
      quantity: 'ratio of the laws of Giersiepen and of Heuser and Opitz on one exposure',
      check: 'published',
      at: '100 Pa for 0.1 s',
      source: 'the two laws as published',
      tolerance: 0.5 / 136,
    },
    () => percent(law('Giersiepen'), ONE) / percent(law('Heuser and Opitz'), ONE) / 136 - 1,
  );

  test('passes multiply the dose, so that n passes of a path are one n times as long', () => {
    const one = law('Zhang');
    const dose = doseOf(ONE, doseExponent(one));
    const long = doseOf(history([100, 0.7]), doseExponent(one));
    expect(damageOf(one, dose, 7) / damageOf(one, long)).toBeCloseTo(1, 12);
  });

  test('a share of damage never passes one', () => {
    expect(damageOf(law('Giersiepen'), 1e30)).toBe(1);
  });

  test('a constant of one law beside the exponents of another is seen', () => {
    expect(mixedLaw({ constant: 3.62e-5, stress: 1.991, time: 0.765 })).toEqual({
      constant: 'Giersiepen',
      exponents: 'Heuser and Opitz',
    });
    for (const { law: one } of REFERENCE_LAWS) expect(mixedLaw(one)).toBeNull();
    expect(mixedLaw({ constant: 1, stress: 2, time: 0.5 })).toBeNull();
    expect(referenceOf(law('Zhang'))!.name).toBe('Zhang');
  });

  test('every reference says its cells, what was seen and where it stands', () => {
    for (const { cells, seen, source } of REFERENCE_LIMITS) {
      for (const words of [cells, seen, source]) expect(words.length).toBeGreaterThan(6);
    }
    expect(new Set(REFERENCE_LIMITS.map(({ cells }) => cells)).size).toBe(REFERENCE_LIMITS.length);
  });
});

describe('stress against time', () => {
  const CURVE: StressCurve = [
    [0.1, 100],
    [1, 50],
    [10, 50],
    [100, 5],
  ];

  test('is straight in logarithms between its points', () => {
    expect(bearableTime(CURVE, 100)).toBe(0.1);
    expect(bearableTime(CURVE, Math.sqrt(100 * 50))).toBeCloseTo(Math.sqrt(0.1 * 1), 12);
    expect(bearableTime(CURVE, 50)).toBe(10);
    expect(bearableTime(CURVE, Math.sqrt(50 * 5))).toBeCloseTo(Math.sqrt(10 * 100), 10);
    expect(bearableTime(CURVE, 5)).toBe(100);
  });

  test('says nothing above its first point, and holds for good below its last', () => {
    expect(bearableTime(CURVE, 100.001)).toBeNull();
    expect(bearableTime(CURVE, 4.999)).toBe(Number.POSITIVE_INFINITY);
    expect(bearableTime([[2, 30]], 30)).toBe(2);
  });

  test('time at a stress counts with all that is spent above it, however the path is cut', () => {
    const use = curveUse(CURVE, history([20, 3], [60, 0.2], [50, 4]));
    // 4.2 s at 50 Pa or above, of 10 s; at 60 and 20 Pa less is used up.
    expect(use.use).toBeCloseTo(0.42, 12);
    expect(use.stress).toBe(50);
    expect(use.beyond).toBe(0);
    const cut = curveUse(CURVE, history([50, 1], [60, 0.1], [20, 3], [50, 3], [60, 0.1]));
    expect(cut.use).toBeCloseTo(use.use, 12);
  });

  test('stress beyond the curve is told, and broken once it lasts longer than the first point', () => {
    expect(curveUse(CURVE, history([120, 0.05]))).toMatchObject({ beyond: 0.05 });
    expect(curveUse(CURVE, history([120, 0.05])).use).toBeLessThan(1);
    expect(curveUse(CURVE, history([120, 0.2])).use).toBeGreaterThan(1);
    expect(curveUse(CURVE, history()).use).toBe(0);
  });
});
