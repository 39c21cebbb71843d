import { expect, test } from 'vitest';
import { drawingOf, layerOf, rounded } from './read.ts';

/** SVG 1.1 by its standard (W3C, from memory); y runs down there and up here. */

const svg = (inner: string, head = 'width="20mm" height="10mm" viewBox="0 0 2000 1000"'): string =>
  `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" ${head}>${inner}</svg>`;

const loops = (inner: string) =>
  drawingOf(svg(inner)).layers.flatMap(({ regions }) => regions.flatMap((r) => r.loops.map(rounded)));

test('page and box say the unit: 20 mm for 2000 is 10 µm', () => {
  const drawing = drawingOf(svg('<rect x="100" y="200" width="300" height="400"/>'));
  expect(drawing.unit).toBeCloseTo(10e-6, 15);
  expect(drawing.page).toEqual({ width: 2000, height: 1000 });
  // y turned up: 1000 - 200 = 800.
  expect(rounded(drawing.layers[0].regions[0].loops[0])).toEqual([
    100, 800, 0, 400, 800, 0, 400, 400, 0, 100, 400, 0,
  ]);
});

test('an inch is 25.4 mm, a point its 72nd; pixels and percentages say nothing of the chip', () => {
  const unit = (head: string) => drawingOf(svg('<circle r="1"/>', head)).unit;
  expect(unit('width="1in" viewBox="0 0 1000 1000"')).toBeCloseTo(25.4e-6, 15);
  expect(unit('width="72pt" height="72pt" viewBox="0 0 1000 1000"')).toBeCloseTo(25.4e-6, 15);
  expect(unit('width="300px" height="200px"')).toBeNull();
  expect(unit('width="100%" viewBox="0 0 10 10"')).toBeNull();
});

test('a page fitted to a box of other proportions takes the smaller scale', () => {
  expect(
    drawingOf(svg('<circle r="1"/>', 'width="20mm" height="10mm" viewBox="0 0 1000 1000"')).unit,
  ).toBeCloseTo(1e-5, 15);
});

test('without a box a user unit is a pixel, 1/96 in by CSS, whatever the page is told in', () => {
  const drawing = drawingOf(svg('<rect width="96" height="1"/>', 'width="2in" height="1in"'));
  expect(drawing.unit).toBeCloseTo(0.0254 / 96, 15);
  expect(drawing.page).toEqual({ width: 192, height: 96 });
  expect(drawing.unitSays).toMatch(/2in by 1in; it has no viewBox.* 1\/96 in/);
});

test('lengths in units within a drawing are pixels of 1/96 in; those relative to the page are listed', () => {
  const drawing = drawingOf(
    svg(
      '<rect width="1in" height="2.54cm"/><line x2="12pt" stroke="#000" stroke-width="1pc"/><rect width="50%" height="1"/>',
    ),
  );
  expect(rounded(drawing.layers[0].regions[0].loops[0])).toEqual([
    0, 1000, 0, 96, 1000, 0, 96, 904, 0, 0, 904, 0,
  ]);
  const [track] = drawing.layers[0].tracks;
  expect([...rounded(track.vertices), ...track.widths]).toEqual([0, 1000, 0, 16, 1000, 0, 16, 16]);
  expect(drawing.notUnderstood.map(({ what }) => what)).toEqual(['shapes with lengths in other units']);
});

test('symbols and inner pages are fitted to their boxes, by the smaller scale in the middle unless told else', () => {
  const symbol = (how: string, use: string) =>
    loops(
      `<defs><symbol id="s" viewBox="10 0 10 10" ${how}><path d="M10 0h10v10z"/></symbol></defs><use href="#s" ${use}/>`,
    );
  // 10 by 10 into 40 by 20: scale 2, 10 to the right; then y turned up
  expect(symbol('', 'x="5" y="100" width="40" height="20"')).toEqual([[15, 900, 0, 35, 900, 0, 35, 880, 0]]);
  expect(symbol('preserveAspectRatio="xMaxYMin meet"', 'width="40" height="20"')).toEqual([
    [20, 1000, 0, 40, 1000, 0, 40, 980, 0],
  ]);
  expect(symbol('preserveAspectRatio="none"', 'width="40" height="20"')).toEqual([
    [0, 1000, 0, 40, 1000, 0, 40, 980, 0],
  ]);
  expect(
    loops('<svg x="1" y="2" width="20" height="20" viewBox="0 0 10 10"><path d="M0 0h10v10z"/></svg>'),
  ).toEqual([[1, 998, 0, 21, 998, 0, 21, 978, 0]]);
});

