import type { Mesh } from '../mesh/mesh.ts';
import { boundedFlow } from './bounded-flow.ts';
import type { Profile } from './profile.ts';
import { checkSize } from './section-of.ts';
import { sectionMesh } from './solve-section.ts';
import { shapeOf } from './solved-unit.ts';

/** Velocity over a section, to be drawn: quadratic on six-node triangles. */
export interface SectionField {
  /** Coordinates in metres, as `Section` counts places. */
  readonly mesh: Mesh;
  /** Velocity at the nodes per unit G/µ, m². */
  readonly velocity: Float64Array;
  /** Whether only the right half is meshed, the left one being its mirror image at x = 0. */
  readonly mirrored: boolean;
  /** Width of the flat middle that is left out at x = 0, m; the velocity there is that at x = 0. */
  readonly leftOut: number;
}

/** Mesh size over hydraulic diameter: a few parts in a thousand at the nodes. */
const SIZE = 0.15;

/** The velocity field of any profile, rectangles and ellipses too; a few milliseconds. */
export function sectionField(profile: Profile, width: number, depth: number, where = ''): SectionField {
  checkSize(profile, width, depth, where);
  const shape = shapeOf(profile, width, depth, where);
  const size = (SIZE * 4 * shape.area) / shape.perimeter;
  const mesh = sectionMesh(shape, size, 8, where);
  const { u } = boundedFlow(shape, mesh).flow;
  const { unit, origin } = shape;
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    mesh.x[i] = origin[0] + mesh.x[i] * unit;
    mesh.y[i] = origin[1] + mesh.y[i] * unit;
    u[i] *= unit * unit;
  }
  return { mesh, velocity: u, mirrored: shape.symmetric, leftOut: shape.extra * unit };
}
