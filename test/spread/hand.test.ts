import { describe, expect, test } from 'vitest';
import type { Making } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import { slopesOf } from '../../solver/spread/slopes.ts';
import { chipOf } from '../checks/chips.ts';

/**
 * Worked by hand: two channels of equal length from one inlet to two outlets at one pressure, or in a row. A wide
 * shallow rectangle has R ~ w⁻¹ h⁻³ (plates, 12 µL/(w h³)), here taken at 4000 by 10 µm, where the sides do 0.16 %.
 */
const LAYER = { id: 'flow', depth: 10, fillet: 0 };
type Json = Record<string, unknown>;
const pair = (layers: Json[], widths: readonly [number, number], more: Json = {}, own: Json = {}) =>
  chipOf({
    layers,
    channels: [
      {
        id: 'left',
        layer: 'flow',
        path: [
          [38000, 13000],
          [8000, 13000],
        ],
        width: widths[0],
        ...own,
      },
      {
        id: 'right',
        layer: 'flow',
        path: [
          [38000, 13000],
          [68000, 13000],
        ],
        width: widths[1],
      },
    ],
    ports: [
      { id: 'in', at: [38000, 13000], layer: 'flow', diameter: 0, drive: { flow: '1 uL/min' } },
      { id: 'l', at: [8000, 13000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      { id: 'r', at: [68000, 13000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
    ...more,
  });
const ideal = { junctions: 'ideal' } as const;

describe('powers of size', () => {
  test('plates: resistance w⁻¹ h⁻³, shear per gradient h', () => {
    const { resistance, shear } = slopesOf({ kind: 'rectangle' }, [0.1, 0.1], 1e-4, '');
    expect(resistance.depth).toBeCloseTo(-3, 2);
    expect(resistance.width).toBeCloseTo(-1, 2);
    expect(resistance.shift * 0.1).toBeCloseTo(-1, 2);
    expect(shear.depth).toBeCloseTo(1, 2);
    expect(shear.width).toBeCloseTo(0, 2);
  });
  test('a square is as sensitive to one side as to the other: −2 each', () => {
    const { resistance } = slopesOf({ kind: 'rectangle' }, [1e-4, 1e-4], 1e-4, '');
    expect(resistance.depth).toBeCloseTo(-2, 3);
    expect(resistance.width).toBeCloseTo(-2, 3);
  });
  test('an ellipse: K ~ a³b³/(a² + b²), so −3 + 2a²/(a² + b²) for each axis', () => {
    const { resistance } = slopesOf({ kind: 'ellipse' }, [2e-4, 2e-4], 1e-4, '');
    expect(resistance.width).toBeCloseTo(-3 + (2 * 4) / 5, 3);
    expect(resistance.depth).toBeCloseTo(-3 + (2 * 1) / 5, 3);
  });
  test('a taper of plates: R ~ h⁻³ ln(w1/w0)/(w1 − w0), shifted as a whole ~ −1/(log mean)', () => {
    const [a, b] = [0.1, 0.2];
    const { resistance } = slopesOf({ kind: 'rectangle' }, [a, b], 1e-5, '');
    // d/dδ ln(ln((b + δ)/(a + δ))) = (1/b − 1/a)/ln(b/a)
    expect(resistance.shift).toBeCloseTo((1 / b - 1 / a) / Math.log(b / a), 2);
    expect(resistance.width).toBeCloseTo(-1, 2);
  });
  test('a measured rectangle as a polygon answers as the rectangle', () => {
    const points = [
      [0, 0],
      [2e-4, 0],
      [2e-4, 1e-4],
      [0, 1e-4],
    ] as const;
    const drawn = slopesOf({ kind: 'rectangle' }, [2e-4, 2e-4], 1e-4, '').resistance;
    const measured = slopesOf({ kind: 'polygon', points }, [1e-3, 1e-3], 1e-4, '').resistance;
    expect(measured.depth).toBeCloseTo(drawn.depth, 2);
    expect(measured.shift * 2e-4).toBeCloseTo(drawn.width, 2);
  });
});

describe('two channels side by side', () => {
  test('equal plates, widths ± 1 %: each share moves by half of it, both together by 1 %', () => {
    const { ports, making } = solve(pair([{ ...LAYER, tolerance: { width: '1 %' } }], [4000, 4000]), ideal);
    const share = ports[1]!.making!.share;
    // s = w1/(w1 + w2): ds/s = (1 − s)(dw1/w1 − dw2/w2)
    expect(share.worst).toBeCloseTo(0.01, 4);
    expect(share.likely).toBeCloseTo(0.01 / Math.SQRT2, 4);
    expect(share.chief!.part).toBeCloseTo(0.5, 6);
    expect(share.chief!.what).toBe('width');
    expect(making!.share.worst).toBeCloseTo(share.worst, 9);
  });

  test('unequal plates: the smaller share moves by more, and the inlet by nothing', () => {
    const { ports } = solve(pair([{ ...LAYER, tolerance: { width: '20 um' } }], [6000, 2000]), ideal);
    // s1 = 3/4: (1 − s1)(20/6000 + 20/2000); s2 = 1/4: (3/4) of the same
    const sum = 20 / 6000 + 20 / 2000;
    expect(ports[1]!.making!.share.worst).toBeCloseTo(sum / 4, 4);
    expect(ports[2]!.making!.share.worst).toBeCloseTo((3 * sum) / 4, 4);
    expect(ports[2]!.making!.share.chief).toMatchObject({ what: 'width', of: 'channel', id: 'right' });
    // 10² of 10² + 3.33²
    expect(ports[2]!.making!.share.chief!.part).toBeCloseTo(0.9, 2);
    expect(ports[0]!.making!.flow).toEqual({ worst: 0, likely: 0 });
    expect(ports[0]!.making!.share).toEqual({ worst: 0, likely: 0 });
  });

  test('a depth that is off alike all over the layer moves no share of like channels, but the pressure by three times', () => {
    const { ports, making } = solve(pair([{ ...LAYER, tolerance: { depth: '2 %' } }], [4000, 4000]), ideal);
    expect(ports[1]!.making!.share.worst).toBe(0);
    expect(ports[0]!.making!.pressure!.worst).toBeCloseTo(0.06, 3);
    expect(ports[0]!.making!.pressure!.chief).toMatchObject({
      what: 'depth',
      of: 'layer',
      id: 'flow',
      part: 1,
    });
    // τ = 6 µQ/(w h²) at a given flow
    expect(making!.shear.worst).toBeCloseTo(0.04, 3);
  });

  test('width errors that the layer has in common cancel in the split of like channels', () => {
    const split = (common: number): Making =>
      solve(pair([{ ...LAYER, tolerance: { width: '1 %', common } }], [4000, 4000]), ideal).ports[1]!.making!
        .share;
    expect(split(1).worst).toBe(0);
    expect(split(0.5).worst).toBeCloseTo(0.005, 4);
    expect(split(0.5).chief).toMatchObject({ of: 'channel' });
  });

  test('a channel’s own tolerance takes the place of its layer’s, and is its own', () => {
    const layers = [{ ...LAYER, tolerance: { width: '1 %', depth: '1 %' } }];
    const exact = solve(pair(layers, [4000, 4000], {}, { tolerance: { width: '0 %', depth: '0 %' } }), ideal);
    const { share } = exact.ports[1]!.making!;
    // left is exact: only right's width (½ · 1 %) and its depth (½ · 3 %) are left
    expect(share.worst).toBeCloseTo(0.02, 3);
    expect(share.likely).toBeCloseTo(Math.hypot(0.005, 0.015), 3);
    expect(share.chief).toMatchObject({ what: 'depth', of: 'layer' });
  });

  test('a channel with a depth of its own takes its part by the cube', () => {
    const { ports } = solve(pair([LAYER], [4000, 4000], {}, { depth: 20 }), ideal);
    expect(ports[1]!.share!).toBeCloseTo(8 / 9, 2);
  });

  test('targets bear the band of their port, a channel’s that of its flow', () => {
    const { targets, ports } = solve(
      pair([{ ...LAYER, tolerance: { width: '1 %' } }], [4000, 4000], {
        targets: [
          { port: 'l', share: 0.5, within: '5 %' },
          { channel: 'right', flow: '0.5 uL/min', within: '5 %' },
        ],
      }),
      ideal,
    );
    expect(targets[0]!.making).toEqual(ports[1]!.making!.share);
    expect(targets[1]!.making!.worst).toBeCloseTo(0.01, 4);
  });
});

test('in a row at a given pressure: R1 + R2 with R2 = 3 R1 weighs 1 to 3', () => {
  const { ports } = solve(
    chipOf({
      layers: [{ ...LAYER, tolerance: { width: '1 %' } }],
      channels: [
        {
          id: 'a',
          layer: 'flow',
          path: [
            [8000, 13000],
            [20000, 13000],
          ],
          width: 4000,
        },
        {
          id: 'b',
          layer: 'flow',
          path: [
            [20000, 13000],
            [56000, 13000],
          ],
          width: 4000,
        },
      ],
      ports: [
        { id: 'in', at: [8000, 13000], layer: 'flow', diameter: 0, drive: { pressure: '10 mbar' } },
        { id: 'out', at: [56000, 13000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      ],
    }),
    ideal,
  );
  const { flow } = ports[1]!.making!;
  expect(flow.worst).toBeCloseTo(0.01, 4);
  expect(flow.likely).toBeCloseTo(0.01 * Math.hypot(0.25, 0.75), 4);
  expect(flow.chief).toMatchObject({ id: 'b' });
  expect(ports[0]!.making!.pressure).toBeUndefined();
});

test('no tolerance, no band: nothing is reckoned; a tolerance of nought gives none either', () => {
  const without = solve(pair([LAYER], [4000, 4000]), ideal);
  expect(without.making).toBeUndefined();
  expect(without.ports.every(({ making }) => making === undefined)).toBe(true);
  const nought = solve(pair([{ ...LAYER, tolerance: { width: '0 %', depth: '0 um' } }], [4000, 4000]), ideal);
  expect(nought.making).toBeUndefined();
});

test('a power-law fluid between plates: Q ~ w h^(2 + 1/n), so the pressure for a flow goes as h^−(2n + 1) w^−n', () => {
  // n = 0.5: h⁻², w⁻½
  const { ports } = solve(
    pair([{ ...LAYER, tolerance: { depth: '1 %' } }], [4000, 4000], {
      fluid: { density: 1000, shear: { kind: 'power-law', consistency: 0.02, index: 0.5 } },
    }),
    ideal,
  );
  expect(ports[0]!.making!.pressure!.worst).toBeCloseTo(0.02, 3);
});
