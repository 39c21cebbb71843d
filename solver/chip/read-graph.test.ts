import { describe, expect, test } from 'vitest';
import {
  chamber,
  channel,
  chipOf,
  describeGraph,
  findingKinds,
  layer,
  port,
  via,
} from '../../test/chip/drawings.ts';
import { Problem } from '../problem/problem.ts';
import type { Chip } from './chip.ts';
import { readGraph } from './read-graph.ts';

const main = channel('a', [
  [0, 0],
  [2000, 0],
]);

function read(parts: Partial<Chip>): { pieces: string[]; findings: string[] } {
  const graph = readGraph(chipOf(parts));
  return { pieces: describeGraph(graph), findings: findingKinds(graph) };
}

function problem(parts: Partial<Chip>): Problem {
  try {
    readGraph(chipOf(parts));
  } catch (error) {
    if (error instanceof Problem) return error;
    throw error;
  }
  throw new Error('no problem was found');
}

const threeArms = ['a#1 end:1 junction:1 1000', 'a#2 junction:1 end:2 1000', 'b#1 junction:1 end:3 1000'];

describe('centrelines that meet', () => {
  test('a crossing is one junction of four arms', () => {
    const b = channel('b', [
      [1000, -1000],
      [1000, 1000],
    ]);
    const graph = readGraph(
      chipOf({ channels: [main, b], ports: [port('in', [0, 0]), port('out', [2000, 0])] }),
    );
    expect(describeGraph(graph)).toEqual([
      'a#1 port:in junction:1 1000',
      'a#2 junction:1 port:out 1000',
      'b#1 end:1 junction:1 1000',
      'b#2 junction:1 end:2 1000',
    ]);
    const junction = graph.sites.find((s) => s.kind === 'junction')!;
    expect(junction).toEqual({
      name: 'junction:1',
      kind: 'junction',
      at: [1e6, 0],
      layers: ['flow'],
      arms: [
        { piece: 0, end: 'to' },
        { piece: 1, end: 'from' },
        { piece: 2, end: 'to' },
        { piece: 3, end: 'from' },
      ],
      chambers: [],
      ports: [],
      vias: [],
    });
    expect(graph.findings).toEqual([]);
  });

  test('an end on a centreline is a T', () => {
    const b = channel('b', [
      [1000, 0],
      [1000, 1000],
    ]);
    expect(read({ channels: [main, b] })).toEqual({ pieces: threeArms, findings: [] });
  });

  test('an end that overshoots within the other channel makes no dead end', () => {
    const b = channel('b', [
      [1000, -50],
      [1000, 1000],
    ]);
    expect(read({ channels: [main, b] })).toEqual({ pieces: threeArms, findings: [] });
  });

  test('an end that overshoots beyond the other wall leaves a dead end', () => {
    const b = channel('b', [
      [1000, -60],
      [1000, 1000],
    ]);
    expect(read({ channels: [main, b] }).pieces).toContain('b#1 end:3 junction:1 60');
  });

  test('end on end, straight or at an angle, is a junction of two arms', () => {
    const b = channel('b', [
      [2000, 0],
      [2000, 1000],
    ]);
    expect(read({ channels: [main, b] }).pieces).toEqual([
      'a#1 end:1 junction:1 2000',
      'b#1 junction:1 end:2 1000',
    ]);
  });

  test('a vertex on another centreline, and a channel that crosses itself', () => {
    const v = channel('v', [
      [500, 500],
      [1000, 0],
      [1500, 500],
    ]);
    const loop = channel('l', [
      [5000, 0],
      [7000, 0],
      [7000, 1000],
      [6000, 1000],
      [6000, -1000],
    ]);
    expect(read({ channels: [main, v, loop] }).pieces).toEqual([
      'a#1 end:1 junction:1 1000',
      'a#2 junction:1 end:2 1000',
      'v#1 end:3 junction:1 707.1068',
      'v#2 junction:1 end:4 707.1068',
      'l#1 end:5 junction:2 1000',
      'l#2 junction:2 junction:2 4000',
      'l#3 junction:2 end:6 1000',
    ]);
  });

  test('several crossings at one place are one junction', () => {
    const b = channel('b', [
      [1000, -1000],
      [1000, 1000],
    ]);
    const c = channel('c', [
      [0, -990],
      [2000, 1010],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b, c] }));
    expect(graph.sites.filter((s) => s.kind === 'junction').map((s) => s.arms.length)).toEqual([6]);
  });

  test('narrow branches side by side off a wide channel stay apart', () => {
    const wide = channel(
      'a',
      [
        [0, 0],
        [2000, 0],
      ],
      400,
    );
    const teeth = [0, 1, 2].map((i) =>
      channel(
        `t${i}`,
        [
          [1000 + 30 * i, 0],
          [1000 + 30 * i, 1000],
        ],
        20,
      ),
    );
    const graph = readGraph(chipOf({ channels: [wide, ...teeth] }));
    expect(graph.sites.filter((s) => s.kind === 'junction')).toHaveLength(3);
  });

  test('two channels on one line count once', () => {
    const b = channel('b', [
      [1500, 0],
      [2500, 0],
    ]);
    expect(read({ channels: [main, b] })).toEqual({
      pieces: ['a#1 end:1 junction:1 1500', 'a#2 junction:1 junction:2 500', 'b#1 junction:2 end:2 500'],
      findings: ['same-line b'],
    });
  });
});

