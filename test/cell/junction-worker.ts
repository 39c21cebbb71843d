import { workerData } from 'node:worker_threads';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { plausibleJunction } from './random-junction.ts';

/** Solves a run of plausible junctions at the default accuracy, for the benchmark. */
const { from, to } = workerData as { from: number; to: number };
for (let seed = from; seed < to; seed += 1) solveCell(plausibleJunction(seed), { flow: 0.005, peak: 0.05 });
