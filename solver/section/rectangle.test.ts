import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { rectangleConductance, rectangleSection } from './rectangle.ts';
import { taperResistance } from './taper.ts';

const SOURCE = 'Shah & London 1978 ch. VII; series of White 2006 eq. 3-48 recomputed in 20-digit arithmetic';

/** h/W, f·Re, C, u_max/u_m, peak, short-wall middle, all to the digits printed. */
const TABLE: readonly (readonly [number, number, number, number, number, number])[] = [
  [0.02, 23.362535, 0.987395022, 1.51914884, 1.02, 0.75730282],
  [0.05, 22.4770131, 0.968487556, 1.54880668, 1.05, 0.779576433],
  [0.1, 21.1688768, 0.936975112, 1.60089581, 1.09999973, 0.81669912],
  [0.125, 20.5846441, 0.92121889, 1.62826579, 1.12499364, 0.835260464],
  [0.2, 19.0704979, 0.873950263, 1.71496952, 1.1992448, 0.890944201],
  [0.25, 18.2327768, 0.842438875, 1.77368138, 1.24621578, 0.928060115],
  [1 / 3, 17.0896721, 0.789950793, 1.86364613, 1.31391718, 0.989763908],
  [0.4, 16.3681007, 0.748095224, 1.92358072, 1.35529789, 1.03855452],
  [0.5, 15.5480561, 0.686045031, 1.99179634, 1.3950904, 1.10914801],
  [0.6, 14.979962, 0.625836034, 2.03788042, 1.4116726, 1.17419591],
  [0.75, 14.4756972, 0.54137183, 2.07737958, 1.40526619, 1.2569159],
  [0.8, 14.377798, 0.515197627, 2.08486302, 1.39741349, 1.28003616],
  [0.9, 14.2609806, 0.466181087, 2.09370706, 1.37630683, 1.31956303],
  [1, 14.2270769, 0.421731045, 2.09625601, 1.35062897, 1.35062897],
];

const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);

for (const [a, fRe, c, peakVelocity, peak, side] of TABLE) {
  const w = 1e-4;
  const h = a * w;
  const at = `h/W = ${Number(a.toFixed(4))}`;
  const claim = { check: 'published', at, source: SOURCE } as const;
  verify({ ...claim, quantity: 'f·Re of a rectangle', tolerance: 5e-9 }, () =>
    relative(rectangleSection(w, h).frictionReynolds, fRe),
  );
  verify({ ...claim, quantity: 'resistance of a rectangle', tolerance: 2e-9 }, () =>
    relative(rectangleSection(w, h).conductance, (c * w * h ** 3) / 12),
  );
  verify({ ...claim, quantity: 'peak over mean velocity of a rectangle', tolerance: 5e-9 }, () =>
    relative(rectangleSection(w, h).peakVelocity, peakVelocity),
  );
  verify({ ...claim, quantity: 'peak over mean wall shear of a rectangle', tolerance: 5e-9 }, () => {
    const section = rectangleSection(w, h);
    return relative(section.peakShear! / section.meanShear, peak);
  });
  verify({ ...claim, quantity: 'side-middle over mean wall shear of a rectangle', tolerance: 5e-9 }, () => {
    const section = rectangleSection(w, h);
    return relative(section.sideShear / section.meanShear, side);
  });
}

/** µ 1 mPa·s; width, depth, length in µm; resistance in Pa·s/m³; shears in Pa at 1 µL/min. */
for (const [width, depth, length, resistance, mean, peak] of [
  [100, 50, 10e3, 1.3993251e13, 0.3887014, 0.5422736],
  [200, 50, 20e3, 1.1395486e13, 0.1899248, 0.2366872],
  [100, 100, 10e3, 2.8454154e12, 0.118559, 0.1601292],
  [500, 100, 10e3, 2.7461517e11, 0.0190705, 0.0228702],
] as const) {
  verify(
    {
      quantity: 'resistance and wall shear of a rectangle, worked',
      check: 'published',
      at: `${width} × ${depth} µm`,
      source: 'Bruus 2008 sec. 3.4.6, series recomputed',
      tolerance: 2e-6,
    },
    () => {
      const section = rectangleSection(width * 1e-6, depth * 1e-6);
      const flow = 1e-9 / 60;
      const got = (1e-3 * length * 1e-6) / section.conductance;
      const gradient = (1e-3 * flow) / section.conductance;
      return Math.max(
        relative(got, resistance),
        relative(gradient * section.meanShear, mean),
        relative(gradient * section.peakShear!, peak),
      );
    },
  );
}

