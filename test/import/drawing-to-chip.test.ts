import { expect, test } from 'vitest';
import { boundary, chipOf, dxf, gds, outline, record } from './read.ts';

/** What paths, lines, holes, units and layers of a drawing become; one drawing unit is a micrometre. */

const um = 1000;

test('paths with a width are channels as they stand, tapered edges too', () => {
  const { chip } = chipOf(
    dxf([
      ...[
        0,
        'LWPOLYLINE',
        8,
        'A',
        90,
        3,
        70,
        0,
        43,
        80,
        10,
        1000,
        20,
        1000,
        10,
        5000,
        20,
        1000,
        10,
        5000,
        20,
        4000,
      ],
      ...[0, 'LWPOLYLINE', 8, 'A', 90, 2, 70, 0, 10, 1000, 20, 6000, 40, 100, 41, 50, 10, 3000, 20, 6000],
    ]),
  );
  expect(chip.channels.map(({ path, width }) => ({ path, width }))).toEqual([
    {
      path: [
        [1000 * um, 1000 * um],
        [5000 * um, 1000 * um],
        [5000 * um, 4000 * um],
      ],
      width: [80 * um, 80 * um],
    },
    {
      path: [
        [1000 * um, 6000 * um],
        [3000 * um, 6000 * um],
      ],
      width: [100 * um, 50 * um],
    },
  ]);
});

test('lines without a width wait for one: listed without, channels with', () => {
  const line = dxf([
    0,
    'LINE',
    8,
    'A',
    10,
    1000,
    20,
    1000,
    11,
    5000,
    21,
    1000,
    ...outline(
      [
        [1000, 2000],
        [5000, 2000],
        [5000, 2100],
        [1000, 2100],
      ],
      'A',
    ),
  ]);
  const without = chipOf(line);
  expect(without.chip.channels).toHaveLength(1);
  expect(without.report.notUnderstood.map(({ what, count }) => [what, count])).toEqual([
    ['open lines without a width (give one to make them channels)', 1],
  ]);
  const given = chipOf(line, { lineWidth: 60 * um });
  expect(given.chip.channels.map(({ width }) => width[0])).toEqual([60 * um, 100 * um]);
  expect(given.report.notUnderstood).toEqual([]);
});

test('holes are ports where there is fluid under them, an outline is the edge', () => {
  const { chip, report } = chipOf(
    dxf([
      ...outline([
        [1000, 1000],
        [9000, 1000],
        [9000, 1100],
        [1000, 1100],
      ]),
      ...[0, 'CIRCLE', 8, 'HOLES', 10, 1000, 20, 1050, 40, 400],
      ...[0, 'CIRCLE', 8, 'HOLES', 10, 5000, 20, 4000, 40, 400],
      ...outline(
        [
          [-1000, -1000],
          [11000, -1000],
          [11000, 5000],
          [-1000, 5000],
        ],
        'OUTLINE',
      ),
    ]),
  );
  expect(chip.outline).toEqual({ width: 12000 * um, height: 6000 * um });
  expect(chip.ports.map(({ at, diameter, drive }) => ({ at, diameter, drive }))).toEqual([
    { at: [2000 * um, 2050 * um], diameter: 800 * um, drive: { kind: 'pressure', pressure: 0 } },
  ]);
  expect(report.notUnderstood.map(({ what }) => what)).toEqual(['holes with no fluid under them']);
});

test('units matter: the same drawing in micrometres, millimetres, and unknown', () => {
  const box = outline([
    [1, 1],
    [9, 1],
    [9, 1.1],
    [1, 1.1],
  ]);
  const width = (unit: number, given: number | null = null) =>
    chipOf(dxf(box, [], unit), { unit: given }).chip.channels[0].width[0];
  expect(width(4)).toBe(100 * um);
  expect(width(13)).toBe(100);
  expect(width(13, 1e-3)).toBe(100 * um);
  expect(() => width(0)).toThrow(
    expect.objectContaining({ what: expect.stringContaining('does not say what its numbers are in') }),
  );
  expect(width(0, 1e-6)).toBe(100);
});

