import type { Chip } from './chip/chip.ts';
import type { Result } from './chip/result.ts';
import { emptyMemory } from './memory.ts';
import { type SolveOptions, solve } from './solve.ts';

/** Solves one chip after another while it is edited, keeping what did not change between them. */
export class Session {
  readonly #memory = emptyMemory();

  /** The same result as a fresh `solve`. Throws `Problem` where the chip cannot be solved. */
  update(chip: Chip, options: SolveOptions = {}): Result {
    return solve(chip, options, this.#memory);
  }
}
