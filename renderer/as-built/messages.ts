import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Measured } from '../../solver/asbuilt/measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { Refused } from '../solving/messages.ts';

/** What the page asks of the thread that works out the made chip. */
export interface BuiltOrder {
  readonly id: number;
  readonly chip: Chip;
  readonly measured: readonly Measured[];
  /** Ports whose drives may be set. */
  readonly set: readonly string[];
  /** Of the drawn chip, where all its junctions are solved; else it is solved anew. */
  readonly drawn: Result | null;
}

export type BuiltNews = { readonly id: number } & (
  | { readonly built: AsBuilt }
  | { readonly problem: Refused }
);
