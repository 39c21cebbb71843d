import { span } from '../checks/span.ts';
import type { Chip } from '../chip/chip.ts';
import type { Graph, Piece, Site } from '../chip/graph.ts';
import { NANOMETRES } from '../lump/stretches.ts';

/**
 * Of half the width of the widest channel at an ideal junction: by how much each arm may be longer or shorter in
 * effect. Half of it, because what flows past is neither as free as if the junction were open space nor as held
 * as if its walls went on.
 */
const OF_HALF = 0.5;
/** cos 120°: arms that open wider than this share no corner that reaches into them. */
const WIDE = -0.5;

/**
 * By how much the arms of ideal junctions and chambers may be longer or shorter in effect, m: of each piece at
 * its start and at its end (2 × index, 2 × index + 1).
 *
 * A junction reaches half the width of its widest channel into an arm. Where the arm beside it leaves at a sharp
 * angle, the two go on covering the same ground as far as the corner between them, (w' + w cos θ)/(2 sin θ) for
 * widths w, w' at an angle θ: that is counted twice, so that all of it is in doubt. In a chamber, taken as one
 * pressure, it is how much flow narrows into a mouth, and the way from there to the middle of the mouths (or to
 * the port inside), by how much a channel as wide as the largest circle inside resists against the arm.
 */
export function excesses(chip: Chip, graph: Graph): Float64Array {
  const found = new Float64Array(2 * graph.pieces.length);
  for (const site of graph.sites) {
    const inside = site.chambers.length > 0;
    if (site.kind !== 'junction' && !inside) continue;
    const arms = site.arms.map(({ piece, end }) => armOf(graph.pieces[piece], end === 'from'));
    const widest = Math.max(...arms.map(({ width }) => width));
    const room = inside ? roomOf(chip, site, arms) : null;
    site.arms.forEach(({ piece, end }, i) => {
      const arm = arms[i];
      let off = room?.(arm, graph.pieces[piece]) ?? 0;
      if (!room) {
        const half = widest / 2;
        const reach = Math.max(half, ...arms.map((other) => (other === arm ? 0 : corner(arm, other))));
        off = OF_HALF * half + Math.min(reach, graph.pieces[piece].length) - half;
      }
      found[2 * piece + (end === 'from' ? 0 : 1)] = Math.max(0, off) / NANOMETRES;
    });
  }
  return found;
}

/** How an arm leaves its junction: nm and a unit vector. */
interface Arm {
  readonly x: number;
  readonly y: number;
  readonly ux: number;
  readonly uy: number;
  readonly width: number;
}

function armOf({ path, width }: Piece, starts: boolean): Arm {
  const [p, q] = starts ? [path[0], path[1]] : [path[path.length - 1], path[path.length - 2]];
  // An arc leaves its chord by half its sweep, four times the arctan of the bulge.
  const bulge = starts ? p.bulge : -q.bulge;
  const turn = Math.atan2(q.y - p.y, q.x - p.x) - 2 * Math.atan(bulge);
  return { x: p.x, y: p.y, ux: Math.cos(turn), uy: Math.sin(turn), width: width[starts ? 0 : 1] };
}

/** How far along an arm the corner between it and another lies. */
function corner(arm: Arm, other: Arm): number {
  const cos = arm.ux * other.ux + arm.uy * other.uy;
  if (cos < WIDE) return 0;
  const sin = Math.abs(arm.ux * other.uy - arm.uy * other.ux);
  return (other.width + arm.width * cos) / (2 * Math.max(sin, 1e-3));
}

/** The way inside a chamber as a length of the arm, nm. */
function roomOf(chip: Chip, site: Site, arms: readonly Arm[]): (arm: Arm, piece: Piece) => number {
  const holes = chip.ports.filter(({ id }) => site.ports.includes(id)).map(({ at: [x, y] }) => ({ x, y }));
  const ends = holes.length > 0 ? holes : arms;
  const x = ends.reduce((sum, end) => sum + end.x, 0) / ends.length;
  const y = ends.reduce((sum, end) => sum + end.y, 0) / ends.length;
  const chambers = chip.chambers.filter(({ id }) => site.chambers.includes(id));
  const wide = Math.min(...chambers.map((chamber) => span(chamber).diameter));
  return (arm, { layerIndex }) => {
    const { depth } = chip.layers[layerIndex];
    const way = Math.hypot(arm.x - x, arm.y - y);
    return narrowing(arm.width, wide) + way * (slenderness(wide, depth) / slenderness(arm.width, depth));
  };
}

/**
 * What a step from one width to a larger one adds to the narrow side, as a length of it, in the limit of no depth,
 * where it is most: w/π [(x + 1/x) ln((x + 1)/(x − 1)) + 2 ln((x² − 1)/(4 x))], x the ratio (Hall 1967, Thin Solid
 * Films 1, 277, from memory).
 */
function narrowing(width: number, wide: number): number {
  const x = Math.max(wide / width, width / wide);
  if (x < 1 + 1e-6) return 0;
  const sum = (x + 1 / x) * Math.log((x + 1) / (x - 1)) + 2 * Math.log((x * x - 1) / (4 * x));
  return (Math.min(width, wide) / Math.PI) * Math.max(0, sum);
}

/**
 * Resistance per length of a rectangle up to a factor, a the smaller side and b the larger: 1/(a³ b (1 − 0.63 a/b)),
 * within 13 % (first terms of the series, from memory), which is ample for what an error is weighed by.
 */
export function slenderness(width: number, depth: number): number {
  const [a, b] = width < depth ? [width, depth] : [depth, width];
  return 1 / (a ** 3 * b * (1 - (0.63 * a) / b));
}
