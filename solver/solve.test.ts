import { describe, expect, test } from 'vitest';
import { verify } from '../test/verify/row.ts';
import { readDescription } from './chip/description.ts';
import type { Problem } from './problem/problem.ts';
import { solve as solveWith } from './solve.ts';

const UL_MIN = 1e-9 / 60;

/** The closed forms below hold for ideal junctions. */
const solve = (chip: Parameters<typeof solveWith>[0]) => solveWith(chip, { junctions: 'ideal' });

/** A description with the parts that a test gives, the rest a plain slide with one rectangular layer. */
function chipOf(parts: Record<string, unknown>) {
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'test',
      outline: { width: 76000, height: 26000 },
      layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
      fluid: { viscosity: '1 mPa.s', density: 1000 },
      ...parts,
    }),
  );
}
const channel = (id: string, path: number[][], width: number | number[] = 100) => ({
  id,
  layer: 'flow',
  path,
  width,
});
const port = (id: string, at: number[], drive: Record<string, unknown>, more = {}) => ({
  id,
  at,
  layer: 'flow',
  diameter: 0,
  drive,
  ...more,
});

describe('one channel', () => {
  const chip = chipOf({
    channels: [
      channel('a', [
        [0, 1000],
        [10000, 1000],
      ]),
    ],
    ports: [port('in', [0, 1000], { flow: '1 uL/min' }), port('out', [10000, 1000], { pressure: 0 })],
  });
  const source =
    'Shah and London 1978, Laminar Flow Forced Convection in Ducts, ch. VII, series recomputed with 20 digits';
  const claim = { check: 'published', at: '100 x 50 um, 10 mm, 1 uL/min of 1 mPa s', source } as const;
  const piece = () => solve(chip).channels[0].pieces[0];
  const off = (value: number | null, wanted: number) => Math.abs((value ?? Number.NaN) / wanted - 1);
  verify({ ...claim, quantity: 'pressure drop', tolerance: 3e-9 }, () =>
    off(piece().pressureDrop, 233.220842),
  );
  verify({ ...claim, quantity: 'resistance', tolerance: 4e-8 }, () => off(piece().resistance, 1.3993251e13));
  verify({ ...claim, quantity: 'mean velocity', tolerance: 1.1e-7 }, () =>
    off(piece().meanVelocity, 3.333333e-3),
  );
  verify({ ...claim, quantity: 'Reynolds number', tolerance: 1.1e-6 }, () => off(piece().reynolds, 0.222222));
  verify({ ...claim, quantity: 'peak wall shear', tolerance: 1e-7 }, () =>
    off(piece().peakWallShear, 0.5422736),
  );
  verify({ ...claim, quantity: 'mean wall shear', tolerance: 1e-7 }, () =>
    off(piece().meanWallShear, 0.3887014),
  );
  test('residence time is volume over flow', () => {
    expect(piece().residenceTime).toBeCloseTo((100e-6 * 50e-6 * 10e-3) / UL_MIN, 12);
  });
});

test('a taper of 100 to 300 um over 5 mm has the quadrature of the series as resistance', () => {
  const chip = chipOf({
    channels: [
      channel(
        'a',
        [
          [0, 1000],
          [5000, 1000],
        ],
        [100, 300],
      ),
    ],
    ports: [port('in', [0, 1000], { pressure: 1000 }), port('out', [5000, 1000], { pressure: 0 })],
  });
  // Shah and London series integrated by quadrature: 3.2780878e12 Pa s/m^3 at 1 mPa s.
  expect(solve(chip).channels[0].pieces[0].resistance / 3.2780878e12).toBeCloseTo(1, 7);
});

test('a bridge of five resistances splits as Kirchhoff says', () => {
  // Lengths in the ratio 1:2:3:4:5 of one section; exact fractions for the bridge (1,2,3,4,5).
  const chip = chipOf({
    channels: [
      channel('r1', [
        [10000, 10000],
        [10000, 11000],
      ]),
      channel('r2', [
        [10000, 10000],
        [12000, 10000],
      ]),
      channel('r3', [
        [10000, 11000],
        [10000, 12000],
        [12000, 12000],
      ]),
      channel('r4', [
        [12000, 10000],
        [14000, 10000],
        [14000, 12000],
      ]),
      channel('r5', [
        [10000, 11000],
        [11500, 11000],
        [11500, 10500],
        [11000, 10500],
        [11000, 10300],
        [12000, 10300],
        [12000, 10000],
      ]),
      channel('r3b', [
        [12000, 12000],
        [14000, 12000],
      ]),
    ],
    ports: [port('in', [10000, 10000], { pressure: 1000 }), port('out', [14000, 12000], { pressure: 0 })],
  });
  const result = solve(chip);
  const length = new Map(
    result.channels.map(({ id, pieces }) => [id, pieces.reduce((sum, piece) => sum + piece.length, 0)]),
  );
  const [r1, r2, r4, r5] = ['r1', 'r2', 'r4', 'r5'].map((id) => length.get(id)!);
  const r3 = length.get('r3')! + length.get('r3b')!;
  // Two equations for the pressures at A (end of r1) and B (end of r2), by Cramer's rule.
  const a11 = 1 / r1 + 1 / r3 + 1 / r5;
  const a22 = 1 / r2 + 1 / r4 + 1 / r5;
  const det = a11 * a22 - 1 / (r5 * r5);
  const pA = ((1000 / r1) * a22 + 1000 / (r2 * r5)) / det;
  const pB = ((1000 / r2) * a11 + 1000 / (r1 * r5)) / det;
  const drop = (id: string) => result.channels.find((one) => one.id === id)!.pieces[0].pressureDrop;
  expect(drop('r1')).toBeCloseTo(1000 - pA, 8);
  expect(drop('r2')).toBeCloseTo(1000 - pB, 8);
  expect(drop('r5')).toBeCloseTo(pA - pB, 8);
  expect(result.balance.dissipation / result.balance.powerIn).toBeCloseTo(1, 12);
});

