import type { Chip } from './chip/chip.ts';
import { readGraph } from './chip/read-graph.ts';
import type { Result } from './chip/result.ts';
import { fluidOf } from './fluid/fluid.ts';
import { checkDrives } from './lump/floating.ts';
import { lump } from './lump/lump.ts';
import { emptyMemory, type Memory } from './memory.ts';
import { report } from './report/report.ts';

export interface SolveOptions {
  readonly junctions?: 'ideal' | 'solved';
  /** Relative accuracy asked of the solved junctions. */
  readonly accuracy?: number;
}

/**
 * The whole way once: chip → fluid and drawing → resistances → network → what a designer asks.
 * Throws `Problem` where the chip cannot be solved.
 *
 * @param memory what may be kept between solves of a chip that is being edited
 */
export function solve(chip: Chip, _options: SolveOptions = {}, memory: Memory = emptyMemory()): Result {
  const fluid = fluidOf(chip.fluid);
  const graph = memory.graph(chip, readGraph);
  const drives = checkDrives(chip, graph, fluid.density);
  const lumped = lump(chip, graph, fluid, memory.lumps);
  const flow = memory.network(lumped);
  return report(chip, graph, fluid, lumped, flow, drives);
}
