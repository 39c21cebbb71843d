import { expect, test } from 'vitest';
import { channel, chipOf, port } from '../../test/chip/drawings.ts';
import type { FluidSpec } from '../fluid/spec.ts';
import { solve } from '../solve.ts';

const tee = (fluid: FluidSpec) => {
  const chip = chipOf({
    channels: [
      channel(
        'feed',
        [
          [1000, 5000],
          [2000, 5000],
        ],
        100,
      ),
      channel(
        'left',
        [
          [2000, 5000],
          [2000, 6000],
        ],
        100,
      ),
      channel(
        'right',
        [
          [2000, 5000],
          [2000, 3000],
        ],
        100,
      ),
    ],
    ports: [
      { ...port('in', [1000, 5000]), drive: { kind: 'flow', flow: 1e-11 } },
      port('out left', [2000, 6000]),
      port('out right', [2000, 3000]),
    ],
    fluid,
  });
  return { ...chip, layers: [{ ...chip.layers[0], fillet: 10_000 }] };
};
const COARSE = { accuracy: 0.03 } as const;

test('a fluid that hardly thins flows through solved junctions as one that does not', () => {
  const plain = solve(tee({ viscosity: 1e-3, density: 1000 }), COARSE);
  const thin = solve(
    tee({ density: 1000, shear: { kind: 'power-law', consistency: 1e-3, index: 0.9999 } }),
    COARSE,
  );
  expect(thin.junctions).toBe('solved');
  expect(thin.ports[1].share! / plain.ports[1].share!).toBeCloseTo(1, 4);
  // Viscosity at some 1000 1/s is below the consistency by 0.07 %.
  expect(thin.ports[0].pressure / plain.ports[0].pressure).toBeCloseTo(1, 2);
});

test('junctions take the viscosity that the fluid has around them, and the result says so', () => {
  const shear = { kind: 'power-law', consistency: 0.02, index: 0.7 } as const;
  const solved = solve(tee({ density: 1060, shear }), COARSE);
  const ideal = solve(tee({ density: 1060, shear }), { junctions: 'ideal' });
  // The junction is some two hundred micrometres of two thousand: its viscosity cannot be far off.
  expect(solved.ports[0].pressure / ideal.ports[0].pressure).toBeGreaterThan(0.95);
  expect(solved.ports[0].pressure / ideal.ports[0].pressure).toBeLessThan(1.05);
  expect(solved.findings.map(({ kind }) => kind)).toContain('thinning-junction');
  expect(solved.balance.conservationResidual).toBeLessThan(1e-9);
});
