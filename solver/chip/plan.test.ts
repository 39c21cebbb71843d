import { describe, expect, test } from 'vitest';
import { chamber, channel, chipOf, layer, port } from '../../test/chip/drawings.ts';
import type { Edge, Shape } from '../mesh/mesh.ts';
import type { Chip } from './chip.ts';
import { type PlanBody, planPolygons, planShape } from './plan.ts';
import { gaps } from './plan-gaps.ts';
import { readGraph } from './read-graph.ts';
import { drawingOf } from './read-graph-drawing.ts';

const main = channel('a', [
  [0, 0],
  [2000, 0],
]);

function outer(parts: Partial<Chip>, fillets = false): string[] {
  const chip = chipOf(parts);
  return planPolygons(chip, readGraph(chip), 'flow', { chordError: 10, fillets, holes: true }).map((p) =>
    p.outer.map(([x, y]) => `${x / 1000},${y / 1000}`).join(' '),
  );
}

function strip(channelIndex: number, from = 0, to = Infinity, tagFrom = 0, tagTo = 0): PlanBody {
  return { kind: 'strip', channel: channelIndex, from, to, tagFrom, tagTo };
}

function shapesOf(parts: Partial<Chip>, bodies: PlanBody[], fillet = 0): Shape[] {
  return [...planShape(drawingOf(chipOf(parts)), bodies, fillet).shapes];
}

/** Area of a loop with its arcs, exactly: the polygon of its corners plus the circular segments. */
function areaOf(loop: readonly Edge[]): number {
  let area = 0;
  for (let k = 0; k < loop.length; k++) {
    const p = loop[k]!;
    const q = loop[(k + 1) % loop.length]!;
    area += (p.x * q.y - q.x * p.y) / 2;
    const sweep = 4 * Math.atan(p.bulge);
    if (sweep === 0) continue;
    const r = Math.hypot(q.x - p.x, q.y - p.y) / (2 * Math.sin(Math.abs(sweep) / 2));
    area += Math.sign(sweep) * ((r * r) / 2) * (Math.abs(sweep) - Math.sin(Math.abs(sweep)));
  }
  return area;
}

describe('outlines', () => {
  test('square ends, mitred corners, a T, a taper', () => {
    const bend = channel('b', [
      [0, 0],
      [1000, 0],
      [1000, 1000],
    ]);
    expect(outer({ channels: [bend] })).toEqual(['0,-50 1050,-50 1050,1000 950,1000 950,50 0,50']);
    const b = channel('b', [
      [1000, 0],
      [1000, 1000],
    ]);
    expect(outer({ channels: [main, b] })).toEqual([
      '0,-50 2000,-50 2000,50 1050,50 1050,1000 950,1000 950,50 0,50',
    ]);
    const taper = channel(
      't',
      [
        [0, 0],
        [1000, 0],
      ],
      [200, 100],
    );
    expect(outer({ channels: [taper] })).toEqual(['0,-100 1000,-50 1000,50 0,100']);
  });

  test('a turn beyond 120 degrees is bevelled', () => {
    const sharp = channel('b', [
      [0, 0],
      [1000, 0],
      [1000 - 600, 800],
    ]);
    // turn 126.87 degrees: corners at half a width square to both sides, joined straight
    expect(outer({ channels: [sharp] })[0]).toContain('1000,-50 1040,30');
  });

  test('where three channels end on one point only a sector above half a turn gets a corner', () => {
    const arm = (id: string, x: number, y: number) =>
      channel(id, [
        [0, 0],
        [x, y],
      ]);
    expect(outer({ channels: [arm('a', 1000, 0), arm('b', 0, 1000), arm('c', -1000, 0)] })).toEqual([
      '-1000,-50 1000,-50 1000,50 50,50 50,1000 -50,1000 -50,50 -1000,50',
    ]);
    expect(outer({ channels: [arm('a', 1000, 0), arm('b', 0, 1000)] })).toEqual([
      '-50,-50 1000,-50 1000,50 50,50 50,1000 -50,1000',
    ]);
  });

  test('a width step where channels end on each other stays square', () => {
    const b = channel(
      'b',
      [
        [2000, 0],
        [3000, 0],
      ],
      60,
    );
    expect(outer({ channels: [main, b] })).toEqual([
      '0,-50 2000,-50 2000,-30 3000,-30 3000,30 2000,30 2000,50 0,50',
    ]);
  });

  test('a closed path has a hole, and its corner is the same wherever the path starts', () => {
    const square: [number, number][] = [
      [0, 0],
      [1000, 0],
      [1000, 1000],
      [0, 1000],
      [0, 0],
    ];
    const chip = chipOf({ channels: [channel('r', square)] });
    const [polygon] = planPolygons(chip, readGraph(chip), 'flow', {
      chordError: 10,
      fillets: false,
      holes: true,
    });
    expect(polygon!.outer).toEqual([
      [-50e3, -50e3],
      [1050e3, -50e3],
      [1050e3, 1050e3],
      [-50e3, 1050e3],
    ]);
    expect(polygon!.holes).toEqual([
      [
        [50e3, 50e3],
        [50e3, 950e3],
        [950e3, 950e3],
        [950e3, 50e3],
      ],
    ]);
  });

  test('cavities and layers apart', () => {
    const b = channel('b', [
      [0, 500],
      [2000, 500],
    ]);
    const c = channel(
      'c',
      [
        [500, -500],
        [500, 1000],
      ],
      100,
      { layer: 'upper' },
    );
    const chip = chipOf({ channels: [main, b, c] });
    const graph = readGraph(chip);
    const on = (layerId: string) =>
      planPolygons(chip, graph, layerId, { chordError: 10, fillets: false, holes: true }).map(
        (p) => p.cavity,
      );
    expect(on('flow')).toEqual([0, 1]);
    expect(on('upper')).toEqual([2]);
  });
});

