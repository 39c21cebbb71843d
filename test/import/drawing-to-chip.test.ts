import { expect, test } from 'vitest';
import { chipOf, dxf, outline } from './read.ts';

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
