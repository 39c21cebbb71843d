import { describe, expect, test } from 'vitest';
import { chamber, channel, chipOf, layer, port, via } from '../../../test/chip/drawings.ts';
import { randomDrawing } from '../../../test/chip/random-drawing.ts';
import type { Chip, Point } from '../../chip/chip.ts';
import type { Graph } from '../../chip/graph.ts';
import { planShape } from '../../chip/plan.ts';
import { readGraph } from '../../chip/read-graph.ts';
import { drawingOf } from '../../chip/read-graph-drawing.ts';
import { twiceArea } from '../../mesh/check-shape.ts';
import { cellKey } from '../solve-cell.ts';
import { legLength, MERGE } from './bounds.ts';
import { cutCells } from './cut.ts';
import type { Cut } from './spec.ts';

/** Leg of a 100 um channel 50 um deep, um. */
const LEG = legLength(100, 50);

const main = channel('a', [
  [0, 0],
  [2000, 0],
]);
const up = (id: string, x: number, y0 = 0, y1 = 1000) =>
  channel(id, [
    [x, y0],
    [x, y1],
  ]);

function read(parts: Partial<Chip>, fillet = 0, options = {}): { graph: Graph; cut: Cut } {
  const chip = chipOf({ layers: [layer('flow', 50, fillet), layer('upper', 50, fillet)], ...parts });
  const graph = readGraph(chip);
  return { graph, cut: cutCells(chip, graph, options) };
}

/** "name kind: where its faces are, um". */
function cells(cut: Cut): string[] {
  return cut.cells.map((c) => {
    const faces = c.faces.map((f) => `${f.kind} ${f.centre.map((v) => Math.round(v / 100) / 10).join(',')}`);
    return `${c.name} ${c.kind}: ${faces.join('; ')}`;
  });
}

function ducts(graph: Graph, cut: Cut): string[] {
  return cut.ducts.map((d) => {
    const p = graph.pieces[d.piece]!;
    return `${p.channel}#${p.number} ${d.fromName} ${d.toName} ${Math.round(d.length / 100) / 10}`;
  });
}

const at = (x: number) => Math.round(10 * x) / 10;

