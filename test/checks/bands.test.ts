import { describe, expect, test } from 'vitest';
import { prepareNetwork } from '../../solver/network/prepare.ts';
import { gradients } from '../../solver/network/sensitivity.ts';
import { solveNetwork } from '../../solver/network/solve-network.ts';
import { solve } from '../../solver/solve.ts';
import { randomNetwork } from '../network/random-network.ts';
import { chipOf, line, port } from './chips.ts';

/** A feed that splits into a short and a long arm, µm. */
const tee = (arms: readonly [number, number], widths: readonly [number, number, number], depth: number) =>
  chipOf({
    layers: [{ id: 'flow', depth, fillet: 5 }],
    channels: [
      {
        id: 'feed',
        layer: 'flow',
        path: [
          [20000, 8000],
          [20000, 12000],
        ],
        width: widths[0],
      },
      {
        id: 'left',
        layer: 'flow',
        path: [
          [20000, 12000],
          [20000 - arms[0], 12000],
        ],
        width: widths[1],
      },
      {
        id: 'right',
        layer: 'flow',
        path: [
          [20000, 12000],
          [20000 + arms[1], 12000],
        ],
        width: widths[2],
      },
    ],
    ports: [
      port('in', [20000, 8000], { flow: '1 uL/min' }, 0),
      port('l', [20000 - arms[0], 12000], { pressure: 0 }, 0),
      port('r', [20000 + arms[1], 12000], { pressure: 0 }, 0),
    ],
  });

describe('bands of ideal junctions hold the same chip with its junction solved', () => {
  const CHIPS = [
    tee([1000, 3000], [200, 200, 200], 100),
    tee([600, 600], [300, 100, 200], 80),
    tee([800, 5000], [150, 250, 100], 50),
    tee([1500, 900], [400, 200, 120], 100),
  ];
  test.each(CHIPS.map((chip, i) => [i, chip] as const))('chip %i', (_, chip) => {
    const ideal = solve(chip, { junctions: 'ideal' });
    const solved = solve(chip, { accuracy: 0.01 });
    for (const { id, share, band } of ideal.ports) {
      const better = solved.ports.find((other) => other.id === id)!;
      const off = Math.abs(share! / better.share! - 1);
      expect(off, id).toBeLessThanOrEqual(band!.share + better.band!.share + 1e-12);
    }
    // a solved junction is better known by far
    expect(solved.bands!.share).toBeLessThan(ideal.bands!.share / 3);
    const pressure = (result: typeof ideal) => result.ports[0]!.pressure;
    const off = Math.abs(pressure(ideal) / pressure(solved) - 1);
    expect(off).toBeLessThanOrEqual(ideal.bands!.pressure + solved.bands!.pressure);
    // worst chips aside, the band is no wild guess: within 30 times of what is true
    expect(ideal.bands!.pressure).toBeLessThan(30 * off + 0.01);
  });
});

test('one channel: nothing but its section can be wrong, and its flow is given', () => {
  const { ports, bands } = solve(chipOf({ channels: [line('a', 12000)] }), { junctions: 'ideal' });
  expect(ports[0]!.band!.share).toBeLessThan(1e-6);
  expect(bands!.flow).toBeLessThan(1e-6);
  expect(bands!.pressure).toBeLessThan(1e-6);
});

test('the bound by blocks holds when blocks are scaled, 24 random networks', () => {
  let blocks = 0;
  for (let seed = 0; seed < 24; seed += 1) {
    const spec = randomNetwork(seed);
    const prepared = prepareNetwork(spec);
    const solution = solveNetwork(spec, prepared);
    if (solution.faults.length > 0) continue;
    const targets = spec.drives.map((_, index) => ({ of: 'drive' as const, index }));
    const found = gradients(spec, prepared, solution, targets);
    for (let b = 0; b < spec.blocks.length; b += 1) {
      blocks += 1;
      const at = (factor: number) =>
        solveNetwork({
          ...spec,
          blocks: spec.blocks.map((block, k) =>
            k === b ? { ...block, matrix: block.matrix.map((entry) => entry * factor) } : block,
          ),
        });
      const [up, down] = [at(1 + 1e-4), at(1 - 1e-4)];
      targets.forEach((_, t) => {
        const slope = Math.abs(up.driveFlow[t]! - down.driveFlow[t]!) / 2e-4;
        expect(slope).toBeLessThanOrEqual(found[t]!.byBlock[b]! + 1e-7 * solution.throughput);
      });
    }
  }
  expect(blocks).toBeGreaterThan(10);
});