describe('true arcs through the union', () => {
  const bent = channel(
    'b',
    [
      [0, 0],
      [1000, 0],
      [1000, 1000],
    ],
    100,
    { bendRadius: 200 },
  );

  test('a rounded bend is two concentric arcs of the right radii', () => {
    const [shape] = shapesOf({ channels: [bent] }, [strip(0)]);
    const arcs = shape![0]!.filter((e) => e.bulge !== 0);
    expect(arcs.map((e) => e.bulge)).toEqual([
      expect.closeTo(Math.tan(Math.PI / 8), 9),
      expect.closeTo(-Math.tan(Math.PI / 8), 9),
    ]);
    expect(areaOf(shape![0]!)).toBeCloseTo(100e3 * (1600e3 + (200e3 * Math.PI) / 2), -3);
  });

  test('cut by another channel, the parts keep their circle', () => {
    const across = channel('c', [
      [700, 300],
      [1300, -300],
    ]);
    const [shape] = shapesOf({ channels: [bent, across] }, [strip(0), strip(1)]);
    const loop = shape![0]!;
    const arcs = loop
      .map((e, k) => ({ e, next: loop[(k + 1) % loop.length]! }))
      .filter(({ e }) => e.bulge !== 0);
    expect(arcs).toHaveLength(4);
    for (const { e, next } of arcs) {
      const radius = e.bulge > 0 ? 250e3 : 150e3;
      for (const p of [e, next]) expect(Math.hypot(p.x - 800e3, p.y - 200e3)).toBeCloseTo(radius, 3);
    }
  });

  test('a port hole at the end of a channel, wider and as wide as it', () => {
    for (const diameter of [100, 160]) {
      const chip = { channels: [main], ports: [port('p', [2000, 0], diameter)] };
      const r = diameter * 500;
      const disc: PlanBody = { kind: 'disc', x: 2e6, y: 0, radius: r, tag: 3 };
      const [shape] = shapesOf(chip, [strip(0), disc]);
      const arcs = shape![0]!.filter((e) => e.tag === 3);
      const half = Math.asin(50e3 / r);
      expect(arcs.map((e) => 4 * Math.atan(e.bulge)).reduce((a, b) => a + b)).toBeCloseTo(
        2 * Math.PI - 2 * half,
        9,
      );
      const lune = ((r * r) / 2) * (2 * half - Math.sin(2 * half));
      expect(areaOf(shape![0]!)).toBeCloseTo(100e3 * (2e6 - r * Math.cos(half)) + Math.PI * r * r - lune, -3);
    }
  });

  test('a hole of its own is one circle', () => {
    const [shape] = shapesOf({}, [{ kind: 'disc', x: 5e6, y: 7e6, radius: 200e3, tag: 1 }]);
    expect(shape).toEqual([
      [
        { x: 4.8e6, y: 7e6, bulge: 1, tag: 1 },
        { x: 5.2e6, y: 7e6, bulge: 1, tag: 1 },
      ],
    ]);
  });

  test('a taper through a bend keeps its area to a millionth', () => {
    const taper = channel(
      't',
      [
        [0, 0],
        [1000, 0],
        [1000, 1000],
      ],
      [200, 100],
      { bendRadius: 300 },
    );
    const [shape] = shapesOf({ channels: [taper] }, [strip(0)]);
    // width is linear along the centreline, so the area is the mean width times its length
    expect(areaOf(shape![0]!) / (150e3 * (1400e3 + 150e3 * Math.PI))).toBeCloseTo(1, 3);
  });
});

describe('tags', () => {
  test('cut faces keep their label, walls have none', () => {
    const b = channel('b', [
      [1000, 0],
      [1000, 1000],
    ]);
    const bodies = [strip(0, 850e3, 1150e3, 1, 2), strip(1, 0, 200e3, 0, 3)];
    const [shape] = shapesOf({ channels: [main, b] }, bodies);
    expect(shape![0]!.map((e) => [e.x / 1000, e.y / 1000, e.tag])).toEqual([
      [850, -50, 0],
      [1150, -50, 2],
      [1150, 50, 0],
      [1050, 50, 0],
      [1050, 200, 3],
      [950, 200, 0],
      [950, 50, 0],
      [850, 50, 1],
    ]);
  });
});

