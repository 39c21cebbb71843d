import { area, FillRule, type Paths64, union } from 'clipper2-ts';
import { expect, test } from 'vitest';
import { checkCell } from '../../solver/cell/check-cell.ts';
import { cutCells } from '../../solver/cell/cut/cut.ts';
import { planPolygons } from '../../solver/chip/plan.ts';
import { gaps } from '../../solver/chip/plan-gaps.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { crowdedDrawing } from './random-drawing.ts';

const totalArea = (paths: Paths64) => paths.reduce((sum, p) => sum + area(p), 0);

test('crowded drawings, full of coincidences, are read, drawn and cut without fail', () => {
  let cells = 0;
  let refused = 0;
  for (let seed = 1; seed <= 250; seed++) {
    const chip = crowdedDrawing(seed);
    try {
      const graph = readGraph(chip);
      for (const p of graph.pieces) {
        const about = `seed ${seed} ${p.channel}#${p.number}`;
        expect(p.length, about).toBeGreaterThan(0);
        expect(p.path.length, about).toBeGreaterThan(1);
        for (const v of p.path) expect(Number.isFinite(v.x + v.y + v.bulge), about).toBe(true);
        for (const w of p.width) expect(w, about).toBeGreaterThan(0);
      }
      const polygons = planPolygons(chip, graph, 'flow', { chordError: 50, fillets: false, holes: true });
      // cavities share no ground: together they are as large as their union
      const paths = polygons.flatMap((p) => [p.outer, ...p.holes].map((l) => l.map(([x, y]) => ({ x, y }))));
      const sum = totalArea(paths);
      expect(totalArea(union(paths, FillRule.NonZero)) / sum, `seed ${seed}`).toBeCloseTo(1, 6);
      for (const gap of gaps(chip, 50e3)) expect(gap.width, `seed ${seed}`).toBeLessThan(50e3);
      const cut = cutCells(chip, graph);
      for (const f of cut.findings) expect(f.says, `seed ${seed}`).not.toContain('comes too close');
      for (const c of cut.cells) checkCell(c.shape, `seed ${seed} ${c.name}`);
      cells += cut.cells.length;
    } catch (error) {
      // a port's place may be taken from under it by the bend that does not fit
      if (!(error instanceof Problem && error.kind === 'place')) throw error;
      refused++;
    }
  }
  expect(cells).toBeGreaterThan(500);
  expect(refused).toBeLessThan(10);
});
