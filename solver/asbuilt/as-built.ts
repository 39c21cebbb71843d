import type { Chip } from '../chip/chip.ts';
import type { Result } from '../chip/result.ts';
import { emptyMemory, type Memory } from '../memory.ts';
import { type SolveOptions, solve } from '../solve.ts';
import { type Made, madeChip } from './made.ts';
import type { Measured } from './measured.ts';
import { type Restored, restoreDrives, settable } from './restore.ts';
import { heldToWays, waysOf } from './ways.ts';

/** The made chip beside the drawn one, and what its drives can still do. */
export interface AsBuilt extends Made {
  readonly drawn: Result;
  readonly result: Result;
  /** null where no target is given. */
  readonly restored: Restored | null;
  /** Where that does not meet the targets: what it would take if every open port could be driven too; null where it is no better. */
  readonly wider: Restored | null;
}

export interface AsBuiltOptions extends SolveOptions {
  /** Ports whose drives may be set, by id; chosen by the chip where absent. */
  readonly set?: readonly string[];
}

/**
 * The whole way: measurements into a made chip, both solved, and the drives that restore the targets. A target is met
 * only by a flow that runs the way it does in the drawn chip. Throws `Problem`.
 *
 * @param memory what may be kept of the made chip between calls
 * @param known of the drawn chip, where it is solved already
 */
export function asBuilt(
  drawn: Chip,
  measured: readonly Measured[],
  options: AsBuiltOptions = {},
  memory: Memory = emptyMemory(),
  known: Result | null = null,
): AsBuilt {
  const made = madeChip(drawn, measured);
  const before = known ?? solve(drawn, options);
  const ways = waysOf(drawn, before);
  const result = heldToWays(made.chip, solve(made.chip, options, memory), ways);
  if (made.chip.targets.length === 0) return { ...made, drawn: before, result, restored: null, wider: null };
  const restored = restoreDrives(made.chip, { ...options, ways }, memory);
  const all = made.chip.ports.filter(({ drive }) => drive.kind !== 'closed').map(({ id }) => id);
  let wider: Restored | null = null;
  if (!restored.met && all.length > (options.set ?? settable(made.chip)).length) {
    const tried = restoreDrives(made.chip, { ...options, ways, set: all }, memory);
    if (tried.strain !== null && (restored.strain === null || tried.strain < 0.9 * restored.strain))
      wider = tried;
  }
  return { ...made, drawn: before, result, restored, wider };
}