describe('fillets', () => {
  const b = channel('b', [
    [1000, 0],
    [1000, 1000],
  ]);

  test('re-entrant corners become tangent arcs, outer ones stay', () => {
    const [shape] = shapesOf({ channels: [main, b] }, [strip(0), strip(1)], 20e3);
    const loop = shape![0]!;
    expect(loop.filter((e) => e.bulge !== 0).map((e) => e.bulge)).toEqual([
      expect.closeTo(-Math.tan(Math.PI / 8), 12),
      expect.closeTo(-Math.tan(Math.PI / 8), 12),
    ]);
    expect(areaOf(loop)).toBeCloseTo(2e6 * 100e3 + 950e3 * 100e3 + 2 * 20e3 * 20e3 * (1 - Math.PI / 4), -3);
    expect(outer({ layers: [layer('flow', 50, 20)], channels: [main, b] }, true)[0]).toContain('1070,50');
  });

  test('a radius too large for a short edge is reduced, and said', () => {
    const c = channel('c', [
      [1000, 0],
      [1000, 110],
      [1500, 110],
    ]);
    const result = planShape(drawingOf(chipOf({ channels: [main, c] })), [strip(0), strip(1)], 40e3);
    expect(result.reduced.length).toBeGreaterThan(0);
    for (const r of result.reduced) expect(r.radius).toBeLessThan(40e3);
    expect(result.shapes).toHaveLength(1);
  });

  test('between a line and an arc', () => {
    const bent = channel(
      'b',
      [
        [0, 300],
        [1000, 300],
        [1000, 1300],
      ],
      100,
      { bendRadius: 400 },
    );
    const post = channel(
      'c',
      [
        [880, 420],
        [1500, -200],
      ],
      60,
    );
    const [shape] = shapesOf({ channels: [bent, post] }, [strip(0), strip(1)], 15e3);
    const loop = shape![0]!;
    for (let k = 0; k < loop.length; k++) {
      const e = loop[k]!;
      const next = loop[(k + 1) % loop.length]!;
      const sweep = 4 * Math.atan(e.bulge);
      const radius = Math.hypot(next.x - e.x, next.y - e.y) / (2 * Math.sin(sweep / 2));
      if (e.bulge !== 0) expect([15e3, 350e3, 450e3]).toContainEqual(expect.closeTo(Math.abs(radius), 2));
    }
    expect(loop.filter((e) => e.bulge < 0)).toHaveLength(3);
  });
});

describe('walls between bodies', () => {
  test('the thinnest of every pair, with its place; joined bodies have none', () => {
    const b = channel('b', [
      [0, 130],
      [1000, 130],
      [2000, 400],
    ]);
    const c = channel('c', [
      [500, 130],
      [500, 1000],
    ]);
    const found = gaps(chipOf({ channels: [main, b, c] }), 50e3);
    expect(found.map((g) => [...g.between, g.width])).toEqual([['a', 'b', 30e3]]);
    expect(found[0]!.at[1]).toBe(65e3);
    expect(gaps(chipOf({ channels: [main, b, c] }), 30e3)).toEqual([]);
  });

  test('legs of one serpentine, an arc beside a line, a chamber, another layer', () => {
    const s = channel('s', [
      [0, 0],
      [1000, 0],
      [1000, 120],
      [0, 120],
    ]);
    expect(gaps(chipOf({ channels: [s] }), 50e3)).toMatchObject([{ between: ['s', 's'], width: 20e3 }]);
    const bent = channel(
      'b',
      [
        [0, 0],
        [1000, 0],
        [1000, -1000],
      ],
      100,
      { bendRadius: 300 },
    );
    const d = channel('d', [
      [600, 500],
      [1400, -300],
    ]);
    const [gap] = gaps(chipOf({ channels: [bent, d] }), 200e3);
    // the arc's centre is at (700, -300); the line x + y = 1100 is 700/sqrt 2 from it
    expect(gap!.width).toBeCloseTo(1e3 * (700 / Math.SQRT2 - 350 - 50), 3);
    const well = chamber('w', [
      [0, 80],
      [500, 80],
      [500, 400],
      [0, 400],
    ]);
    expect(gaps(chipOf({ channels: [main], chambers: [well] }), 50e3)).toMatchObject([{ width: 30e3 }]);
    expect(gaps(chipOf({ channels: [main], chambers: [{ ...well, layer: 'upper' }] }), 50e3)).toEqual([]);
  });

  test('a gap that other fluid fills is none', () => {
    const corner = channel('k', [
      [0, 0],
      [1000, 0],
      [1010, 10],
      [1010, 1000],
    ]);
    expect(gaps(chipOf({ channels: [corner] }), 50e3)).toEqual([]);
  });
});
