import { arrays } from './arrays.ts';
import type { DepthModes } from './depth.ts';
import { integrate, type Plane } from './plane.ts';
import type { StokesFields } from './stokes.ts';
import { triangleWorkspace } from './triangle.ts';

/**
 * Shear of each mode on the side walls by the consistent flux: what the wall must exert so that the
 * discrete equations hold for the velocity functions N_i of wall nodes too,
 *   integral over walls of du/dn N_i = a(u, N_i) - (p, div N_i) + integral over walls of p n N_i - load,
 * divided by the integral of N_i over the walls (Simpson's rule for the quadratic edge functions).
 * More exact than gradients of the velocity (Gresho et al. 1987, Int. J. Numer. Methods Fluids 7, 1111).
 * What is left is scatter from node to node: the middle of an edge takes a fifteenth of either end, which
 * halves the scatter of peaks on fillets (T junctions, fillet/width 0.02 to 0.3, 4 to 8 edges per quarter
 * circle) without lowering them on the mean.
 */
export interface WallTraction {
  /** Per in-plane mode: patterns x boundary edges x 3 (start, end, middle), along the edge's direction. */
  readonly along: Float64Array[];
  /** Per mode across: the same, along +z. */
  readonly across: Float64Array[];
}

export function wallTraction(
  plane: Plane,
  depth: DepthModes,
  halfDepth: number,
  flow: StokesFields,
): WallTraction {
  const { mesh, unknown, count } = plane;
  const { triangles, nodeCount, vertexCount, boundary, boundaryTag } = mesh;
  const N = depth.count;
  const acrossModes = depth.acrossLambda.length;
  const n = flow.patterns;
  const edges = boundaryTag.length;

  const wallIndex = new Int32Array(nodeCount).fill(-1);
  let walls = 0;
  for (let e = 0; e < edges; e += 1)
    if (boundaryTag[e] === 0)
      for (let i = 0; i < 3; i += 1)
        if (wallIndex[boundary[3 * e + i]] < 0) wallIndex[boundary[3 * e + i]] = walls++;

  // Residuals: per mode and pattern, x then y (then none) per wall node.
  const inPlane = arrays(N, 2 * n * walls);
  const across = arrays(acrossModes, n * walls);
  const work = triangleWorkspace();
  const x = new Float64Array(6);
  const y = new Float64Array(6);
  for (let t = 0; t < triangles.length / 6; t += 1) {
    let touches = false;
    for (let i = 0; i < 6; i += 1) if (wallIndex[triangles[6 * t + i]] >= 0) touches = true;
    if (!touches) continue;
    integrate(mesh, t, work, x, y);
    for (let i = 0; i < 6; i += 1) {
      const to = wallIndex[triangles[6 * t + i]];
      if (to < 0) continue;
      for (let k = 0; k < N; k += 1) {
        const shift = depth.inPlaneLambda[k] / halfDepth ** 2;
        for (let j = 0; j < 6; j += 1) {
          const from = unknown[triangles[6 * t + j]];
          if (from < 0) continue;
          const a = work.stiffness[6 * i + j] + shift * work.mass[6 * i + j];
          for (let c = 0; c < 2 * n; c += 1)
            inPlane[k][c * walls + to] += a * flow.inPlane[k][c * count + from];
        }
        for (let l = 0; l < 3; l += 1) {
          const corner = triangles[6 * t + l];
          for (let c = 0; c < n; c += 1) {
            let p = 0;
            for (let j = 0; j < flow.pressure.length; j += 1)
              p += depth.coupling[j * N + k] * flow.pressure[j][c * vertexCount + corner];
            inPlane[k][2 * c * walls + to] -= work.gradX[6 * l + i] * p;
            inPlane[k][(2 * c + 1) * walls + to] -= work.gradY[6 * l + i] * p;
          }
        }
      }
      for (let m = 0; m < acrossModes; m += 1) {
        const shift = depth.acrossLambda[m] / halfDepth ** 2;
        for (let j = 0; j < 6; j += 1) {
          const from = unknown[triangles[6 * t + j]];
          if (from < 0) continue;
          const a = work.stiffness[6 * i + j] + shift * work.mass[6 * i + j];
          for (let c = 0; c < n; c += 1) across[m][c * walls + to] += a * flow.across[m][c * count + from];
        }
        for (let l = 0; l < 3; l += 1)
          for (let c = 0; c < n; c += 1) {
            let p = 0;
            for (let j = 1; j < flow.pressure.length; j += 1)
              p +=
                depth.acrossCoupling[j * acrossModes + m] *
                flow.pressure[j][c * vertexCount + triangles[6 * t + l]];
            across[m][c * walls + to] -= (work.mixed[6 * l + i] * p) / halfDepth;
          }
      }
    }
  }

  const length = new Float64Array(walls);
  const value = new Float64Array(3);
  for (let e = 0; e < edges; e += 1) {
    const tag = boundaryTag[e];
    const nodes = boundary.subarray(3 * e, 3 * e + 3);
    for (let g = 0; g < 3; g += 1) {
      const s = GAUSS[g];
      value[0] = (s * (s - 1)) / 2;
      value[1] = (s * (s + 1)) / 2;
      value[2] = 1 - s * s;
      const dx = (s - 0.5) * mesh.x[nodes[0]] + (s + 0.5) * mesh.x[nodes[1]] - 2 * s * mesh.x[nodes[2]];
      const dy = (s - 0.5) * mesh.y[nodes[0]] + (s + 0.5) * mesh.y[nodes[1]] - 2 * s * mesh.y[nodes[2]];
      for (let i = 0; i < 3; i += 1) {
        const to = wallIndex[nodes[i]];
        if (to < 0) continue;
        const w = WEIGHT[g] * value[i];
        if (tag === 0) length[to] += w * Math.hypot(dx, dy);
        for (let k = 0; k < N; k += 1)
          for (let c = 0; c < n; c += 1) {
            // On walls the pressure of the flow, on its own face the unit pressure that drives the pattern.
            let p = tag === c + 1 ? depth.coupling[k] : 0;
            if (tag === 0)
              for (let j = 0; j < flow.pressure.length; j += 1) {
                const at = flow.pressure[j];
                p +=
                  depth.coupling[j * N + k] *
                  (((1 - s) / 2) * at[c * vertexCount + nodes[0]] +
                    ((1 + s) / 2) * at[c * vertexCount + nodes[1]]);
              }
            inPlane[k][2 * c * walls + to] += w * p * dy;
            inPlane[k][(2 * c + 1) * walls + to] -= w * p * dx;
          }
      }
    }
  }

  const along = arrays(N, 3 * edges * n);
  const up = arrays(acrossModes, 3 * edges * n);
  for (let e = 0; e < edges; e += 1) {
    if (boundaryTag[e] !== 0) continue;
    const nodes = boundary.subarray(3 * e, 3 * e + 3);
    for (let i = 0; i < 3; i += 1) {
      const s = NODE[i];
      const dx = (s - 0.5) * mesh.x[nodes[0]] + (s + 0.5) * mesh.x[nodes[1]] - 2 * s * mesh.x[nodes[2]];
      const dy = (s - 0.5) * mesh.y[nodes[0]] + (s + 0.5) * mesh.y[nodes[1]] - 2 * s * mesh.y[nodes[2]];
      const scale = -1 / (length[wallIndex[nodes[i]]] * Math.hypot(dx, dy));
      const from = wallIndex[nodes[i]];
      for (let c = 0; c < n; c += 1) {
        const to = 3 * (c * edges + e) + i;
        for (let k = 0; k < N; k += 1)
          along[k][to] =
            scale * (dx * inPlane[k][2 * c * walls + from] + dy * inPlane[k][(2 * c + 1) * walls + from]);
        for (let m = 0; m < acrossModes; m += 1) up[m][to] = -across[m][c * walls + from] / length[from];
      }
    }
  }
  for (const part of [...along, ...up])
    for (let e = 0; e < part.length; e += 3) part[e + 2] = (13 * part[e + 2] + part[e] + part[e + 1]) / 15;
  return { along, across: up };
}

/** Three-point Gauss on [-1, 1]; places of start, end, middle. */
const GAUSS = [-Math.sqrt(0.6), 0, Math.sqrt(0.6)] as const;
const WEIGHT = [5 / 9, 8 / 9, 5 / 9] as const;
const NODE = [-1, 1, 0] as const;
