import type { Accuracy, ShapeSolution } from '../../solver/cell/cell.ts';
import type { CellPicture } from '../../solver/cell/picture.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { ProblemKind } from '../../solver/problem/problem.ts';
import type { SolveOptions } from '../../solver/solve.ts';
import type { Answer } from '../verdict/answer.ts';
import type { UnitHabit } from '../words/figure.ts';
import type { ShownGraph } from './shown-graph.ts';

/** What the page tells the solving thread; `id` grows by one with every chip it means. */
export type Order =
  | { readonly kind: 'load'; readonly id: number; readonly chip: Chip; readonly options: SolveOptions }
  | { readonly kind: 'edit'; readonly id: number; readonly edit: ChipEdit }
  /** The chip as it would be if the hand let go here; null when it has. */
  | { readonly kind: 'drag'; readonly id: number; readonly edit: ChipEdit | null }
  /** Solves the chip as it would be and leaves it as it is. */
  | { readonly kind: 'try'; readonly id: number; readonly edit: ChipEdit }
  /** Solves one variant after another and sends each result. */
  | { readonly kind: 'sweep'; readonly id: number; readonly edits: readonly ChipEdit[] }
  | { readonly kind: 'cancel'; readonly id: number }
  /** What is to be drawn inside a solved junction, with the flows of the newest answer. */
  | { readonly kind: 'picture'; readonly id: number; readonly cell: string; readonly lines: number }
  /** The whole of the newest answer, which was told in short. */
  | { readonly kind: 'rest' }
  /** The units in which a person reads figures. */
  | { readonly kind: 'speak'; readonly units: UnitHabit }
  /** The part of the plan that is on screen, nm: its junctions come first. */
  | { readonly kind: 'look'; readonly box: PlanBox }
  /** Solved junctions that the project had kept, in answer to 'want'. */
  | { readonly kind: 'kept'; readonly cells: readonly KeptCell[] };

/** A part of the plan, nm. */
export interface PlanBox {
  readonly left: number;
  readonly right: number;
  readonly bottom: number;
  readonly top: number;
}

/** A solved junction as the project keeps it. */
export interface KeptCell {
  readonly key: string;
  readonly bytes: Uint8Array;
}

/** Local coordinates (m) of the picture stand on the plan at origin (nm) + 1e9 (x, y). */
export interface PlacedPicture extends CellPicture {
  readonly origin: readonly [number, number];
}

/** A refusal as it crosses the thread. */
export interface Refused {
  readonly what: string;
  readonly where: string;
  readonly remedy: string;
}

export type Outcome =
  | { readonly ok: true; readonly result: Result }
  | { readonly ok: false; readonly problem: Refused };

/** A junction for a cell thread to solve, or to be left as it is; `id` is the asker's. */
export type CellOrder =
  | {
      readonly kind: 'solve';
      readonly id: number;
      readonly shape: CellShape;
      readonly name: string;
      readonly accuracy: Accuracy;
    }
  | { readonly kind: 'drop'; readonly id: number }
  /** Nothing more is done for so many ms; 0 goes on at once. */
  | { readonly kind: 'hold'; readonly ms: number };

export type CellNews = { readonly id: number } & (
  | { readonly key: string; readonly solution: ShapeSolution }
  | { readonly problem: Refused & { readonly kind: ProblemKind } }
);

/** An answer to a chip. */
export interface Answered {
  /** The drawing as the fluid reads it crosses once: 'same' where it is that of the answer before. */
  readonly graph: ShownGraph | 'same' | null;
  readonly outcome: Outcome;
  /** Junctions still being solved, which count as ideal in this answer; another answer follows. */
  readonly waiting: number;
}

export type News =
  /** The newest answer in five sentences; the whole of it follows when 'rest' asks for it. */
  | {
      readonly kind: 'short';
      readonly id: number;
      readonly answers: readonly Answer[];
      /** Junctions that count as ideal in them, as in `Answered`. */
      readonly waiting: number;
      /** ms since 1970 when the answer was begun and when it was ready, for whoever measures. */
      readonly times: { readonly began: number; readonly ready: number };
    }
  | ({ readonly kind: 'solved'; readonly id: number } & Answered)
  /** Of what is being dragged: to preview accuracy, to be looked at and not to be kept. */
  | ({ readonly kind: 'dragged'; readonly id: number } & Answered)
  /** Whether the project has kept these; 'kept' is to follow, with what was found. */
  | { readonly kind: 'want'; readonly keys: readonly string[] }
  /** A junction was solved, to be kept in the project. */
  | { readonly kind: 'keep'; readonly cell: KeptCell }
  | { readonly kind: 'pictured'; readonly id: number; readonly picture: PlacedPicture | null }
  | { readonly kind: 'tried'; readonly id: number; readonly outcome: Outcome }
  | { readonly kind: 'swept'; readonly id: number; readonly index: number; readonly outcome: Outcome };
