import { apparentViscosity } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import { wallShear } from '../wall-shear.ts';
import type { SectionElements } from './elements.ts';

/** Greatest wall shear stress of a solved flow. */
export function peakWallStress(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
): number {
  const still = new Uint8Array(elements.mesh.nodeCount);
  const stress = wallStress(elements, model, gradient, smallest, velocity, still);
  let peak = 0;
  for (let i = 0; i < stress.length; i += 1) if (elements.wall[i]) peak = Math.max(peak, stress[i]);
  return peak;
}

/**
 * Wall shear stress of a solved flow at the nodes of the wall, from the balance of forces there (consistent
 * boundary flux, see `wallShear`): what the pressure gradient drives less what the fluid's stress holds.
 *
 * @param still nodes where it is known to be zero (1): convex corners, of fluids without a yield stress
 */
export function wallStress(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
  still: Uint8Array,
): Float64Array {
  const { mesh, table, load, wall, wallEdges } = elements;
  const { weight, gx, gy } = table;
  const { count } = table.rule;
  const force = load.map((value) => gradient * value);
  for (let t = 0; t < table.triangleCount; t += 1) {
    const nodes = mesh.triangles.subarray(6 * t, 6 * t + 6);
    if (!nodes.some((node) => wall[node])) continue;
    for (let p = t * count; p < (t + 1) * count; p += 1) {
      let ux = 0;
      let uy = 0;
      for (let k = 0; k < 6; k += 1) {
        ux += velocity[nodes[k]] * gx[6 * p + k];
        uy += velocity[nodes[k]] * gy[6 * p + k];
      }
      const viscous = weight[p] * apparentViscosity(model, Math.hypot(ux, uy), smallest);
      for (let k = 0; k < 6; k += 1) {
        force[nodes[k]] -= viscous * (ux * gx[6 * p + k] + uy * gy[6 * p + k]);
      }
    }
  }
  const stress = new Float64Array(mesh.nodeCount);
  wallShear(mesh, wallEdges, force, still, stress);
  return stress;
}
