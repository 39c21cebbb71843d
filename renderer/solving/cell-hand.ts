import type { Accuracy, ShapeSolution } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';

/** Where junctions are solved beside the solving thread. A new list takes the place of the one before. */
export interface CellHand {
  /** @param ahead nobody waits for them yet: they must not keep those waiting who do */
  solve(cells: readonly CellSpec[], accuracy: Accuracy, ahead?: boolean): void;
  /** `left` is how many of the newest list are still to come. */
  listen(listener: (cell: CellSpec, accuracy: Accuracy, found: Found, left: number) => void): void;
  /** Work is left lying for so many ms, after the step that is being done; 0 takes it up again. */
  hold(ms: number): void;
}

export type Found = { readonly key: string; readonly solution: ShapeSolution } | Problem;

/** Threads beside the solving thread and the page's own. */
const THREADS = Math.max(1, Math.min(4, navigator.hardwareConcurrency - 1));
/** ms until they start where no junction was asked for: the page and the first answer come before. */
const START_MS = 2500;

interface Job {
  readonly cell: CellSpec;
  readonly accuracy: Accuracy;
  /** Nobody waits for it yet: what is waited for is put before it, and it is dropped when no longer asked for. */
  readonly ahead: boolean;
}

/** A thread and the jobs it has begun, by number. */
interface Bench {
  readonly worker: Worker;
  readonly begun: Map<number, Job>;
}

/** How cells are solved elsewhere, one order after another; a test may put a function in its place. */
export type StartWorker = () => Worker;
const cellWorker: StartWorker = () =>
  new Worker(new URL('./cell-worker.ts', import.meta.url), { type: 'module', name: 'cells' });

/**
 * Junctions solved on threads of their own, in the order given. A new list replaces what was not begun;
 * what was begun is finished, because it is likely to be wanted again, unless it was begun ahead.
 */
export function cellHand(start: StartWorker = cellWorker, threads = THREADS): CellHand {
  let queue: Job[] = [];
  let listener: (cell: CellSpec, accuracy: Accuracy, found: Found, left: number) => void = () => {};
  let last = 0;
  const benches: Bench[] = [];

  const waitedFor = (): number => queue.length + benches.reduce((sum, { begun }) => sum + begun.size, 0);
  /** A thread that can take the job: one without work, else one whose work nobody waits for. */
  const free = (job: Job): Bench | undefined =>
    benches.find(({ begun }) => begun.size === 0) ??
    (job.ahead ? undefined : benches.find(({ begun }) => [...begun.values()].every(({ ahead }) => ahead)));
  const next = (): void => {
    for (let job = queue[0]; job; job = queue[0]) {
      const bench = free(job);
      if (!bench) return;
      queue.shift();
      last += 1;
      bench.begun.set(last, job);
      const { shape, name } = job.cell;
      const order: CellOrder = { kind: 'solve', id: last, shape, name, accuracy: job.accuracy };
      bench.worker.postMessage(order);
    }
  };
  const addBench = (): void => {
    const bench: Bench = { worker: start(), begun: new Map() };
    bench.worker.addEventListener('message', ({ data }: MessageEvent<CellNews>) => {
      const job = bench.begun.get(data.id);
      // one that was dropped may have been ready already
      if (!job) return;
      bench.begun.delete(data.id);
      const { kind, what, where, remedy } = 'problem' in data ? data.problem : ({} as never);
      const found = 'problem' in data ? new Problem(kind, what, where, remedy) : data;
      listener(job.cell, job.accuracy, found, waitedFor());
      next();
    });
    benches.push(bench);
  };
  const begin = (): void => {
    while (benches.length < threads) addBench();
  };
  setTimeout(begin, START_MS);
  return {
    solve(cells, accuracy, ahead = false) {
      if (cells.length > 0) begin();
      const wanted = new Set(cells);
      const under = new Set<CellSpec>();
      for (const { worker, begun } of benches)
        for (const [id, job] of begun) {
          if (wanted.has(job.cell) && job.accuracy.flow <= accuracy.flow) {
            under.add(job.cell);
            begun.set(id, { ...job, ahead: job.ahead && ahead });
          } else if (job.ahead) {
            begun.delete(id);
            worker.postMessage({ kind: 'drop', id } satisfies CellOrder);
          }
        }
      queue = cells.filter((cell) => !under.has(cell)).map((cell) => ({ cell, accuracy, ahead }));
      next();
    },
    listen(given) {
      listener = given;
    },
    hold(ms) {
      for (const { worker, begun } of benches)
        if (begun.size > 0) worker.postMessage({ kind: 'hold', ms } satisfies CellOrder);
    },
  };
}
