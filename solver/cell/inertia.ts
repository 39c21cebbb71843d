import type { CellFields, CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { type FlowField, flowField } from './flow-field.ts';
import { emptySample, sampleAt } from './sample.ts';

/** Middles of the three sides: exact to degree two on a triangle. */
const SIDE_A = [0.5, 0, 0.5] as const;
const SIDE_B = [0.5, 0.5, 0] as const;
/** Gauss points on [0, 1], exact to degree seven. */
const HEIGHT = [0.0694318442029737, 0.3300094782075719, 0.6699905217924281, 0.9305681557970263] as const;
const WEIGHT = [0.1739274225687269, 0.3260725774312731, 0.3260725774312731, 0.1739274225687269] as const;

/** By solution: what one pattern's flow, carried by another's, does to the flow into a face. */
const tensors = new WeakMap<CellSolution, Float64Array | null>();

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
  let tensor = tensors.get(solution);
  if (tensor === undefined) {
    tensor = sharedTensor(solution);
    tensors.set(solution, tensor);
  }
  if (!tensor) return null;
  const { faces, portMatrix } = solution;
  const patterns = faces - 1;
  let most = 0;
  let last = 0;
  for (let f = 0; f < patterns; f += 1) {
    let shift = 0;
    for (let j = 0; j < patterns; j += 1) {
      for (let k = 0; k < patterns; k += 1) {
        const pj = pressures[j] - pressures[patterns];
        const pk = pressures[k] - pressures[patterns];
        shift += tensor[(f * patterns + j) * patterns + k] * pj * pk;
      }
    }
    most = Math.max(most, Math.abs(shift));
    last -= shift;
  }
  const scale = solution.placements[0].scale ** 3;
  let largest = 0;
  for (let i = 0; i < faces; i += 1) {
    let q = 0;
    for (let j = 0; j < faces; j += 1) q += portMatrix[i * faces + j] * pressures[j];
    largest = Math.max(largest, Math.abs(q) / scale);
  }
  const share = (density * depth ** 2) / viscosity ** 2;
  return largest > 0 ? (share * Math.max(most, Math.abs(last))) / largest : 0;
}

/** By solved copy, then by the order of its faces: copies of one junction in a chip have it in common. */
const shared = new WeakMap<CellFields, Map<string, Float64Array | null>>();

function sharedTensor(solution: CellSolution): Float64Array | null {
  const { fields, holes, placements } = solution;
  // beyond a hole the pressures are not those on the faces of the solved copy
  if (!fields || holes.some((r) => r > 0)) return tensorOf(solution);
  let known = shared.get(fields);
  if (!known) {
    known = new Map();
    shared.set(fields, known);
  }
  const key = placements[0].face.join(' ');
  let tensor = known.get(key);
  if (tensor === undefined) {
    tensor = tensorOf(solution);
    known.set(key, tensor);
  }
  return tensor;
}

/** patterns x patterns x patterns: minus the integral of (u_j . grad u_k) . u_f; null where fields were not kept. */
function tensorOf(solution: CellSolution): Float64Array | null {
  const { faces } = solution;
  const patterns = faces - 1;
  const flows: FlowField[] = [];
  for (let i = 0; i < patterns; i += 1) {
    const unit = new Float64Array(faces);
    unit[i] = 1;
    const flow = flowField(solution, unit);
    if (!flow) return null;
    flows.push(flow);
  }
  const tensor = new Float64Array(patterns ** 3);
  const { mesh, depth } = flows[0];
  const samples = flows.map(() => emptySample());
  const force = new Float64Array(3);
  for (let level = 0; level < HEIGHT.length; level += 1) {
    const modes = depthValues(depth, HEIGHT[level]);
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
        for (let f = 0; f < patterns; f += 1) sampleAt(flows[f], place, modes, samples[f]);
        for (let j = 0; j < patterns; j += 1) {
          const u = samples[j].velocity;
          for (let k = 0; k < patterns; k += 1) {
            const g = samples[k].gradient;
            for (let d = 0; d < 3; d += 1)
              force[d] = u[0] * g[3 * d] + u[1] * g[3 * d + 1] + u[2] * g[3 * d + 2];
            for (let f = 0; f < patterns; f += 1) {
              const v = samples[f].velocity;
              tensor[(f * patterns + j) * patterns + k] -=
                weight * (force[0] * v[0] + force[1] * v[1] + force[2] * v[2]);
            }
          }
        }
      }
    }
  }
  return tensor;
}
