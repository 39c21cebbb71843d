import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { remade } from '../card/remake.ts';
import { toEdit } from '../edits/to-edit.ts';
import { pathLength } from '../geometry/path.ts';
import { emptyChip } from '../testing/chips.ts';
import { chamberRow } from './chambers.ts';
import { gradientTree } from './gradient-tree.ts';
import { familyOf, type Made, type Maker, type Making } from './made.ts';
import { posts } from './posts.ts';
import { readSerpentine, serpentine, serpentineReach } from './serpentine.ts';
import { splitTree } from './split-tree.ts';

const mm = 1_000_000;
const box = { left: 10 * mm, right: 40 * mm, bottom: 3 * mm, top: 23 * mm };
const made = (making: Making): Made => {
  if ('refusal' in making) throw new Error(making.refusal);
  return making.made;
};
const chipOf = (parts: Made): Chip => ({ ...emptyChip(), ...parts });

test('a splitting tree whose holes would run into one another is refused, with what would do', () => {
  const wishes = {
    layer: 'flow',
    levels: 7,
    box,
    trunkWidth: 200_000,
    leafWidth: 50_000,
    joining: false,
    portDiameter: 750_000,
  };
  const refused = splitTree.make('tree 1', wishes);
  expect('refusal' in refused && refused.refusal.replaceAll('\u00a0', ' ')).toContain(
    'make the box 108.8 mm high',
  );
  // 128 holes of 750 µm with 100 µm between them
  const high = { ...wishes, box: { ...box, bottom: 0, top: 110 * mm } };
  expect(made(splitTree.make('tree 1', high)).ports).toHaveLength(129);
  expect('made' in splitTree.make('tree 1', { ...wishes, portDiameter: null })).toBe(true);
});

test('an inlet with a hole of its own keeps it, stands first, and the wish is that of the others', () => {
  const wishes = {
    layer: 'flow',
    levels: 2,
    box,
    trunkWidth: 200_000,
    leafWidth: 100_000,
    joining: false,
    portDiameter: 750_000,
  };
  const tree = made(splitTree.make('tree 1', wishes));
  expect(tree.ports.map(({ id }) => id).slice(0, 2)).toEqual(['tree 1-in', 'tree 1-out1']);
  const [inlet, ...outlets] = tree.ports;
  const chip = chipOf({ ...tree, ports: [{ ...inlet!, diameter: 1_500_000 }, ...outlets] });
  const read = splitTree.read(chip, 'tree 1')!;
  expect(read.portDiameter).toBe(750_000);
  const again = made(splitTree.make('tree 1', { ...read, levels: 3, portDiameter: 500_000 }));
  const after = applyEdit(chip, toEdit(chip, remade(chip, 'tree 1', again, 'again')));
  expect(after.ports.map(({ diameter }) => diameter)).toEqual([1_500_000, ...Array(8).fill(500_000)]);
  expect(splitTree.read(after, 'tree 1')!.portDiameter).toBe(500_000);
});

describe('serpentine', () => {
  const wishes = {
    layer: 'flow',
    length: 150 * mm,
    box,
    width: 200_000,
    gap: 200_000,
    bendRadius: 0,
    upright: false,
  };
  test.each([
    [150 * mm, 0, false],
    [150 * mm, 300_000, false],
    [31 * mm, 0, false],
    [400 * mm, 200_000, true],
  ])('%d nm with bends of %d, upright %s', (length, bendRadius, upright) => {
    const [channel] = made(serpentine.make('s1', { ...wishes, length, bendRadius, upright })).channels;
    const got = pathLength(channel!.path, bendRadius);
    // half a nanometre of rounding at each vertex
    expect(Math.abs(got - length)).toBeLessThanOrEqual(channel!.path.length);
    const half = channel!.width[0] / 2;
    for (const [x, y] of channel!.path) {
      expect(upright ? x - half : y - half).toBeGreaterThanOrEqual((upright ? box.left : box.bottom) - 1);
      expect(upright ? x + half : y + half).toBeLessThanOrEqual((upright ? box.right : box.top) + 1);
    }
  });
  test('legs keep their gap', () => {
    const [channel] = made(
      serpentine.make('s1', { ...wishes, length: serpentineReach(wishes).most }),
    ).channels;
    const xs = [...new Set(channel!.path.map((p) => p[0]))].sort((a, b) => a - b);
    for (let i = 1; i < xs.length; i += 1) expect(xs[i]! - xs[i - 1]!).toBeGreaterThanOrEqual(400_000);
  });
  test('is read back and made again alike', () => {
    const first = made(serpentine.make('s1', wishes));
    const back = serpentine.read(chipOf(first), 's1');
    expect(back).toMatchObject({ width: 200_000, upright: false, bendRadius: 0 });
    expect(Math.abs(back!.length - wishes.length)).toBeLessThan(50);
    const longer = made(serpentine.make('s1', { ...back!, length: 100 * mm }));
    expect(Math.abs(pathLength(longer.channels[0]!.path) - 100 * mm)).toBeLessThan(50);
  });
  test('is no serpentine once a vertex was moved', () => {
    const first = made(serpentine.make('s1', wishes));
    const path = first.channels[0]!.path.map((p, i) => (i === 3 ? ([p[0], p[1] + 9000] as const) : p));
    const moved = { ...first, channels: [{ ...first.channels[0]!, path }] };
    expect(serpentine.read(chipOf(moved), 's1')).toBeNull();
  });
  test('says what fits', () => {
    expect(serpentine.make('s1', { ...wishes, length: 10 * mm })).toMatchObject({
      refusal: expect.stringContaining('30.00'),
    });
    expect(serpentine.make('s1', { ...wishes, length: 9000 * mm })).toMatchObject({
      refusal: expect.stringContaining('At most'),
    });
  });
});