describe('drives', () => {
  const channels = [
    channel('a', [
      [0, 1000],
      [10000, 1000],
    ]),
  ];
  test('a head drives with the density of the fluid and standard gravity', () => {
    const chip = chipOf({
      channels,
      ports: [port('in', [0, 1000], { head: '10 mm' }), port('out', [10000, 1000], { pressure: 0 })],
      fluid: { viscosity: '1 mPa.s', density: 998.2067 },
    });
    // 10 mm of water at 20 °C, density Tanaka 2001, g 9.80665 (CGPM 1901): 97.8906 Pa.
    expect(solve(chip).ports[0].pressure).toBeCloseTo(97.8906, 4);
  });
  test('tubing lies in series, by Hagen and Poiseuille', () => {
    const chip = chipOf({
      channels,
      ports: [
        port('in', [0, 1000], { pressure: 1000 }, { tubing: [{ bore: '100 um', length: '10 mm' }] }),
        port('out', [10000, 1000], { pressure: 0 }),
      ],
    });
    const result = solve(chip);
    const [chipR, tubeR] = [1.3993251e13, 4.0743665e12];
    expect(result.ports[0].pressure / ((1000 * chipR) / (chipR + tubeR))).toBeCloseTo(1, 7);
  });
  test('a closed port passes nothing and holds the pressure of its place', () => {
    const chip = chipOf({
      channels: [
        ...channels,
        channel('dead', [
          [5000, 1000],
          [5000, 3000],
        ]),
      ],
      ports: [
        port('in', [0, 1000], { pressure: 1000 }),
        port('out', [10000, 1000], { pressure: 0 }),
        port('shut', [5000, 3000], { closed: true }),
      ],
    });
    const result = solve(chip);
    expect(result.ports[2]).toMatchObject({ flow: 0, share: 0 });
    expect(result.ports[2].pressure).toBeCloseTo(500, 9);
    expect(result.channels[1].pieces[0].flow).toBe(0);
  });
  const problem = (parts: Record<string, unknown>): Problem => {
    try {
      solve(chipOf({ channels, ...parts }));
    } catch (error) {
      return error as Problem;
    }
    throw new Error('solved');
  };
  test('two flows and no pressure are named with their ports', () => {
    const found = problem({
      ports: [port('in', [0, 1000], { flow: '1 uL/min' }), port('out', [10000, 1000], { flow: '-1 uL/min' })],
    });
    expect(found.kind).toBe('reference-pressure');
    expect(found.what).toContain('in and out impose flows');
  });
  test('two pressures at one place contradict', () => {
    const found = problem({
      ports: [
        port('in', [0, 1000], { pressure: 5 }),
        port('also', [0, 1000], { pressure: 6 }),
        port('out', [10000, 1000], { pressure: 0 }),
      ],
    });
    expect(found.kind).toBe('drive');
    expect(found.what).toContain('in and also');
  });
  test('a part that nothing drives is named and stands still', () => {
    const result = solve(
      chipOf({
        channels: [
          ...channels,
          channel('lonely', [
            [0, 9000],
            [10000, 9000],
          ]),
        ],
        ports: [port('in', [0, 1000], { pressure: 5 }), port('out', [10000, 1000], { pressure: 0 })],
      }),
    );
    expect(result.findings).toContainEqual(
      expect.objectContaining({ kind: 'unconnected', severity: 'warn', where: 'lonely' }),
    );
    expect(result.channels[1].pieces[0].flow).toBe(0);
  });
});

describe('limits and targets', () => {
  const parts = {
    channels: [
      channel('feed', [
        [0, 1000],
        [10000, 1000],
      ]),
      channel('a', [
        [10000, 1000],
        [20000, 1000],
      ]),
      channel('b', [
        [10000, 1000],
        [10000, 11000],
      ]),
    ],
    ports: [
      port('in', [0, 1000], { flow: '1 uL/min' }),
      port('oa', [20000, 1000], { pressure: 0 }),
      port('ob', [10000, 11000], { pressure: 0 }),
    ],
  };
  test('equal branches share alike', () => {
    const result = solve(
      chipOf({
        ...parts,
        targets: [
          { port: 'oa', share: 0.5, within: '1 %' },
          { port: 'ob', share: 0.6, within: '1 %' },
        ],
      }),
    );
    expect(result.targets).toMatchObject([{ met: true }, { met: false }]);
    expect(result.targets[0].got).toBeCloseTo(0.5, 12);
  });
  test('a limit is judged where it holds: on a channel, a route, the whole chip', () => {
    const limits = [
      { name: 'whole', shear: '0.5 Pa' },
      { name: 'branch', shear: '0.5 Pa', where: 'a' },
      { name: 'route', shear: '0.5 Pa', where: ['in', 'ob'] },
    ];
    const result = solve(chipOf({ ...parts, limits }));
    expect(result.limits.map(({ met, where }) => [met, where])).toEqual([
      [false, 'feed#1'],
      [true, 'a#1'],
      [false, 'feed#1'],
    ]);
    expect(result.limits[0].worst).toBeCloseTo(0.5422736, 6);
  });
});
