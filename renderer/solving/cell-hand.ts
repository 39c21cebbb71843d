import type { Accuracy } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';
import type { CellHand, Found } from './thread.ts';

/** Threads beside the solving thread and the page's own. */
const THREADS = Math.max(1, Math.min(4, navigator.hardwareConcurrency - 1));

/**
 * Junctions solved on threads of their own, in the order given. A new list replaces what was not begun;
 * what was begun is finished, because it is likely to be wanted again.
 */
export function cellHand(): CellHand {
  let queue: { cell: CellSpec; accuracy: Accuracy }[] = [];
  let listener: (cell: CellSpec, accuracy: Accuracy, found: Found, left: number) => void = () => {};
  let last = 0;
  const begun = new Map<number, { cell: CellSpec; accuracy: Accuracy }>();
  const idle: Worker[] = [];

  const next = (): void => {
    while (idle.length > 0 && queue.length > 0) {
      const worker = idle.pop()!;
      const job = queue.shift()!;
      last += 1;
      begun.set(last, job);
      const { shape, name } = job.cell;
      worker.postMessage({ id: last, shape, name, accuracy: job.accuracy } satisfies CellOrder);
    }
  };
  for (let i = 0; i < THREADS; i += 1) {
    const worker = new Worker(new URL('./cell-worker.ts', import.meta.url), {
      type: 'module',
      name: 'cells',
    });
    worker.addEventListener('message', ({ data }: MessageEvent<CellNews>) => {
      const job = begun.get(data.id);
      begun.delete(data.id);
      idle.push(worker);
      if (job) {
        const { kind, what, where, remedy } = 'problem' in data ? data.problem : ({} as never);
        const found = 'problem' in data ? new Problem(kind, what, where, remedy) : data;
        listener(job.cell, job.accuracy, found, queue.length + begun.size);
      }
      next();
    });
    idle.push(worker);
  }
  return {
    solve(cells, accuracy) {
      const under = new Set(
        [...begun.values()].filter((job) => job.accuracy.flow <= accuracy.flow).map(({ cell }) => cell),
      );
      queue = cells.filter((cell) => !under.has(cell)).map((cell) => ({ cell, accuracy }));
      next();
    },
    listen(given) {
      listener = given;
    },
  };
}
