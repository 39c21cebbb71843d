import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf } from '../checks/chips.ts';

/**
 * One tolerance at a time against central differences of whole solves, junctions solved in three dimensions: arms a
 * few widths long, so that the junction is a good part of each, and cells under both.
 */
const OPTIONS = { accuracy: 0.005 } as const;
const STEP = 0.02;
const BY = { share: STEP };

const tee = (more: object = {}): Chip =>
  chipOf({
    layers: [{ id: 'flow', depth: 80, fillet: 10 }],
    channels: [
      {
        id: 'feed',
        layer: 'flow',
        path: [
          [20000, 10800],
          [20000, 12000],
        ],
        width: 200,
      },
      {
        id: 'left',
        layer: 'flow',
        path: [
          [20000, 12000],
          [18800, 12000],
        ],
        width: 120,
      },
      {
        id: 'right',
        layer: 'flow',
        path: [
          [20000, 12000],
          [22400, 12000],
        ],
        width: 200,
      },
    ],
    ports: [
      { id: 'in', at: [20000, 10800], layer: 'flow', diameter: 0, drive: { flow: '5 uL/min' } },
      { id: 'l', at: [18800, 12000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      { id: 'r', at: [22400, 12000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
    ...more,
  });

const SOURCES: readonly (readonly [string, (chip: Chip) => Chip, (chip: Chip, by: number) => Chip])[] = [
  [
    'depth of the layer',
    (chip) => ({ ...chip, layers: chip.layers.map((layer) => ({ ...layer, tolerance: { depth: BY } })) }),
    (chip, by) => ({
      ...chip,
      layers: chip.layers.map((layer) => ({ ...layer, depth: Math.round(layer.depth * (1 + by)) })),
    }),
  ],
  ...['feed', 'left', 'right'].map(
    (id) =>
      [
        `width of ${id}`,
        (chip: Chip): Chip => ({
          ...chip,
          channels: chip.channels.map((one) => (one.id === id ? { ...one, tolerance: { width: BY } } : one)),
        }),
        (chip: Chip, by: number): Chip => ({
          ...chip,
          channels: chip.channels.map((one) => {
            const width = Math.round(one.width[0] * (1 + by));
            return one.id === id ? { ...one, width: [width, width] as const } : one;
          }),
        }),
      ] as const,
  ),
];

/** Relative change by one step up, of the mean of up and down. */
const slope = (up: number, down: number): number => Math.abs(up - down) / (up + down);

describe('solved junctions', () => {
  test.each(SOURCES)('%s', (_, allow, change) => {
    const told = solve(allow(tee()), OPTIONS);
    const [up, down] = [solve(change(tee(), STEP), OPTIONS), solve(change(tee(), -STEP), OPTIONS)];
    expect(told.junctions).toBe('solved');
    const near = (
      what: string,
      said: number,
      value: (result: Result) => number,
      part: number,
      least = 1e-3,
    ): void => {
      const true_ = slope(value(up), value(down));
      // Solves are good to a few thousandths each, of which the difference is taken.
      expect(Math.abs(said - true_), `${what}: said ${said}, is ${true_}`).toBeLessThan(part * true_ + least);
    };
    near('pressure', told.ports[0]!.making!.pressure!.worst, (r) => r.ports[0]!.pressure, 0.08);
    near('share', told.ports[1]!.making!.share.worst, (r) => r.ports[1]!.share!, 0.12);
    told.channels.forEach(({ id, pieces }, c) => {
      const of = (r: Result): number => r.channels[c]!.pieces[0]!.peakWallShear!;
      near(`shear in ${id}`, pieces[0]!.making!.shear.worst, of, 0.1);
    });
    const cell = told.cells.findIndex(({ kind }) => kind === 'junction');
    // An estimate: which of its channels a corner goes with is not reckoned. Half of what the source itself is off.
    near(
      'peak of the junction',
      told.cells[cell]!.making!.worst,
      (r) => r.cells[cell]!.peakWallShear!,
      0.5,
      STEP / 2,
    );
  });
});
