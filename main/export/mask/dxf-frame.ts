import { inUnit, metres } from '../../../solver/chip/units.ts';
import { TextBytes } from './bytes.ts';

const inUm = (nm: number): number => inUnit(metres(nm), 'um');
const same = (value: number): number => value;

/** A DXF file as group codes and values, one per line. */
export class DxfText {
  readonly #out = new TextBytes();
  #handle = 0x100;

  put(...pairs: readonly (string | number)[]): void {
    for (let i = 0; i < pairs.length; i++) {
      this.#out.ascii(String(pairs[i]));
      this.#out.ascii(END);
    }
  }

  /** A corner of a polyline, nm, as micrometres to a picometre; with the bulge of its edge where that is bent. */
  corner(x: number, y: number, bulge: number): void {
    const out = this.#out;
    out.ascii(X);
    out.fixed(x, -3, 6, inUm);
    out.ascii(Y);
    out.fixed(y, -3, 6, inUm);
    out.ascii(END);
    if (bulge === 0) return;
    out.ascii(BULGE);
    out.fixed(bulge, 0, 12, same);
    out.ascii(END);
  }

  /** The next free handle, hexadecimal. */
  handle(): string {
    this.#handle += 1;
    return this.#handle.toString(16).toUpperCase();
  }

  get next(): string {
    return (this.#handle + 1).toString(16).toUpperCase();
  }

  append(other: DxfText): void {
    this.#out.append(other.#out);
  }

  text(): string {
    return this.#out.toString();
  }
}

const END = '\r\n';
const X = `10${END}`;
const Y = `${END}20${END}`;
const BULGE = `42${END}`;

/** Fixed handles of what every file has. */
export const MODEL = '17';
const PAPER = '1B';
const TABLES = {
  VPORT: '8',
  LTYPE: '2',
  LAYER: '1',
  STYLE: '5',
  VIEW: '7',
  UCS: '6',
  APPID: '3',
  DIMSTYLE: '4',
  BLOCK_RECORD: '9',
};

/** Tables with the layers (name, colour number) and the blocks by name and handle of their record. */
export function putTables(
  dxf: DxfText,
  layers: readonly { readonly name: string; readonly colour: number }[],
  blocks: readonly { readonly name: string; readonly record: string }[],
): void {
  const table = (name: keyof typeof TABLES, count: number, records: () => void): void => {
    dxf.put(0, 'TABLE', 2, name, 5, TABLES[name], 330, 0, 100, 'AcDbSymbolTable', 70, count);
    if (name === 'DIMSTYLE') dxf.put(100, 'AcDbDimStyleTable');
    records();
    dxf.put(0, 'ENDTAB');
  };
  const record = (name: keyof typeof TABLES, handle: string, kind: string): void =>
    dxf.put(
      0,
      name,
      name === 'DIMSTYLE' ? 105 : 5,
      handle,
      330,
      TABLES[name],
      100,
      'AcDbSymbolTableRecord',
      100,
      kind,
    );
  dxf.put(0, 'SECTION', 2, 'TABLES');
  table('VPORT', 0, () => undefined);
  table('LTYPE', 3, () => {
    for (const [handle, name] of [
      ['24', 'ByBlock'],
      ['25', 'ByLayer'],
      ['26', 'Continuous'],
    ] as const) {
      record('LTYPE', handle, 'AcDbLinetypeTableRecord');
      dxf.put(2, name, 70, 0, 3, '', 72, 65, 73, 0, 40, 0);
    }
  });
  table('LAYER', layers.length + 1, () => {
    for (const { name, colour } of [{ name: '0', colour: 7 }, ...layers]) {
      record('LAYER', name === '0' ? '27' : dxf.handle(), 'AcDbLayerTableRecord');
      dxf.put(2, name, 70, 0, 62, colour, 6, 'Continuous', 370, -3, 390, '13');
    }
  });
  table('STYLE', 1, () => {
    record('STYLE', '29', 'AcDbTextStyleTableRecord');
    dxf.put(2, 'Standard', 70, 0, 40, 0, 41, 1, 50, 0, 71, 0, 42, 2.5, 3, 'txt', 4, '');
  });
  table('VIEW', 0, () => undefined);
  table('UCS', 0, () => undefined);
  table('APPID', 1, () => {
    record('APPID', '2A', 'AcDbRegAppTableRecord');
    dxf.put(2, 'ACAD', 70, 0);
  });
  table('DIMSTYLE', 1, () => {
    record('DIMSTYLE', '2B', 'AcDbDimStyleTableRecord');
    dxf.put(2, 'Standard', 70, 0);
  });
  table('BLOCK_RECORD', blocks.length + 2, () => {
    for (const [handle, name, layout] of [
      [MODEL, '*Model_Space', '1A'],
      [PAPER, '*Paper_Space', '1E'],
      ...blocks.map(({ record: at, name: own }) => [at, own, '0'] as const),
    ] as const) {
      record('BLOCK_RECORD', handle, 'AcDbBlockTableRecord');
      dxf.put(2, name, 340, layout);
    }
  });
  dxf.put(0, 'ENDSEC');
}

/** One block; its entities are put by `entities`. */
export function putBlock(dxf: DxfText, name: string, record: string, entities: () => void): void {
  dxf.put(0, 'BLOCK', 5, dxf.handle(), 330, record, 100, 'AcDbEntity', 8, 0, 100, 'AcDbBlockBegin');
  dxf.put(2, name, 70, 0, 10, 0, 20, 0, 30, 0, 3, name, 1, '');
  entities();
  dxf.put(0, 'ENDBLK', 5, dxf.handle(), 330, record, 100, 'AcDbEntity', 8, 0, 100, 'AcDbBlockEnd');
}

export function putSpaces(dxf: DxfText): void {
  for (const [name, record] of [
    ['*Model_Space', MODEL],
    ['*Paper_Space', PAPER],
  ] as const) {
    putBlock(dxf, name, record, () => undefined);
  }
}

/** The objects that a reader of this version looks for: the root dictionary, one plot style, both layouts. */
export function putObjects(dxf: DxfText): void {
  const dictionary = (
    handle: string,
    owner: string,
    entries: readonly (readonly [string, string])[],
  ): void => {
    dxf.put(0, 'DICTIONARY', 5, handle, 330, owner, 100, 'AcDbDictionary', 281, 1);
    for (const [name, to] of entries) dxf.put(3, name, 350, to);
  };
  dxf.put(0, 'SECTION', 2, 'OBJECTS');
  dictionary('A', '0', [
    ['ACAD_GROUP', 'C'],
    ['ACAD_LAYOUT', 'D'],
    ['ACAD_MLINESTYLE', '10'],
    ['ACAD_PLOTSETTINGS', '11'],
    ['ACAD_PLOTSTYLENAME', '12'],
  ]);
  dictionary('C', 'A', []);
  dictionary('D', 'A', [
    ['Model', '1A'],
    ['Layout1', '1E'],
  ]);
  dictionary('10', 'A', [['Standard', '22']]);
  dxf.put(0, 'MLINESTYLE', 5, '22', 330, '10', 100, 'AcDbMlineStyle', 2, 'Standard', 70, 0, 3, '', 62, 256);
  dxf.put(51, 90, 52, 90, 71, 2, 49, 0.5, 62, 256, 6, 'BYLAYER', 49, -0.5, 62, 256, 6, 'BYLAYER');
  dictionary('11', 'A', []);
  dxf.put(0, 'ACDBDICTIONARYWDFLT', 5, '12', 330, 'A', 100, 'AcDbDictionary', 281, 1, 3, 'Normal', 350, '13');
  dxf.put(100, 'AcDbDictionaryWithDefault', 340, '13');
  dxf.put(0, 'ACDBPLACEHOLDER', 5, '13', 330, '12');
  for (const [handle, name, order, record, flags] of [
    ['1A', 'Model', 0, MODEL, 1024],
    ['1E', 'Layout1', 1, PAPER, 0],
  ] as const) {
    dxf.put(0, 'LAYOUT', 5, handle, 330, 'D', 100, 'AcDbPlotSettings', 1, '', 2, '', 4, '', 6, '');
    dxf.put(
      40,
      0,
      41,
      0,
      42,
      0,
      43,
      0,
      44,
      0,
      45,
      0,
      46,
      0,
      47,
      0,
      48,
      0,
      49,
      0,
      140,
      0,
      141,
      0,
      142,
      1,
      143,
      1,
    );
    dxf.put(70, flags, 72, 1, 73, 0, 74, 5, 7, '', 75, 16, 147, 1, 148, 0, 149, 0);
    dxf.put(
      100,
      'AcDbLayout',
      1,
      name,
      70,
      1,
      71,
      order,
      10,
      0,
      20,
      0,
      11,
      420,
      21,
      297,
      12,
      0,
      22,
      0,
      32,
      0,
    );
    dxf.put(14, 0, 24, 0, 34, 0, 15, 0, 25, 0, 35, 0, 146, 0, 13, 0, 23, 0, 33, 0, 16, 1, 26, 0, 36, 0);
    dxf.put(17, 0, 27, 1, 37, 0, 76, 1, 330, record);
  }
  dxf.put(0, 'ENDSEC');
}
