import { inUnit, metres } from '../../../solver/chip/units.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';
import { LINE, legend, letterHeight, PARTS, type Part } from './cells.ts';
import { DxfText, MODEL, putBlock, putObjects, putSpaces, putTables } from './dxf-frame.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { escaped } from './names.ts';

/**
 * Masks as DXF, ASCII, version 2000 (AC1015): the oldest that says its unit ($INSUNITS, here 13, µm) and so
 * the most readers; by the published group codes. Outlines are closed LWPOLYLINEs with true arcs as
 * bulges, whole circles CIRCLEs; outlines inside outlines are walls.
 */

const BLOCK = 'CHIP';
export const NOTES_LAYER = 'NOTES';
export const WAFER_LAYER = 'WAFER';
const SUFFIX: Readonly<Record<Part, string>> = {
  cavities: '',
  marks: '_MARKS',
  outline: '_OUTLINE',
  lane: '_LANE',
};
/** Colour numbers 1 to 6 (red to magenta) by drawing; notes in 7 (black or white). */
const COLOURS = 6;
const PLAIN = 7;

export const dxfLayer = (plane: { readonly key: string }, part: Part): string =>
  `${plane.key}${SUFFIX[part]}`;
const namesLayer = ({ key }: MaskPlane): string => `${key}_NAMES`;

/** Micrometres to a picometre. */
function um(nm: number): number {
  const rounded = Number(inUnit(metres(nm), 'um').toFixed(6));
  return rounded === 0 ? 0 : rounded;
}

/** What the reference takes for the beginning of a code within a text is spelt as an escape. */
const inText = (text: string): string =>
  escaped(text).replaceAll('%%', '%\\U+0025').replaceAll('^', '\\U+005E');

export function writeDxf(model: MaskModel): string {
  const { planes, wafer, field } = model;
  const dxf = new DxfText();
  const height = letterHeight(field);
  const unit = 'Unit: 1 drawing unit = 1 micrometre (um).';
  const lines = legend(model, planes, unit, 110);
  for (const line of lines) dxf.put(999, escaped(line));
  const layers = [
    ...planes.flatMap((plane, i) => {
      const colour = (i % COLOURS) + 1;
      const names = [...PARTS.filter((part) => plane[part].length > 0).map((part) => dxfLayer(plane, part))];
      if (model.settings.labels && plane.labels.length > 0) names.push(namesLayer(plane));
      return names.map((name) => ({ name, colour }));
    }),
    ...(model.settings.labels ? [{ name: NOTES_LAYER, colour: PLAIN }] : []),
    ...(wafer ? [{ name: WAFER_LAYER, colour: PLAIN }] : []),
  ];
  const extent = wafer
    ? { x0: -wafer.diameter / 2, y0: -wafer.diameter / 2, x1: wafer.diameter / 2, y1: wafer.diameter / 2 }
    : field;
  const body = new DxfText();
  const record = body.handle();
  putTables(body, layers, wafer ? [{ name: BLOCK, record }] : []);
  body.put(0, 'SECTION', 2, 'BLOCKS');
  putSpaces(body);
  if (wafer) putBlock(body, BLOCK, record, () => putChip(body, model, record, height));
  body.put(0, 'ENDSEC', 0, 'SECTION', 2, 'ENTITIES');
  if (wafer) {
    const { diameter, edge, pitch, blocks } = model.wafer!;
    for (const { x, y, columns, rows } of blocks) {
      const many = columns * rows > 1;
      entity(body, 'INSERT', MODEL, WAFER_LAYER, many ? 'AcDbMInsertBlock' : 'AcDbBlockReference');
      body.put(2, BLOCK, 10, um(x - model.centre[0]), 20, um(y - model.centre[1]), 30, 0);
      if (many) body.put(70, columns, 71, rows, 44, um(pitch[0]), 45, um(pitch[1]));
    }
    putCircle(body, MODEL, WAFER_LAYER, 0, 0, diameter / 2);
    if (edge > 0) putCircle(body, MODEL, WAFER_LAYER, 0, 0, diameter / 2 - edge);
  } else putChip(body, model, MODEL, height);
  if (model.settings.labels) {
    lines.forEach((line, i) => {
      putText(body, MODEL, NOTES_LAYER, extent.x0, extent.y0 - (2 + i) * LINE * height, height, line);
    });
  }
  body.put(0, 'ENDSEC');
  putObjects(body);
  dxf.put(0, 'SECTION', 2, 'HEADER', 9, '$ACADVER', 1, 'AC1015', 9, '$DWGCODEPAGE', 3, 'ANSI_1252');
  dxf.put(9, '$INSUNITS', 70, 13, 9, '$MEASUREMENT', 70, 1, 9, '$HANDSEED', 5, body.next);
  dxf.put(9, '$EXTMIN', 10, um(extent.x0), 20, um(extent.y0), 30, 0);
  dxf.put(9, '$EXTMAX', 10, um(extent.x1), 20, um(extent.y1), 30, 0, 0, 'ENDSEC');
  dxf.put(0, 'SECTION', 2, 'CLASSES', 0, 'ENDSEC');
  body.put(0, 'EOF');
  dxf.append(body);
  return dxf.text();
}

function putChip(dxf: DxfText, model: MaskModel, owner: string, height: number): void {
  for (const plane of model.planes) {
    for (const part of PARTS) {
      for (const shape of plane[part]) putShape(dxf, owner, dxfLayer(plane, part), shape);
    }
    if (!model.settings.labels) continue;
    for (const { text, x, y } of plane.labels) putText(dxf, owner, namesLayer(plane), x, y, height, text);
  }
}

function entity(dxf: DxfText, kind: string, owner: string, layer: string, subclass: string): void {
  dxf.put(0, kind, 5, dxf.handle(), 330, owner, 100, 'AcDbEntity', 8, layer, 100, subclass);
}

function putShape(dxf: DxfText, owner: string, layer: string, shape: Shape): void {
  for (const loop of shape) {
    if (isCircle(loop)) {
      const [a, b] = loop as [Edge, Edge];
      putCircle(dxf, owner, layer, (a.x + b.x) / 2, (a.y + b.y) / 2, Math.hypot(b.x - a.x, b.y - a.y) / 2);
      continue;
    }
    entity(dxf, 'LWPOLYLINE', owner, layer, 'AcDbPolyline');
    dxf.put(90, loop.length, 70, 1);
    for (const { x, y, bulge } of loop) dxf.corner(x, y, bulge);
  }
}

/** A whole circle that is no hole. */
const isCircle = (loop: readonly Edge[]): boolean =>
  loop.length === 2 && Math.abs(loop[0]!.bulge - 1) < 1e-12 && Math.abs(loop[1]!.bulge - 1) < 1e-12;

function putCircle(dxf: DxfText, owner: string, layer: string, x: number, y: number, radius: number): void {
  entity(dxf, 'CIRCLE', owner, layer, 'AcDbCircle');
  dxf.put(10, um(x), 20, um(y), 30, 0, 40, um(radius));
}

function putText(
  dxf: DxfText,
  owner: string,
  layer: string,
  x: number,
  y: number,
  height: number,
  text: string,
): void {
  entity(dxf, 'TEXT', owner, layer, 'AcDbText');
  dxf.put(10, um(x), 20, um(y), 30, 0, 40, um(height), 1, inText(text), 100, 'AcDbText');
}
