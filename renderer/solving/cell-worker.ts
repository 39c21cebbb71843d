import type { ShapeSolution } from '../../solver/cell/cell.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { type CellStore, memoryStore } from '../../solver/cell/store.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';

interface Scope {
  postMessage(news: CellNews): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<CellOrder>) => void): void;
}
const scope = globalThis as unknown as Scope;

/** What this thread solved itself: copies of one shape in one chip are asked for one after the other. */
const kept = memoryStore(64e6);

scope.addEventListener('message', ({ data: { id, shape, name, accuracy } }) => {
  let found: { key: string; solution: ShapeSolution } | null = null;
  const store: CellStore = {
    get(key) {
      const solution = kept.get(key);
      if (solution) found = { key, solution };
      return solution;
    },
    put(key, solution) {
      kept.put(key, solution);
      found = { key, solution };
    },
  };
  try {
    solveCell(shape, accuracy, store, name);
    if (found) scope.postMessage({ id, ...(found as { key: string; solution: ShapeSolution }) });
  } catch (error) {
    const problem =
      error instanceof Problem
        ? error
        : new Problem(
            'not-converged',
            'The solver stopped at this shape.',
            name,
            'Change the drawing there a little.',
          );
    const { kind, what, where, remedy } = problem;
    scope.postMessage({ id, problem: { kind, what, where, remedy } });
  }
});

warmUp();
