import { curve, part } from '../../../solver/chip/geometry/curve.ts';
import { discPatch, flipped, type Patch, patchOf, stripPatch } from '../../../solver/chip/geometry/patch.ts';
import { unite } from '../../../solver/chip/geometry/union.ts';
import type { Edge, Shape } from '../../../solver/mesh/mesh.ts';

/**
 * The openings from which an etch that goes `undercut` sideways in every direction makes `shape`: what
 * lies at least so far inside its boundary, with true arcs (round re-entrant corners of radius
 * `undercut`, from which the etch makes sharp ones). Nothing where the shape is narrower than that.
 *
 * What is within `undercut` of the boundary is a band along every edge and a disc at every corner.
 */
export function compensated(shape: Shape, undercut: number): Shape[] {
  if (undercut === 0) return [shape];
  const minus: Patch[] = [];
  const [outer, ...holes] = shape;
  for (const hole of holes) minus.push(flipped(patchOf(hole)));
  for (const loop of shape) addBand(loop, undercut, minus);
  return unite([patchOf(outer!)], minus);
}

/** Turns gentler than this (radians) leave no gap between two bands that their overlap would not close. */
const STRAIGHT = 1e-6;

function addBand(loop: readonly Edge[], half: number, patches: Patch[]): void {
  const n = loop.length;
  const curves = loop.map((e, k) => {
    const next = loop[(k + 1) % n]!;
    return curve(e.x, e.y, next.x, next.y, e.bulge);
  });
  curves.forEach((c, k) => {
    // an arc of more than half a turn is cut, so that its band does not close on itself
    const pieces =
      c.curvature === 0 ? 1 : Math.ceil((Math.abs(c.curvature) * c.length) / (Math.PI / 2) - 1e-9);
    for (let i = 0; i < pieces; i++) {
      const piece = part(c, (c.length * i) / pieces, (c.length * (i + 1)) / pieces);
      const element = {
        channel: 0,
        index: 0,
        curve: piece,
        s0: 0,
        s1: piece.length,
        h0: half,
        h1: half,
        turn0: 0,
        turn1: 0,
      };
      patches.push(stripPatch({ element, from: 0, to: piece.length, tagFrom: undefined, tagTo: undefined }));
    }
    const before = curves[(k + n - 1) % n]!;
    const end = part(before, before.length / 2, before.length);
    // the tangent at an arc's end is its chord's turned by half the sweep: that of the reversed curve
    const back = curve(end.x1, end.y1, end.x0, end.y0, -end.bulge);
    const turn = Math.atan2(-back.ux * c.uy + back.uy * c.ux, -back.ux * c.ux - back.uy * c.uy);
    // only where the wall pokes into the cavity is a corner nearer than the edges beside it
    if (turn < -STRAIGHT) patches.push(discPatch(c.x0, c.y0, half, 0));
  });
}