describe('covered areas that meet', () => {
  test('an end that stops at the other wall is joined, taken on to the centreline', () => {
    const b = channel('b', [
      [1000, 50],
      [1000, 1000],
    ]);
    expect(read({ channels: [main, b] })).toEqual({ pieces: threeArms, findings: ['end-extended b'] });
  });

  test('a gap of two nanometres is a wall', () => {
    const b = channel('b', [
      [1000, 50.002],
      [1000, 1000],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b] }));
    expect([...graph.cavity]).toEqual([0, 0, 1, 1]);
    expect(graph.findings).toEqual([]);
  });

  test('a slanted end whose corner reaches in is joined where its direction meets the centreline', () => {
    const b = channel('b', [
      [1040, 80],
      [1640, 880],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b] }));
    expect(findingKinds(graph)).toEqual(['end-extended b']);
    expect(graph.pieces[2]!.path[0]).toMatchObject({ x: 980e3, y: 0 });
    expect(graph.pieces[2]!.length).toBeCloseTo(1.1e6, 3);
    expect(graph.pieces[2]!.start).toBeCloseTo(-0.1e6, 3);
  });

  test('ends that face each other with a sideways offset are joined once', () => {
    const b = channel('b', [
      [2000, 60],
      [3000, 60],
    ]);
    expect(read({ channels: [main, b] })).toEqual({
      pieces: ['a#1 end:1 junction:1 2060', 'b#1 junction:1 end:2 1000'],
      findings: ['end-extended a'],
    });
  });

  test('channels that overlap alongside are one cavity, joined where that begins and ends', () => {
    const b = channel('b', [
      [500, 400],
      [500, 80],
      [1500, 80],
      [1500, 400],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b] }));
    expect(findingKinds(graph)).toEqual(['overlap-alongside b']);
    expect(graph.findings[0]!.severity).toBe('warn');
    expect(new Set(graph.cavity).size).toBe(1);
    expect(graph.pieces.filter((p) => p.channel === 'a').map((p) => p.length / 1000)).toEqual([
      450, 1100, 450,
    ]);
  });

  test('a corner that pokes into the side of another channel joins them', () => {
    const b = channel('b', [
      [500, 600],
      [1000, 100],
      [1500, 600],
    ]);
    expect(read({ channels: [main, b] }).findings).toEqual(['overlap-alongside b']);
  });

  test('the overlap of the legs of a sharp Y is no join of its own', () => {
    const b = channel('b', [
      [2000, 0],
      [4000, 150],
    ]);
    const c = channel('c', [
      [2000, 0],
      [4000, -150],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b, c] }));
    expect(graph.findings).toEqual([]);
    expect(graph.pieces).toHaveLength(3);
  });

  test('branches opposite each other in the mouth of a third are no join of their own', () => {
    const b = channel('b', [
      [1000, 0],
      [1000, 1000],
    ]);
    const c = channel('c', [
      [1060, 0],
      [1060, -1000],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b, c] }));
    expect(graph.findings).toEqual([]);
    expect(graph.sites.filter((s) => s.kind === 'junction')).toHaveLength(2);
  });

  test('legs of a serpentine that touch are one cavity', () => {
    const s = channel('s', [
      [0, 0],
      [1000, 0],
      [1000, 100],
      [0, 100],
      [0, 400],
    ]);
    expect(read({ channels: [s] }).findings).toContain('overlap-alongside s');
    const open = channel('s', [
      [0, 0],
      [1000, 0],
      [1000, 101],
      [0, 101],
      [0, 400],
    ]);
    expect(read({ channels: [open] })).toEqual({ pieces: ['s#1 end:1 end:2 2400'], findings: [] });
  });

  test('layers do not join without a via', () => {
    const b = channel(
      'b',
      [
        [1000, -1000],
        [1000, 1000],
      ],
      100,
      { layer: 'upper' },
    );
    expect([...readGraph(chipOf({ channels: [main, b] })).cavity]).toEqual([0, 0, 1, 1]);
  });
});