describe('where cells are', () => {
  test('a T: faces one leg beyond where the arms leave each other', () => {
    const { graph, cut } = read({
      channels: [main, up('b', 1000)],
      ports: [port('i', [0, 0]), port('o', [2000, 0])],
    });
    const reach = at(50 + LEG);
    expect(cells(cut)).toEqual([
      `junction:1 junction: cut ${at(1000 - reach)},0; cut ${at(1000 + reach)},0; cut 1000,${reach}`,
    ]);
    expect(ducts(graph, cut)).toEqual([
      `a#1 port:i junction:1 ${at(1000 - reach)}`,
      `a#2 junction:1 port:o ${at(1000 - reach)}`,
      `b#1 junction:1 end:1 ${at(1000 - reach)}`,
    ]);
    const [cell] = cut.cells;
    expect(cell!.faces.map((f) => [f.piece, f.width, ...f.direction])).toEqual([
      [0, 100e3, -1, expect.closeTo(0, 12)],
      [1, 100e3, 1, expect.closeTo(0, 12)],
      [2, 100e3, expect.closeTo(0, 12), 1],
    ]);
    expect(cut.portNode[0]).not.toBe(cut.portNode[1]);
    expect(cut.siteNode[graph.sites.findIndex((s) => s.name === 'junction:1')]).toBe(-1);
  });

  test('fillets and depth push faces out', () => {
    const reach = (cut: Cut) => 1000 - cut.cells[0]!.faces[0]!.centre[0] / 1000;
    const plain = reach(read({ channels: [main, up('b', 1000)] }).cut);
    expect(reach(read({ channels: [main, up('b', 1000)] }, 20).cut) - plain).toBeCloseTo(20, 6);
    const deep = read({ layers: [layer('flow', 300)], channels: [main, up('b', 1000)] }).cut;
    expect(reach(deep)).toBeCloseTo(50 + (Math.log(50) * 300) / 4.2124, 6);
  });

  test('corners above ten degrees, tight arcs, steps, steep tapers; gentle ones are ducts', () => {
    const bent = (id: string, y: number, dy: number, radius = 0) =>
      channel(
        id,
        [
          [0, y],
          [1000, y],
          [2000, y + dy],
        ],
        100,
        { bendRadius: radius },
      );
    const { cut } = read({ channels: [bent('a', 0, 100), bent('b', 2000, 300), bent('c', 4000, 1000, 390)] });
    expect(cells(cut).map((c) => c.split(':')[0] + c.split(':')[1]!.slice(0, 7))).toEqual([
      'bend1 bend',
      'bend2 bend',
    ]);
    expect(read({ channels: [bent('c', 4000, 1000, 410)] }).cut.cells).toEqual([]);
    const step = (w: number) => [
      main,
      channel(
        'b',
        [
          [2000, 0],
          [3000, 0],
        ],
        w,
      ),
    ];
    expect(read({ channels: step(100.5) }).cut.cells).toEqual([]);
    expect(cells(read({ channels: step(60) }).cut)[0]).toMatch(/^junction:1 step/);
    const taper = (length: number) =>
      channel(
        't',
        [
          [0, 0],
          [length, 0],
        ],
        [200, 100],
      );
    expect(read({ channels: [taper(600)] }).cut.cells).toEqual([]);
    const steep = read({
      channels: [
        taper(400),
        channel(
          'b',
          [
            [400, 0],
            [2000, 0],
          ],
          100,
        ),
      ],
    });
    expect(cells(steep.cut)).toEqual([]);
    const ported = read({
      channels: [
        channel(
          'w',
          [
            [-1000, 0],
            [0, 0],
          ],
          200,
        ),
        taper(400),
        channel(
          'b',
          [
            [400, 0],
            [2000, 0],
          ],
          100,
        ),
      ],
    });
    expect(cells(ported.cut)).toHaveLength(1);
  });

  test('many slight turns in a row are a bend of their mean radius', () => {
    const arc = (radius: number) =>
      Array.from({ length: 19 }, (_, i): [number, number] => {
        const a = (Math.PI / 2) * (i / 18);
        return [radius * Math.sin(a), radius * (1 - Math.cos(a))];
      });
    expect(read({ channels: [channel('b', [[-1000, 0], ...arc(300), [300, 1300]])] }).cut.cells).toHaveLength(
      1,
    );
    expect(read({ channels: [channel('b', [[-1000, 0], ...arc(500), [500, 1500]])] }).cut.cells).toEqual([]);
  });

  test('channels that go straight on are one duct after the other, unless a leg reaches over the joint', () => {
    const joint = (x: number) => [
      channel('a', [
        [0, 0],
        [x, 0],
      ]),
      channel('b', [
        [x, 0],
        [2000, 0],
      ]),
      up('c', 1000),
    ];
    const apart = read({ channels: joint(500) });
    expect(ducts(apart.graph, apart.cut)).toContain('a#1 end:1 junction:1 500');
    const over = read({ channels: joint(900) });
    expect(over.cut.cells[0]!.sites.map((s) => over.graph.sites[s]!.name)).toEqual([
      'junction:1',
      'junction:2',
    ]);
    // past the joint by a whole leg
    expect(over.cut.cells[0]!.faces[0]!.centre[0] / 1000).toBeCloseTo(900 - LEG, 6);
  });

  test('close junctions are one cell, less close ones share the cut between them', () => {
    const pair = (distance: number) =>
      read({ channels: [main, up('b', 1000), up('c', 1000 + distance, 0, -1000)] });
    const merge = (MERGE * 100) / Math.PI;
    expect(pair(100 + merge - 1).cut.cells.map((c) => c.faces.length)).toEqual([4]);
    const { graph, cut } = pair(100 + merge + 1);
    expect(cut.cells.map((c) => c.faces.length)).toEqual([3, 3]);
    expect(cut.cells[0]!.faces[1]!.node).toBe(cut.cells[1]!.faces[0]!.node);
    expect(ducts(graph, cut).filter((d) => d.startsWith('a#2'))).toEqual([]);
  });

  test('chambers, with channels, holes and posts of ground in them', () => {
    const well = chamber('w', [
      [800, -500],
      [1800, -500],
      [1800, 500],
      [800, 500],
    ]);
    const feed = channel('a', [
      [0, 0],
      [900, 0],
    ]);
    const { graph, cut } = read({
      channels: [feed],
      chambers: [well],
      ports: [port('i', [0, 0]), port('o', [1300, 0], 300), port('p', [1600, 300], 100)],
    });
    expect(cells(cut)).toEqual([`chamber:w chamber: cut ${at(800 - LEG)},0; rim 1300,0; rim 1600,300`]);
    expect(
      cut.cells[0]!.shape.loops.slice(1)
        .map((l) => l.map((e) => [e.tag, Math.sign(e.bulge)]))
        .sort(),
    ).toEqual([
      [
        [2, -1],
        [2, -1],
      ],
      [
        [3, -1],
        [3, -1],
      ],
    ]);
    expect(new Set(cut.portNode).size).toBe(3);
    expect(cut.cells[0]!.faces[1]!.node).toBe(cut.portNode[1]);
    expect(ducts(graph, cut)).toEqual([`a#1 port:i chamber:w ${at(800 - LEG)}`]);
  });

  test('a port with a hole: from its rim; a port without, near a junction: at its place', () => {
    const { cut } = read({
      channels: [main, up('b', 1000)],
      ports: [port('i', [0, 0], 300), port('o', [1190, 0])],
    });
    expect(cells(cut)).toEqual([
      `port:i port: cut ${at(150 + LEG)},0; rim 0,0`,
      `junction:1 junction: cut ${at(1000 - 50 - LEG)},0; end 1190,0; cut 1000,${at(50 + LEG)}`,
    ]);
    expect(cut.cells[1]!.faces[1]!.node).toBe(cut.portNode[1]);
  });

  test('a port without a hole in the midst of a junction leaves it ideal, and says so', () => {
    const { graph, cut } = read({ channels: [main, up('b', 1000)], ports: [port('o', [1000, 0])] });
    expect(cut.cells).toEqual([]);
    expect(cut.findings.map((f) => [f.kind, f.where])).toEqual([['cell-ideal', 'port:o']]);
    expect(cut.findings[0]!.says).toContain('port o sits in its midst');
    expect(ducts(graph, cut)).toHaveLength(3);
  });

  test('a rim that just touches a wall cuts it, and its port stays joined', () => {
    const mid = read({ channels: [main], ports: [port('p', [1000, 0], 100)] }).cut;
    expect(mid.cells.map((c) => c.faces.map((f) => f.kind))).toEqual([
      ['cut', 'rim'],
      ['cut', 'rim'],
    ]);
    const square = chamber('w', [
      [0, -200],
      [400, -200],
      [400, 200],
      [0, 200],
    ]);
    const feed = channel('a', [
      [300, 0],
      [1000, 0],
    ]);
    const { cut } = read({ channels: [feed], chambers: [square], ports: [port('p', [100, 0], 200)] });
    expect(cut.cells[0]!.faces.map((f) => f.kind)).toEqual(['cut', 'rim']);
    expect(cut.cells[0]!.shape.loops).toHaveLength(1);
  });

  test('an end taken on to another centreline lies in the cell', () => {
    const { graph, cut } = read({ channels: [main, up('b', 1000, 40)], ports: [port('i', [0, 0])] });
    expect(cut.cells[0]!.faces).toHaveLength(3);
    expect(ducts(graph, cut)).toContain(`b#1 junction:1 end:2 ${at(1000 - 50 - LEG)}`);
    expect(ducts(graph, cut)).toHaveLength(3);
  });

  test('a via is one place for the cells of both layers', () => {
    const u = channel(
      'u',
      [
        [1000, 0],
        [1000, 2000],
      ],
      100,
      { layer: 'upper' },
    );
    const { cut } = read({ channels: [main, u], vias: [via('v', [1000, 0], 300)] });
    expect(cut.cells.map((c) => [c.name, c.layerIndex])).toEqual([
      ['via:v', 0],
      ['via:v.2', 0],
      ['via:v.3', 1],
    ]);
    const rims = cut.cells.flatMap((c) => c.faces.filter((f) => f.kind === 'rim').map((f) => f.node));
    expect(new Set(rims).size).toBe(1);
  });

  test('a cell that would be too large is left ideal, a tight serpentine is cut where it can be', () => {
    const turns = (pitch: number, legs: number, count: number) => {
      const path: [number, number][] = [[-1000, 0]];
      for (let k = 0; k < count; k++) {
        const x = k % 2 === 0 ? legs : 0;
        path.push([x, k * pitch], [x, (k + 1) * pitch]);
      }
      path.push([count % 2 === 0 ? legs + 1000 : -1000, count * pitch]);
      return read({ channels: [channel('s', path)] }, 0, { largest: 80 }).cut;
    };
    const loose = turns(200, 600, 6);
    expect(loose.cells).toHaveLength(6);
    expect(loose.findings).toEqual([]);
    const tight = turns(200, 240, 40);
    expect(tight.findings).toEqual([]);
    expect(tight.cells.length).toBeGreaterThan(1);
    const tooTight = turns(130, 110, 40);
    expect(tooTight.cells).toEqual([]);
    expect(tooTight.findings.map((f) => f.kind)).toEqual(['cell-ideal']);
  });
});

