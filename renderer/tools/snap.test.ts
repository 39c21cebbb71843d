import { describe, expect, test } from 'vitest';
import { Spatial } from '../sheet/spatial.ts';
import { emptyChip } from '../testing/chips.ts';
import { gridFor, snap } from './snap.ts';

const chip = {
  ...emptyChip(),
  channels: [
    {
      id: 'a',
      layer: 'flow',
      path: [
        [0, 0],
        [10_000, 0],
      ] as const,
      width: [200, 200] as const,
      bendRadius: 0,
    },
    {
      id: 'b',
      layer: 'flow',
      path: [
        [5_000, 5_000],
        [9_000, 9_000],
      ] as const,
      width: [200, 200] as const,
      bendRadius: 0,
    },
  ],
  ports: [
    {
      id: 'p',
      at: [0, 20_000] as const,
      layer: 'flow',
      diameter: 0,
      drive: { kind: 'closed' as const },
      tubing: [],
    },
    {
      id: 'q',
      at: [3_000, 20_000] as const,
      layer: 'flow',
      diameter: 0,
      drive: { kind: 'closed' as const },
      tubing: [],
    },
  ],
};
const spatial = new Spatial(chip);
const at = (x: number, y: number, more = {}) => snap([x, y], spatial, { reach: 150, grid: 100, ...more });

describe('snap', () => {
  test('an end before its centreline', () =>
    expect(at(9_950, 60)).toMatchObject({ at: [10_000, 0], by: 'end' }));
  test('a centreline', () => expect(at(4_033, 90)).toMatchObject({ at: [4_033, 0], by: 'centreline' }));
  test('a port', () => expect(at(60, 19_950)).toMatchObject({ at: [0, 20_000], by: 'port' }));
  test('45 degrees from the last point, in steps of the grid across and up', () => {
    const found = at(22_050, 21_900, { from: [20_000, 20_000] });
    expect(found.by).toBe('in line');
    expect(found.at[0]).toBeCloseTo(22_000, 6);
    expect(found.at[0] - 20_000).toBeCloseTo(found.at[1] - 20_000, 6);
  });
  test('straight on is exactly straight', () => {
    expect(at(25_060, 20_090, { from: [20_000, 20_000] }).at).toEqual([25_100, 20_000]);
  });
  test('the line from the last point and a centreline, both at once', () => {
    expect(at(4_090, 60, { from: [4_000, 3_000] })).toMatchObject({ at: [4_000, 0], by: 'centreline' });
  });
  test('equal spacing in a row of ports', () => {
    expect(at(6_080, 20_100)).toMatchObject({ at: [6_000, 20_000], by: 'equal spacing' });
  });
  test('the grid, or nothing where it is held off', () => {
    expect(at(15_049, 12_051)).toMatchObject({ at: [15_000, 12_100], by: 'grid' });
    expect(at(9_950, 60, { free: true })).toMatchObject({ at: [9_950, 60], by: 'free' });
  });
  test('what moves does not catch itself', () => {
    expect(at(9_950, 60, { without: new Set(['channel:a']) }).by).not.toBe('end');
  });
  test('grid steps are 1, 2 or 5 tens', () => {
    expect(gridFor(1_000)).toBe(10_000);
    expect(gridFor(1_234)).toBe(20_000);
    expect(gridFor(0.01)).toBe(1);
  });
});

describe('what lies under the pointer', () => {
  test('a port before a channel, a vertex within reach', () => {
    expect(spatial.hit([10, 20_010], 100)).toMatchObject({ kind: 'port', id: 'p' });
    expect(spatial.hit([9_980, 50], 60)).toMatchObject({
      kind: 'channel',
      id: 'a',
      vertex: 1,
      segment: 0,
      away: 0,
    });
    expect(spatial.hit([5_000, 50], 60)).toMatchObject({ kind: 'channel', id: 'a', vertex: -1 });
    expect(spatial.hit([50_000, 50_000], 60)).toBeNull();
  });
  test('parts in a box, touched or wholly inside', () => {
    const box = { left: -1, right: 6_000, bottom: -1, top: 25_000 };
    expect(spatial.partsIn(box, false)).toHaveLength(4);
    expect(
      spatial
        .partsIn(box, true)
        .map((part) => part.id)
        .sort(),
    ).toEqual(['p', 'q']);
  });
  test('an empty chip has nothing', () => {
    const empty = new Spatial(emptyChip());
    expect(empty.hit([0, 0], 100)).toBeNull();
    expect(empty.partsIn({ left: -1, right: 1, bottom: -1, top: 1 }, false)).toEqual([]);
  });
  test('as far from the end of a channel as that is from the next', () => {
    const third = new Spatial({
      ...chip,
      channels: [
        chip.channels[0]!,
        { ...chip.channels[0]!, id: 'c', path: [[0, 3_000] as const, [10_000, 3_000] as const] },
      ],
    });
    expect(snap([10_040, 6_060], third, { reach: 150, grid: 100 })).toMatchObject({
      at: [10_000, 6_000],
      by: 'equal spacing',
    });
  });
  test('45 degrees from the nearer of two neighbours', () => {
    const found = at(22_050, 21_900, {
      from: [
        [20_000, 20_000],
        [0, 90_000],
      ],
    });
    expect(found).toMatchObject({ by: 'in line', guide: [[20_000, 20_000], found.at] });
  });
});
