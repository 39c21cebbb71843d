import { expect, test } from 'vitest';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { metres } from '../../solver/chip/units.ts';
import { chipOf, dxf, outline } from './read.ts';

/**
 * Outlines whose channels are worked by hand: what comes out must be exactly those, in whole micrometres
 * (one drawing unit), and must lie on the drawing.
 */

const um = 1000;
const NOTHING = { unit: null };

/** Channels in µm: path, widths, bend radius; sorted so that their order in the file does not matter. */
function channelsOf(
  points: readonly (readonly number[])[][],
  settings: Parameters<typeof chipOf>[1] = NOTHING,
) {
  const { chip, report } = chipOf(dxf(points.flatMap((one) => outline(one))), settings);
  const round = (nm: number): number => Math.round(nm / 10) / 100;
  const channels = chip.channels.map(({ path, width, bendRadius }) => {
    const out = path.map(([x, y]) => [round(x), round(y)]);
    const [first, last] = [out[0], out[out.length - 1]];
    const turned = first[0] > last[0] || (first[0] === last[0] && first[1] > last[1]);
    return {
      path: turned ? out.toReversed() : out,
      width: (turned ? width.toReversed() : [...width]).map(round),
      bend: round(bendRadius),
    };
  });
  channels.sort((a, b) => JSON.stringify(a).localeCompare(JSON.stringify(b)));
  const [{ deviation }] = report.chipLayers;
  return { chip, report, channels, deviation: deviation! };
}

const even = (path: number[][], width: number, bend = 0) => ({ path, width: [width, width], bend });

test('a rectangle is a straight channel along its middle', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 1000],
      [9000, 1000],
      [9000, 1100],
      [1000, 1100],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [9000, 1050],
      ],
      100,
    ),
  ]);
  expect(deviation.difference).toBe(0);
  expect(deviation.area).toBeCloseTo(8000e-6 * 100e-6, 18);
});

test('one at an angle too', () => {
  // Direction (3, 4) / 5, length 5000, width 100.
  const [ux, uy] = [0.6, 0.8];
  const at = (s: number, n: number): number[] => [2000 + s * ux - n * uy, 2000 + s * uy + n * ux];
  const { channels } = channelsOf([[at(0, -50), at(5000, -50), at(5000, 50), at(0, 50)]]);
  expect(channels).toEqual([
    even(
      [
        [2000, 2000],
        [5000, 6000],
      ],
      100,
    ),
  ]);
});

test('a bend with a mitred corner is one channel with a corner', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 1000],
      [5100, 1000],
      [5100, 6000],
      [5000, 6000],
      [5000, 1100],
      [1000, 1100],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [5050, 1050],
        [5050, 6000],
      ],
      100,
    ),
  ]);
  expect(deviation.difference).toBe(0);
});

test('a round bend has the radius of its centreline', () => {
  const q = Math.tan(Math.PI / 8);
  const { channels, deviation } = channelsOf([
    [
      [1000, 1000],
      [5000, 1000, q],
      [5550, 1550],
      [5550, 6000],
      [5450, 6000],
      [5450, 1550, -q],
      [5000, 1100],
      [1000, 1100],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [5500, 1050],
        [5500, 6000],
      ],
      100,
      500,
    ),
  ]);
  expect(deviation.furthest).toBeLessThan(metres(30));
});

test('a bend about a sharp inner corner: half the width', () => {
  const q = Math.tan(Math.PI / 8);
  const { channels } = channelsOf([
    [
      [1000, 1000],
      [5000, 1000, q],
      [5100, 1100],
      [5100, 6000],
      [5000, 6000],
      [5000, 1100],
      [1000, 1100],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [5050, 1050],
        [5050, 6000],
      ],
      100,
      50,
    ),
  ]);
});

test('a taper keeps the widths at its ends', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 950],
      [3000, 950],
      [4000, 1000],
      [6000, 1000],
      [6000, 1100],
      [4000, 1100],
      [3000, 1150],
      [1000, 1150],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [3000, 1050],
      ],
      200,
    ),
    {
      path: [
        [3000, 1050],
        [4000, 1050],
      ],
      width: [200, 100],
      bend: 0,
    },
    even(
      [
        [4000, 1050],
        [6000, 1050],
      ],
      100,
    ),
  ]);
  expect(deviation.difference).toBe(0);
});

test('a taper that a channel opens into on its way is one taper', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 900],
      [6000, 850],
      [6000, 1150],
      [1000, 1100],
    ],
    // 52 wide, direction (12, 5) / 13, its centreline through (1000, 1000)
    [
      [1014, 1034],
      [1034, 986],
      [4610, 2476],
      [4590, 2524],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1000],
        [4600, 2500],
      ],
      52,
    ),
    {
      path: [
        [1000, 1000],
        [6000, 1000],
      ],
      width: [200, 300],
      bend: 0,
    },
  ]);
  expect(deviation.difference).toBeLessThan(1e-7 * deviation.perimeter);
});