describe('the whole plan, once', () => {
  const strips = (chip: Chip, cut: Cut, graph: Graph) =>
    cut.ducts.reduce((sum, d) => {
      const { channelIndex } = graph.pieces[d.piece]!;
      const body = {
        kind: 'strip',
        channel: channelIndex,
        from: d.start,
        to: d.stop,
        tagFrom: 0,
        tagTo: 0,
      } as const;
      return sum + planShape(drawingOf(chip), [body], 0).shapes.reduce((s, shape) => s + areaOf(shape, 1), 0);
    }, 0);

  function areaOf(shape: Cut['cells'][number]['shape']['loops'], unit: number): number {
    return shape.reduce((sum, loop) => sum + (twiceArea(loop) / 2) * unit * unit, 0);
  }

  test('cells and ducts together cover the fluid of random drawings, and nothing twice', () => {
    let checked = 0;
    for (let seed = 1; seed <= 60; seed++) {
      const drawn = randomDrawing(seed, 6);
      const chip = { ...drawn, channels: drawn.channels.map((c) => ({ ...c, layer: 'flow' })) };
      const graph = readGraph(chip);
      // a network without ports that is one cell has no face to be solved by
      const cut = cutCells(chip, graph, { largest: 80 });
      if (cut.findings.length > 0 || graph.findings.length > 0) continue;
      checked++;
      const inCells = cut.cells.reduce((sum, c) => sum + areaOf(c.shape.loops, 1e9), 0);
      // ducts that go over slight corners have their mitres; corners where ends meet are in cells
      const all = chip.channels.map(
        (_, i) =>
          ({
            kind: 'strip',
            channel: i,
            from: 0,
            to: Infinity,
            tagFrom: 0,
            tagTo: 0,
          }) as const,
      );
      const whole = planShape(drawingOf(chip), all, 0).shapes.reduce((s, shape) => s + areaOf(shape, 1), 0);
      const sum = inCells + strips(chip, cut, graph);
      expect(sum / whole, `seed ${seed}`).toBeGreaterThan(1 - 1e-6);
      expect(sum / whole, `seed ${seed}`).toBeLessThan(1.01);
    }
    expect(checked).toBeGreaterThan(10);
  });

  test('every cut has two sides', () => {
    for (let seed = 1; seed <= 40; seed++) {
      const chip = randomDrawing(seed, 10);
      const graph = readGraph(chip);
      const cut = cutCells(chip, graph);
      const sides = new Uint8Array(cut.nodeCount);
      for (const d of cut.ducts) for (const n of [d.from, d.to]) sides[n]!++;
      for (const c of cut.cells) for (const f of c.faces) sides[f.node]!++;
      for (const f of cut.cells.flatMap((c) => c.faces)) {
        if (f.kind !== 'cut' || sides[f.node] === 2) continue;
        // a dead end that is wholly a cell of one face is none: nothing flows there
        const { from, to } = graph.pieces[f.piece]!;
        expect([graph.sites[from]!.kind, graph.sites[to]!.kind]).toContain('end');
      }
      for (let n = 0; n < cut.nodeCount; n++) expect(sides[n]).toBeGreaterThan(0);
    }
  });
});