test('two layers of the drawing on one of the chip are one cavity; two depths for it are refused', () => {
  const file = dxf([
    ...outline(
      [
        [1000, 1000],
        [5000, 1000],
        [5000, 1100],
        [1000, 1100],
      ],
      'A',
    ),
    ...outline(
      [
        [4000, 1000],
        [9000, 1000],
        [9000, 1100],
        [4000, 1100],
      ],
      'B',
    ),
  ]);
  const role = (depth: number) => ({ kind: 'cavity', depth, layer: 'flow' }) as const;
  const { chip } = chipOf(file, { roles: { A: role(50_000), B: role(50_000) } });
  expect(chip.layers.map(({ id }) => id)).toEqual(['flow']);
  expect(chip.channels).toHaveLength(1);
  expect(() => chipOf(file, { roles: { A: role(50_000), B: role(20_000) } })).toThrow(
    expect.objectContaining({ what: 'Layer "flow" of the chip is given two depths.' }),
  );
  expect(() => chipOf(file, { roles: { C: { kind: 'holes' } } })).toThrow(
    expect.objectContaining({ what: 'The drawing has no layer "C".' }),
  );
});

/** A GDSII path of a width with the ends of its type, nm. */
const gdsPath = (width: number, xy: readonly number[], type = 1): number[] => [
  ...record(0x09, 0),
  ...record(0x0d, 2, [1]),
  ...record(0x0e, 2, [0]),
  ...record(0x21, 2, [type]),
  ...record(0x0f, 3, [width]),
  ...record(0x10, 3, xy),
  ...record(0x11, 0),
];

test('round ends of paths: half a disc beyond a free end, as the hole of its port or as a chamber', () => {
  const one = gds({ TOP: [gdsPath(100_000, [1e6, 1e6, 3e6, 1e6])] });
  const { chip, report } = chipOf(one);
  expect(report.notUnderstood).toEqual([]);
  expect(chip.channels.map(({ path }) => path)).toEqual([
    [
      [1e6, 1e6],
      [3e6, 1e6],
    ],
  ]);
  expect(chip.ports.map(({ at, diameter }) => [at, diameter])).toEqual([
    [[1e6, 1e6], 100_000],
    [[3e6, 1e6], 100_000],
  ]);
  // 2 mm by 0.1 mm and a disc of 0.1 mm; its chords lie within 20 nm of it.
  const [{ deviation }] = report.chipLayers;
  const area = 2 * 0.1 + (Math.PI * 0.1 ** 2) / 4;
  expect(Math.abs(deviation!.area * 1e6 - area)).toBeLessThan(20e-6 * Math.PI * 0.1);
  expect(deviation!.furthest).toBeLessThan(0.05e-6);
  const bare = chipOf(one, { portsAtEnds: false });
  expect(bare.chip.chambers).toHaveLength(2);
  expect(bare.report.chipLayers[0]!.deviation!.furthest).toBeLessThan(0.05e-6);
});

test('round ends inside another channel, in a region or on the end of another path are no holes', () => {
  const { chip } = chipOf(
    gds({
      TOP: [
        gdsPath(200_000, [1e6, 1e6, 5e6, 1e6], 0),
        gdsPath(100_000, [2e6, 1e6, 2e6, 3e6]),
        gdsPath(100_000, [2e6, 3e6, 4e6, 3e6]),
        gdsPath(100_000, [4e6, 3e6, 6e6, 5e6]),
        boundary([5.5e6, 4.5e6, 7.5e6, 4.5e6, 7.5e6, 6.5e6, 5.5e6, 6.5e6]),
      ],
    }),
  );
  expect(chip.ports.map(({ diameter }) => diameter)).toEqual([0, 0]);
  expect(chip.chambers).toHaveLength(1);
});

test('round and square ends of strokes', () => {
  const stroke = (cap: string): string =>
    `<svg width="10mm" height="10mm" viewBox="0 0 10000 10000"><g id="flow"><path d="M1000 5000h4000" fill="none" stroke="#000" stroke-width="100" stroke-linecap="${cap}"/></g></svg>`;
  const [round, square, butt] = ['round', 'square', 'butt'].map((cap) => chipOf(stroke(cap)));
  const reach = ({ chip }: typeof round): number[] => chip.channels[0]!.path.map(([x]) => x);
  expect(reach(butt!)).toEqual([1e6, 5e6]);
  expect(reach(square!)).toEqual([0.95e6, 5.05e6]);
  expect(reach(round!)).toEqual([1e6, 5e6]);
  expect(round!.chip.ports.map(({ diameter }) => diameter)).toEqual([100_000, 100_000]);
  for (const { report } of [round!, square!, butt!]) expect(report.notUnderstood).toEqual([]);
});