test('a step of the width parts two channels', () => {
  const { channels } = channelsOf([
    [
      [1000, 900],
      [3000, 900],
      [3000, 1000],
      [6000, 1000],
      [6000, 1100],
      [3000, 1100],
      [3000, 1200],
      [1000, 1200],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [3000, 1050],
      ],
      300,
    ),
    even(
      [
        [3000, 1050],
        [6000, 1050],
      ],
      100,
    ),
  ]);
});

/** Half a width aside; flush on one side of a wider one; overlapping there; beside an arc. */
const STEPS: Readonly<Record<string, number[][][]>> = {
  aside: [
    [
      [1000, 1000],
      [6000, 1000],
      [6000, 1050],
      [9000, 1050],
      [9000, 1150],
      [6000, 1150],
      [6000, 1100],
      [1000, 1100],
    ],
  ],
  flush: [
    [
      [1000, 1000],
      [6000, 1000],
      [6000, 900],
      [9000, 900],
      [9000, 1100],
      [1000, 1100],
    ],
  ],
  overlapping: [
    [
      [1000, 1000],
      [6000, 1000],
      [6000, 1100],
      [1000, 1100],
    ],
    [
      [5980, 1080],
      [9000, 1080],
      [9000, 1180],
      [5980, 1180],
    ],
  ],
  arc: [
    [
      [1000, 1000],
      [6000, 1000],
      [6000, 1100],
      [1000, 1100],
    ],
    // A quarter turn from the right to upward, its radii 950 and 1050 about (6000, 2000).
    [
      [6000, 950, Math.tan(Math.PI / 8)],
      [7050, 2000],
      [6950, 2000, -Math.tan(Math.PI / 8)],
      [6000, 1050],
    ],
  ],
};

test.each(Object.entries(STEPS))(
  'channels that go on a little to the side (%s) are channels still, with a room between',
  (_, outlines) => {
    const { chip, channels, deviation } = channelsOf(outlines);
    expect(channels).toHaveLength(2);
    expect(chip.chambers).toHaveLength(1);
    expect(deviation.furthest).toBeLessThan(0.1e-6);
    // nearly all of it is channel, and all of it one cavity
    const length = channels.reduce((sum, { path: [[ax], [bx]] }) => sum + Math.abs(bx! - ax!), 0);
    expect(length).toBeGreaterThan(5500);
    expect(new Set(readGraph(chip).cavity).size).toBe(1);
  },
);

test('a tee: the straight one goes through, the other ends on it', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 1000],
      [4000, 1000],
      [4000, 500],
      [4100, 500],
      [4100, 1000],
      [8000, 1000],
      [8000, 1100],
      [1000, 1100],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 1050],
        [8000, 1050],
      ],
      100,
    ),
    even(
      [
        [4050, 500],
        [4050, 1050],
      ],
      100,
    ),
  ]);
  expect(deviation.difference).toBe(0);
});

test('overlapping outlines are one cavity: a crossing', () => {
  const { channels } = channelsOf([
    [
      [1000, 3000],
      [7000, 3000],
      [7000, 3100],
      [1000, 3100],
    ],
    [
      [4000, 1000],
      [4200, 1000],
      [4200, 6000],
      [4000, 6000],
    ],
  ]);
  expect(channels).toEqual([
    even(
      [
        [1000, 3050],
        [7000, 3050],
      ],
      100,
    ),
    even(
      [
        [4100, 1000],
        [4100, 6000],
      ],
      200,
    ),
  ]);
});

test('three arms of one fork meet in a point', () => {
  // Arms of width 200 at 0, 120 and 240 degrees, 3000 long, around (5000, 5000).
  const corner = (k: number): number[] => {
    const a = ((60 + 120 * k) * Math.PI) / 180;
    return [5000 + (200 / Math.sqrt(3)) * Math.cos(a), 5000 + (200 / Math.sqrt(3)) * Math.sin(a)];
  };
  const tip = (k: number, n: number): number[] => {
    const a = (120 * k * Math.PI) / 180;
    return [5000 + 3000 * Math.cos(a) - n * Math.sin(a), 5000 + 3000 * Math.sin(a) + n * Math.cos(a)];
  };
  const points = [0, 1, 2].flatMap((k) => [tip(k, -100), tip(k, 100), corner(k)]);
  const { channels } = channelsOf([points]);
  expect(channels).toHaveLength(3);
  for (const { path, width } of channels) {
    expect(path.some(([x, y]) => Math.hypot(x - 5000, y - 5000) < 0.02)).toBe(true);
    expect(width[0]).toBeCloseTo(200, 1);
  }
});

test('a room between narrow channels is a chamber, and the channels reach into it', () => {
  const { channels, chip, deviation } = channelsOf([
    [
      [1000, 3000],
      [4000, 3000],
      [4000, 2000],
      [6000, 2000],
      [6000, 3000],
      [9000, 3000],
      [9000, 3100],
      [6000, 3100],
      [6000, 4000],
      [4000, 4000],
      [4000, 3100],
      [1000, 3100],
    ],
  ]);
  expect(chip.chambers).toHaveLength(1);
  expect(channels).toEqual([
    even(
      [
        [1000, 3050],
        [4050, 3050],
      ],
      100,
    ),
    even(
      [
        [5950, 3050],
        [9000, 3050],
      ],
      100,
    ),
  ]);
  expect(deviation.share).toBeLessThan(1e-6);
  expect(chip.ports.map(({ at }) => at)).toEqual(
    expect.arrayContaining([
      [1000 * um, 3050 * um],
      [9000 * um, 3050 * um],
    ]),
  );
});

