import { expect, test } from 'vitest';
import { drawingOf, dxf, layerOf, outline, rounded } from './read.ts';

/**
 * DXF by its published structure: pairs of group code and value; the geometry is worked by hand. Codes as in
 * the vendor's reference: 10/20 a point, 42 the bulge (tangent of a quarter of the sweep), 50/51 degrees.
 */

test('a closed polyline is a region, with the bulges of its arcs', () => {
  const drawing = drawingOf(
    dxf(
      outline([
        [0, 0, 1],
        [10, 0],
        [10, 5],
        [0, 5],
      ]),
    ),
  );
  expect(drawing.unit).toBeCloseTo(1e-6, 15);
  expect(rounded(layerOf(drawing, 'FLOW').regions[0].loops[0])).toEqual([
    0, 0, 1, 10, 0, 0, 10, 5, 0, 0, 5, 0,
  ]);
});

test('units: micrometres, millimetres, inches; none where the file says none', () => {
  const box = outline([
    [0, 0],
    [1, 0],
    [1, 1],
  ]);
  expect(drawingOf(dxf(box, [], 4)).unit).toBeCloseTo(1e-3, 15);
  expect(drawingOf(dxf(box, [], 1)).unit).toBeCloseTo(0.0254, 15);
  expect(drawingOf(dxf(box, [], 0)).unit).toBeNull();
  expect(drawingOf(dxf(box, [], 7)).unit).toBeNull();
});

test('a polyline with a width is a path, with the widths of each edge', () => {
  const drawing = drawingOf(
    dxf([
      0,
      'LWPOLYLINE',
      8,
      'A',
      90,
      3,
      70,
      0,
      43,
      2,
      10,
      0,
      20,
      0,
      10,
      5,
      20,
      0,
      40,
      2,
      41,
      4,
      10,
      9,
      20,
      0,
    ]),
  );
  const [track] = layerOf(drawing, 'A').tracks;
  expect([...track.widths]).toEqual([2, 2, 2, 4]);
  expect(track.closed).toBe(false);
});

test('an old POLYLINE with VERTEX entities reads like a new one', () => {
  const vertex = (x: number, y: number, bulge = 0) => [0, 'VERTEX', 8, 'A', 10, x, 20, y, 42, bulge];
  const drawing = drawingOf(
    dxf([
      0,
      'POLYLINE',
      8,
      'A',
      66,
      1,
      70,
      1,
      ...vertex(0, 0),
      ...vertex(4, 0, 0.5),
      ...vertex(4, 4),
      0,
      'SEQEND',
    ]),
  );
  expect(rounded(layerOf(drawing, 'A').regions[0].loops[0])).toEqual([0, 0, 0, 4, 0, 0.5, 4, 4, 0]);
});

test('loose lines and arcs that meet end to end become one region, whatever their direction', () => {
  // A slot: two lines of 10, two half circles of radius 2.
  const drawing = drawingOf(
    dxf([
      ...[0, 'LINE', 8, 'A', 10, 0, 20, 0, 11, 10, 21, 0],
      ...[0, 'LINE', 8, 'A', 10, 0, 20, 4, 11, 10, 21, 4],
      ...[0, 'ARC', 8, 'A', 10, 10, 20, 2, 40, 2, 50, 270, 51, 90],
      ...[0, 'ARC', 8, 'A', 10, 0, 20, 2, 40, 2, 50, 90, 51, 270],
    ]),
  );
  const { regions, lines } = layerOf(drawing, 'A');
  expect(lines).toHaveLength(0);
  expect(regions).toHaveLength(1);
  expect(area(regions[0].loops[0])).toBeCloseTo(40 + Math.PI * 4, 9);
});

test('lines that do not close stay lines, in one piece', () => {
  const drawing = drawingOf(
    dxf([0, 'LINE', 8, 'A', 10, 0, 20, 0, 11, 10, 21, 0, 0, 'LINE', 8, 'A', 10, 10, 20, 8, 11, 10, 21, 0]),
  );
  const { regions, lines } = layerOf(drawing, 'A');
  expect(regions).toHaveLength(0);
  expect(lines.map(({ vertices }) => rounded(vertices))).toEqual([[0, 0, 0, 10, 0, 0, 10, 8, 0]]);
});

