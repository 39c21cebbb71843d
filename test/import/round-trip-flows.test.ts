import { beforeAll, describe, expect, test } from 'vitest';
import { randomNetwork } from '../chips/random-network.ts';
import { verify } from '../verify/row.ts';
import { apart, FORMATS, reRead } from './re-read.ts';

/**
 * Masks of random chips, read back as any drawing: how the flow splits. A mask has no ports and drives: those of the
 * chip are put back where they were. In every test run a fixed half of the chips goes through one format each, a
 * tenth of these with solved junctions; in a verification run all 200 go through all formats with both.
 */

const WHOLE = process.env.CHANNELWRIGHT_VERIFY !== undefined;
const CHIPS = WHOLE ? 200 : 99;
/** Of so many chips each format has one whose junctions are solved, besides those that ideal ones do not tell alike. */
const SOLVED = WHOLE ? FORMATS.length : 33;
const HOUR = 3.6e6;

describe.each(FORMATS)('%s', (format) => {
  const found = { area: 0, ideal: 0, solved: 0, chips: 0, doubted: 0, mixed: 0, wells: 0, layers: 0 };
  beforeAll(async () => {
    for (let seed = 1; seed <= CHIPS; seed += 1) {
      if (!WHOLE && seed % FORMATS.length !== FORMATS.indexOf(format)) continue;
      const chip = randomNetwork(seed);
      const read = await reRead(chip, format);
      expect(read.outlines.length).toBe(format === 'svg' ? chip.layers.length : 1);
      for (const outline of read.outlines) expect(outline).toEqual(chip.outline);
      const { off } = apart(chip, read.chip, 'ideal');
      found.chips += 1;
      found.wells += chip.chambers.length;
      found.layers += chip.layers.length - 1;
      found.area = Math.max(found.area, read.area);
      // Where channels meet in one another's way a junction has no one set of centrelines; its shape decides.
      const doubted = off > 0.002;
      if (doubted) found.doubted += 1;
      else found.ideal = Math.max(found.ideal, off);
      if (!doubted && seed % SOLVED >= FORMATS.length) continue;
      const solved = apart(chip, read.chip, 'solved');
      // A junction that the solver leaves ideal, and says so, is told by the ideal comparison.
      if (!solved.whole && !doubted) found.mixed += 1;
      else found.solved = Math.max(found.solved, solved.off);
    }
  }, HOUR);

  test('there are chips of every sort among them, and hardly any in doubt', () => {
    expect(found.chips).toBeGreaterThanOrEqual(WHOLE ? CHIPS : Math.floor(CHIPS / FORMATS.length));
    expect(Math.min(found.wells, found.layers)).toBeGreaterThan(3);
    expect(found.doubted + found.mixed).toBeLessThanOrEqual(0.02 * found.chips);
  });
  const claim = { check: 'invariant', source: 'the chip before it went through the mask' } as const;
  const at = `random chips through ${format.toUpperCase()} and back`;
  verify(
    { ...claim, at, tolerance: 1, quantity: 'area of the difference, over chord error times perimeter' },
    () => found.area,
  );
  verify({ ...claim, at, tolerance: 0.002, quantity: 'flow split, ideal junctions' }, () => found.ideal);
  verify({ ...claim, at, tolerance: 0.002, quantity: 'flow split, solved junctions' }, () => found.solved);
});