test('dashes, round corners and strokes that do not scale are told', () => {
  const drawing = drawingOf(
    svg(
      '<g stroke="#000" fill="none"><path d="M0 0h9v9" stroke-dasharray="2 1"/><path d="M0 0h9v9" stroke-linejoin="round"/><path d="M0 0h9" vector-effect="non-scaling-stroke"/><path d="M0 0h9" stroke-dasharray="0"/></g>',
    ),
  );
  expect(drawing.notUnderstood.map(({ what, count }) => `${count} ${what}`)).toEqual([
    '1 dashed strokes (taken without gaps)',
    '1 strokes that do not scale (taken as scaled)',
  ]);
  expect(drawing.assumed.join()).toMatch(/mitred/);
});

test('path data: relative and absolute, closed and reopened, arcs kept true', () => {
  expect(loops('<path d="M100 100h200v100H100z m0 300l100 0 0 50z"/>')).toEqual([
    [100, 900, 0, 300, 900, 0, 300, 800, 0, 100, 800, 0],
    [100, 600, 0, 200, 600, 0, 200, 550, 0],
  ]);
  // A half circle of radius 50 clockwise on the screen, in two quarters of bulge tan(22.5 deg), mirrored.
  const [half] = loops('<path d="M100 100a50 50 0 0 1 100 0z"/>');
  const bulge = Math.round(-Math.tan(Math.PI / 8) * 1e6) / 1e6;
  expect(half).toEqual([100, 900, bulge, 150, 950, bulge, 200, 900, 0]);
});

test('a cubic lies on its curve', () => {
  // Control points on a line at thirds: x = 300 t, and y = 3 t (1 - t)^2 * 90 + 3 t^2 (1 - t) * 90 = 270 t (1 - t).
  const [curve] = loops('<path d="M0 0C100 90 200 90 300 0z"/>');
  expect(curve.length).toBeGreaterThan(60);
  for (let k = 0; k < curve.length; k += 3) {
    const t = curve[k] / 300;
    expect(1000 - curve[k + 1]).toBeCloseTo(270 * t * (1 - t), 4);
  }
});

test('transforms apply from the inside out; a mirror turns arcs round', () => {
  expect(loops('<g transform="translate(100 0)"><path transform="scale(2)" d="M0 0h10v10z"/></g>')).toEqual([
    [100, 1000, 0, 120, 1000, 0, 120, 980, 0],
  ]);
  expect(loops('<circle transform="rotate(90 10 0)" cx="20" r="1"/>')).toEqual([[10, 991, -1, 10, 989, -1]]);
});

test('strokes without a fill are paths of that width, in the group named', () => {
  const drawing = drawingOf(
    svg(
      '<style>.c{fill:none;stroke:#000}</style><g id="flow" stroke-width="3"><polyline class="c" points="0,0 10,0 10,10"/></g>',
    ),
  );
  const [track] = layerOf(drawing, 'flow').tracks;
  expect(rounded(track.vertices)).toEqual([0, 1000, 0, 10, 1000, 0, 10, 990, 0]);
  expect([...track.widths]).toEqual([3, 3, 3, 3]);
});

test('what is used again is placed again, with what is white in a layer of its own', () => {
  const drawing = drawingOf(
    svg(
      '<defs><rect id="rect1" width="10" height="10"/></defs><use xlink:href="#rect1" x="5"/><use href="#rect1" fill="white"/>',
    ),
  );
  expect(drawing.layers.map(({ name, regions }) => [name, regions.length])).toEqual([
    ['drawing', 1],
    ['drawing (white)', 1],
  ]);
});

test('a shape with a name of its own is a layer of that name; names that programs give are none', () => {
  const drawing = drawingOf(
    svg('<g id="all"><rect id="FLOW" width="1" height="1"/><rect id="rect12" width="1" height="1"/></g>'),
  );
  expect(drawing.layers.map(({ name }) => name)).toEqual(['FLOW', 'all']);
});

test('text, pictures, hidden things and clips are listed', () => {
  const { notUnderstood } = drawingOf(
    svg(
      '<text>a</text><image/><rect width="1" height="1" display="none"/><rect clip-path="url(#c)" width="1" height="1"/>',
    ),
  );
  expect(notUnderstood.map(({ what }) => what)).toEqual([
    '<text>',
    '<image>',
    'elements that are not displayed',
    'clip-path (drawn without it)',
  ]);
});

test.each([
  [
    'entities',
    '<!DOCTYPE svg [<!ENTITY a SYSTEM "file:///etc/passwd">]><svg>&a;</svg>',
    'entities of its own',
  ],
  ['outside', '<!DOCTYPE svg [<!ENTITY % a SYSTEM "http://127.0.0.1/">%a;]><svg/>', 'entities of its own'],
  ['broken', '<svg><g></svg>', 'not well-formed'],
  ['undefined', '<svg>&nothing;</svg>', 'not well-formed'],
  ['another', '<html/>', 'not an SVG'],
  ['itself', svg('<g id="a"><use href="#a"/></g>'), 'holds a reference to itself'],
])('%s: refused by name', (_, text, what) => {
  expect(() => drawingOf(text)).toThrow(
    expect.objectContaining({ name: 'Problem', what: expect.stringContaining(what) }),
  );
});