describe('chambers', () => {
  const well = chamber('w', [
    [800, -200],
    [1200, -200],
    [1200, 200],
    [800, 200],
  ]);

  test('channels are cut at the outline, through or ending, whatever they do inside', () => {
    const b = channel('b', [
      [1000, 100],
      [1000, 1000],
    ]);
    const c = channel('c', [
      [1000, -1000],
      [1000, 150],
    ]);
    expect(read({ channels: [main, b, c], chambers: [well] })).toEqual({
      pieces: [
        'a#1 end:1 chamber:w 800',
        'a#2 chamber:w end:2 800',
        'b#1 chamber:w end:3 800',
        'c#1 end:4 chamber:w 800',
      ],
      findings: [],
    });
  });

  test('direction of the outline does not matter; an end on it is in it', () => {
    const turned = { ...well, outline: [...well.outline].reverse() };
    const b = channel('b', [
      [1000, 200],
      [1000, 1000],
    ]);
    expect(read({ channels: [b], chambers: [turned] }).pieces).toEqual(['b#1 chamber:w end:1 800']);
  });

  test('an end that only overlaps is taken on to the outline', () => {
    const b = channel('b', [
      [1170, 220],
      [1570, 520],
    ]);
    const { pieces, findings } = read({ channels: [b], chambers: [well] });
    expect(findings).toEqual(['end-extended b']);
    expect(pieces).toEqual(['b#1 chamber:w end:1 533.3333']);
  });

  test('a channel with its side in a chamber is joined in the middle of that stretch', () => {
    const b = channel('b', [
      [0, 240],
      [2000, 240],
    ]);
    expect(read({ channels: [b], chambers: [well] })).toEqual({
      pieces: ['b#1 end:1 chamber:w 1000', 'b#2 chamber:w end:2 1000'],
      findings: ['overlap-alongside b'],
    });
  });

  test('overlapping chambers are one site; a port inside shares it', () => {
    const next = chamber('x', [
      [1200, -100],
      [1500, -100],
      [1500, 100],
      [1200, 100],
    ]);
    const graph = readGraph(
      chipOf({ channels: [main], chambers: [well, next], ports: [port('in', [0, 0]), port('p', [1400, 0])] }),
    );
    expect(describeGraph(graph)).toEqual(['a#1 port:in chamber:w 800', 'a#2 chamber:w end:1 500']);
    const site = graph.sites[graph.portSite[1]!]!;
    expect([site.name, site.chambers, site.ports]).toEqual(['chamber:w', ['w', 'x'], ['p']]);
  });

  test('a chamber with many corners', () => {
    const round = Array.from({ length: 2000 }, (_, i) => {
      const a = (2 * Math.PI * i) / 2000;
      return [1000 + 500 * Math.cos(a), 500 * Math.sin(a)] as const;
    });
    const graph = readGraph(chipOf({ channels: [main], chambers: [chamber('w', round)] }));
    expect(graph.pieces.map((p) => Math.round(p.length / 1000))).toEqual([500, 500]);
  });
});

describe('ports', () => {
  test('length counts to the rim on every arm; what was taken off is kept', () => {
    const b = channel('b', [
      [2000, 0],
      [2000, 1000],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b], ports: [port('p', [2000, 0], 400)] }));
    expect(describeGraph(graph)).toEqual(['a#1 end:1 port:p 1800', 'b#1 port:p end:2 800']);
    expect(graph.pieces[0]!.trim).toEqual([0, 200e3]);
    expect(graph.pieces[0]!.stop).toBe(2e6);
    expect(graph.pieces[1]!.trim[0]).toBeCloseTo(200e3, 6);
  });

  test('in the middle of a channel it splits it', () => {
    expect(read({ channels: [main], ports: [port('p', [700, 0])] }).pieces).toEqual([
      'a#1 end:1 port:p 700',
      'a#2 port:p end:2 1300',
    ]);
    expect(read({ channels: [main], ports: [port('p', [700, 20], 60)] }).pieces[0]).toBe(
      `a#1 end:1 port:p ${Number((700 - Math.sqrt(900 - 400)).toFixed(4))}`,
    );
  });

  test('on a junction it shares the site', () => {
    const b = channel('b', [
      [1000, 0],
      [1000, 1000],
    ]);
    const graph = readGraph(chipOf({ channels: [main, b], ports: [port('p', [1000, 0])] }));
    expect(graph.sites[graph.portSite[0]!]).toMatchObject({ name: 'port:p', kind: 'port' });
    expect(graph.sites[graph.portSite[0]!]!.arms).toHaveLength(3);
  });

  test('off the centreline but in the fluid it is on the channel; outside it is a problem that says what is near', () => {
    expect(read({ channels: [main], ports: [port('p', [2000, 50])] }).pieces).toEqual([
      'a#1 end:1 port:p 2000',
    ]);
    const off = problem({ channels: [main], ports: [port('p', [1000, 60])] });
    expect([off.kind, off.where]).toEqual(['place', 'port:p']);
    expect(off.what).toContain('the nearest channel there is a, 10 um away');
    expect(problem({ channels: [main], ports: [port('p', [3000, 0], 500)] }).kind).toBe('place');
    const other = problem({ channels: [main], ports: [port('p', [1000, 0], 0, 'upper')] });
    expect(other.what).toContain('upper');
    expect(problem({ ports: [port('p', [0, 0])] }).kind).toBe('place');
  });
});

