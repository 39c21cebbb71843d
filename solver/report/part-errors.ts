import { entranceError, softRoofError } from '../checks/leave-out.ts';
import { type ProcessRules, rulesOf } from '../checks/process.ts';
import type { Chip } from '../chip/chip.ts';
import type { Graph, Piece } from '../chip/graph.ts';
import type { PieceResult } from '../chip/result.ts';
import type { Duct } from '../lump/duct.ts';
import type { Lumped } from '../lump/lump.ts';
import { channelDepth, depthMismatch, NANOMETRES } from '../lump/stretches.ts';
import type { NetworkSolution } from '../network/spec.ts';
import { excesses, slenderness } from './ideal-excess.ts';

/** What is solved, as far as the errors of its parts go. */
export interface Parts {
  readonly chip: Chip;
  readonly graph: Graph;
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
  readonly pieces: readonly PieceResult[];
  readonly density: number;
  /** Share by which inertia shifts each cell. */
  readonly inertia: Float64Array;
}

/**
 * Of the width: by how much a square mitred bend is shorter than its centreline; 1 − 2 ln 2/π in the limit
 * of no depth, where it is most (Hall 1967, Thin Solid Films 1, 277, from memory).
 */
const SQUARE_BEND = 1 - (2 * Math.LN2) / Math.PI;
/** Relative error of a centreline that stands in for a cell, measured on those chips: the worst held 1.2 times over. */
const STAND_IN = 0.2;
/**
 * A cell's bound is that of its worst pattern of pressures, and in flows, which errors of both signs divide,
 * bounds of several cells rarely add up. Of their sum, this part holds 99, 97 and 95 % of flows and shares of
 * the 72 chips of test/checks/band-chips.ts at 0.002, 0.005 and 0.02 asked, and is 9, 7 and 7 times the true
 * error in the middle. What drives the whole is a sum of dissipations, which all err to one side: there the
 * whole bound counts.
 */
const OF_BOUND = 0.4;

/** Relative error of the resistance of every duct of the network, tubing counted exact. */
export function ductErrors({ chip, graph, lumped, pieces, flow, density }: Parts): Float64Array {
  const errors = new Float64Array(lumped.spec.resistance.length);
  const ideal = lumped.cells.length === 0;
  const around = ideal ? excesses(chip, graph) : null;
  const rules = chip.process ? rulesOf(chip.process) : null;
  lumped.stretches.forEach(({ piece: index, length, from, to, width }, e) => {
    const piece = graph.pieces[index];
    const layer = chip.layers[piece.layerIndex];
    const duct = lumped.ducts[e];
    errors[e] =
      duct.error +
      (around ? idealShare(duct, width, channelDepth(chip, piece), length, around, index, piece) : 0) +
      entranceError(pieces[e], duct.narrow.area, density) +
      softness(
        rules,
        layer.roof ? null : channelDepth(chip, piece),
        width,
        flow.pressure[from],
        flow.pressure[to],
      );
  });
  for (let e = lumped.stretches.length; e < lumped.ducts.length; e += 1) errors[e] = STAND_IN;
  return errors;
}

/** What ideal junctions and bends may add to a duct's resistance or take from it, as a share of it. */
function idealShare(
  duct: Duct,
  width: readonly [number, number],
  depth: number,
  length: number,
  around: Float64Array,
  index: number,
  piece: Piece,
): number {
  // A taper resists most at its narrow end: what is uncertain there counts by what a length of it resists there.
  const narrow = Math.min(...width);
  const local = width.map(
    (w) => slenderness(w, depth) / slenderness(narrow, depth) / duct.narrow.conductance,
  );
  const ends = around[2 * index] * local[0] + around[2 * index + 1] * local[1];
  return (ends / duct.resistance + bendExcess(piece)) / length;
}

/**
 * Relative error of every block of the network: of flows, which errors of several cells share, or `whole`, of
 * the power that drives it.
 */
export function blockErrors({ chip, graph, lumped, inertia }: Parts, whole = false): Float64Array {
  const errors = new Float64Array(lumped.spec.blocks.length);
  lumped.cells.forEach(({ spec, solution }, index) => {
    if (!solution) return;
    const { flowError, profileError } = solution;
    // What stands in for walls that lean, or for the turn into a hole, may well be off by all of its bound.
    const solved = spec.faces.some(({ kind }) => kind === 'rim') ? 0 : flowError - profileError;
    errors[lumped.cellBlock[index]] =
      flowError - (whole ? 0 : (1 - OF_BOUND) * solved) + inertia[index] + depthMismatch(chip, graph, spec);
  });
  return errors;
}

/** What a soft roof that is not reckoned with may let through in excess; none where the depth is null. */
function softness(
  rules: ProcessRules | null,
  depth: number | null,
  width: readonly [number, number],
  from: number,
  to: number,
): number {
  if (!rules?.modulus || depth === null) return 0;
  const pressure = Math.max(Math.abs(from || 0), Math.abs(to || 0));
  return softRoofError((Math.max(...width) * pressure) / (rules.modulus.number * depth));
}

/** What the mitred bends of a piece may take off its length, m. */
function bendExcess({ path, width }: Piece): number {
  let turned = 0;
  for (let i = 1; i + 1 < path.length; i += 1) {
    if (path[i - 1].bulge !== 0 || path[i].bulge !== 0) continue;
    const [ax, ay] = [path[i].x - path[i - 1].x, path[i].y - path[i - 1].y];
    const [bx, by] = [path[i + 1].x - path[i].x, path[i + 1].y - path[i].y];
    turned += Math.abs(Math.atan2(ax * by - ay * bx, ax * bx + ay * by));
  }
  return (SQUARE_BEND * (turned / (Math.PI / 2)) * Math.max(...width)) / NANOMETRES;
}
