import type { MaskFormat } from '../../contract/mask.ts';
import type { Part } from './cells.ts';
import { dxfLayer, writeDxf } from './dxf.ts';
import { gdsiiLayer, writeGdsii } from './gdsii.ts';
import type { MaskModel, MaskPlane } from './model.ts';
import { PDF_ARC } from './page.ts';
import type { ReadMask } from './read.ts';
import { readDxf } from './read-dxf.ts';
import { readGdsii } from './read-gdsii.ts';
import { readPdf } from './read-pdf.ts';
import { readSvg } from './read-svg.ts';
import { SVG_ARC, writeSvg } from './svg.ts';

/** One way to write a mask and to read back what was written. */
export interface Format {
  readonly extension: string;
  /** Of the numbers in the file, in words and as it stands in the file's name. */
  readonly unit: string;
  readonly fileUnit: string;
  /** One drawing to a file. */
  readonly onePlane: boolean;
  /** Longest sweep of an arc in the file, radians. */
  readonly arcs: number;
  /** What the reader calls the layer that holds a part of a drawing. */
  readonly layer: (plane: MaskPlane, part: Part) => string;
  readonly write: (model: MaskModel) => Uint8Array | Promise<Uint8Array>;
  readonly read: (bytes: Uint8Array) => ReadMask | Promise<ReadMask>;
}

const textOf = (bytes: Uint8Array): string => new TextDecoder('utf-8', { fatal: true }).decode(bytes);
const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);
/** Any arc whole. */
const WHOLE = 2 * Math.PI;

export const FORMATS: Readonly<Record<MaskFormat, Format>> = {
  dxf: {
    extension: 'dxf',
    unit: 'µm',
    fileUnit: 'um',
    onePlane: false,
    arcs: WHOLE,
    layer: dxfLayer,
    write: (model) => bytesOf(writeDxf(model)),
    read: readDxf,
  },
  gdsii: {
    extension: 'gds',
    unit: 'nm (database), µm (user)',
    fileUnit: 'um',
    onePlane: false,
    arcs: WHOLE,
    layer: gdsiiLayer,
    write: writeGdsii,
    read: readGdsii,
  },
  svg: {
    extension: 'svg',
    unit: 'mm',
    fileUnit: 'mm',
    onePlane: true,
    arcs: SVG_ARC,
    layer: dxfLayer,
    write: (model) => bytesOf(writeSvg(model)),
    read: (bytes) => readSvg(textOf(bytes)),
  },
  pdf: {
    extension: 'pdf',
    unit: 'true size',
    fileUnit: 'true-size',
    onePlane: false,
    arcs: PDF_ARC,
    layer: dxfLayer,
    // loaded where it is asked for: the library for it is large
    write: async (model) => (await import('./pdf.ts')).writePdf(model),
    read: readPdf,
  },
};
