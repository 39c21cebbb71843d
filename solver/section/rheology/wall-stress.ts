import { apparentViscosity } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import { analyse } from '../../sparse/analyse.ts';
import { factorise } from '../../sparse/factorise.ts';
import { patternOfElements } from '../../sparse/pattern.ts';
import { solve } from '../../sparse/solve.ts';
import { edgeValues } from '../basis.ts';
import { LINE_POINTS, LINE_WEIGHTS } from '../quadrature.ts';
import { type SectionElements, stretch } from './elements.ts';

/**
 * Greatest wall shear stress of a solved flow, from the balance of forces (consistent boundary flux): the
 * quadratic stress along the wall that holds what the section's own equations leave there. Its integral
 * is the force of the pressure gradient to rounding, and it converges faster than the velocity's slope.
 */
export function peakWallStress(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
): number {
  const { mesh, load, wallEdges } = elements;
  const place = new Int32Array(mesh.nodeCount).fill(-1);
  let count = 0;
  const local = wallEdges.map((node) => {
    if (place[node] < 0) {
      place[node] = count;
      count += 1;
    }
    return place[node];
  });
  const force = new Float64Array(count);
  for (let i = 0; i < mesh.nodeCount; i += 1) if (place[i] >= 0) force[place[i]] = gradient * load[i];
  takeStress(elements, model, smallest, velocity, place, force);

  const start = Int32Array.from({ length: wallEdges.length / 3 + 1 }, (_, e) => 3 * e);
  const { matrix, scatter } = patternOfElements(count, start, local);
  const n = new Float64Array(3);
  for (let e = 0; 3 * e < wallEdges.length; e += 1) {
    const edge = wallEdges.subarray(3 * e, 3 * e + 3);
    LINE_POINTS.forEach((t, q) => {
      edgeValues(t, n);
      const w = LINE_WEIGHTS[q] * stretch(mesh, edge, t);
      for (let i = 0, m = 6 * e; i < 3; i += 1) {
        for (let j = 0; j <= i; j += 1, m += 1) matrix.value[scatter[m]] += w * n[i] * n[j];
      }
    });
  }
  solve(factorise(analyse(matrix), matrix), force);
  return force.reduce((a, b) => Math.max(a, b));
}

/** Takes from `force` the integral of stress times the gradient of each wall function. */
function takeStress(
  elements: SectionElements,
  model: ShearModel,
  smallest: number,
  velocity: Float64Array,
  place: Int32Array,
  force: Float64Array,
): void {
  const { table, mesh } = elements;
  const { weight, gx, gy } = table;
  const { count } = table.rule;
  for (let t = 0; t < table.triangleCount; t += 1) {
    const nodes = mesh.triangles.subarray(6 * t, 6 * t + 6);
    if (nodes.every((node) => place[node] < 0)) continue;
    for (let p = t * count; p < (t + 1) * count; p += 1) {
      let ux = 0;
      let uy = 0;
      for (let k = 0; k < 6; k += 1) {
        ux += velocity[nodes[k]] * gx[6 * p + k];
        uy += velocity[nodes[k]] * gy[6 * p + k];
      }
      const viscous = weight[p] * apparentViscosity(model, Math.hypot(ux, uy), smallest);
      for (let k = 0; k < 6; k += 1) {
        if (place[nodes[k]] >= 0) {
          force[place[nodes[k]]] -= viscous * (ux * gx[6 * p + k] + uy * gy[6 * p + k]);
        }
      }
    }
  }
}
