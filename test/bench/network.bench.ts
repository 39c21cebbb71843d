import { execFileSync } from 'node:child_process';
import { join } from 'node:path';
import type { DuctLaw } from '../../solver/network/law.ts';
import { prepareNetwork } from '../../solver/network/prepare.ts';
import { solveNetwork } from '../../solver/network/solve-network.ts';
import { solveNonlinear } from '../../solver/network/solve-nonlinear.ts';
import type { NetworkSpec } from '../../solver/network/spec.ts';
import { cassonTube, powerLaw, softRoof } from '../network/laws.ts';
import { gridNetwork, treeNetwork } from './native/grid-network.ts';
import { Python } from './native/scipy.ts';
import type { BenchRow } from './row.ts';

const RUNS = 7;

const median = (times: number[]) => times.sort((a, b) => a - b)[times.length >> 1];

const clock = (work: () => void) => {
  const start = performance.now();
  work();
  return performance.now() - start;
};

/**
 * Cold: from the arrays of channels to pressures and balanced flows, nothing known beforehand. Values only:
 * the same network with other resistances. scipy, run in turn with these, builds its matrix and solves.
 */
async function compared(
  what: string,
  spec: NetworkSpec,
  python: Python | null,
  request: string,
  targets: number[],
) {
  const prepared = prepareNetwork(spec);
  const changed = { ...spec, resistance: spec.resistance.map((r, e) => r * (1 + (e % 7) / 10)) };
  const cold: number[] = [];
  const again: number[] = [];
  const theirs: number[] = [];
  for (let run = -2; run < RUNS; run += 1) {
    const times = [
      clock(() => solveNetwork(spec)),
      clock(() => solveNetwork(run % 2 === 0 ? spec : changed, prepared)),
      python === null ? Number.NaN : await python.ask(request),
    ];
    if (run < 0) continue;
    cold.push(times[0]);
    again.push(times[1]);
    theirs.push(times[2]);
  }
  const scipy = median(theirs);
  const row = (name: string, times: number[], target?: number): BenchRow => {
    const ms = median(times);
    const base = { what: `${what}, ${name}`, median: ms, unit: 'ms', runs: RUNS };
    if (python === null)
      return { ...base, note: 'no Python with scipy here: not compared (Debian: python3-scipy)' };
    return {
      ...base,
      against: `scipy spsolve, one thread (${scipy.toPrecision(3)} ms)`,
      ratio: ms / scipy,
      ...(target === undefined ? {} : { target }),
    };
  };
  return [row('cold', cold, targets[0]), row('values only', again, targets[1])];
}

/** Fluids and walls whose flow is not in proportion, each against one linear solve of the same network run in turn. */
function nonlinear(): BenchRow[] {
  const spec = gridNetwork(23);
  const prepared = prepareNetwork(spec);
  const kinds: [string, (r: number, e: number) => DuctLaw][] = [
    ['shear-thinning (power law, n = 0.5)', (r) => powerLaw(r, 0.5, 20)],
    ['yield stress (Casson)', (r) => cassonTube(r, 2)],
    ['soft roofs of two stiffnesses', (r, e) => softRoof(r, 1e-3 * (1 + (e % 2)))],
  ];
  return kinds.map(([kind, law]) => {
    const laws = Array.from(spec.resistance, law);
    const linear: number[] = [];
    const times: number[] = [];
    for (let run = -40; run < 101; run += 1) {
      const one = clock(() => solveNetwork(spec, prepared));
      const other = clock(() => {
        if (solveNonlinear(spec, laws, prepared).faults.length > 0)
          throw new Error(`${kind} was not solved.`);
      });
      if (run < 0) continue;
      linear.push(one);
      times.push(other);
    }
    return {
      what: `network of 1,012 channels, ${kind}`,
      median: median(times),
      unit: 'ms',
      runs: times.length,
      against: `one linear solve, values only (${median(linear).toPrecision(3)} ms)`,
      ratio: median(times) / median(linear),
      target: 10,
    };
  });
}

export default async function bench(): Promise<BenchRow[]> {
  const python = await Python.start('networks.py');
  const rows = [
    ...(await compared('grid of 1e4 channels', gridNetwork(71), python, 'grid 71', [])),
    ...(await compared('grid of 1e5 channels', gridNetwork(224), python, 'grid 224', [0.75, 0.35])),
    ...(await compared('tree of 1e5 channels', treeNetwork(100_001), python, 'tree 100001', [1])),
  ];
  python?.stop();
  rows.push(...nonlinear());
  const [ms, mb] = execFileSync(process.execPath, [join(import.meta.dirname, 'native', 'million.ts')], {
    encoding: 'utf8',
  })
    .split(' ')
    .map(Number);
  rows.push(
    {
      what: 'grid of 1e6 channels, cold, first call of a process, processor time',
      median: ms,
      unit: 'ms',
      runs: 1,
      target: 10_000,
    },
    { what: 'grid of 1e6 channels, resident at most', median: mb, unit: 'MB', runs: 1, target: 1536 },
  );
  return rows;
}