describe('split tree', () => {
  const wishes = {
    layer: 'flow',
    levels: 3,
    box,
    trunkWidth: 400_000,
    leafWidth: 100_000,
    joining: false,
    portDiameter: 750_000,
  };
  test('has 2^n equal paths, ports and shares', () => {
    const tree = made(splitTree.make('tree 1', wishes));
    expect(tree.channels).toHaveLength(15);
    expect(tree.ports).toHaveLength(9);
    expect(tree.targets).toHaveLength(8);
    const leafLength = new Set(
      tree.channels.filter((c) => c.id.startsWith('tree 1-3-')).map((c) => pathLength(c.path)),
    );
    expect(Math.max(...leafLength) - Math.min(...leafLength)).toBeLessThanOrEqual(1);
    expect(tree.channels[0]!.width[0]).toBe(400_000);
    expect(tree.channels.at(-1)!.width[0]).toBe(100_000);
    // each branch begins where its parent ends
    for (const branch of tree.channels.slice(1)) {
      const [level, index] = branch.id.split('-').slice(1).map(Number);
      const parent = tree.channels.find((c) => c.id === `tree 1-${level! - 1}-${(index! + 1) >> 1}`)!;
      expect(branch.path[0]).toEqual(parent.path.at(-1));
    }
  });
  test.each([false, true])('is read back, joining %s', (joining) => {
    const asked = { ...wishes, joining };
    expect(splitTree.read(chipOf(made(splitTree.make('tree 1', asked))), 'tree 1')).toEqual(asked);
  });
  test('refuses with a reason', () => {
    for (const bad of [
      { levels: 0 },
      { levels: 2.5 },
      { leafWidth: 9 * mm },
      { box: { ...box, right: box.left } },
    ])
      expect(splitTree.make('t', { ...wishes, ...bad })).toHaveProperty('refusal');
  });
});

test('a row of chambers joins end to end and is read back', () => {
  const wishes = { layer: 'flow', box, count: 5, chamberLength: 3 * mm, channelWidth: 200_000 };
  const row = made(chamberRow.make('row 1', wishes));
  expect(row.chambers).toHaveLength(5);
  expect(row.channels).toHaveLength(6);
  expect(row.channels[1]!.path[0]![0]).toBe(row.chambers[0]!.outline[1]![0]);
  expect(chamberRow.read(chipOf(row), 'row 1')).toEqual(wishes);
  expect(chamberRow.make('row 1', { ...wishes, chamberLength: 7 * mm })).toHaveProperty('refusal');
  expect(chamberRow.make('row 1', { ...wishes, count: 0 })).toHaveProperty('refusal');
});

test('posts leave their gaps and are read back', () => {
  const wishes = { layer: 'flow', box, gap: 50_000, post: 150_000, along: 300_000 };
  const filter = made(posts.make('posts 1', wishes));
  expect(filter.channels).toHaveLength(100);
  expect(filter.channels[1]!.path[0]![1] - filter.channels[0]!.path[0]![1]).toBe(200_000);
  expect(posts.read(chipOf(filter), 'posts 1')).toEqual(wishes);
  expect(posts.make('p', { ...wishes, gap: 30 * mm })).toHaveProperty('refusal');
  expect(posts.make('p', { ...wishes, gap: 1000, post: 1000 })).toHaveProperty('refusal');
});

test('a gradient tree gains one outlet per stage and is read back', () => {
  const wishes = {
    layer: 'flow',
    box,
    inlets: 2,
    stages: 3,
    width: 100_000,
    mixing: 15 * mm,
    portDiameter: 750_000,
  };
  const tree = made(gradientTree.make('gradient 1', wishes));
  expect(tree.channels.filter((c) => c.id.endsWith('-x'))).toHaveLength(3);
  expect(tree.ports).toHaveLength(2 + 5);
  for (const c of tree.channels.filter((part) => /-[123]-\d+$/.test(part.id)))
    expect(Math.abs(pathLength(c.path) - 15 * mm)).toBeLessThan(100);
  expect(gradientTree.read(chipOf(tree), 'gradient 1')).toMatchObject({
    inlets: 2,
    stages: 3,
    width: 100_000,
  });
  expect(gradientTree.make('g', { ...wishes, width: 5 * mm })).toHaveProperty('refusal');
  expect(gradientTree.make('g', { ...wishes, mixing: 900 * mm })).toHaveProperty('refusal');
});

