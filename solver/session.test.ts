import { expect, test } from 'vitest';
import { channel, chipOf, port } from '../test/chip/drawings.ts';
import { Session } from './session.ts';
import { solve } from './solve.ts';

const COARSE = { accuracy: 0.05 } as const;

/** A T with unequal arms, a bend on one of them; every corner filleted. */
const chip = (() => {
  const plain = chipOf({
    channels: [
      channel(
        'feed',
        [
          [1000, 5000],
          [3000, 5000],
        ],
        100,
      ),
      channel(
        'left',
        [
          [3000, 5000],
          [3000, 7000],
          [4000, 7000],
        ],
        80,
      ),
      channel(
        'right',
        [
          [3000, 5000],
          [3000, 2000],
        ],
        100,
      ),
    ],
    ports: [
      { ...port('in', [1000, 5000]), drive: { kind: 'flow', flow: 1e-11 } },
      port('out left', [4000, 7000]),
      port('out right', [3000, 2000], 500),
    ],
  });
  return { ...plain, layers: [{ ...plain.layers[0], fillet: 10_000 }] };
})();

const shares = (result: ReturnType<typeof solve>) => result.ports.map((one) => one.share ?? Number.NaN);

test('in haste the answer is that of ideal junctions, said so; as junctions come it becomes the fresh solved one', () => {
  const session = new Session();
  const first = session.update(chip, { ...COARSE, haste: true });
  expect(first.junctions).toBe('ideal');
  expect(session.waiting).toBe(first.cells.length);
  expect(first.cells.every((cell) => cell.peakWallShear === null && cell.portMatrix.length === 0)).toBe(true);
  const ideal = solve(chip, { junctions: 'ideal' });
  shares(first).forEach((share, i) => {
    expect(share).toBeCloseTo(shares(ideal)[i], 9);
  });

  session.solveNext(COARSE);
  expect(session.update(chip, { ...COARSE, haste: true }).junctions).toBe('mixed');
  for (let guard = 0; guard < 20 && session.waiting > 0; guard += 1) {
    session.solveNext(COARSE);
    session.update(chip, { ...COARSE, haste: true });
  }
  const last = session.update(chip, { ...COARSE, haste: true });
  expect(last.junctions).toBe('solved');
  expect(last).toEqual(solve(chip, COARSE));
  // What the junctions change is more than round-off and less than nonsense.
  const shift = Math.abs(shares(last)[1] / shares(ideal)[1] - 1);
  expect(shift).toBeGreaterThan(1e-4);
  expect(shift).toBeLessThan(0.1);
  expect(last.cells.every((cell) => (cell.peakWallShear ?? 0) > 0)).toBe(true);
});

test('a layer without a fillet radius has no peak at its junctions, and a limit there is not judged', () => {
  const sharp = {
    ...chip,
    layers: [{ ...chip.layers[0], fillet: 0 }],
    limits: [{ name: 'cells', shear: 1000 }],
  };
  const result = solve(sharp, COARSE);
  expect(result.cells.some((cell) => cell.peakWallShear === null)).toBe(true);
  expect(result.findings.map(({ kind }) => kind)).toContain('sharp-corner');
  expect(result.limits[0].met).toBe(null);
});