test('a block is placed with its base point, scale, turn and rows; layer 0 takes the layer it is placed on', () => {
  const block = [
    0,
    'BLOCK',
    8,
    0,
    2,
    'B',
    10,
    1,
    20,
    1,
    ...outline(
      [
        [1, 1],
        [3, 1],
        [3, 2],
      ],
      '0',
    ),
    0,
    'ENDBLK',
  ];
  const drawing = drawingOf(
    dxf([0, 'INSERT', 8, 'A', 2, 'B', 10, 100, 20, 0, 41, 2, 42, 2, 50, 90, 70, 2, 71, 1, 44, 10], block),
  );
  // Less the base point, twice the size, a quarter turn, then to (100, 0); the second one 10 along the turned row.
  expect(layerOf(drawing, 'A').regions.map(({ loops }) => rounded(loops[0]))).toEqual([
    [100, 0, 0, 100, 4, 0, 98, 4, 0],
    [100, 10, 0, 100, 14, 0, 98, 14, 0],
  ]);
});

test('a mirrored block turns its arcs the other way', () => {
  const block = [
    0,
    'BLOCK',
    2,
    'B',
    10,
    0,
    20,
    0,
    ...outline(
      [
        [0, 0, 0.3],
        [2, 0],
        [2, 2],
      ],
      '0',
    ),
    0,
    'ENDBLK',
  ];
  const drawing = drawingOf(dxf([0, 'INSERT', 8, 'A', 2, 'B', 10, 0, 20, 0, 41, -1], block));
  expect(rounded(layerOf(drawing, 'A').regions[0].loops[0])).toEqual([0, 0, -0.3, -2, 0, 0, -2, 2, 0]);
});

test('ellipse and spline lie on the curve they stand for', () => {
  const drawing = drawingOf(
    dxf([
      ...[0, 'ELLIPSE', 8, 'E', 10, 5, 20, 5, 11, 4, 21, 0, 40, 0.5, 41, 0, 42, 2 * Math.PI],
      // A quadratic spline of one span is a parabola: from (0, 0) over (1, 2) to (2, 0), y = 2 x - x^2.
      ...[0, 'SPLINE', 8, 'S', 70, 0, 71, 2, 40, 0, 40, 0, 40, 0, 40, 1, 40, 1, 40, 1],
      ...[10, 0, 20, 0, 10, 1, 20, 2, 10, 2, 20, 0],
    ]),
  );
  const [ellipse] = layerOf(drawing, 'E').regions[0].loops;
  for (let k = 0; k < ellipse.length; k += 3) {
    expect(((ellipse[k] - 5) / 4) ** 2 + ((ellipse[k + 1] - 5) / 2) ** 2).toBeCloseTo(1, 9);
  }
  // Chords take a little off, and no more than the tolerance times the boundary.
  expect(Math.PI * 8 - area(ellipse)).toBeGreaterThan(0);
  expect(Math.PI * 8 - area(ellipse)).toBeLessThan(4e-5 * 20);
  const [{ vertices }] = layerOf(drawing, 'S').lines;
  for (let k = 0; k < vertices.length; k += 3) {
    expect(vertices[k + 1]).toBeCloseTo(2 * vertices[k] - vertices[k] ** 2, 9);
  }
});

test('a hatch gives its boundaries, holes by even and odd', () => {
  const drawing = drawingOf(
    dxf([
      ...[0, 'HATCH', 8, 'H', 10, 0, 20, 0, 30, 0, 2, 'SOLID', 70, 1, 71, 0, 91, 2],
      ...[92, 3, 72, 0, 73, 1, 93, 4, 10, 0, 20, 0, 10, 9, 20, 0, 10, 9, 20, 9, 10, 0, 20, 9, 97, 0],
      ...[92, 16, 93, 1, 72, 2, 10, 4, 20, 4, 40, 2, 50, 0, 51, 360, 73, 1, 97, 0, 75, 1, 76, 1],
    ]),
  );
  const [{ loops, fill }] = layerOf(drawing, 'H').regions;
  expect(fill).toBe('even-odd');
  expect(loops.map((loop) => Math.round(area(loop) * 1e9) / 1e9)).toEqual([
    81,
    Math.round(4e9 * Math.PI) / 1e9,
  ]);
});