describe('vias', () => {
  const upper = channel(
    'u',
    [
      [1000, 0],
      [1000, 2000],
    ],
    100,
    { layer: 'upper' },
  );

  test('join two layers, lengths to the hole', () => {
    const graph = readGraph(chipOf({ channels: [main, upper], vias: [via('v', [1000, 0], 300)] }));
    expect(describeGraph(graph)).toEqual([
      'a#1 end:1 via:v 850',
      'a#2 via:v end:2 850',
      'u#1 via:v end:3 1850',
    ]);
    expect(new Set(graph.cavity).size).toBe(1);
    expect(graph.sites.find((s) => s.kind === 'via')!.layers).toEqual(['flow', 'upper']);
  });

  test('must overlap fluid on both layers', () => {
    const off = problem({ channels: [main, upper], vias: [via('v', [500, 0], 300)] });
    expect([off.kind, off.where]).toEqual(['place', 'via:v']);
    expect(off.what).toContain('layer upper');
  });

  test('a stack of vias goes through a layer that has no channel there', () => {
    const top = channel(
      't',
      [
        [1000, 0],
        [3000, 0],
      ],
      100,
      { layer: 'top' },
    );
    const graph = readGraph(
      chipOf({
        layers: [layer('flow'), layer('upper'), layer('top')],
        channels: [main, top],
        vias: [via('v1', [1000, 0], 300), via('v2', [1000, 0], 300, ['upper', 'top'])],
      }),
    );
    expect(new Set(graph.cavity).size).toBe(1);
  });
});

describe('bends and tapers', () => {
  test('an inner vertex with a radius is an arc; length and bulge follow', () => {
    const b = channel(
      'b',
      [
        [0, 0],
        [1000, 0],
        [1000, 1000],
      ],
      100,
      { bendRadius: 300 },
    );
    const graph = readGraph(chipOf({ channels: [b] }));
    expect(graph.pieces[0]!.length / 1e3).toBeCloseTo(1400 + (300 * Math.PI) / 2, 6);
    expect(graph.pieces[0]!.path).toHaveLength(4);
    expect(graph.pieces[0]!.path[1]!.bulge).toBeCloseTo(Math.tan(Math.PI / 8), 12);
  });

  test('a radius that does not fit is taken as large as it can be, with a finding', () => {
    const b = channel(
      'b',
      [
        [0, 0],
        [1000, 0],
        [1000, 400],
        [0, 400],
      ],
      100,
      { bendRadius: 300 },
    );
    const graph = readGraph(chipOf({ channels: [b] }));
    expect(findingKinds(graph)).toEqual(['bend-reduced b']);
    expect(graph.pieces[0]!.length / 1e3).toBeCloseTo(1600 + 200 * Math.PI, 6);
  });

  test('width is linear along the length, bends included, and kept where a channel is split', () => {
    const t = channel(
      't',
      [
        [0, 0],
        [1000, 0],
        [1000, 1000],
      ],
      [200, 100],
    );
    const b = channel('b', [
      [500, -1000],
      [500, 1000],
    ]);
    const graph = readGraph(chipOf({ channels: [t, b] }));
    expect(graph.pieces[0]!.width).toEqual([200e3, 175e3]);
    expect(graph.pieces[1]!.width).toEqual([175e3, 100e3]);
  });

  test('crossing on an arc', () => {
    const b = channel(
      'b',
      [
        [0, 0],
        [1000, 0],
        [1000, 1000],
      ],
      100,
      { bendRadius: 1000 },
    );
    const d = channel('d', [
      [0, 1000],
      [2000, -1000],
    ]);
    const graph = readGraph(chipOf({ channels: [b, d] }));
    const { at } = graph.sites.find((s) => s.kind === 'junction')!;
    expect(Math.hypot(at[0], at[1] - 1e6) / 1e6).toBeCloseTo(1, 9);
    expect(graph.pieces[0]!.length / 1e3).toBeCloseTo((1000 * Math.PI) / 4, 6);
  });
});