describe('copies', () => {
  const keys = (chip: Chip) => {
    const layers = chip.layers.map((l) => ({ ...l, fillet: 4e3 }));
    const filleted = { ...chip, layers };
    return cutCells(filleted, readGraph(filleted))
      .cells.map((c) => cellKey(c.shape))
      .sort();
  };
  const moves: ((p: Point) => Point)[] = [
    ([x, y]) => [-y, x],
    ([x, y]) => [-x, y],
    ([x, y]) => [x + 123_456_789, y - 987_654_321],
  ];

  test('turned, mirrored and moved drawings have the same cells', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const chip = randomDrawing(seed, 6);
      for (const move of moves) {
        const channels = chip.channels.map((c) => ({ ...c, path: c.path.map(move) }));
        expect(keys({ ...chip, channels }), `seed ${seed}`).toEqual(keys(chip));
      }
    }
  });

  test('the fifty equal bends of a serpentine are two shapes, or one', () => {
    const path: [number, number][] = [[0, 0]];
    for (let k = 0; k < 25; k++) path.push([k % 2 ? 0 : 3000, k * 1000], [k % 2 ? 0 : 3000, (k + 1) * 1000]);
    const { cut } = read({ channels: [channel('s', path)] }, 5);
    expect(cut.cells.length).toBeGreaterThan(45);
    expect(new Set(cut.cells.map((c) => cellKey(c.shape))).size).toBe(1);
  });

  test('a bend drawn as one path or as two channels is the same shape', () => {
    const one = read(
      {
        channels: [
          channel('a', [
            [0, 0],
            [1000, 0],
            [1500, 900],
          ]),
        ],
      },
      5,
    ).cut;
    const two = read(
      {
        channels: [
          channel('a', [
            [0, 0],
            [1000, 0],
          ]),
          channel('b', [
            [1000, 0],
            [1500, 900],
          ]),
        ],
      },
      5,
    ).cut;
    expect(cellKey(two.cells[0]!.shape)).toBe(cellKey(one.cells[0]!.shape));
    expect([one.cells[0]!.kind, two.cells[0]!.kind]).toEqual(['bend', 'bend']);
  });
});
