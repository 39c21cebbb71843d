import type { CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { type FlowField, flowField } from './flow-field.ts';
import { emptySample, sampleAt } from './sample.ts';

/** Middles of the three sides: exact to degree two on a triangle. */
const SIDE_A = [0.5, 0, 0.5] as const;
const SIDE_B = [0.5, 0.5, 0] as const;
/** Gauss points on [0, 1], exact to degree seven. */
const HEIGHT = [0.0694318442029737, 0.3300094782075719, 0.6699905217924281, 0.9305681557970263] as const;
const WEIGHT = [0.1739274225687269, 0.3260725774312731, 0.3260725774312731, 0.1739274225687269] as const;

/**
 * What creeping flow leaves out: to first order in the Reynolds number, inertia changes the flow into
 * face i by -rho times the integral of (u . grad u) . v_i, v_i the flow that unit pressure on face i
 * drives (reciprocal theorem; Happel and Brenner 1965, Low Reynolds Number Hydrodynamics). Returned as
 * a share of the largest flow, so that it is compared with the accuracy asked for.
 *
 * @param pressures on the faces, Pa
 * @param depth of the cell, m
 */
export function inertiaShare(
  solution: CellSolution,
  pressures: ArrayLike<number>,
  depth: number,
  density: number,
  viscosity: number,
): number | null {
  const { faces, portMatrix } = solution;
  const flow = flowField(solution, pressures);
  if (!flow) return null;
  const tests: FlowField[] = [];
  for (let i = 0; i < faces - 1; i += 1) {
    const unit = new Float64Array(faces);
    unit[i] = 1;
    tests.push(flowField(solution, unit) as FlowField);
  }
  const { mesh } = flow;
  const shift = new Float64Array(faces - 1);
  const sample = emptySample();
  const test = emptySample();
  const force = new Float64Array(3);
  for (let level = 0; level < HEIGHT.length; level += 1) {
    const modes = depthValues(flow.depth, HEIGHT[level]);
    for (let t = 0; t < mesh.triangles.length / 6; t += 1) {
      const [a, b, c] = mesh.triangles.subarray(6 * t, 6 * t + 3);
      const area =
        ((mesh.x[b] - mesh.x[a]) * (mesh.y[c] - mesh.y[a]) -
          (mesh.x[c] - mesh.x[a]) * (mesh.y[b] - mesh.y[a])) /
        2;
      // Both halves of depth 1.
      const weight = (WEIGHT[level] * area) / 3;
      for (let i = 0; i < 3; i += 1) {
        const place = { triangle: t, la: SIDE_A[i], lb: SIDE_B[i] };
        sampleAt(flow, place, modes, sample);
        const { velocity: u, gradient: g } = sample;
        for (let k = 0; k < 3; k += 1) force[k] = u[0] * g[3 * k] + u[1] * g[3 * k + 1] + u[2] * g[3 * k + 2];
        for (let f = 0; f < tests.length; f += 1) {
          sampleAt(tests[f], place, modes, test);
          const { velocity: v } = test;
          shift[f] -= weight * (force[0] * v[0] + force[1] * v[1] + force[2] * v[2]);
        }
      }
    }
  }
  const scale = solution.placements[0].scale ** 3;
  let most = 0;
  let last = 0;
  let largest = 0;
  for (const value of shift) {
    most = Math.max(most, Math.abs(value));
    last -= value;
  }
  for (let i = 0; i < faces; i += 1) {
    let q = 0;
    for (let j = 0; j < faces; j += 1) q += portMatrix[i * faces + j] * pressures[j];
    largest = Math.max(largest, Math.abs(q) / scale);
  }
  const share = (density * depth ** 2) / viscosity ** 2;
  return largest > 0 ? (share * Math.max(most, Math.abs(last))) / largest : 0;
}
