import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf } from '../checks/chips.ts';

/** A soft roof that opens the feed by a tenth: the deeper the channel, the less of it is the rise. */
const tee = (depth: number, left: number, layer: object = {}, channel: object = {}): Chip =>
  chipOf({
    layers: [
      { id: 'flow', depth, fillet: 0, roof: { modulus: '1 MPa', thickness: '5 mm', poisson: 0.5 }, ...layer },
    ],
    channels: [
      {
        id: 'feed',
        layer: 'flow',
        path: [
          [20000, 4000],
          [20000, 12000],
        ],
        width: 300,
      },
      {
        id: 'left',
        layer: 'flow',
        path: [
          [20000, 12000],
          [8000, 12000],
        ],
        width: left,
        ...channel,
      },
      {
        id: 'right',
        layer: 'flow',
        path: [
          [20000, 12000],
          [44000, 12000],
        ],
        width: 300,
      },
    ],
    ports: [
      { id: 'in', at: [20000, 4000], layer: 'flow', diameter: 0, drive: { flow: '100 uL/min' } },
      { id: 'l', at: [8000, 12000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      { id: 'r', at: [44000, 12000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
  });
const ideal = { junctions: 'ideal' } as const;

const CASES = [
  ['depth', tee(50, 200, { tolerance: { depth: '1 %' } }), tee(50.5, 200), tee(49.5, 200)],
  ['one width', tee(50, 200, {}, { tolerance: { width: '1 %' } }), tee(50, 202), tee(50, 198)],
] as const;

test.each(CASES)(
  'under a soft roof, against central differences of whole solves: %s',
  (_, told, more, less) => {
    const [said, up, down] = [solve(told, ideal), solve(more, ideal), solve(less, ideal)];
    const off = (value: (result: Result) => number): number =>
      Math.abs(value(up) - value(down)) / (value(up) + value(down));
    const near = (band: number, value: (result: Result) => number): void => {
      // The roof's own answer is taken at the mean of a duct's two pressures.
      expect(Math.abs(band - off(value))).toBeLessThan(0.1 * off(value) + 5e-4);
    };
    expect(said.ports[0]!.pressure).toBeGreaterThan(8000);
    near(said.ports[0]!.making!.pressure!.worst, (r) => r.ports[0]!.pressure);
    near(said.ports[1]!.making!.share.worst, (r) => r.ports[1]!.share!);
    said.channels.forEach(({ pieces }, c) => {
      near(pieces[0]!.making!.shear.worst, (r) => r.channels[c]!.pieces[0]!.peakWallShear!);
    });
  },
);