verify(
  {
    quantity:
      'rectangle so flat that it is a gap between plates: f·Re, peak velocity, peak shear, resistance',
    check: 'exact',
    at: 'h/W = 1e-7',
    source: 'plane Poiseuille flow: White 2006 sec. 3-3',
    tolerance: 4e-7,
  },
  () => {
    const section = rectangleSection(1, 1e-7);
    return Math.max(
      relative(section.frictionReynolds, 24),
      relative(section.peakVelocity, 1.5),
      relative(section.peakShear! / section.meanShear, 1),
      relative(section.conductance, 1e-21 / 12),
    );
  },
);

verify(
  {
    quantity: 'f·Re of a rectangle against the usual polynomial in h/W, worst of all aspect ratios',
    check: 'published',
    at: '0 < h/W ≤ 1',
    source: 'Shah & London 1978 ch. VII, polynomial from memory; good to 0.07 %',
    tolerance: 8e-4,
  },
  () => {
    let worst = 0;
    for (let a = 0.01; a <= 1; a += 0.01) {
      const fit =
        24 * (1 - 1.3553 * a + 1.9467 * a ** 2 - 1.7012 * a ** 3 + 0.9564 * a ** 4 - 0.2537 * a ** 5);
      worst = Math.max(worst, relative(rectangleSection(1, a).frictionReynolds, fit));
    }
    return worst;
  },
);

verify(
  {
    quantity: 'resistance of a taper',
    check: 'published',
    at: '100 to 300 µm wide, 50 µm deep, 5 mm long',
    source: 'series of White 2006 eq. 3-48 integrated by quadrature',
    tolerance: 2e-8,
  },
  () => relative(1e-3 * taperResistance({ kind: 'rectangle' }, 1e-4, 3e-4, 5e-5, 5e-3), 3.2780878e12),
);

verify(
  {
    quantity: 'resistance of a shallow taper',
    check: 'exact',
    at: 'depth/width → 0',
    source: 'R = 12 µL ln(W2/W1)/(h³(W2 − W1)), derived',
    tolerance: 1e-6,
  },
  () => {
    const h = 1e-10;
    return relative(
      taperResistance({ kind: 'rectangle' }, 1e-4, 3e-4, h, 1),
      (12 / h ** 3) * (Math.log(3) / 2e-4),
    );
  },
);

test('the sides may be exchanged, and nothing overflows at any aspect ratio', () => {
  for (let e = -12; e <= 12; e += 0.37) {
    const w = 1e-4;
    const d = w * 10 ** e;
    const a = rectangleSection(w, d);
    const b = rectangleSection(d, w);
    expect(relative(a.conductance, b.conductance)).toBeLessThan(1e-14);
    expect(a.floorShear).toBe(b.sideShear);
    expect(a.sideShear).toBe(b.floorShear);
    expect(relative(rectangleConductance(w, d), a.conductance)).toBeLessThan(1e-14);
    expect(a.peakShear!).toBeGreaterThanOrEqual(Math.max(a.floorShear, a.sideShear));
  }
});

/** The plain series with many terms and its algebraic tail left out, in an order that keeps digits. */
function slowC(a: number): number {
  let sum = 0;
  for (let n = 20_001; n >= 1; n -= 2) sum += Math.tanh((n * Math.PI) / (2 * a)) / n ** 5;
  return 1 - ((192 * a) / Math.PI ** 5) * sum;
}

test('the accelerated series equals the plain one to 1e-12', () => {
  for (let a = 0.013; a <= 1; a += 0.0471) {
    expect(relative(rectangleConductance(1, a), (slowC(a) * a ** 3) / 12)).toBeLessThan(1e-12);
  }
});

test('tapers: 1e-10 against a fine composite rule, either direction, any span', () => {
  const profile = { kind: 'rectangle' } as const;
  for (const [w1, w2] of [
    [1, 1.0000001],
    [1, 1.5],
    [0.2, 3],
    [0.01, 40],
    [3, 0.2],
  ] as const) {
    // Composite Simpson in ln w.
    const n = 4000;
    const span = Math.log(w2 / w1);
    let sum = 0;
    for (let i = 0; i <= n; i += 1) {
      const w = w1 * Math.exp((span * i) / n);
      sum += ((i === 0 || i === n ? 1 : i % 2 ? 4 : 2) * w) / rectangleConductance(w, 1);
    }
    const wanted = (sum * span) / (3 * n) / (w2 - w1);
    expect(relative(taperResistance(profile, w1, w2, 1, 1), wanted)).toBeLessThan(1e-10);
  }
  expect(taperResistance(profile, 2, 2, 1, 3)).toBe(3 / rectangleConductance(2, 1));
});
