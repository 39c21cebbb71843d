import { describe, expect, test } from 'vitest';
import { verify } from '../../../test/verify/row.ts';
import { Problem } from '../../problem/problem.ts';
import { collapsed, meanOpening, opening, openingSlope, roofLaw } from './roof.ts';

const um = 1e-6;
const plate = { modulus: 2e6, thickness: 200 * um, poisson: 0.5, law: 'plate' } as const;
const thick = { modulus: 2e6, thickness: 5e-3, poisson: 0.5, law: 'thick', constant: 0.5 } as const;

const gervais = 'Gervais et al. 2006, Lab Chip 6, 500 (formula from memory, derived again)';
const christov = 'Christov et al. 2018, J. Fluid Mech. 841, 267 (formula from memory, derived again)';

verify(
  {
    quantity: 'flow under a soft roof over that under a rigid one',
    check: 'published',
    at: 'thick roof, mean rise at the inlet half the depth',
    source: gervais,
    tolerance: 1e-14,
  },
  () => {
    // c dp W / (E h0) = 0.5 for 500 µm by 50 µm under 200 kPa.
    const law = roofLaw(thick, 500 * um, 50 * um);
    const dp = (0.5 * 2e6 * 50 * um) / (0.5 * 500 * um);
    return Math.abs(meanOpening(law, dp, 0) / 2.03125 - 1);
  },
);
verify(
  {
    quantity: 'flow under a soft roof over that under a rigid one',
    check: 'published',
    at: 'plate of 200 µm over 500 µm by 50 µm, 2 MPa, 20 kPa',
    source: christov,
    tolerance: 5e-8,
  },
  () => {
    const law = roofLaw(plate, 500 * um, 50 * um);
    return Math.abs(meanOpening(law, 20e3, 0) / 1.029846 - 1);
  },
);
verify(
  {
    quantity: 'rise of a plate roof at the inlet',
    check: 'published',
    at: 'plate of 200 µm over 500 µm by 50 µm, 2 MPa, 20 kPa',
    source: christov,
    tolerance: 3e-8,
  },
  () => Math.abs((roofLaw(plate, 500 * um, 50 * um).middleRise * 20e3) / 1.8310547e-6 - 1),
);
verify(
  {
    quantity: 'conductance under a plate roof',
    check: 'exact',
    at: 'cube of the local depth, averaged over the width',
    source: 'midpoint rule with 20000 points',
    tolerance: 1e-8,
  },
  () => {
    const law = roofLaw(plate, 500 * um, 50 * um);
    const n = 20000;
    let sum = 0;
    for (let i = 0; i < n; i += 1) {
      const s = (i + 0.5) / n;
      sum += (1 + law.slope * 3e5 * (1 - s * s) ** 2) ** 3 / n;
    }
    return Math.abs(opening(law, 3e5) / sum - 1);
  },
);

describe('the law is chosen by thickness', () => {
  test.each([
    [0.05, 'plate'],
    [0.27, 'plate'],
    [0.29, 'thick'],
    [1, 'thick'],
    [20, 'thick'],
  ] as const)('%s widths: %s', (share, law) => {
    const roof = { modulus: 1e6, thickness: share * 400 * um, poisson: 0.5 };
    expect(roofLaw(roof, 400 * um, 40 * um).law).toBe(law);
  });

  test('at the change both rise alike', () => {
    const thickness = (1 / (15 * Math.PI)) ** (1 / 3) * 400 * um;
    const roof = { modulus: 1e6, thickness, poisson: 0.45 };
    const bending = roofLaw({ ...roof, law: 'plate' }, 400 * um, 40 * um);
    const bulk = roofLaw({ ...roof, law: 'thick' }, 400 * um, 40 * um);
    expect((8 / 15) * bending.slope).toBeCloseTo(bulk.slope, 15);
  });

  test('a law outside its range says so', () => {
    expect(roofLaw(plate, 500 * um, 50 * um).caution).toMatch(/shear/);
    expect(roofLaw({ ...plate, thickness: 20 * um }, 500 * um, 50 * um).caution).toBeUndefined();
    expect(roofLaw({ ...thick, thickness: 100 * um }, 500 * um, 50 * um).caution).toMatch(/bends/);
    expect(roofLaw(thick, 100 * um, 50 * um).caution).toMatch(/shallow/);
  });
});

describe.each([
  ['plate', roofLaw(plate, 500 * um, 50 * um)],
  ['thick', roofLaw(thick, 500 * um, 50 * um)],
] as const)('%s', (_, law) => {
  const end = -1 / law.slope;

  test.each([
    [0, 3],
    [3, 0],
    [-0.5, 1],
    [-3, 2],
    [-5, -4],
    [2, -0.7],
  ])('the mean opening is the mean of the opening, from %s to %s of the collapse pressure', (from, to) => {
    const n = 20000;
    let sum = 0;
    for (let i = 0; i < n; i += 1) sum += opening(law, -end * (from + ((to - from) * (i + 0.5)) / n)) / n;
    expect(meanOpening(law, -end * (to - from), -end * from) / sum).toBeCloseTo(1, 7);
  });

  test('its slope is its derivative', () => {
    for (const share of [-2, -0.5, 0, 0.3, 2, 10]) {
      const p = -share * end;
      const h = 1e-4 * -end;
      const curve = (opening(law, p + h) - opening(law, p - h)) / (2 * h);
      expect(openingSlope(law, p)).toBeCloseTo(curve, 10);
    }
  });

  test('it stays open enough to solve, and collapse is told', () => {
    expect(opening(law, 5 * end)).toBeGreaterThan(0);
    expect(collapsed(law, 0.5 * end)).toBe(false);
    expect(collapsed(law, end)).toBe(true);
    expect(collapsed(law, -5 * end)).toBe(false);
  });
});

test('a stiff roof is a rigid one', () => {
  const law = roofLaw({ modulus: 1e12, thickness: 1e-3, poisson: 0.3 }, 500 * um, 50 * um);
  expect(opening(law, 1e5)).toBeCloseTo(1, 5);
});

test.each([
  [{ ...thick, modulus: 0 }],
  [{ ...thick, modulus: Number.NaN }],
  [{ ...thick, thickness: -1 }],
  [{ ...thick, poisson: 0.6 }],
  [{ ...thick, constant: 0 }],
])('numbers that no roof has are refused', (roof) => {
  expect(() => roofLaw(roof, 500 * um, 50 * um, 'layers[0].roof')).toThrow(Problem);
});
