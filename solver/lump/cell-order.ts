import type { Accuracy, ShapeSolution } from '../cell/cell.ts';
import type { CellShape } from '../cell/shape.ts';
import { cellSteps } from '../cell/solve-cell.ts';
import { finished, type Steps } from '../cell/steps.ts';
import type { CellStore } from '../cell/store.ts';
import { Problem } from '../problem/problem.ts';

/** A shape solved for whoever keeps it: its canonical solution with its key. */
export interface SolvedShape {
  readonly key: string;
  readonly solution: ShapeSolution;
}

/**
 * Solves one shape apart from the chip it comes from, on a thread of its own, or takes a copy of it from
 * `store`. What cannot be solved comes back as the `Problem` that says why.
 */
export function solveOrdered(
  shape: CellShape,
  accuracy: Accuracy,
  name: string,
  store: CellStore,
): SolvedShape | Problem {
  return finished(orderedSteps(shape, accuracy, name, store));
}

/** The same, step by step. */
export function* orderedSteps(
  shape: CellShape,
  accuracy: Accuracy,
  name: string,
  store: CellStore,
): Steps<SolvedShape | Problem> {
  let found: SolvedShape | null = null;
  const noting: CellStore = {
    get(key) {
      const solution = store.get(key);
      if (solution) found = { key, solution };
      return solution;
    },
    put(key, solution) {
      store.put(key, solution);
      found = { key, solution };
    },
  };
  const stopped = new Problem(
    'not-converged',
    'The solver stopped at this shape.',
    name,
    'Change the drawing there a little.',
  );
  try {
    yield* cellSteps(shape, accuracy, noting, name);
    return found ?? stopped;
  } catch (error) {
    return error instanceof Problem ? error : stopped;
  }
}
