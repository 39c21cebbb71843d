import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { cellKey } from '../../solver/cell/solve-cell.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { settleWaiting } from '../../solver/lump/cells.ts';
import { emptyMemory, type Memory } from '../../solver/memory.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { accuracyOf, networkOf, type SolveOptions, solve } from '../../solver/solve.ts';
import type { CellNews, CellOrder } from './messages.ts';

/** Junctions that a thread must have to do for its start to be worth while: it compiles the solver anew. */
const LEAST_A_THREAD = 8;

/** As `solve`, with many unlike junctions solved on several threads at once: the same result, sooner. */
export async function solveChip(
  chip: Chip,
  options: SolveOptions,
  threads = availableParallelism(),
): Promise<Result> {
  const memory = emptyMemory();
  if (options.junctions !== 'ideal') {
    // What makes the chip unsolvable is said before any junction is waited for.
    networkOf(chip, { ...options, haste: true }, memory);
    const cells = unlike(memory.cells.waiting);
    const count = Math.min(threads, Math.floor(cells.length / LEAST_A_THREAD));
    if (count > 1) await solveCells(cells, options, memory, count);
  }
  return solve(chip, options, memory);
}

/** One cell of each shape; one whose shape is faulty is left for the solve itself to say so. */
function unlike(cells: readonly CellSpec[]): CellSpec[] {
  const byKey = new Map<string, CellSpec>();
  for (const cell of cells) {
    try {
      const key = cellKey(cell.shape, cell.name);
      if (!byKey.has(key)) byKey.set(key, cell);
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
    }
  }
  return [...byKey.values()];
}

async function solveCells(
  cells: readonly CellSpec[],
  options: SolveOptions,
  memory: Memory,
  count: number,
): Promise<void> {
  const accuracy = accuracyOf(options);
  let next = 0;
  const work = (): Promise<void> =>
    new Promise((resolve, reject) => {
      const worker = new Worker(new URL('./cell-worker.ts', import.meta.url));
      const order = (): void => {
        if (next === cells.length) {
          worker.terminate().then(() => resolve(), reject);
          return;
        }
        const { shape, name } = cells[next]!;
        worker.postMessage({ id: next, shape, name, accuracy } satisfies CellOrder);
        next += 1;
      };
      worker.on('message', ({ id, found }: CellNews) => {
        const settled =
          'key' in found ? found : new Problem(found.kind, found.what, found.where, found.remedy);
        settleWaiting(cells[id]!, accuracy, settled, memory.cells);
        order();
      });
      worker.once('error', reject);
      order();
    });
  await Promise.all(Array.from({ length: count }, work));
}
