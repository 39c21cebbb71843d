import { parentPort } from 'node:worker_threads';
import { memoryStore } from '../../solver/cell/store.ts';
import { solveOrdered } from '../../solver/lump/cell-order.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';

/** One order after another is solved and told; no two of them are copies of one shape. */
const store = memoryStore(0);

parentPort!.on('message', ({ id, shape, name, accuracy }: CellOrder) => {
  const found = solveOrdered(shape, accuracy, name, store);
  const news: CellNews =
    found instanceof Problem
      ? { id, found: { kind: found.kind, what: found.what, where: found.where, remedy: found.remedy } }
      : { id, found };
  parentPort!.postMessage(news);
});
