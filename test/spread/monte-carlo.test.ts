import { readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { Session } from '../../solver/session.ts';
import { solve } from '../../solver/solve.ts';
import { deviation, madeOnce, normalFrom } from './sampled.ts';

/**
 * The bands against whole solves of chips made at random, seeded: tolerances stand for two standard deviations, so that
 * two standard deviations of what comes out is what is likely. Small tolerances, because the bands are of first order.
 */
const DEMOS = resolve(import.meta.dirname, '../../assets/demo');
const SAMPLES = 400;

function demo(name: string, tolerance: object, more: object = {}): Chip {
  const raw = JSON.parse(readFileSync(resolve(DEMOS, `${name}.json`), 'utf8')) as { layers: object[] };
  return readDescription(
    JSON.stringify({ ...raw, layers: raw.layers.map((layer) => ({ ...layer, tolerance })), ...more }),
  );
}

const CHIPS: readonly (readonly [string, Chip])[] = [
  ['a splitting tree', demo('eight-way-splitter', { depth: '1 %', width: '1 um' })],
  ['a gradient tree', demo('gradient-tree', { depth: '1 %', width: '1 um', common: 0.4 })],
  ['cells on their way', demo('cell-loading', { depth: '0.5 um', width: '1 %' })],
  ['under gravity', demo('gravity-crossing', { depth: '1 %', width: '1 %' })],
  [
    'a thinning fluid',
    demo(
      'eight-way-splitter',
      { depth: '1 %', width: '1 um' },
      { fluid: { density: 1050, shear: { kind: 'power-law', consistency: 0.02, index: 0.6 } } },
    ),
  ],
];

interface Sampled {
  readonly name: string;
  readonly likely: number;
  of(result: Result): number | null | undefined;
  readonly nominal: number;
}

function figures(result: Result): Sampled[] {
  const out: Sampled[] = [];
  result.ports.forEach(({ id, making, share, flow, pressure }, i) => {
    if (!making || share === null || flow === null) return;
    out.push({
      name: `share ${id}`,
      likely: making.share.likely,
      nominal: share,
      of: (r) => r.ports[i]!.share,
    });
    out.push({ name: `flow ${id}`, likely: making.flow.likely, nominal: flow, of: (r) => r.ports[i]!.flow });
    if (making.pressure)
      out.push({
        name: `pressure ${id}`,
        likely: making.pressure.likely,
        nominal: pressure,
        of: (r) => r.ports[i]!.pressure,
      });
  });
  result.channels.forEach(({ id, pieces }, c) => {
    pieces.forEach(({ making, peakWallShear, flow }, p) => {
      if (!making || peakWallShear === null || flow === null) return;
      const of = (r: Result) => r.channels[c]!.pieces[p]!.peakWallShear;
      out.push({ name: `shear ${id}#${p + 1}`, likely: making.shear.likely, nominal: peakWallShear, of });
    });
  });
  return out;
}

describe('ideal junctions: every share, flow, pressure and peak shear, seeded samples with whole solves', () => {
  test.each(CHIPS)('%s', (_, chip) => {
    const result = solve(chip, { junctions: 'ideal' });
    const asked = figures(result).filter(({ likely }) => likely > 1e-4);
    expect(asked.length).toBeGreaterThan(8);
    const normal = normalFrom(7);
    const session = new Session();
    const seen = asked.map((): number[] => []);
    const samples = chip.channels.length > 60 ? SAMPLES / 2 : SAMPLES;
    for (let i = 0; i < samples; i += 1) {
      const made = session.update(
        madeOnce(chip, () => normal() / 2),
        { junctions: 'ideal' },
      );
      asked.forEach(({ of, nominal }, k) => {
        seen[k]!.push(of(made)! / nominal);
      });
    }
    // Twice the deviation of so many samples is known to about 1/√(2 samples) of itself: four of those are allowed,
    // and two hundredths for what is beyond the first order.
    const allowed = 0.02 + 4 / Math.sqrt(2 * samples);
    asked.forEach(({ name, likely }, k) => {
      const ratio = (2 * deviation(seen[k]!)) / likely;
      expect(Math.abs(ratio - 1), `${name}: ${ratio}`).toBeLessThan(allowed);
    });
  });
});
