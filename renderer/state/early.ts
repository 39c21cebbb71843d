import type { Chip } from '../../solver/chip/chip.ts';
import type { Solver } from '../solving/solver.ts';

/**
 * A solver that can be given a chip before there is a page to show it: when the page then loads that same
 * chip, it is being solved already.
 */
export function solvesEarly(solver: Solver): { readonly solver: Solver; early(chip: Chip): void } {
  let begun: Chip | null = null;
  return {
    solver: {
      ...solver,
      load(chip, options) {
        const same = chip === begun;
        begun = null;
        if (!same) solver.load(chip, options);
      },
    },
    early(chip) {
      begun = chip;
      solver.load(chip, {});
    },
  };
}
