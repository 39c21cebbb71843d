import { describe, expect, test } from 'vitest';
import {
  area,
  boxBetween,
  boxOf,
  inside,
  nearestOnPath,
  offsetPath,
  pathLength,
  placeAlong,
  tidy,
} from './path.ts';
import { nearestOnSegment, rayMeets, turned, whole, type Xy } from './vector.ts';

describe('paths', () => {
  const corner: readonly Xy[] = [
    [0, 0],
    [10, 0],
    [10, 10],
  ];
  test('length, straight and with a rounded corner', () => {
    expect(pathLength(corner)).toBe(20);
    // two tangents of length r replaced by a quarter circle
    expect(pathLength(corner, 2)).toBeCloseTo(20 - 4 + Math.PI, 12);
  });
  test('the nearest place knows segment and distance along', () => {
    expect(nearestOnPath([12, 4], corner)).toEqual({ at: [10, 4], segment: 1, t: 0.4, away: 2, along: 14 });
  });
  test('places along, clipped at the ends', () => {
    expect(placeAlong(corner, 15)).toEqual([10, 5]);
    expect(placeAlong(corner, -1)).toEqual([0, 0]);
    expect(placeAlong(corner, 99)).toEqual([10, 10]);
  });
  test('an offset keeps distance on both sides of a corner', () => {
    expect(offsetPath(corner, 1)).toEqual([
      [0, 1],
      [9, 1],
      [9, 10],
    ]);
  });
  test('tidy drops repeats and points on a straight run, keeps a path that turns back', () => {
    expect(
      tidy([
        [0, 0],
        [5, 0],
        [5, 0],
        [10, 0],
        [10, 5],
      ]),
    ).toEqual([
      [0, 0],
      [10, 0],
      [10, 5],
    ]);
    expect(
      tidy([
        [0, 0],
        [5, 0],
        [2, 0],
      ]),
    ).toHaveLength(3);
  });
  test('area, inside, boxes', () => {
    const square: Xy[] = [
      [0, 0],
      [4, 0],
      [4, 4],
      [0, 4],
    ];
    expect(area(square)).toBe(16);
    expect(inside([1, 1], square)).toBe(true);
    expect(inside([5, 1], square)).toBe(false);
    expect(boxOf(square, 1)).toEqual({ left: -1, bottom: -1, right: 5, top: 5 });
    expect(boxOf([])).toBeNull();
    expect(boxBetween([4, 0], [0, 3])).toEqual({ left: 0, right: 4, bottom: 0, top: 3 });
  });
});

describe('vectors', () => {
  test('quarter turns are exact and come back', () => {
    const p: Xy = [12345, -678];
    let q = p;
    for (let i = 0; i < 4; i += 1) q = turned(q, [17, 3], 90);
    expect(q).toEqual(p);
    expect(turned([1, 0], [0, 0], 45)[1]).toBeCloseTo(Math.SQRT1_2, 12);
  });
  test('nearest on a segment, also of no length', () => {
    expect(nearestOnSegment([3, 5], [0, 0], [2, 0])).toEqual({ at: [2, 0], t: 1 });
    expect(nearestOnSegment([3, 5], [1, 1], [1, 1]).at).toEqual([1, 1]);
  });
  test('a ray meets a segment or not', () => {
    expect(rayMeets([0, 0], [1, 1], [4, 0], [4, 9])).toEqual([4, 4]);
    expect(rayMeets([0, 0], [1, 1], [4, 5], [4, 9])).toBeNull();
    expect(rayMeets([0, 0], [1, 0], [0, 1], [9, 1])).toBeNull();
  });
  test('whole nanometres have no negative zero', () => {
    expect(Object.is(whole([-0.2, 0.4])[0], 0)).toBe(true);
  });
});
