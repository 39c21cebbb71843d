import { execFileSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { writeDxf } from '../../main/export/mask/dxf.ts';
import type { MaskModel } from '../../main/export/mask/model.ts';
import { areaOf, perimeterOf } from '../../main/export/mask/shapes.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { port } from '../chip/drawings.ts';
import { randomDrawing } from '../chip/random-drawing.ts';
import { BARE, bend, modelOf } from './mask-drawings.ts';

const section = (text: string, name: string): string[] => {
  const lines = text.split('\r\n');
  const from = lines.findIndex((line, i) => line === name && lines[i - 1]?.trim() === '2');
  const to = lines.indexOf('ENDSEC', from);
  return lines.slice(from + 1, to - 1);
};

describe('DXF', () => {
  // Worked by hand from the published group codes (DXF reference: LWPOLYLINE 90, 70, 10, 20, 42; a bulge is
  // the tangent of a quarter of the sweep, positive counter-clockwise). A quarter turn: tan 22.5° = √2 − 1.
  // The channel is 4 µm wide; its bend of radius 10 µm has walls of 12 and 8 µm about (20, 20).
  test('a quarter bend is these lines', () => {
    const text = writeDxf(modelOf(bend(), BARE));
    const wanted = [
      ['0', 'LWPOLYLINE', '5', '107', '330', '17', '100', 'AcDbEntity', '8', 'L1_A', '100', 'AcDbPolyline'],
      ['90', '8', '70', '1'],
      ['10', '10', '20', '8'],
      ['10', '20', '20', '8', '42', '0.414213562373'],
      ['10', '32', '20', '20'],
      ['10', '32', '20', '30'],
      ['10', '28', '20', '30'],
      ['10', '28', '20', '20', '42', '-0.414213562373'],
      ['10', '20', '20', '12'],
      ['10', '10', '20', '12'],
    ];
    expect(section(text, 'ENTITIES')).toEqual(wanted.flat());
    // 13 is the micrometre (DXF reference, $INSUNITS); AC1015 is version 2000
    const header = [
      ['9', '$ACADVER', '1', 'AC1015', '9', '$DWGCODEPAGE', '3', 'ANSI_1252', '9', '$INSUNITS', '70', '13'],
      ['9', '$MEASUREMENT', '70', '1', '9', '$HANDSEED', '5', '108'],
      ['9', '$EXTMIN', '10', '10', '20', '8', '30', '0', '9', '$EXTMAX', '10', '32', '20', '30', '30', '0'],
    ];
    expect(section(text, 'HEADER')).toEqual(header.flat());
    expect(text.startsWith('999\r\nbend\r\n')).toBe(true);
    expect(text.endsWith('0\r\nEOF\r\n')).toBe(true);
    expect(Math.abs(Math.SQRT2 - 1 - 0.414213562373)).toBeLessThan(1e-12);
  });

  test('names in any script are escapes that the reference gives, and come back', () => {
    const text = writeDxf(modelOf({ ...bend(), name: 'Ω %%c ^J מבחן' }));
    expect(text).toMatch(/^[\x20-\x7e\r\n]*$/);
    expect(text).toContain('\\U+03A9 %\\U+0025c \\U+005EJ \\U+05DE\\U+05D1\\U+05D7\\U+05DF');
    expect(text).toMatch(/1 drawing unit = 1 micrometre/);
    expect(text).toMatch(/Not for diagnosis/);
  });
});

const PYTHON = '/usr/bin/python3';
// What the package says of each file: faults, version and unit, area by layer with its own arcs, texts, inserts.
const SCRIPT = `
import sys, json, math, ezdxf
from ezdxf.math import bulge_radius
out = []
for name in sys.argv[1:]:
    doc = ezdxf.readfile(name)
    audit = doc.audit()
    space = doc.modelspace()
    inserts = list(space.query('INSERT'))
    places = []
    for i in inserts:
        for c in range(max(1, i.dxf.column_count)):
            for r in range(max(1, i.dxf.row_count)):
                places.append([i.dxf.insert.x + c * i.dxf.column_spacing, i.dxf.insert.y + r * i.dxf.row_spacing])
    held = doc.blocks.get('CHIP') if inserts else space
    areas = {}
    for e in held.query('LWPOLYLINE CIRCLE'):
        if e.dxftype() == 'CIRCLE':
            a = math.pi * e.dxf.radius ** 2
        else:
            p = e.get_points('xyb')
            a = 0
            for k in range(len(p)):
                (x0, y0, b), (x1, y1, _) = p[k], p[(k + 1) % len(p)]
                a += ((x0 - p[0][0]) * (y1 - p[0][1]) - (x1 - p[0][0]) * (y0 - p[0][1])) / 2
                if b:
                    t = 4 * math.atan(abs(b))
                    a += math.copysign(bulge_radius((x0, y0), (x1, y1), b) ** 2 * (t - math.sin(t)) / 2, b)
            assert e.closed
        areas[e.dxf.layer] = areas.get(e.dxf.layer, 0) + a
    texts = [ezdxf.decode_dxf_unicode(e.dxf.text) for e in list(space.query('TEXT')) + list(held.query('TEXT'))]
    faults = [str(e.code) + ' ' + e.message for e in audit.errors + audit.fixes]
    out.append(dict(faults=faults, version=doc.dxfversion, units=doc.units, areas=areas, texts=texts, places=places))
print(json.dumps(out))
`;

interface Read {
  readonly faults: string[];
  readonly version: string;
  readonly units: number;
  /** µm², holes taken off. */
  readonly areas: Record<string, number>;
  readonly texts: string[];
  readonly places: [number, number][];
}

const DEMOS = join(import.meta.dirname, '../../assets/demo');
const LONG = `${'very long '.repeat(19)}name`;

describe('ezdxf', () => {
  let folder = '';
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'channelwright-dxf-'));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  const present = (() => {
    try {
      execFileSync(PYTHON, ['-c', 'import ezdxf']);
      return true;
    } catch {
      return false;
    }
  })();
  if (!present) {
    test('DXF files: not audited, ezdxf is absent', () => {
      console.warn(
        'ezdxf is not installed: the DXF files were not audited (Debian: apt install python3-ezdxf).',
      );
      expect(process.env.CI, 'ezdxf must be present in continuous integration').toBeFalsy();
    });
    return;
  }

  test('audits every file without a fault and reads the same unit, areas, names and places', () => {
    const models: MaskModel[] = [
      modelOf(bend(), BARE),
      modelOf({
        ...bend(),
        name: 'Ω %%c מבחן',
        ports: [port('εἴσοδος', [10, 10], 2, 'a'), port('مدخل', [30, 30], 0, 'a')],
      }),
      modelOf(
        { ...bend(), name: LONG },
        { wafer: { diameter: 2_000_000, edge: 50_000 }, marks: false, lane: 5000 },
      ),
      modelOf(bend(), { ...BARE, undercut: 1500, mirror: true, shrink: 0.02 }),
      ...readdirSync(DEMOS).map((file) => modelOf(readDescription(readFileSync(join(DEMOS, file), 'utf8')))),
      ...[1, 2, 3, 4].map((seed) => modelOf(randomDrawing(seed), { pads: true, lane: 0 })),
    ];
    const files = models.map((model, i) => {
      const file = join(folder, `${i}.dxf`);
      writeFileSync(file, writeDxf(model));
      return file;
    });
    const read = JSON.parse(
      execFileSync(PYTHON, ['-c', SCRIPT, ...files], { encoding: 'utf8', maxBuffer: 1e8 }),
    ) as Read[];
    expect(read.length).toBe(models.length);
    read.forEach((found, i) => {
      const model = models[i]!;
      expect(found.faults, files[i]).toEqual([]);
      expect(found.version).toBe('AC1015');
      expect(found.units).toBe(13);
      for (const { key, cavities } of model.planes) {
        // digits of a picometre in the file
        const within = perimeterOf(cavities) * 1e-3 + 1;
        const area = (found.areas[key] ?? 0) * 1e6;
        expect(Math.abs(area - areaOf(cavities)), `${files[i]} ${key}`).toBeLessThanOrEqual(within);
      }
      const places = model.wafer?.centres.map(([x, y]) => [
        (x - model.centre[0]) / 1000,
        (y - model.centre[1]) / 1000,
      ]);
      expect(found.places.map(String).sort()).toEqual((places ?? []).map(String).sort());
    });
    expect(read[1]!.texts).toContain('Ω %%c מבחן');
    expect(read[1]!.texts).toContain('εἴσοδος');
    expect(read[1]!.texts).toContain('مدخل');
    expect(read[2]!.texts.join(' ')).toContain(LONG);
    expect(read[2]!.places.length).toBeGreaterThan(100);
  });
});
