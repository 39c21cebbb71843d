import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { chipOf, drawingOf } from './read.ts';

/** DXF files written by ezdxf (Debian: apt-get install python3-ezdxf), and the areas it works out itself. */

const PYTHON = '/usr/bin/python3';
const SCRIPT = `
import sys, json, math, ezdxf
from ezdxf import units, path
from ezdxf.math import area
folder, = sys.argv[1:]
told = {}
for version in ('R12', 'R2000', 'R2010', 'R2018'):
    doc = ezdxf.new(version)
    doc.units = units.MM
    m = doc.modelspace()
    block = doc.blocks.new('ARM', base_point=(1, 1))
    closed = lambda points: block.add_polyline2d(points, close=True) if version == 'R12' else block.add_lwpolyline(points, close=True)
    closed([(1, 1), (9, 1), (9, 1.1), (1, 1.1)])
    for angle, scale in ((0, 1), (30, 0.5), (90, 2)):
        m.add_blockref('ARM', (20 + scale * 10, 20), dxfattribs={'layer': 'FLOW', 'rotation': angle, 'xscale': scale, 'yscale': scale})
    m.add_circle((5, 5), 1.5, dxfattribs={'layer': 'PAD'})
    m.add_arc((60, 20), 5, 0, 180, dxfattribs={'layer': 'SLOT'})
    m.add_arc((60, 20), 4.8, 0, 180, dxfattribs={'layer': 'SLOT'})
    m.add_line((65, 20), (64.8, 20), dxfattribs={'layer': 'SLOT'})
    m.add_line((-5 + 60, 20), (-4.8 + 60, 20), dxfattribs={'layer': 'SLOT'})
    if version != 'R12':
        m.add_ellipse((5, 30), (3, 1), 0.4, dxfattribs={'layer': 'OVAL'})
        s = m.add_spline(dxfattribs={'layer': 'CURVE'})
        s.set_closed([(40, 40, 0), (50, 40, 0), (50, 50, 0), (40, 50, 0)], degree=3)
        told['CURVE'] = abs(area(list(s.construction_tool().approximate(20000))))
    name = f'{folder}/{version}.dxf'
    doc.saveas(name)
print(json.dumps(told))
`;

function written(): { folder: string; told: Record<string, number> } | null {
  try {
    execFileSync(PYTHON, ['-c', 'import ezdxf'], { stdio: 'pipe' });
  } catch (error) {
    if (process.env.CI) throw error;
    console.warn('ezdxf is missing; on Debian: apt-get install python3-ezdxf');
    return null;
  }
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-ezdxf-'));
  const told = JSON.parse(execFileSync(PYTHON, ['-c', SCRIPT, folder], { encoding: 'utf8' })) as Record<
    string,
    number
  >;
  return { folder, told };
}

const NONE = { kind: 'ignore' } as const;
const FLUID = { kind: 'cavity', depth: 50_000 } as const;

test('every version that ezdxf writes is read with the areas that ezdxf, or a hand, works out', () => {
  const files = written();
  if (!files) return;
  try {
    for (const version of ['R12', 'R2000', 'R2010', 'R2018']) {
      const bytes = new Uint8Array(readFileSync(join(files.folder, `${version}.dxf`)));
      const drawing = drawingOf(bytes);
      expect(drawing.notUnderstood, version).toEqual([]);
      const unit = version === 'R12' ? { unit: 1e-3 } : {};
      expect(drawing.unit === null || Math.abs(drawing.unit - 1e-3) < 1e-12, version).toBe(true);
      const names = drawing.layers.map(({ name }) => name);
      const only = (layer: string) =>
        chipOf(bytes, {
          ...unit,
          roles: Object.fromEntries(names.map((name) => [name, name === layer ? { ...FLUID, layer } : NONE])),
        });
      const area = (layer: string): number => only(layer).report.chipLayers[0]!.deviation!.area * 1e6;
      // 8 x 0.1 mm at scales 1, 0.5 and 2; chords of circles take off at most 20 nm of their length.
      expect(area('FLOW'), version).toBeCloseTo(0.8 * (1 + 0.25 + 4), 5);
      expect(Math.abs(area('PAD') - Math.PI * 1.5 ** 2), version).toBeLessThan(2e-5 * 2 * Math.PI * 1.5);
      const slot = only('SLOT');
      expect(slot.chip.channels, version).toHaveLength(1);
      expect(slot.chip.channels[0]!.width, version).toEqual([200_000, 200_000]);
      expect(Math.abs(slot.chip.channels[0]!.bendRadius - 4_900_000), version).toBeLessThan(50);
      if (version === 'R12') continue;
      // Half axes √10 and 0.4 √10.
      expect(Math.abs(area('OVAL') / (Math.PI * 10 * 0.4) - 1), version).toBeLessThan(1e-4);
      expect(Math.abs(area('CURVE') / files.told.CURVE! - 1), version).toBeLessThan(1e-4);
      expect(only('FLOW').chip.channels, version).toHaveLength(3);
    }
  } finally {
    rmSync(files.folder, { recursive: true });
  }
});
