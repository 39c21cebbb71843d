import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf } from '../checks/chips.ts';
import { madeOnce } from './sampled.ts';

const IDEAL = { junctions: 'ideal' } as const;

/** A comb: a feed along the bottom, arms up from it, each of its own width. */
const comb = (widths: readonly number[], tolerance: object): Chip =>
  chipOf({
    layers: [{ id: 'flow', depth: 60, fillet: 0, tolerance }],
    channels: [
      ...widths.map((width, i) => ({
        id: `arm ${i}`,
        layer: 'flow',
        path: [
          [10000 + 8000 * i, 8000],
          [10000 + 8000 * i, 20000],
        ],
        width,
      })),
      ...widths.map((_, i) => ({
        id: `run ${i}`,
        layer: 'flow',
        path: [
          [2000 + 8000 * i, 8000],
          [10000 + 8000 * i, 8000],
        ],
        width: 250,
      })),
    ],
    ports: [
      { id: 'in', at: [2000, 8000], layer: 'flow', diameter: 0, drive: { flow: '4 uL/min' } },
      ...widths.map((_, i) => ({
        id: `out ${i}`,
        at: [10000 + 8000 * i, 20000],
        layer: 'flow',
        diameter: 0,
        drive: { pressure: 0 },
      })),
    ],
  });

const widths = fc.array(fc.integer({ min: 60, max: 400 }), { minLength: 2, maxLength: 5 });

test('random combs: nothing made within its tolerances leaves the worst case, and the corner of them reaches it', () => {
  fc.assert(
    fc.property(widths, fc.nat(1e6), (arms, seed) => {
      const chip = comb(arms, { depth: '0.1 %', width: '0.1 %' });
      const told = solve(chip, IDEAL);
      let state = seed;
      const coin = (): number => {
        state = (state * 48271 + 11) % 2147483647;
        return state % 2 === 0 ? 1 : -1;
      };
      const reached = told.ports.map(() => 0);
      for (let i = 0; i < 12; i += 1) {
        const made = solve(madeOnce(chip, coin), IDEAL);
        made.ports.forEach(({ share }, p) => {
          const off = Math.abs(share! / told.ports[p]!.share! - 1);
          reached[p] = Math.max(reached[p]!, off);
          // beyond the first order, 0.1 % squared; and whole nanometres
          expect(off).toBeLessThanOrEqual(told.ports[p]!.making!.share.worst * 1.01 + 2e-5);
        });
      }
    }),
    { numRuns: 20, seed: 5 },
  );
});

test('twice the tolerance is twice the band; the band of one source is the same by worst case and by squares', () => {
  fc.assert(
    fc.property(widths, fc.double({ min: 1e-3, max: 0.05, noNaN: true }), (arms, share) => {
      const once = solve(comb(arms, { depth: `${share * 100} %`, width: `${share * 100} %` }), IDEAL);
      const twice = solve(comb(arms, { depth: `${share * 200} %`, width: `${share * 200} %` }), IDEAL);
      once.ports.forEach(({ making }, p) => {
        expect(twice.ports[p]!.making!.share.worst).toBeCloseTo(2 * making!.share.worst, 8);
        expect(twice.ports[p]!.making!.share.likely).toBeCloseTo(2 * making!.share.likely, 8);
        expect(making!.share.likely).toBeLessThanOrEqual(making!.share.worst * (1 + 1e-12));
      });
      const deep = solve(comb(arms, { depth: `${share * 100} %` }), IDEAL);
      expect(deep.making!.shear.likely).toBeCloseTo(deep.making!.shear.worst, 12);
    }),
    { numRuns: 20, seed: 6 },
  );
});

test('sources that lie on no way of the flow move nothing', () => {
  const chip = comb([100, 200], { width: '5 %' });
  const told = solve(
    {
      ...chip,
      ports: chip.ports.map((port) => (port.id === 'out 1' ? { ...port, drive: { kind: 'closed' } } : port)),
    },
    IDEAL,
  );
  expect(told.ports[1]!.making!.share.worst).toBe(0);
  expect(told.ports[2]!.making).toBeUndefined();
});
