import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Chip, Tolerance } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';

import { writeDescription } from '../../solver/chip/description-write.ts';
import { readChip } from '../../solver/chip/schema-chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { chipOf, line } from '../checks/chips.ts';

const share = fc.oneof(fc.constant(0), fc.double({ min: 1e-9, max: 1, noNaN: true }));
const tolerance: fc.Arbitrary<Tolerance> = fc.oneof(
  share.map((value) => ({ share: value * 0.99 })),
  fc.nat(1_000_000).map((length) => ({ length })),
);
const own = fc.record({ depth: tolerance, width: tolerance }, { requiredKeys: [] });
const ofLayer = fc.record(
  {
    depth: tolerance,
    width: tolerance,
    common: share,
  },
  { requiredKeys: [] },
);

test('tolerances and depths of channels survive a description and a project file, to the bit', () => {
  const plain = chipOf();
  fc.assert(
    fc.property(ofLayer, own, fc.integer({ min: 1, max: 1e6 }), (layer, channel, depth) => {
      const chip: Chip = structuredClone({
        ...plain,
        layers: [{ ...plain.layers[0]!, tolerance: layer }],
        channels: [{ ...plain.channels[0]!, depth, tolerance: channel }],
      });
      expect(readDescription(writeDescription(chip))).toStrictEqual(chip);
      expect(readChip(JSON.parse(JSON.stringify(chip)))).toStrictEqual(chip);
    }),
    { numRuns: 200 },
  );
});

const BAD: readonly (readonly [string, object, RegExp, RegExp])[] = [
  ['a depth of none', { depth: 0 }, /above zero/, /channels\[0\]\.depth \(a\)/],
  [
    'an unknown key',
    { tolerance: { depht: '5 %' } },
    /depht is no known key/,
    /channels\[0\]\.tolerance\.depht/,
  ],
  [
    'a common part of one channel',
    { tolerance: { common: 0.5 } },
    /common is no known key/,
    /tolerance\.common/,
  ],
  [
    'all of the width',
    { tolerance: { width: '100 %' } },
    /below 100 %/,
    /channels\[0\]\.tolerance\.width \(a\)/,
  ],
  ['a bare number', { tolerance: { width: 2 } }, /takes a share or a length/, /tolerance\.width/],
];
test.each(BAD)('%s is refused by name and place', (_, more, what, where) => {
  let caught: unknown;
  try {
    chipOf({ channels: [line('a', 12000, 200, more as Record<string, unknown>)] });
  } catch (error) {
    caught = error;
  }
  expect(caught).toBeInstanceOf(Problem);
  expect((caught as Problem).what).toMatch(what);
  expect((caught as Problem).where).toMatch(where);
});

test('a common part beyond all of it is refused', () => {
  expect(() => chipOf({ layers: [{ id: 'flow', depth: 100, tolerance: { common: '120 %' } }] })).toThrow(
    /must lie from 0 to 1/,
  );
});
