import PDFDocument from 'pdfkit';
import { curve } from '../../../solver/chip/geometry/curve.ts';
import { Fonts } from '../note/pdf-fonts.ts';
import { TextBytes } from './bytes.ts';
import { PARTS, shifts } from './cells.ts';
import { dxfLayer } from './dxf.ts';
import { cutLoops, type Loops } from './loops.ts';
import { mm, putMm } from './millimetres.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { type Page, PDF_ARC, POINTS_PER_MM, pageOf } from './page.ts';

/**
 * Drawings as PDF at true size, one page each: filled paths, dark on clear or clear on dark. A chip is a
 * form that is set once or, on a wafer, at every place. Arcs are cubic curves of at most PDF_ARC, which
 * lie within 4e-7 of their radius of the arc. The numbers are millimetres, turned over and scaled by the page.
 */

/** Where there is no lane the outline is a line this wide, mm. */
const HAIRLINE = 0.02;

const WHITE = '1 g 1 G';
const BLACK = '0 g 0 G';

type Doc = InstanceType<typeof PDFDocument>;

export async function writePdf(model: MaskModel): Promise<Uint8Array> {
  const doc = new PDFDocument({
    autoFirstPage: false,
    margin: 0,
    // no standard font: every font that is used is embedded
    font: null as unknown as string,
    info: {
      Title: `${model.title}: masks`,
      Creator: `Channelwright ${model.version}`,
      Producer: 'Channelwright',
      CreationDate: model.made,
    },
  });
  const chunks: Buffer[] = [];
  doc.on('data', (chunk: Buffer) => chunks.push(chunk));
  const ended = new Promise<void>((done, fail) => {
    doc.on('end', done);
    doc.on('error', fail);
  });
  const fonts = new Fonts(doc);
  for (const plane of model.planes) addPage(doc, fonts, model, plane);
  doc.end();
  await ended;
  return new Uint8Array(Buffer.concat(chunks));
}

function addPage(doc: Doc, fonts: Fonts, model: MaskModel, plane: MaskPlane): void {
  const page = pageOf(model, plane);
  const { box, plate, bar } = page;
  const k = POINTS_PER_MM;
  const size: [number, number] = [k * mm(box.x1 - box.x0), k * mm(box.y1 - box.y0)];
  doc.addPage({ size, margin: 0 });
  const dark = model.settings.polarity === 'dark-field';
  const form = doc.ref({
    Type: 'XObject',
    Subtype: 'Form',
    FormType: 1,
    BBox: [-10_000, -10_000, 10_000, 10_000],
    Resources: {},
  });
  form.end(Buffer.from(chipContent(model, plane)));
  const resources = doc.page as unknown as { xobjects: Record<string, unknown> };
  resources.xobjects.Chip = form;
  const raw = (text: string): void => {
    (doc as unknown as { addContent(text: string): void }).addContent(text);
  };
  // the page's own matrix has y downward from its upper edge
  raw(`q ${k} 0 0 ${-k} ${-k * mm(box.x0)} ${k * mm(box.y1)} cm`);
  raw(dark ? BLACK : WHITE);
  raw(`${mm(plate.x0)} ${mm(plate.y0)} ${mm(plate.x1 - plate.x0)} ${mm(plate.y1 - plate.y0)} re f`);
  raw(dark ? WHITE : BLACK);
  for (const [x, y] of shifts(model)) raw(`q 1 0 0 1 ${mm(x)} ${mm(y)} cm /Chip Do Q`);
  if (bar) raw(`${BLACK} ${mm(bar.x)} ${mm(bar.y)} ${mm(bar.length)} ${mm(bar.height)} re f`);
  raw('Q');
  if (bar) putNotes(doc, fonts, model, plane, page);
}

function putNotes(doc: Doc, fonts: Fonts, model: MaskModel, plane: MaskPlane, page: Page): void {
  const { box, bar, lines, letters } = page;
  const size = POINTS_PER_MM * mm(letters);
  const put = (text: string, x: number, y: number, ends = false): void => {
    const left = POINTS_PER_MM * mm(x - box.x0) - (ends ? fonts.width(text, 'figure', size) : 0);
    fonts.draw(text, 'figure', size, left, POINTS_PER_MM * mm(box.y1 - y));
  };
  doc.fillColor('black');
  put('10 mm', bar!.x + bar!.length + letters, bar!.y);
  for (const { text, x, y } of lines) put(text, x, y);
  // names would be exposed with a layer; on the drawing of holes they tell which is which
  if (plane.kind !== 'holes') return;
  doc.fillColor(model.settings.polarity === 'dark-field' ? 'white' : 'black');
  for (const [dx, dy] of shifts(model)) {
    for (const { text, x, y, ends } of plane.labels)
      put(text, x + dx + (ends ? -letters : letters), y + dy + letters, ends);
  }
}

function chipContent(model: MaskModel, plane: MaskPlane): Uint8Array {
  const out = new TextBytes();
  for (const part of PARTS) {
    if (plane[part].length === 0) continue;
    out.ascii(`/${dxfLayer(plane, part)} BMC\n`);
    putLoops(out, cutLoops(plane[part], PDF_ARC));
    if (part !== 'outline') out.ascii('f*\n');
    // the lane's inner side is the outline already
    else out.ascii(model.settings.lane > 0 ? 'n\n' : `${HAIRLINE} w S\n`);
    out.ascii('EMC\n');
  }
  return out.bytes();
}

function putLoops(out: TextBytes, loops: Loops): void {
  const { x, y, bulge } = loops;
  let from = 0;
  for (const end of loops.ends) {
    putPoint(out, x[from]!, y[from]!);
    out.ascii('m\n');
    for (let k = from; k < end; k++) {
      const last = k + 1 === end;
      const next = last ? from : k + 1;
      if (bulge[k] !== 0) putCubic(out, x[k]!, y[k]!, x[next]!, y[next]!, bulge[k]!);
      else if (!last) {
        putPoint(out, x[next]!, y[next]!);
        out.ascii('l\n');
      }
    }
    out.ascii('h\n');
    from = end;
  }
}

/** The cubic with the arc's tangents at its ends and the arc's own point in its middle. */
function putCubic(out: TextBytes, x0: number, y0: number, x1: number, y1: number, bulge: number): void {
  const c = curve(x0, y0, x1, y1, bulge);
  const sweep = 4 * Math.atan(bulge);
  const reach = (4 / 3) * Math.tan(sweep / 4) * (1 / c.curvature);
  const cos = Math.cos(sweep);
  const sin = Math.sin(sweep);
  putPoint(out, x0 + reach * c.ux, y0 + reach * c.uy);
  putPoint(out, x1 - reach * (c.ux * cos - c.uy * sin), y1 - reach * (c.uy * cos + c.ux * sin));
  putPoint(out, x1, y1);
  out.ascii('c\n');
}

/** Each number with a space after it. */
function putPoint(out: TextBytes, x: number, y: number): void {
  putMm(out, x);
  out.ascii(' ');
  putMm(out, y);
  out.ascii(' ');
}
