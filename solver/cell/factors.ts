import { analyse } from '../sparse/analyse.ts';
import { type Factor, factorise } from '../sparse/factorise.ts';
import type { Symbolic } from '../sparse/symbolic.ts';
import type { DepthModes } from './depth.ts';
import type { Plane } from './plane.ts';

/** The symbolic parts, made once for a mesh and used for every number of modes. */
export interface PlaneSymbolic {
  readonly velocity: Symbolic;
  readonly pressure: Symbolic;
}

export const analysePlane = (plane: Plane): PlaneSymbolic => ({
  velocity: analyse(plane.velocity),
  pressure: analyse(plane.pressure),
});

/** What the pressure iteration needs, factored. */
export interface StokesFactors {
  /** Per mode: stiffness + lambda / H^2 mass. */
  readonly inPlane: readonly Factor[];
  readonly across: readonly Factor[];
  /** Of the pressures: mass; stiffness with zero pressure on the faces. */
  readonly mass: Factor;
  readonly laplacian: Factor;
  /** vertexCount: 1 on faces. */
  readonly onFace: Uint8Array;
  /** Weight of the inverse Laplacian of the mean pressure. */
  readonly shallow: number;
}

/**
 * Factors all plane matrices. Mean flow in a shallow cell obeys 3/H^2 u = -grad p; where the cell is as
 * deep as it is wide the side walls hold it back as well, which 1 + 2 (depth / width)^2 stands for
 * (fewest iterations on bends of depth/width 0.05 to 5).
 */
export function factorPlane(
  plane: Plane,
  symbolic: PlaneSymbolic,
  depth: DepthModes,
  halfDepth: number,
): StokesFactors {
  const { pressure } = plane;
  const inPlane: Factor[] = [];
  const across: Factor[] = [];
  for (const lambda of depth.inPlaneLambda) inPlane.push(modal(plane, symbolic, lambda / halfDepth ** 2));
  for (const lambda of depth.acrossLambda) across.push(modal(plane, symbolic, lambda / halfDepth ** 2));
  pressure.value.set(plane.pressureMass);
  const massFactor = factorise(symbolic.pressure, pressure);

  const { boundary, boundaryTag, vertexCount } = plane.mesh;
  const onFace = new Uint8Array(vertexCount);
  let wall = 0;
  for (let e = 0; e < boundaryTag.length; e += 1) {
    const a = boundary[3 * e];
    const b = boundary[3 * e + 1];
    if (boundaryTag[e] > 0) onFace[a] = onFace[b] = 1;
    else wall += Math.hypot(plane.mesh.x[b] - plane.mesh.x[a], plane.mesh.y[b] - plane.mesh.y[a]);
  }
  // Closed all round, pressure is known but for a constant: one corner holds it.
  if (!onFace.includes(1)) onFace[0] = 1;
  pressure.value.set(plane.pressureStiffness);
  let area = 0;
  for (const value of plane.pressureMass) area += value;
  for (let j = 0; j < vertexCount; j += 1)
    for (let e = pressure.columnStart[j]; e < pressure.columnStart[j + 1]; e += 1) {
      const i = pressure.row[e];
      if (i !== j) area += plane.pressureMass[e];
      if (onFace[i] || onFace[j]) pressure.value[e] = i === j ? 1 : 0;
    }
  const ratio = wall > 0 ? (halfDepth * wall) / area : 0;
  return {
    inPlane,
    across,
    mass: massFactor,
    laplacian: factorise(symbolic.pressure, pressure),
    onFace,
    shallow: (3 / halfDepth ** 2) * (1 + 2 * ratio ** 2),
  };
}

/** Stiffness + shift mass, factored. */
function modal(plane: Plane, symbolic: PlaneSymbolic, shift: number): Factor {
  const { velocity, stiffness, mass } = plane;
  for (let e = 0; e < stiffness.length; e += 1) velocity.value[e] = stiffness[e] + shift * mass[e];
  return factorise(symbolic.velocity, velocity);
}
