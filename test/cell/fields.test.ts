import { expect, test } from 'vitest';
import { canonical } from '../../solver/cell/canonical.ts';
import { flowField, pressuresOf } from '../../solver/cell/flow-field.ts';
import { inertiaShare } from '../../solver/cell/inertia.ts';
import { fieldsOf, levelOf, solveLevel } from '../../solver/cell/level.ts';
import { peakOfFields, peakShear } from '../../solver/cell/peak.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import { emptySample, sampler } from '../../solver/cell/sample.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { peakStrain } from '../../solver/cell/strain.ts';
import { streamlines } from '../../solver/cell/streamline.ts';
import { rectangleSection } from '../../solver/section/rectangle.ts';
import { verify } from '../verify/row.ts';
import { bend, star, tee } from './shapes.ts';

const straight = (depth: number) =>
  star(
    [
      { angle: 30, width: 1 },
      { angle: 210, width: 1 },
    ],
    depth,
  );
const DUCT = 'series for rectangular ducts, Shah and London 1978';
verify(
  {
    quantity: 'velocity in the middle of a duct',
    check: 'exact',
    at: 'depth/width 0.5, drawn at 30 degrees',
    source: DUCT,
    tolerance: 0.003,
  },
  () => {
    const depth = 0.5;
    const solution = solveCell(straight(depth), { flow: 0.001, peak: null });
    const sample = emptySample();
    sampler(flowField(solution, [2, 0])!).at(0, 0, 0, sample);
    // Lengths of the sample are depths: pressure falls by 1 per unit of the shape.
    const section = rectangleSection(1, depth);
    const exact = (section.peakVelocity * section.conductance) / section.area / depth;
    const along = -(
      Math.cos(Math.PI / 6) * sample.velocity[0]! +
      Math.sin(Math.PI / 6) * sample.velocity[1]!
    );
    return along / exact - 1;
  },
);
verify(
  {
    quantity: 'strain rate on the floor of a duct against its wall shear',
    check: 'exact',
    at: 'depth/width 0.5',
    source: DUCT,
    tolerance: 0.01,
  },
  () => {
    const solution = solveCell(straight(0.5), { flow: 0.001, peak: null });
    const sample = emptySample();
    sampler(flowField(solution, [2, 0])!).at(0, 0, 1, sample);
    return sample.strainRate / rectangleSection(1, 0.5).peakShear! - 1;
  },
);
verify(
  {
    quantity: 'largest strain rate of a filleted bend against its peak wall shear',
    check: 'invariant',
    at: 'fillet 0.2 width, depth/width 0.5',
    source: 'at a wall the strain rate is the shear rate',
    tolerance: 0.06,
  },
  () => {
    const solution = solveCell(bend(0.5, 0.2), { flow: 0.003, peak: 0.02 });
    return peakStrain(solution, [1, 0])!.value / peakShear(solution, [1, 0])!.value - 1;
  },
);
test('pressures of given flows give these flows back', () => {
  const { portMatrix, faces } = solveCell(tee(0.5));
  const flows = [2, -0.5, -1.5];
  const pressures = pressuresOf(portMatrix, faces, flows);
  for (let i = 0; i < faces; i += 1) {
    let q = 0;
    for (let j = 0; j < faces; j += 1) q += portMatrix[i * faces + j]! * pressures[j]!;
    expect(q).toBeCloseTo(flows[i]!, 10);
  }
});

test('streamlines run from the face of inflow to the others, in the proportion of the flows there', () => {
  const solution = solveCell(tee(0.5, 0.1));
  // In at the branch, out at both main arms alike.
  const lines = streamlines(solution, [0, 0, 1], 20);
  expect(lines.every((line) => line.from === 2)).toBe(true);
  expect(lines.filter((line) => line.to === 0).length).toBe(10);
  expect(lines.filter((line) => line.to === 1).length).toBe(10);
  for (const { time, points, stress } of lines) {
    expect(points.length).toBe(3 * time.length);
    expect(stress.length).toBe(time.length);
    for (let i = 1; i < time.length; i += 1) expect(time[i]!).toBeGreaterThan(time[i - 1]!);
  }
});

test('a straight channel has no inertia to neglect, a bend has some, in proportion to density and drive', () => {
  const of = (shape: ReturnType<typeof bend>, pressure: number, density: number): number =>
    inertiaShare(solveCell(shape), [pressure, 0], 50e-6, density, 1e-3)!;
  const lopsided = star(
    [
      { angle: 0, width: 1 },
      { angle: 180, width: 0.4 },
    ],
    0.5,
    0.1,
  );
  const once = of(lopsided, 100, 1000);
  expect(once).toBeGreaterThan(1e-4);
  // Nothing but what the mesh leaves.
  expect(of(straight(0.5), 100, 1000)).toBeLessThan(0.02 * once);
  expect(of(lopsided, 300, 1000) / once).toBeCloseTo(3, 6);
  expect(of(lopsided, 100, 2000) / once).toBeCloseTo(2, 6);
});

test('sharp corners have no peak: shear there grows with every refinement', () => {
  const sharp = solveCell(bend(0.5));
  expect(sharp.sharp).toBe(true);
  expect(sharp.peakError).toBeNull();
  expect(peakShear(sharp, [1, 0])).toBeNull();
  expect(peakStrain(sharp, [1, 0])).toBeNull();
});
verify(
  {
    quantity: 'growth of the largest shear at a sharp corner, per halving of the elements there',
    check: 'published',
    at: 'square bend, fluid angle 270 degrees, depth/width 1',
    source:
      'Dean and Montagnon 1949, Proc. Camb. Phil. Soc. 45, 389: exponent 0.5444837 recomputed, 2^0.4555 = 1.371',
    tolerance: 0.05,
  },
  () => {
    const { shape } = canonical(bend(1));
    // The size at the corner goes with the cube of the coarseness.
    const peak = (halvings: number): number =>
      peakOfFields(
        fieldsOf(solveLevel(levelOf(planMesh(shape, 0.7 * 2 ** (-halvings / 3), '', 1e5), 2), 2, 1e-7)),
        0,
      );
    return Math.sqrt(peak(2) / peak(0)) / 2 ** 0.4555162632 - 1;
  },
);
