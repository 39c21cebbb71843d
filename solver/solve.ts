import { type Accuracy, DEFAULT_ACCURACY, PREVIEW_ACCURACY } from './cell/cell.ts';
import type { Chip } from './chip/chip.ts';
import type { Graph } from './chip/graph.ts';
import type { Result } from './chip/result.ts';
import { type Fluid, fluidOf } from './fluid/fluid.ts';
import { placeCells } from './lump/cells.ts';
import { checkDrives, type DriveCheck } from './lump/floating.ts';
import { cellLayout, idealLayout, type Layout } from './lump/layout.ts';
import { type Lumped, lump } from './lump/lump.ts';
import { settleThinning } from './lump/thinning.ts';
import { emptyMemory, type Memory } from './memory.ts';
import type { Gradient, Target } from './network/sensitivity.ts';
import type { NetworkSolution } from './network/spec.ts';
import { withMaking } from './report/making.ts';
import { report } from './report/report.ts';

export interface SolveOptions {
  /** Junctions solved in three dimensions (the default), or one pressure each. */
  readonly junctions?: 'ideal' | 'solved';
  /** Relative accuracy asked of the flow through solved junctions; their peaks get five times that. */
  readonly accuracy?: number;
  /** Take only junctions that memory holds; the others count as ideal and wait in `memory.cells.waiting`. */
  readonly haste?: boolean;
  /** To preview accuracy, whatever `accuracy` says: while a shape is dragged, never for what is kept. */
  readonly preview?: boolean;
}

/**
 * The whole way once: chip → fluid and drawing → ducts and cells → network → what a designer asks.
 * Throws `Problem` where the chip cannot be solved.
 *
 * @param memory what may be kept between solves of a chip that is being edited
 */
export function solve(chip: Chip, options: SolveOptions = {}, memory: Memory = emptyMemory()): Result {
  return solveInParts(chip, options, memory).whole();
}

/** A chip's result in two parts, the second for when it is asked for. */
export interface SolvedInParts {
  /** What the five answers are made from: all but routes that no limit needs and how cells are strained. */
  readonly first: Result;
  /** What `solve` returns, whatever was solved with the same memory meanwhile. */
  whole(): Result;
}

/** As `solve`, for whoever waits for the five answers: what these do not need is found when it is asked for. */
export function solveInParts(chip: Chip, options: SolveOptions, memory: Memory): SolvedInParts {
  const { graph, fluid, drives, lumped, flow } = networkOf(chip, options, memory);
  const depends = (targets: readonly Target[]): Gradient[] | null => memory.gradients(lumped, flow, targets);
  const slopes = (targets: readonly Target[]): Gradient[] | null => memory.slopes(lumped, flow, targets);
  const reported = report(chip, graph, fluid, lumped, flow, drives, depends, accuracyOf(options).flow);
  const first = withMaking(reported.first, { chip, graph, lumped, flow }, slopes);
  return { first, whole: () => reported.complete(first) };
}

/** A chip's network with its flows, and what it was made from. */
export interface Networked {
  readonly graph: Graph;
  readonly fluid: Fluid;
  readonly drives: DriveCheck;
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
}

/** The first part of `solve`: pressures and flows, before anything is reported of them. */
export function networkOf(chip: Chip, options: SolveOptions, memory: Memory): Networked {
  const fluid = fluidOf(chip.fluid);
  const graph = memory.graph(chip);
  const drives = checkDrives(chip, graph, fluid.density);
  const layout = options.junctions === 'ideal' ? idealLayout(graph) : solvedLayout(chip, options, memory);
  const settled = settleThinning(lump(chip, graph, layout, fluid, memory.lumps), memory.network);
  return { graph, fluid, drives, ...settled };
}

function solvedLayout(chip: Chip, options: SolveOptions, memory: Memory): Layout {
  const cut = memory.cut(chip);
  const { cells, findings } = placeCells(
    cut.cells,
    accuracyOf(options),
    options.haste ?? false,
    memory.cells,
  );
  return cellLayout(memory.graph(chip), cut, cells, findings);
}

export function accuracyOf({ accuracy, preview }: SolveOptions): Accuracy {
  if (preview) return PREVIEW_ACCURACY;
  return accuracy === undefined ? DEFAULT_ACCURACY : { flow: accuracy, peak: 5 * accuracy };
}