test('a hatch bounded by a spline, with and without the points that it was fitted to', () => {
  // The parabola from (2, 1) over (1, 3) to (0, 1) stands 2/3 of 2 x 1 above the square below it.
  const head = [0, 'HATCH', 8, 'H', 10, 0, 20, 0, 30, 0, 2, 'SOLID', 70, 1, 71, 0, 91, 1, 92, 1, 93, 4];
  const lines = [
    ...[
      72, 1, 10, 0, 20, 1, 11, 0, 21, 0, 72, 1, 10, 0, 20, 0, 11, 2, 21, 0, 72, 1, 10, 2, 20, 0, 11, 2, 21, 1,
    ],
    ...[72, 4, 94, 2, 73, 0, 74, 0, 95, 6, 96, 3, 40, 0, 40, 0, 40, 0, 40, 1, 40, 1, 40, 1],
    ...[10, 2, 20, 1, 10, 1, 20, 3, 10, 0, 20, 1],
  ];
  for (const rest of [
    [97, 1, 330, 'A1', 75, 1, 76, 1],
    [97, 0, 75, 1, 76, 1],
    [97, 2, 11, 2, 21, 1, 11, 0, 21, 1, 12, -1, 22, 2, 13, -1, 23, -2, 97, 0, 75, 1, 76, 1],
  ]) {
    const drawing = drawingOf(dxf([...head, ...lines, ...rest]));
    expect(drawing.notUnderstood).toEqual([]);
    expect(Math.abs(area(layerOf(drawing, 'H').regions[0].loops[0]))).toBeCloseTo(2 + 4 / 3, 4);
  }
});

test('an axis that points down mirrors what is told in axes of its own, and only the turn of an ellipse', () => {
  const down = [210, 0, 220, 0, 230, -1];
  const drawing = drawingOf(
    dxf([
      ...[0, 'ELLIPSE', 8, 'E', 10, 0, 20, 0, 11, 4, 21, 0, ...down, 40, 0.5, 41, 0, 42, Math.PI / 2],
      ...[0, 'SPLINE', 8, 'S', ...down, 70, 8, 71, 1, 40, 0, 40, 0, 40, 1, 40, 1, 10, 1, 20, 2, 10, 3, 20, 5],
      ...[0, 'CIRCLE', 8, 'C', 10, 5, 20, 5, 40, 1, ...down],
      ...[0, 'ELLIPSE', 8, 'E', 10, 0, 20, 0, 11, 4, 21, 0, 210, 1, 220, 0, 230, 0, 40, 0.5],
    ]),
  );
  // From the half axis (4, 0) clockwise, as it is seen from above, to (0, -2).
  const { vertices } = layerOf(drawing, 'E').lines[0];
  expect(rounded(vertices.slice(-3))).toEqual([0, -2, 0]);
  expect(rounded(layerOf(drawing, 'S').lines[0].vertices.slice(0, 3))).toEqual([1, 2, 0]);
  expect(rounded(layerOf(drawing, 'C').regions[0].loops[0])).toEqual([-4, 5, -1, -6, 5, -1]);
  expect(drawing.notUnderstood.map(({ what }) => what)).toEqual(['ELLIPSE tilted out of the plan']);
});

test('what the file does not show is listed; what belongs to an entity is left out with it', () => {
  const drawing = drawingOf(
    dxf(
      [
        ...[0, 'CIRCLE', 8, 'A', 60, 1, 10, 0, 20, 0, 40, 1],
        ...[0, 'POLYLINE', 8, 'A', 60, 1, 66, 1, 0, 'VERTEX', 8, 'A', 10, 0, 20, 0],
        ...[0, 'VERTEX', 8, 'A', 10, 1, 20, 0, 0, 'SEQEND', 8, 'A'],
        ...[0, 'INSERT', 8, 'A', 66, 1, 2, 'B', 10, 0, 20, 0, 0, 'ATTRIB', 8, 'A', 1, 'name'],
        ...[0, 'SEQEND', 8, 'A', 0, 'CIRCLE', 8, 'frozen', 10, 0, 20, 0, 40, 1],
      ],
      [0, 'BLOCK', 2, 'B', 10, 0, 20, 0, 0, 'CIRCLE', 8, '0', 10, 0, 20, 0, 40, 1, 0, 'ENDBLK'],
    ).replace(
      '0\nSECTION\n2\nBLOCKS',
      `${[0, 'SECTION', 2, 'TABLES', 0, 'TABLE', 2, 'LAYER', 70, 2, 0, 'LAYER', 2, 'A', 70, 0, 62, 3, 0, 'LAYER', 2, 'Frozen', 70, 1, 62, 7, 0, 'ENDTAB', 0, 'ENDSEC'].join('\n')}\n0\nSECTION\n2\nBLOCKS`,
    ),
  );
  expect(drawing.notUnderstood.map(({ what, count }) => `${count} ${what}`)).toEqual([
    '1 CIRCLE that the file does not show',
    '1 POLYLINE that the file does not show',
    '1 ATTRIB',
  ]);
  expect(layerOf(drawing, 'A').regions).toHaveLength(1);
  expect(drawing.assumed).toEqual([
    'The layer "frozen" is off or frozen in the file; it was taken like the others.',
  ]);
});

