import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';
import { solveChip } from './solve-chip.ts';

/** A ladder of `count` rungs, no two of one width: two unlike junctions a rung. */
function ladder(count: number): Chip {
  const length = 1000 * (count + 1);
  const rung = (i: number) => ({
    id: `rung${i}`,
    layer: 'flow',
    path: [
      [1000 * (i + 1), 1000],
      [1000 * (i + 1), 2000],
    ],
    width: 60 + 3 * i,
  });
  const rail = (id: string, y: number) => ({
    id,
    layer: 'flow',
    path: [
      [500, y],
      [length, y],
    ],
    width: 100,
  });
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'ladder',
      outline: { width: length + 1000, height: 3000 },
      layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
      channels: [rail('low', 1000), rail('high', 2000), ...Array.from({ length: count }, (_, i) => rung(i))],
      ports: [
        { id: 'in', at: [500, 1000], layer: 'flow', diameter: 0, drive: { flow: '10 uL/min' } },
        { id: 'out', at: [length, 2000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      ],
      fluid: { name: 'water', temperature: '25 degC' },
    }),
  );
}

const loose = { accuracy: 0.02 };

test('a chip solved on two threads has the result it has on one', async () => {
  const chip = ladder(10);
  expect(await solveChip(chip, loose, 2)).toEqual(solve(chip, loose));
}, 120_000);

test('a chip that cannot be solved says so before junctions are waited for', async () => {
  const chip = ladder(10);
  // Two flows, and no pressure that the others are counted from.
  const ports = chip.ports.map((port) => ({ ...port, drive: chip.ports[0]!.drive }));
  const said = await solveChip({ ...chip, ports }, loose, 2).catch((error: unknown) => error);
  expect(said).toBeInstanceOf(Problem);
  expect(() => solve({ ...chip, ports }, loose)).toThrow((said as Problem).message);
});

test('a demo on two threads is the same as on one', async () => {
  const text = readFileSync(join(import.meta.dirname, '../../assets/demo/eight-way-splitter.json'), 'utf8');
  const chip = readDescription(text);
  expect(await solveChip(chip, loose, 2)).toEqual(solve(chip, loose));
}, 120_000);