test('a part knows its family', () => {
  expect(familyOf('tree 1-2-3')).toBe('tree 1');
  expect(familyOf('feed')).toBe('feed');
});

test('a drawn serpentine can be made longer in its box, with walls as thin as it is wide or as was wished', () => {
  const wishes = {
    layer: 'flow',
    length: 150 * mm,
    box,
    width: 200_000,
    gap: 200_000,
    bendRadius: 0,
    upright: false,
  };
  const chip = chipOf(made(serpentine.make('s1', wishes)));
  const { most } = serpentineReach(wishes);
  const wall = (w: typeof wishes | null) => serpentineReach(w!).most;
  // its own height is what the length takes of the box: here seven eighths
  expect(wall(readSerpentine(chip, 's1')) / most).toBeGreaterThan(0.85);
  expect(wall(readSerpentine(chip, 's1', { high: 20 * mm }))).toBe(most);
  expect(wall(readSerpentine(chip, 's1', { wall: 400_000, high: 20 * mm }))).toBeLessThan(0.7 * most);
});

describe('what was made is changed again and again as what it is, whatever the sizes', () => {
  /** Whole numbers that look like any, the same in each run (Park and Miller, 1988). */
  const dice = (seed: number) => {
    let state = seed;
    return (from: number, to: number): number => {
      state = (state * 48_271) % 2_147_483_647;
      return from + (state % (to - from + 1));
    };
  };
  /** Through the card: read, one wish altered, made anew within the chip, read again. */
  function again<W>(maker: Maker<W>, name: string, first: W, changes: readonly ((wishes: W) => W)[]): void {
    let chip: Chip = emptyChip();
    const take = (making: Making): void => {
      chip = applyEdit(chip, toEdit(chip, remade(chip, name, made(making), 'again')));
    };
    take(maker.make(name, first));
    for (const [i, change] of changes.entries()) {
      const wishes = maker.read(chip, name);
      expect(wishes, `before change ${i}`).not.toBeNull();
      take(maker.make(name, change(wishes!)));
    }
    expect(maker.read(chip, name)).not.toBeNull();
  }
  const some = dice(7);
  const boxes = Array.from({ length: 8 }, () => {
    const [left, bottom] = [some(1, 5 * mm), some(1, 3 * mm)];
    return { left, bottom, right: left + some(40 * mm, 60 * mm), top: bottom + some(16 * mm, 20 * mm) };
  });
  test.each(boxes)('%o', (some) => {
    again(
      gradientTree,
      'gradient 1',
      {
        layer: 'flow',
        box: some,
        inlets: 2,
        stages: 3,
        width: 100_000,
        mixing: 25 * mm,
        portDiameter: 750_000,
      },
      [
        (w) => ({ ...w, inlets: 3 }),
        (w) => ({ ...w, stages: 2 }),
        (w) => ({ ...w, inlets: 2, stages: 4 }),
        (w) => ({ ...w, mixing: 17_777_777 }),
        (w) => ({ ...w, width: 90_001 }),
      ],
    );
    again(
      splitTree,
      'tree 1',
      {
        layer: 'flow',
        levels: 2,
        box: some,
        trunkWidth: 200_000,
        leafWidth: 100_000,
        joining: false,
        portDiameter: 750_000,
      },
      [
        (w) => ({ ...w, levels: 3 }),
        (w) => ({ ...w, leafWidth: 77_777 }),
        (w) => ({ ...w, joining: true }),
        (w) => ({ ...w, levels: 1 }),
        (w) => ({ ...w, levels: 4 }),
      ],
    );
    again(
      chamberRow,
      'row 1',
      { layer: 'flow', box: some, count: 5, chamberLength: 3_333_333, channelWidth: 200_000 },
      [(w) => ({ ...w, count: 7 }), (w) => ({ ...w, chamberLength: 2_222_221 }), (w) => ({ ...w, count: 3 })],
    );
    again(
      posts,
      'posts 1',
      {
        layer: 'flow',
        box: { ...some, right: some.left + 2_000_003 },
        gap: 200_000,
        post: 200_000,
        along: 400_000,
      },
      [(w) => ({ ...w, gap: 155_555 }), (w) => ({ ...w, post: 133_331 }), (w) => ({ ...w, along: 250_001 })],
    );
    again(
      serpentine,
      'serpentine 1',
      {
        layer: 'flow',
        length: 150 * mm,
        box: some,
        width: 200_000,
        gap: 200_000,
        bendRadius: 0,
        upright: false,
      },
      [
        (w) => ({ ...w, length: 133_333_331 }),
        (w) => ({ ...w, bendRadius: 200_001 }),
        (w) => ({ ...w, width: 150_001 }),
      ],
    );
  });
});