test('names of layers: escapes of signs, and the code page that the header names', () => {
  const circle = (layer: string) => dxf([0, 'CIRCLE', 8, layer, 10, 0, 20, 0, 40, 1]);
  expect(drawingOf(circle('\\U+03C4 \\U+5C64')).layers[0].name).toBe('τ 層');
  // Windows 1253: 0xF4 is the Greek letter tau
  const page = circle('?').replace('$INSUNITS', '$DWGCODEPAGE\n3\nANSI_1253\n9\n$INSUNITS');
  const bytes = new TextEncoder().encode(page);
  bytes[bytes.indexOf(63)] = 0xf4;
  expect(drawingOf(bytes).layers[0].name).toBe('τ');
});

test('what is not understood is listed with its line, nothing is dropped silently', () => {
  const drawing = drawingOf(
    dxf([0, 'TEXT', 8, 'T', 1, 'a', 0, 'TEXT', 8, 'T', 1, 'b', 0, 'INSERT', 8, 'A', 2, 'NO', 10, 0, 20, 0]),
  );
  expect(drawing.notUnderstood).toEqual([
    { what: 'TEXT', count: 2, where: 'line 15' },
    { what: 'references to the block "NO", which the file does not hold', count: 1, where: 'line 27' },
  ]);
});

test.each([
  [
    'a value that is no number',
    [0, 'LINE', 8, 'A', 10, 'x', 20, 0, 11, 1, 21, 1],
    'line 20',
    'Group 10 takes a number',
  ],
  ['a point that is missing', [0, 'LINE', 8, 'A', 10, 0, 20, 0, 11, 1], 'line 15', 'A LINE has no group 21'],
])('%s is refused with its line', (_, entity, where, what) => {
  expect(() => drawingOf(dxf(entity))).toThrow(
    expect.objectContaining({ where, what: expect.stringContaining(what) }),
  );
});

test('a block that holds itself is refused by name', () => {
  const block = [0, 'BLOCK', 2, 'B', 10, 0, 20, 0, 0, 'INSERT', 8, 0, 2, 'B', 10, 1, 20, 1, 0, 'ENDBLK'];
  expect(() => drawingOf(dxf([0, 'INSERT', 8, 'A', 2, 'B', 10, 0, 20, 0], block))).toThrow(
    expect.objectContaining({ kind: 'reference', what: 'The block "B" holds a reference to itself.' }),
  );
});

/** Signed area of a loop, the segments of its arcs included (of a circle of radius r: r² (θ − sin θ) / 2). */
function area(loop: Float64Array): number {
  let sum = 0;
  const n = loop.length / 3;
  for (let i = 0; i < n; i += 1) {
    const [k, j] = [3 * i, 3 * ((i + 1) % n)];
    sum += (loop[k] * loop[j + 1] - loop[j] * loop[k + 1]) / 2;
    if (loop[k + 2] === 0) continue;
    const sweep = 4 * Math.atan(loop[k + 2]);
    const r = Math.hypot(loop[j] - loop[k], loop[j + 1] - loop[k + 1]) / (2 * Math.sin(sweep / 2));
    sum += (r * r * (sweep - Math.sin(sweep))) / 2;
  }
  return sum;
}

test('a closed spline of fit points: four points of a circle give the periodic cubic through them', () => {
  const points = [
    [1000, 0],
    [0, 1000],
    [-1000, 0],
    [0, -1000],
  ].flatMap(([x, y]) => [11, x!, 21, y!]);
  const drawing = drawingOf(dxf([0, 'SPLINE', 8, 'A', 70, 1, 71, 3, 74, 4, ...points]));
  const [loop] = layerOf(drawing, 'A').regions[0]!.loops;
  // By hand: equal spans of parameter 1, m(i-1) + 4 m(i) + m(i+1) = 3 (p(i+1) - p(i-1)) gives m = 1.5 (turned
  // a quarter), so that half way on a span x = y = (1 + 1.5 / 4) / 2 of the radius.
  const half = 1000 * (1 / 2 + 1.5 / 8);
  const nearest = Math.min(
    ...Array.from({ length: loop!.length / 3 }, (_, k) =>
      Math.hypot(loop![3 * k]! - half, loop![3 * k + 1]! - half),
    ),
  );
  expect(nearest).toBeLessThan(1e-6);
  expect(loop!.length / 3).toBeGreaterThan(16);
});
