import { expect, test } from 'vitest';
import { randomNetwork } from '../../test/network/random-network.ts';
import { prepareNetwork } from './prepare.ts';
import { gradients, type Target } from './sensitivity.ts';
import { solveNetwork } from './solve-network.ts';
import type { NetworkSpec } from './spec.ts';

test('gradients of duct and drive flows equal central differences, 24 random networks', () => {
  for (let seed = 0; seed < 24; seed += 1) {
    const spec = randomNetwork(seed);
    const prepared = prepareNetwork(spec);
    const solution = solveNetwork(spec, prepared);
    const targets: Target[] = [
      { of: 'duct', index: 0 },
      { of: 'duct', index: spec.resistance.length - 1 },
      ...spec.drives.map((_, index) => ({ of: 'drive' as const, index })),
    ];
    const found = gradients(spec, prepared, solution, targets);
    const flow = (changed: NetworkSpec, { of, index }: Target) => {
      const { ductFlow, driveFlow } = solveNetwork(changed);
      return of === 'duct' ? ductFlow[index] : driveFlow[index];
    };
    const scale = Math.max(solution.throughput, 1e-30);
    for (const e of [0, spec.resistance.length >> 1, spec.resistance.length - 1]) {
      const at = (factor: number): NetworkSpec => ({
        ...spec,
        resistance: spec.resistance.map((r, k) => (k === e ? r * factor : r)),
      });
      targets.forEach((target, t) => {
        const slope = (flow(at(Math.exp(1e-4)), target) - flow(at(Math.exp(-1e-4)), target)) / 2e-4;
        expect(Math.abs(found[t].byResistance[e] - slope) / scale).toBeLessThan(1e-8);
      });
    }
    spec.drives.forEach(({ value }, d) => {
      const step = Math.abs(value) * 0.1 + 1e-12;
      const at = (by: number): NetworkSpec => ({
        ...spec,
        drives: spec.drives.map((drive, k) => (k === d ? { ...drive, value: value + by } : drive)),
      });
      targets.forEach((target, t) => {
        // Linear in the drives, so that a wide difference is exact.
        const change = (flow(at(step), target) - flow(at(-step), target)) / 2;
        expect(Math.abs(found[t].byDrive[d] * step - change) / scale).toBeLessThan(1e-9);
      });
    });
  }
});
