import { memoryStore } from '../../solver/cell/store.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import { solveOrdered } from '../../solver/lump/cell-order.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';

interface Scope {
  postMessage(news: CellNews): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<CellOrder>) => void): void;
}
const scope = globalThis as unknown as Scope;

/** What this thread solved itself: copies of one shape in one chip are asked for one after the other. */
const kept = memoryStore(32e6);

scope.addEventListener('message', ({ data: { id, shape, name, accuracy } }) => {
  const found = solveOrdered(shape, accuracy, name, kept);
  if (found instanceof Problem) {
    const { kind, what, where, remedy } = found;
    scope.postMessage({ id, problem: { kind, what, where, remedy } });
  } else scope.postMessage({ id, ...found });
});

warmUp();
