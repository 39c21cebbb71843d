import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { solve } from '../../solver/solve.ts';

const read = (name: string): Chip =>
  readDescription(readFileSync(join(import.meta.dirname, '../../assets/demo', `${name}.json`), 'utf8'));
const COARSE = { accuracy: 0.02 } as const;

test('cell loading: its corners are fatal as drawn; a fillet and a wider neck save the cells, as the caption says', () => {
  const drawn = read('cell-loading');
  const first = solve(drawn, COARSE);
  expect(first.junctions).toBe('solved');
  expect(first.limits[0]).toMatchObject({ met: false, where: 'junction:1' });

  const wider = {
    funnel: [200_000, 120_000],
    neck: [120_000, 120_000],
    release: [120_000, 200_000],
  } as const;
  const saved: Chip = {
    ...drawn,
    layers: [{ ...drawn.layers[0], fillet: 50_000 }],
    channels: drawn.channels.map((channel) =>
      channel.id in wider ? { ...channel, width: wider[channel.id as keyof typeof wider] } : channel,
    ),
  };
  const last = solve(saved, COARSE);
  expect(last.limits[0].met).toBe(true);
  expect(last.targets[0].met).toBe(true);
  // Neither remedy is enough alone.
  expect(solve({ ...saved, layers: drawn.layers }, COARSE).limits[0].met).toBe(false);
  expect(solve({ ...saved, channels: drawn.channels }, COARSE).limits[0].met).toBe(false);
});

test('the other demos meet what they ask with their junctions solved', () => {
  for (const name of ['eight-way-splitter', 'attached-cells', 'recirculation-loop', 'gravity-crossing']) {
    const result = solve(read(name), COARSE);
    expect(result.junctions, name).toBe('solved');
    expect(
      result.targets.every(({ met }) => met),
      name,
    ).toBe(true);
    expect(
      result.limits.every(({ met }) => met === true),
      name,
    ).toBe(true);
  }
});

test('circulating cells: the dose decides with junctions solved too', () => {
  const result = solve(read('circulating-cells'), COARSE);
  expect(result.junctions).toBe('solved');
  expect(result.limits.map(({ met }) => met)).toEqual([true, false]);
});

test('attached cells: the floor is uneven, starved in its corners and swept at its mouths, and still met', () => {
  const drawn = read('attached-cells');
  const within = (low: number, high: number): number => {
    const limits = drawn.limits.map((limit) =>
      'floor' in limit ? { ...limit, floor: [low, high] as const } : limit,
    );
    return solve({ ...drawn, limits }, COARSE).limits[0].worst!;
  };
  const [starved, met, swept] = [within(0, 0.05), within(0.05, 0.25), within(0.25, 1000)];
  expect(starved + met + swept).toBeCloseTo(1, 9);
  expect(starved).toBeGreaterThan(0.01);
  expect(swept).toBeGreaterThan(0.001);
  expect(met).toBeGreaterThan(0.9);
});
