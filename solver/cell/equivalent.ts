import type { Shape } from '../mesh/mesh.ts';
import type { Profile } from '../section/profile.ts';
import { rectangleSection } from '../section/rectangle.ts';
import { type Section, sectionOf } from '../section/section-of.ts';
import { offsetPlan } from './offset-plan.ts';
import type { CellShape } from './shape.ts';

/**
 * Cells are extruded. Another profile is stood in for by rectangles of its mean width (area over depth):
 * the walls of the plan are moved by half the difference, and the depth is the one at which the arms
 * carry as much per length as their true sections,
 *   product over the faces of K(true) / K(rectangle) = 1.
 */
export interface Equivalent {
  readonly shape: CellShape;
  /**
   * Bound of the relative error that this brings: what is left between single arms, and for the
   * middle of the cell 0.003 + 0.03 run / width, `run` being how far a side wall leans. Measured by
   * tetrahedra on square bends and T junctions with side walls at 54.7 degrees (depth/width 0.1, 0.2, 0.5)
   * and etched round (0.1, 0.5): at most 0.3, 0.3, 0.8 and 0.4, 0.1 %. Doubled for profiles not measured.
   * Where details are smaller than the move the walls stay, and 0.4 run / width holds (measured up to
   * 0.36).
   */
  readonly error: number;
  /**
   * How the peak wall shear of `shape` becomes that of the true walls; else why it can't: walls that lean
   * outward leave some fillet sharp, or the profile was not measured.
   */
  readonly peak: EquivalentPeak | 'leans sharp' | 'not measured';
}

export interface EquivalentPeak {
  /** The true sections' peak shear over the rectangles', for the same flow; the mean over the faces. */
  readonly scale: number;
  /**
   * Bound of the relative error: what single faces differ by, and 0.03 + run / width, of which no more than
   * 0.15 counts. Measured by tetrahedra on bends and T junctions with fillets of 0.05 to 0.5 of the width, less
   * what the same meshes say of upright walls: side walls at 54.7, 75 and 85 degrees (depth/width 0.1 to 1)
   * at most 0.1, etched round (0.1, 0.2) 0.11.
   */
  readonly error: number;
}

export function equivalent(given: CellShape, where: string): Equivalent {
  const { profile, depth } = given;
  if (profile.kind === 'rectangle') return { shape: given, error: 0, peak: { scale: 1, error: 0 } };
  const masks = faceWidths(given);
  const sections = masks.map((width) => sectionOf(profile, width, depth, where));
  const narrowest = Math.min(...masks);
  const run = Math.max(...masks.map((width) => lean(profile, width, depth)));
  let move = 0;
  sections.forEach((section, i) => {
    move += (section.area / depth - masks[i]) / 2 / masks.length;
  });
  const moved = offsetPlan(given.loops, move);
  const widths = moved ? masks.map((width) => width + 2 * move) : masks;
  const misses = (d: number): number[] =>
    widths.map((width, i) => Math.log(sections[i].conductance / rectangleSection(width, d).conductance));
  let low = depth / 20;
  let high = depth * 20;
  for (let step = 0; step < 60; step += 1) {
    const middle = Math.sqrt(low * high);
    if (misses(middle).reduce((sum, value) => sum + value, 0) > 0) low = middle;
    else high = middle;
  }
  const equal = Math.sqrt(low * high);
  const spread = Math.max(...misses(equal).map(Math.abs));
  const measured = profile.kind === 'trapezoid' || profile.kind === 'rounded' ? 1 : 2;
  const middle = moved ? 0.003 + (0.03 * measured * run) / narrowest : (0.4 * run) / narrowest;
  return {
    shape: { loops: moved ?? given.loops, depth: equal, faces: given.faces, profile: { kind: 'rectangle' } },
    error: spread + middle,
    peak: moved ? equivalentPeak(given, sections, widths, equal, run / narrowest) : 'not measured',
  };
}

/** Walls that lean further than this share of the width, or meet, were not measured. */
const MOST_LEAN = 0.36;

function equivalentPeak(
  { loops, profile, depth }: CellShape,
  sections: readonly Section[],
  widths: readonly number[],
  equal: number,
  lean: number,
): EquivalentPeak | 'leans sharp' | 'not measured' {
  if (profile.kind !== 'trapezoid' && profile.kind !== 'rounded') return 'not measured';
  if (Math.abs(lean) > MOST_LEAN) return 'not measured';
  const outward = profile.kind === 'rounded' ? depth : depth / Math.tan((-profile.wallAngle * Math.PI) / 180);
  if (outward >= leastFillet(loops)) return 'leans sharp';
  const ratios = sections.map(({ peakShear }, i) =>
    Math.log((peakShear ?? Number.NaN) / rectangleSection(widths[i], equal).peakShear!),
  );
  const mean = ratios.reduce((sum, ratio) => sum + ratio, 0) / ratios.length;
  if (Number.isNaN(mean)) return 'not measured';
  const spread = Math.max(...ratios.map((ratio) => Math.abs(ratio - mean)));
  return { scale: Math.exp(mean), error: spread + 0.03 + Math.min(0.15, Math.abs(lean)) };
}

/** Least radius of the fillets at re-entrant corners: it gets less by as much as walls lean outward. */
function leastFillet(loops: Shape): number {
  let least = Number.POSITIVE_INFINITY;
  for (const loop of loops)
    loop.forEach((edge, i) => {
      if (edge.tag !== 0 || edge.bulge >= 0) return;
      const next = loop[(i + 1) % loop.length];
      const chord = Math.hypot(next.x - edge.x, next.y - edge.y);
      least = Math.min(least, (chord * (1 + edge.bulge ** 2)) / (4 * Math.abs(edge.bulge)));
    });
  return least;
}

/** How far a side wall goes sideways from floor to lid. */
function lean(profile: Profile, width: number, depth: number): number {
  switch (profile.kind) {
    case 'rectangle':
      return 0;
    case 'trapezoid':
      return depth / Math.tan((profile.wallAngle * Math.PI) / 180);
    case 'rounded':
      return depth;
    default:
      return width / 2;
  }
}

/** Length of each face in the plan. */
export function faceWidths(shape: CellShape): number[] {
  const widths = new Array<number>(shape.faces).fill(0);
  for (const loop of shape.loops)
    for (let i = 0; i < loop.length; i += 1) {
      const edge = loop[i];
      if (edge.tag === 0) continue;
      const next = loop[(i + 1) % loop.length];
      widths[edge.tag - 1] += Math.hypot(next.x - edge.x, next.y - edge.y);
    }
  return widths;
}
