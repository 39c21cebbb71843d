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

function written(script = SCRIPT): { folder: string; told: Record<string, number> } | null {
  try {
    execFileSync(PYTHON, ['-c', 'import ezdxf'], { stdio: 'pipe' });
  } catch (error) {
    if (process.env.CI) throw error;
    console.warn('ezdxf is missing; on Debian: apt-get install python3-ezdxf');
    return null;
  }
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-ezdxf-'));
  const told = JSON.parse(execFileSync(PYTHON, ['-c', script, folder], { encoding: 'utf8' })) as Record<
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

/** Splines given by fit points, as ezdxf 1 and 0.18 flatten them themselves; ends with and without tangents. */
const FIT = `
import sys, json, ezdxf
from ezdxf.math import Vec3
folder, = sys.argv[1:]
cases = [
    ([(0, 0), (10, 4), (22, -3), (30, 5), (45, 0)], ((1, 1), (1, -2))),
    ([(0, 0), (3, 8), (14, 9), (15, -4), (40, -6), (44, 3)], ((0, 3), (0.2, 0.1))),
    ([(0, 0), (20, 15)], ((1, 0), (1, 0))),
    ([(0, 0), (10, 4), (22, 6), (34, 4), (45, 0), (60, -4)], None),
]
told = []
for i, (points, tangents) in enumerate(cases):
    doc = ezdxf.new('R2000')
    doc.units = ezdxf.units.MM
    s = doc.modelspace().add_spline([(x, y, 0) for x, y in points], dxfattribs={'layer': 'FLOW'})
    if tangents:
        s.dxf.start_tangent, s.dxf.end_tangent = [Vec3(t) for t in tangents]
    doc.saveas(f'{folder}/fit{i}.dxf')
    told.append([[p.x, p.y] for p in s.flattening(1e-5, segments=64)])
print(json.dumps(told))
`;

test('splines given by fit points run as ezdxf runs them; without end tangents as near as its guess of them', () => {
  const files = written(FIT);
  if (!files) return;
  try {
    const curves = files.told as unknown as [number, number][][];
    curves.forEach((curve, i) => {
      const drawing = drawingOf(new Uint8Array(readFileSync(join(files.folder, `fit${i}.dxf`))));
      expect(drawing.notUnderstood).toEqual([]);
      expect(drawing.assumed.join()).toMatch(/the points they go through/);
      const { vertices } = drawing.layers[0]!.lines[0]!;
      let [furthest, size] = [0, 0];
      for (let k = 0; k < vertices.length; k += 3) {
        furthest = Math.max(furthest, offCurve(curve, vertices[k]!, vertices[k + 1]!));
        size = Math.max(size, Math.hypot(vertices[k]!, vertices[k + 1]!));
      }
      // Of the points themselves; where the file gives no tangents, ezdxf estimates them from five points.
      expect(furthest / size, `spline ${i}`).toBeLessThan(i < 3 ? 1e-6 : 5e-3);
    });
  } finally {
    rmSync(files.folder, { recursive: true });
  }
});

function offCurve(curve: readonly [number, number][], x: number, y: number): number {
  let best = Infinity;
  for (let i = 0; i + 1 < curve.length; i += 1) {
    const [[ax, ay], [bx, by]] = [curve[i]!, curve[i + 1]!];
    const [dx, dy] = [bx - ax, by - ay];
    const t = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
    best = Math.min(best, Math.hypot(x - ax - t * dx, y - ay - t * dy));
  }
  return best;
}
