import type { CellFields, CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { HALF, mixVelocity, type VelocityField } from './flow-field.ts';
import { rimPressures } from './rim.ts';
import { quadraticGradient } from './triangle.ts';

/** Derivatives of the quadratics in the middles of the three sides, which are exact to degree two on a triangle. */
const SIDES = (
  [
    [0.5, 0.5],
    [0, 0.5],
    [0.5, 0],
  ] as const
).map(([la, lb]) => {
  const [da, db] = [new Float64Array(6), new Float64Array(6)];
  quadraticGradient(la, lb, da, db);
  return { da, db };
});
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

/**
 * patterns x patterns x patterns: minus the integral of (u_j . grad u_k) . u_f; null where fields were not kept.
 * A scalar is the same in every frame: it is reckoned in that of the solved copy.
 */
function tensorOf(solution: CellSolution): Float64Array | null {
  const { faces, fields } = solution;
  if (!fields) return null;
  const patterns = faces - 1;
  const { face } = solution.placements[0];
  const flows = Array.from({ length: patterns }, (_, i) => {
    const unit = new Float64Array(faces);
    unit[i] = 1;
    const rims = rimPressures(solution, unit);
    return mixVelocity(
      fields,
      Float64Array.from(face, (mine) => rims[mine]),
    );
  });
  const tensor = new Float64Array(patterns ** 3);
  const { triangles, x, y } = fields.mesh;
  const layers = flows.map(() => new Float64Array(6 * fields.mesh.nodeCount));
  const velocity = new Float64Array(3 * patterns);
  /** Slopes by x, y, z of each component, pattern by pattern. */
  const slopes = new Float64Array(9 * patterns);
  for (let level = 0; level < HEIGHT.length; level += 1) {
    flows.forEach((flow, f) => {
      layerAt(flow, HEIGHT[level], layers[f]);
    });
    for (let t = 0; t < triangles.length; t += 6) {
      const a = triangles[t];
      const b = triangles[t + 1];
      const c = triangles[t + 2];
      const area = ((x[b] - x[a]) * (y[c] - y[a]) - (x[c] - x[a]) * (y[b] - y[a])) / 2;
      // Both halves of depth 1.
      const weight = (WEIGHT[level] * area) / 3;
      for (let side = 0; side < 3; side += 1) {
        const { da, db } = SIDES[side];
        let xa = 0;
        let xb = 0;
        let ya = 0;
        let yb = 0;
        for (let i = 0; i < 6; i += 1) {
          const node = triangles[t + i];
          xa += da[i] * x[node];
          xb += db[i] * x[node];
          ya += da[i] * y[node];
          yb += db[i] * y[node];
        }
        const det = xa * yb - xb * ya;
        slopes.fill(0);
        for (let i = 0; i < 6; i += 1) {
          const gx = (da[i] * yb - db[i] * ya) / det;
          const gy = (db[i] * xa - da[i] * xb) / det;
          const at = 6 * triangles[t + i];
          for (let f = 0; f < patterns; f += 1) {
            const layer = layers[f];
            for (let d = 0; d < 3; d += 1) {
              slopes[9 * f + 3 * d] += gx * layer[at + d];
              slopes[9 * f + 3 * d + 1] += gy * layer[at + d];
            }
          }
        }
        // in the middle of a side there is a node, and what it has is the value
        const at = 6 * triangles[t + 3 + side];
        for (let f = 0; f < patterns; f += 1) {
          for (let d = 0; d < 3; d += 1) {
            velocity[3 * f + d] = layers[f][at + d];
            slopes[9 * f + 3 * d + 2] = layers[f][at + 3 + d];
          }
        }
        addProducts(velocity, slopes, weight, patterns, tensor);
      }
    }
  }
  return tensor;
}

/** Of every node, velocity x, y, z at a height (of half depth 1) and their slopes across the plan. */
function layerAt({ mesh, depth, inPlane, across }: VelocityField, height: number, out: Float64Array): void {
  const modes = depthValues(depth, height);
  const { nodeCount } = mesh;
  out.fill(0);
  for (let k = 0; k < inPlane.length; k += 1) {
    const value = modes.inPlane[k];
    const slope = modes.inPlaneSlope[k] / HALF;
    const mode = inPlane[k];
    for (let node = 0; node < nodeCount; node += 1) {
      const at = 6 * node;
      out[at] += value * mode[node];
      out[at + 1] += value * mode[nodeCount + node];
      out[at + 3] += slope * mode[node];
      out[at + 4] += slope * mode[nodeCount + node];
    }
  }
  for (let m = 0; m < across.length; m += 1) {
    const value = modes.across[m];
    const slope = modes.acrossSlope[m] / HALF;
    const mode = across[m];
    for (let node = 0; node < nodeCount; node += 1) {
      out[6 * node + 2] += value * mode[node];
      out[6 * node + 5] += slope * mode[node];
    }
  }
}

/** Takes weight (u_j . grad u_k) . u_f off the tensor, at one place. */
function addProducts(
  velocity: Float64Array,
  slopes: Float64Array,
  weight: number,
  patterns: number,
  tensor: Float64Array,
): void {
  for (let j = 0; j < patterns; j += 1) {
    const ux = velocity[3 * j];
    const uy = velocity[3 * j + 1];
    const uz = velocity[3 * j + 2];
    for (let k = 0; k < patterns; k += 1) {
      const g = 9 * k;
      const fx = ux * slopes[g] + uy * slopes[g + 1] + uz * slopes[g + 2];
      const fy = ux * slopes[g + 3] + uy * slopes[g + 4] + uz * slopes[g + 5];
      const fz = ux * slopes[g + 6] + uy * slopes[g + 7] + uz * slopes[g + 8];
      for (let f = 0; f < patterns; f += 1) {
        const along = fx * velocity[3 * f] + fy * velocity[3 * f + 1] + fz * velocity[3 * f + 2];
        tensor[(f * patterns + j) * patterns + k] -= weight * along;
      }
    }
  }
}
