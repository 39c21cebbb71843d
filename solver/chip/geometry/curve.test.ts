import { describe, expect, test } from 'vitest';
import { inLoop } from './body.ts';
import {
  alongArc,
  type Curve,
  curve,
  distanceTo,
  line,
  meet,
  nearest,
  part,
  pointAt,
  reversed,
  tangentAt,
} from './curve.ts';

function meetings(a: Curve, b: Curve): [number, number][] {
  const found: [number, number][] = [];
  meet(a, b, (s, t) => found.push([s, t]));
  return found;
}

/** The same places once, in order. */
function places(a: Curve, b: Curve): number[] {
  return [...new Set(meetings(a, b).map(([s]) => Math.round(s)))].sort((p, q) => p - q);
}

const quarter = curve(1000, 0, 0, 1000, Math.tan(Math.PI / 8));

describe('a curve', () => {
  test('an arc from its bulge: radius, centre, length, tangents', () => {
    expect(1 / quarter.curvature).toBeCloseTo(1000, 9);
    expect([quarter.cx, quarter.cy]).toEqual([expect.closeTo(0, 9), expect.closeTo(0, 9)]);
    expect(quarter.length).toBeCloseTo(500 * Math.PI, 9);
    expect([quarter.ux, quarter.uy]).toEqual([expect.closeTo(0, 12), expect.closeTo(1, 12)]);
    expect(tangentAt(quarter, quarter.length)).toEqual([expect.closeTo(-1, 12), expect.closeTo(0, 12)]);
    expect(pointAt(quarter, quarter.length / 2)).toEqual([
      expect.closeTo(1000 * Math.SQRT1_2, 9),
      expect.closeTo(1000 * Math.SQRT1_2, 9),
    ]);
  });

  test('beyond half a turn, backwards, and a part of it', () => {
    const most = curve(1000, 0, 0, -1000, Math.tan((1.5 * Math.PI) / 4));
    expect(1 / most.curvature).toBeCloseTo(1000, 9);
    expect(most.length).toBeCloseTo(1500 * Math.PI, 6);
    const back = reversed(most);
    expect(pointAt(back, 100)).toEqual(pointAt(most, most.length - 100).map((v) => expect.closeTo(v, 6)));
    const cut = part(most, 500 * Math.PI, 1000 * Math.PI);
    expect([cut.x0, cut.y0, cut.x1, cut.y1]).toEqual([0, 1000, -1000, 0].map((v) => expect.closeTo(v, 6)));
    expect(cut.curvature).toBeCloseTo(most.curvature, 12);
  });

  test('nearest place, on the arc and beyond its ends', () => {
    expect(nearest(quarter, 500, 500)).toBeCloseTo(250 * Math.PI, 9);
    expect(distanceTo(quarter, 500, 500)).toBeCloseTo(1000 - 500 * Math.SQRT2, 9);
    expect(nearest(quarter, 900, -10)).toBe(0);
    expect(nearest(quarter, -10, 900)).toBe(quarter.length);
    expect(alongArc(quarter, 1000, -1e-3)).toBeCloseTo(-1e-3, 6);
  });
});

describe('meetings', () => {
  test('of lines at the edge of the range are right to a thousandth of a nanometre', () => {
    const a = line(-1e9, -1e9 + 1, 1e9, 1e9 - 1);
    const b = line(-1e9, 1e9, 1e9, -1e9 + 2);
    const [[s]] = meetings(a, b) as [[number, number]];
    const [x, y] = pointAt(a, s);
    // x + y = 1 on b to first order; solved by hand: x = y + y/(1e9 - 1), and b falls by 1 nm over 2e9
    expect(y * (1 + 1 / (1e9 - 1))).toBeCloseTo(x, 3);
    expect(1e9 - ((x + 1e9) * (2e9 - 2)) / 2e9).toBeCloseTo(y, 3);
  });

  test('an end counts as on the other within a nanometre, not beyond', () => {
    const a = line(0, 0, 1000, 0);
    expect(places(a, line(500, 0.9, 500, 400))).toEqual([500]);
    expect(places(a, line(500, 1.2, 500, 400))).toEqual([]);
    expect(places(a, line(1000.9, 0, 2000, 0))).toEqual([1000]);
    expect(places(a, line(1001.2, 0, 2000, 0))).toEqual([]);
  });

  test('lines on one line meet at both ends of what they share', () => {
    expect(places(line(0, 0, 1000, 0), line(300, 0, 1500, 0))).toEqual([300, 1000]);
    expect(places(line(0, 0, 1000, 0), line(800, 0, 200, 0))).toEqual([200, 800]);
    expect(places(line(0, 0, 1000, 0), line(300, 5, 1500, 5))).toEqual([]);
  });

  test('lines and arcs cross, touch and miss', () => {
    expect(places(line(-2000, 600, 2000, 600), quarter)).toEqual([2800]);
    expect(places(line(0, 0, 2000, 2000), quarter)).toEqual([1000]);
    const half = curve(1000, 0, -1000, 0, 1);
    expect(places(line(-2000, 600, 2000, 600), half)).toEqual([1200, 2800]);
    expect(places(line(-2000, 1000, 2000, 1000), half)).toEqual([2000]);
    expect(places(line(-2000, 1000.9, 2000, 1000.9), half)).toEqual([2000]);
    expect(places(line(-2000, 1002, 2000, 1002), half)).toEqual([]);
  });

  test('arcs cross in two points, touch in one, and share a stretch of one circle', () => {
    const a = curve(1000, 0, -1000, 0, 1);
    const b = curve(2200, 0, 200, 0, 1);
    expect(places(a, b)).toEqual([Math.round(1000 * Math.acos(0.6))]);
    const c = curve(3000, 0, 1000, 0, 1);
    expect(places(a, c)).toEqual([0]);
    const d = curve(0, 1000, -1000, 0, Math.tan(Math.PI / 8));
    expect(places(a, d)).toEqual([Math.round(500 * Math.PI), Math.round(1000 * Math.PI)]);
  });
});

describe('inside a loop with arcs', () => {
  const disc = [curve(-1000, 0, 1000, 0, 1), curve(1000, 0, -1000, 0, 1)];

  test.each([
    [0, 0, true],
    [999, 0, true],
    [-999, 0, true],
    [0, 999, true],
    [0, -999, true],
    [1001, 0, false],
    [-1001, 0, false],
    [710, 710, false],
    [700, 700, true],
  ])('%f, %f of a disc: %s', (x, y, inside) => {
    expect(inLoop(disc, x, y)).toBe(inside);
  });

  test('a bay cut into a square is outside', () => {
    const square = [
      line(0, 0, 1000, 0),
      line(1000, 0, 1000, 1000),
      curve(1000, 1000, 0, 1000, -1),
      line(0, 1000, 0, 0),
    ];
    expect(inLoop(square, 500, 900)).toBe(false);
    expect(inLoop(square, 500, 400)).toBe(true);
    expect(inLoop(square, 10, 900)).toBe(true);
  });
});