test('an outline within another is a post: the room around it is two chambers that touch', () => {
  const { chip, deviation, report } = channelsOf([
    [
      [1000, 1000],
      [4000, 1000],
      [4000, 4000],
      [1000, 4000],
    ],
    [
      [2300, 2300, 1],
      [2700, 2300, 1],
    ],
  ]);
  // Chords of the post lie within 20 nm of its circle.
  expect(Math.abs(deviation.area - (9e-6 - Math.PI * 200e-6 ** 2))).toBeLessThan(
    2 * Math.PI * 200e-6 * 20e-9,
  );
  expect(deviation.share).toBeLessThan(1e-4);
  expect(chip.chambers.length + chip.channels.length).toBeGreaterThan(1);
  expect(report.assumed).toContain('1 outline inside others on layer "FLOW" is a post (wall) in them.');
});

test('a ring is two channels that make a circle', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 3000, 1],
      [5000, 3000, 1],
    ],
    [
      [1200, 3000, 1],
      [4800, 3000, 1],
    ],
  ]);
  expect(channels).toHaveLength(2);
  for (const { width, bend } of channels) {
    expect(width[0]).toBeCloseTo(200, 1);
    expect(bend).toBeCloseTo(1900, 0);
  }
  expect(deviation.share).toBeLessThan(1e-3);
});

test('a serpentine drawn as one outline is one channel', () => {
  // Three runs 4000 long, 400 apart, joined by half turns: centreline radius 200, width 100.
  const { channels, deviation } = channelsOf([
    [
      [1000, 950],
      [5000, 950, 1],
      [5000, 1450],
      [1000, 1450, -1],
      [1000, 1750],
      [5000, 1750],
      [5000, 1850],
      [1000, 1850, 1],
      [1000, 1350],
      [5000, 1350, -1],
      [5000, 1050],
      [1000, 1050],
    ],
  ]);
  expect(channels).toHaveLength(1);
  expect(channels[0].width).toEqual([100, 100]);
  expect(channels[0].bend).toBeCloseTo(200, 1);
  expect(deviation.furthest).toBeLessThan(metres(50));
});

test('a curved channel of changing width follows its walls', () => {
  // Walls y = f(x) -/+ w(x)/2, along a sine: the deviation is what is asked.
  const n = 400;
  const wall = (k: number, side: number): number[] => {
    const t = k / n;
    const x = 1000 + 8000 * t;
    const slope = ((1200 * 2 * Math.PI) / 8000) * Math.cos(2 * Math.PI * t);
    const half = (side * (150 - 50 * t)) / 2;
    const l = Math.hypot(1, slope);
    return [x - (half * slope) / l, 3000 + 1200 * Math.sin(2 * Math.PI * t) + half / l];
  };
  const points = [
    ...Array.from({ length: n + 1 }, (_, k) => wall(k, -1)),
    ...Array.from({ length: n + 1 }, (_, k) => wall(n - k, 1)),
  ];
  const { channels, deviation, chip } = channelsOf([points]);
  expect(channels.length).toBeGreaterThan(1);
  expect(chip.chambers).toHaveLength(0);
  expect(deviation.share).toBeLessThan(0.02);
  expect(deviation.furthest).toBeLessThan(5e-6);
});

test('a long wall between two short ones that lie on one circle with it stays straight', () => {
  const { channels, deviation } = channelsOf([
    [
      [1000, 1000],
      [2000, 1000],
      [2000, 1099.96],
      [1940, 1100],
      [1060, 1100],
      [1000, 1099.96],
    ],
  ]);
  expect(channels).toHaveLength(1);
  expect(channels[0]!.path).toHaveLength(2);
  expect(deviation.furthest).toBeLessThan(0.04e-6);
});

test('a round pad at the end of a channel is a port where no holes are drawn', () => {
  // Pad of radius 500 around (1000, 3000); the channel's walls meet it 50 off its middle.
  const x = 1000 + Math.sqrt(500 ** 2 - 50 ** 2);
  const sweep = 2 * Math.PI - 2 * Math.asin(0.1);
  const { chip } = channelsOf([
    [
      [x, 3050, Math.tan(sweep / 4)],
      [x, 2950],
      [8000, 2950],
      [8000, 3050],
    ],
  ]);
  expect(chip.chambers).toHaveLength(0);
  const pad = chip.ports.find(({ diameter }) => diameter > 0)!;
  expect(pad.diameter / um).toBeCloseTo(1000, 0);
  expect(pad.at.map((nm) => Math.round(nm / um))).toEqual([1000, 3000]);
});
