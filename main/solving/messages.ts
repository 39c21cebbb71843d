import type { Accuracy } from '../../solver/cell/cell.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import type { SolvedShape } from '../../solver/lump/cell-order.ts';
import type { ProblemKind } from '../../solver/problem/problem.ts';

/** A junction for a thread to solve; `id` is the asker's. */
export interface CellOrder {
  readonly id: number;
  readonly shape: CellShape;
  readonly name: string;
  readonly accuracy: Accuracy;
}

/** What came of it: a `Problem` crosses threads as its parts. */
export interface CellNews {
  readonly id: number;
  readonly found:
    | SolvedShape
    | {
        readonly kind: ProblemKind;
        readonly what: string;
        readonly where: string;
        readonly remedy: string;
      };
}
