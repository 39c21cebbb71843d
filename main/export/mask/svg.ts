import { curve } from '../../../solver/chip/geometry/curve.ts';
import { TextBytes } from './bytes.ts';
import { legend, PARTS, shifts } from './cells.ts';
import { dxfLayer } from './dxf.ts';
import { cutLoops, type Loops } from './loops.ts';
import { mm, putMm } from './millimetres.ts';
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
  const out = new SvgText();
  out.put(
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" version="1.1" width="${width}mm" height="${height}mm" viewBox="${mm(box.x0)} ${mm(-box.y1)} ${width} ${height}">`,
    `<title>${xml(model.title)}</title>`,
    `<desc>${xml(about.join('\n'))}</desc>`,
    rect('plate', plate.x0, plate.y1, plate.x1 - plate.x0, plate.y1 - plate.y0, ground),
    model.wafer ? '<defs><g id="CHIP">' : '<g id="CHIP">',
  );
  putChip(out, model, plane, ink, letters);
  out.put(model.wafer ? '</g></defs>' : '</g>');
  if (model.wafer) {
    for (const [x, y] of shifts(model)) out.put(`<use xlink:href="#CHIP" x="${mm(x)}" y="${mm(-y)}"/>`);
  }
  if (bar) {
    out.put(rect('bar', bar.x, bar.y + bar.height, bar.length, bar.height, '#000'));
    out.put(`<g font-family="DejaVu Sans, sans-serif" font-size="${mm(letters)}" fill="#000">`);
    out.put(textAt(bar.x + bar.length + letters, bar.y, '10 mm'));
    for (const { text, x, y } of lines) out.put(textAt(x, y, text));
    out.put('</g>');
  }
  out.put('</svg>');
  return out.text();
}

/** Lines of an SVG file. */
class SvgText {
  readonly bytes = new TextBytes();

  put(...lines: readonly string[]): void {
    for (const line of lines) {
      this.bytes.text(line);
      this.bytes.ascii('\n');
    }
  }

  text(): string {
    return this.bytes.toString();
  }
}

function putChip(out: SvgText, model: MaskModel, plane: MaskPlane, ink: string, letters: number): void {
  for (const part of PARTS) {
    if (plane[part].length === 0) continue;
    // the lane's inner side is the outline already
    const line = plane.lane.length > 0 ? 'none' : ink;
    const paint =
      part === 'outline'
        ? `fill="none" stroke="${line}" stroke-width="${HAIRLINE}"`
        : `fill="${ink}" fill-rule="evenodd"`;
    out.bytes.text(`<path id="${dxfLayer(plane, part)}" ${paint} d="`);
    putLoops(out.bytes, cutLoops(plane[part], SVG_ARC));
    out.put('"/>');
  }
  // names would be exposed with a layer; on the drawing of holes they tell which is which
  if (model.settings.labels && plane.kind === 'holes' && plane.labels.length > 0) {
    out.put(`<g font-family="DejaVu Sans, sans-serif" font-size="${mm(letters)}" fill="${ink}">`);
    for (const { text, x, y, ends } of plane.labels)
      out.put(textAt(x + (ends ? -letters : letters), y + letters, text, ends));
    out.put('</g>');
  }
}

function rect(id: string, left: number, top: number, width: number, height: number, fill: string): string {
  return `<rect id="${id}" x="${mm(left)}" y="${mm(-top)}" width="${mm(width)}" height="${mm(height)}" fill="${fill}"/>`;
}

const textAt = (x: number, y: number, text: string, ends = false): string =>
  `<text x="${mm(x)}" y="${mm(-y)}"${ends ? ' text-anchor="end"' : ''}>${xml(text)}</text>`;

function putLoops(out: TextBytes, loops: Loops): void {
  const { x, y, bulge } = loops;
  let from = 0;
  for (const end of loops.ends) {
    out.ascii('M');
    putPoint(out, x[from]!, y[from]!);
    for (let k = from; k < end; k++) {
      const last = k + 1 === end;
      const next = last ? from : k + 1;
      const bend = bulge[k]!;
      if (bend !== 0) {
        putArc(out, Math.abs(1 / curve(x[k]!, y[k]!, x[next]!, y[next]!, bend).curvature), bend);
        putPoint(out, x[next]!, y[next]!);
      } else if (!last) {
        out.ascii('L');
        putPoint(out, x[next]!, y[next]!);
      }
    }
    out.ascii('Z');
    from = end;
  }
}

function putArc(out: TextBytes, radius: number, bulge: number): void {
  out.ascii('A');
  putMm(out, radius);
  out.ascii(' ');
  putMm(out, radius);
  // counter-clockwise in the plan is against the angles of a page whose y runs down
  out.ascii(bulge > 0 ? ' 0 0 0 ' : ' 0 0 1 ');
}

function putPoint(out: TextBytes, x: number, y: number): void {
  putMm(out, x);
  out.ascii(' ');
  putMm(out, -y);
}
