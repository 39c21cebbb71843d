import type { CellStore } from './cell/store.ts';
import type { Chip } from './chip/chip.ts';
import type { Result } from './chip/result.ts';
import { solveWaiting } from './lump/cells.ts';
import { emptyMemory, type Memory } from './memory.ts';
import { accuracyOf, type SolveOptions, solve } from './solve.ts';

/** Solves one chip after another while it is edited, keeping what did not change between them. */
export class Session {
  readonly #memory: Memory;

  /** @param store where solved cells are kept between sessions; in memory alone if none is given */
  constructor(store?: CellStore) {
    this.#memory = emptyMemory(store);
  }

  /** The same result as a fresh `solve`. Throws `Problem` where the chip cannot be solved. */
  update(chip: Chip, options: SolveOptions = {}): Result {
    return solve(chip, options, this.#memory);
  }

  /** Junctions that the last update in haste left as ideal, shapes met several times counted once each. */
  get waiting(): number {
    return this.#memory.cells.waiting.length;
  }

  /** Solves the next waiting junction; update again to see it in the result. */
  solveNext(options: SolveOptions = {}): void {
    const next = this.#memory.cells.waiting.shift();
    if (next) solveWaiting(next, accuracyOf(options), this.#memory.cells);
  }
}
