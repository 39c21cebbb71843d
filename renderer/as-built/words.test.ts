import { describe, expect, test } from 'vitest';
import { asBuilt } from '../../solver/asbuilt/as-built.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { cross, table } from '../../test/asbuilt/chips.ts';
import { plainText } from '../verdict/answer.ts';
import { templateOf } from './template.ts';
import { drivesWords, driveWords, madeWords, shareWith } from './words.ts';

const built = (text: string, chip: Chip = cross(), set?: readonly string[]) =>
  asBuilt(chip, readMeasured(table(text), chip), { junctions: 'ideal', ...(set ? { set } : {}) });
const HEAD = 'part,what,value,uncertainty\n';
const plain = (text: string): string => text.replaceAll('\u00a0', ' ');
const said = (chip: Chip, found: ReturnType<typeof built>): string =>
  plain(plainText(madeWords(chip, found)));

describe('what the made chip does, in words', () => {
  test('met, one missed, all missed, none asked', () => {
    expect(said(cross(), built(`${HEAD}b,width,1001,1`))).toMatch(
      /^As made it still meets its targets; the furthest is in a, −0\.0\d+ % off\.$/,
    );
    expect(said(cross(), built(`${HEAD}b,width,1100,1`))).toMatch(
      /^As made it misses one target of two: in a is −4\.8 % off, 1\.0 % is allowed\.$/,
    );
    expect(said(cross(), built(`${HEAD}b,width,1100,1\nd,width,1100,1`))).toMatch(/misses all its targets/);
    const free = cross({ targets: [] });
    expect(said(free, built(`${HEAD}b,width,1100,1`, free))).toMatch(/^No target is given/);
  });

  test('drives that restore, that come near, that cannot help', () => {
    const chip = cross();
    expect(drivesWords(chip, built(`${HEAD}b,width,1100,1`))).toBe('These drives restore the targets:');
    expect(drivesWords(chip, built(`${HEAD}d,width,1100,1`))).toMatch(/^No setting of these drives/);
    expect(plain(drivesWords(chip, built(`${HEAD}b,width,1100,1\nd,width,1100,1`)))).toMatch(
      /^These drives come nearest, and do not reach: out c is still −4\.\d % off, 1\.0 % is allowed\.$/,
    );
    const free = cross({ targets: [] });
    expect(drivesWords(free, built(`${HEAD}b,width,1100,1`, free))).toMatch(/^Give a target/);
  });

  test('a share has as many places as what is open of it lets stand', () => {
    const making = (likely: number) => ({ worst: likely, likely });
    expect(shareWith(0.125, making(0.0314))).toBe('12.50 ± 0.39 %');
    expect(shareWith(0.5, making(0.3))).toBe('50 ± 15 %');
    expect(plain(shareWith(0.5, undefined))).toBe('50.00 %');
    expect(shareWith(null, undefined)).toBe('–');
  });

  test('drives in words', () => {
    expect(plain(driveWords({ kind: 'pressure', pressure: 12_345 }))).toBe('12.345 kPa');
    expect(plain(driveWords({ kind: 'head', head: 0.2 }))).toBe('200.00 mm above the chip');
    expect(driveWords({ kind: 'closed' })).toBe('closed');
  });

  test('the table of drawn sizes reads as a chip made as drawn', () => {
    const chip = cross();
    const { result, drawn } = built(templateOf(chip), chip);
    expect(result.ports.map(({ flow }) => flow)).toEqual(drawn.ports.map(({ flow }) => flow));
  });
});
