import type { Chamber, Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import { cellFloor, ductFloor, type FloorParts } from '../exposure/floor.ts';
import type { Lumped } from '../lump/lump.ts';
import { depthOf, NANOMETRES } from '../lump/stretches.ts';
import type { NetworkSolution } from '../network/spec.ts';
import { rectangleConductance } from '../section/rectangle.ts';
import { areaOf } from './pools.ts';
import { inChamber } from './region.ts';

/** The floor of a chamber: what is known of its stress, and how much of it is not (m²). */
export interface ChamberFloor {
  readonly parts: FloorParts;
  readonly unknown: number;
}

/** Why there is none. */
export interface NoFloor {
  readonly why: string;
  readonly remedy: string;
}

/** A chamber's floor from its solved cell, else from the exact duct where the chamber is a straight one. */
export function chamberFloor(
  chip: Chip,
  graph: Graph,
  lumped: Lumped,
  flow: NetworkSolution,
  chamber: Chamber,
): ChamberFloor | NoFloor {
  const site = graph.sites.findIndex(({ chambers }) => chambers.includes(chamber.id));
  const cell = lumped.cells.find(({ spec }) => spec.sites.includes(site));
  if (cell?.solution) {
    const { spec, solution } = cell;
    const pressures = spec.faces.map(({ node }) => flow.pressure[node] || 0);
    const parts = cellFloor(solution, pressures, (x, y) =>
      inChamber(chamber, spec.origin[0] + NANOMETRES * x, spec.origin[1] + NANOMETRES * y),
    );
    if (parts) return { parts, unknown: 0 };
  }
  return straightFloor(chip, graph, lumped, flow, chamber, site);
}

/** Flow off the end walls is that of the duct beyond this many widths, to e^(−π·1.5), under a hundredth. */
const ENDS = 1.5;
/** A mouth this near to the full width disturbs nothing. */
const FULL = 0.999;

/** A rectangle with one mouth in each of two opposite walls: the exact duct between, the ends unknown. */
function straightFloor(
  chip: Chip,
  graph: Graph,
  lumped: Lumped,
  flow: NetworkSolution,
  chamber: Chamber,
  site: number,
): ChamberFloor | NoFloor {
  const layerIndex = chip.layers.findIndex(({ id }) => id === chamber.layer);
  const box = boxOf(chamber);
  const mouths = site < 0 ? [] : mouthsOf(graph, lumped, flow, site);
  if (!box || mouths.length !== 2 || chip.layers[layerIndex].profile.kind !== 'rectangle') {
    return {
      why: 'its floor is not solved, and it is no straight rectangle with one way in and one way out.',
      remedy: 'Solve the junctions, or make the chamber small or straight enough for it.',
    };
  }
  const walls = mouths.map(({ x, y }) => box.wallAt(x, y));
  if (walls[0] < 0 || walls[1] < 0 || (walls[0] + 2) % 4 !== walls[1]) {
    return {
      why: 'its two mouths do not lie in opposite walls.',
      remedy: 'Solve the junctions, or lead the flow straight through.',
    };
  }
  const along = walls[0] % 2;
  // Mouths lie in walls 0 and 2, or in 1 and 3; the flow runs along the other pair.
  const width = box.size[along];
  const length = box.size[1 - along];
  let ends = 0;
  for (const mouth of mouths) if (mouth.width < FULL * width) ends += ENDS * width;
  const known = Math.max(0, length - ends);
  const depth = depthOf(chip, layerIndex);
  const gradient = (lumped.viscosity * mouths[0].flow) / rectangleConductance(width, depth);
  return {
    parts: ductFloor(width, depth, known, gradient),
    unknown: areaOf(chamber) - known * width,
  };
}

interface Mouth {
  /** nm */
  readonly x: number;
  readonly y: number;
  /** m */
  readonly width: number;
  /** m³/s, a magnitude */
  readonly flow: number;
}

/** Mouths of a chamber that carry flow. */
function mouthsOf(graph: Graph, lumped: Lumped, flow: NetworkSolution, site: number): Mouth[] {
  const mouths: Mouth[] = [];
  for (const { piece: index, end } of graph.sites[site].arms) {
    const { path, width } = graph.pieces[index];
    const [vertex] = end === 'from' ? path : path.slice(-1);
    let most = 0;
    lumped.stretches.forEach((stretch, e) => {
      if (stretch.piece === index) most = Math.max(most, Math.abs(flow.ductFlow[e]));
    });
    if (!(most > 1e-9 * flow.throughput)) continue;
    const across = (end === 'from' ? width[0] : width[1]) / NANOMETRES;
    mouths.push({ x: vertex.x, y: vertex.y, width: across, flow: most });
  }
  return mouths;
}

/** Sides of a rectangular outline (m) and which of its walls (0 to 3, in turn) a point lies in; null for others. */
function boxOf({ outline }: Chamber): {
  readonly size: readonly [number, number];
  wallAt(x: number, y: number): number;
} | null {
  if (outline.length !== 4) return null;
  const side = (i: number): [number, number] => {
    const [a, b] = [outline[i % 4], outline[(i + 1) % 4]];
    return [b[0] - a[0], b[1] - a[1]];
  };
  const length = (i: number): number => Math.hypot(...side(i));
  for (let i = 0; i < 4; i += 1) {
    const [a, b] = [side(i), side(i + 1)];
    if (Math.abs(a[0] * b[0] + a[1] * b[1]) > 1e-6 * length(i) * length(i + 1)) return null;
  }
  return {
    size: [length(0) / NANOMETRES, length(1) / NANOMETRES],
    wallAt(x, y) {
      let nearest = -1;
      let least = 1e-3 * Math.min(length(0), length(1));
      for (let i = 0; i < 4; i += 1) {
        const [dx, dy] = side(i);
        const [ax, ay] = outline[i];
        const distance = Math.abs((x - ax) * dy - (y - ay) * dx) / length(i);
        if (distance < least) [least, nearest] = [distance, i];
      }
      return nearest;
    },
  };
}
