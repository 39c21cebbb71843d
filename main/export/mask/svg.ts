import { curve } from '../../../solver/chip/geometry/curve.ts';
import { inUnit, metres } from '../../../solver/chip/units.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';
import { legend, PARTS, shifts } from './cells.ts';
import { cutArcs } from './compare.ts';
import { dxfLayer } from './dxf.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { pageOf } from './page.ts';

/**
 * One drawing as SVG 1.1: one user unit is 1 mm (width and height in mm, viewBox the same numbers), y is
 * turned over, arcs are arcs. What is drawn is one even-odd path per part; the chip's paths stand once and
 * are used for every place on a wafer.
 */

/**
 * Arcs are written in pieces of at most a quarter turn: near half a turn the rounding of a radius would move
 * the arc by much more than itself.
 */
export const SVG_ARC = Math.PI / 2;
/** Where there is no lane the outline is a line this wide, mm. */
const HAIRLINE = 0.02;

/** Millimetres to a tenth of a nanometre. */
function mm(nm: number): number {
  const rounded = Number(inUnit(metres(nm), 'mm').toFixed(7));
  return rounded === 0 ? 0 : rounded;
}

/** Text as XML: what XML cannot hold is replaced. */
const xml = (text: string): string =>
  text
    .toWellFormed()
    // biome-ignore lint/suspicious/noControlCharactersInRegex: these are what XML 1.0 does not allow
    .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '\ufffd')
    .replace(/[&<>"]/g, (c) => `&#${c.charCodeAt(0)};`);

export function writeSvg(model: MaskModel): string {
  const [plane] = model.planes;
  if (!plane || model.planes.length > 1) throw new RangeError('SVG holds one drawing');
  const { box, plate, letters, bar, lines } = pageOf(model, plane);
  const [width, height] = [mm(box.x1 - box.x0), mm(box.y1 - box.y0)];
  const dark = model.settings.polarity === 'dark-field';
  const [ground, ink] = dark ? ['#000', '#fff'] : ['#fff', '#000'];
  const about = legend(model, [plane], 'Unit: 1 user unit = 1 mm.', 1000);
  const out = [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" version="1.1" width="${width}mm" height="${height}mm" viewBox="${mm(box.x0)} ${mm(-box.y1)} ${width} ${height}">`,
    `<title>${xml(model.title)}</title>`,
    `<desc>${xml(about.join('\n'))}</desc>`,
    rect('plate', plate.x0, plate.y1, plate.x1 - plate.x0, plate.y1 - plate.y0, ground),
  ];
  const chip = chipPaths(model, plane, ink, letters);
  if (model.wafer) {
    out.push('<defs><g id="CHIP">', ...chip, '</g></defs>');
    for (const [x, y] of shifts(model)) out.push(`<use xlink:href="#CHIP" x="${mm(x)}" y="${mm(-y)}"/>`);
  } else out.push('<g id="CHIP">', ...chip, '</g>');
  if (bar) {
    out.push(rect('bar', bar.x, bar.y + bar.height, bar.length, bar.height, '#000'));
    out.push(`<g font-family="DejaVu Sans, sans-serif" font-size="${mm(letters)}" fill="#000">`);
    out.push(textAt(bar.x + bar.length + letters, bar.y, '10 mm'));
    for (const { text, x, y } of lines) out.push(textAt(x, y, text));
    out.push('</g>');
  }
  out.push('</svg>', '');
  return out.join('\n');
}

function chipPaths(model: MaskModel, plane: MaskPlane, ink: string, letters: number): string[] {
  const out: string[] = [];
  for (const part of PARTS) {
    if (plane[part].length === 0) continue;
    const d = plane[part].map(pathOf).join('');
    // the lane's inner side is the outline already
    const line = plane.lane.length > 0 ? 'none' : ink;
    const paint =
      part === 'outline'
        ? `fill="none" stroke="${line}" stroke-width="${HAIRLINE}"`
        : `fill="${ink}" fill-rule="evenodd"`;
    out.push(`<path id="${dxfLayer(plane, part)}" ${paint} d="${d}"/>`);
  }
  // names would be exposed with a layer; on the drawing of holes they tell which is which
  if (model.settings.labels && plane.kind === 'holes' && plane.labels.length > 0) {
    out.push(`<g font-family="DejaVu Sans, sans-serif" font-size="${mm(letters)}" fill="${ink}">`);
    for (const { text, x, y, ends } of plane.labels)
      out.push(textAt(x + (ends ? -letters : letters), y + letters, text, ends));
    out.push('</g>');
  }
  return out;
}

function rect(id: string, left: number, top: number, width: number, height: number, fill: string): string {
  return `<rect id="${id}" x="${mm(left)}" y="${mm(-top)}" width="${mm(width)}" height="${mm(height)}" fill="${fill}"/>`;
}

const textAt = (x: number, y: number, text: string, ends = false): string =>
  `<text x="${mm(x)}" y="${mm(-y)}"${ends ? ' text-anchor="end"' : ''}>${xml(text)}</text>`;

function pathOf(shape: Shape): string {
  let d = '';
  for (const loop of shape) d += loopOf(cutArcs(loop, SVG_ARC));
  return d;
}

function loopOf(loop: readonly Edge[]): string {
  let d = `M${mm(loop[0]!.x)} ${mm(-loop[0]!.y)}`;
  for (let k = 0; k < loop.length; k++) {
    const e = loop[k]!;
    const last = k + 1 === loop.length;
    const next = loop[last ? 0 : k + 1]!;
    if (e.bulge === 0) {
      if (!last) d += `L${mm(next.x)} ${mm(-next.y)}`;
      continue;
    }
    const r = mm(Math.abs(1 / curve(e.x, e.y, next.x, next.y, e.bulge).curvature));
    // counter-clockwise in the plan is against the angles of a page whose y runs down
    d += `A${r} ${r} 0 0 ${e.bulge > 0 ? 0 : 1} ${mm(next.x)} ${mm(-next.y)}`;
  }
  return `${d}Z`;
}
