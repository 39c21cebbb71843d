import { join } from 'node:path';
import { fresh, medians, type Times } from './fresh.ts';
import type { BenchRow } from './row.ts';

/** Processes of which the first note is taken. */
const FIRSTS = 5;
const RUNS = 9;
/** The first of these are left to the runtime to compile what they take. */
const WARM = 2;

interface Told {
  /** Wall time of the solve, ms. */
  readonly solved: number;
  readonly times: readonly Times[];
}

async function told(format: string, count: number, runs: number): Promise<Told> {
  const script = join(import.meta.dirname, 'note-process.ts');
  return JSON.parse(await fresh('note', script, [format, String(count), String(runs)])) as Told;
}

/**
 * The note from a solved chip to bytes: the first of a process, which is what the command line and a person wait for,
 * each in a process of its own; and the further ones of a process.
 */
export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const count of [100, 400]) {
    for (const format of ['pdf', 'html']) {
      const firsts: Times[] = [];
      for (let i = 0; i < FIRSTS; i += 1) firsts.push((await told(format, count, 1)).times[0]!);
      const first = medians(firsts);
      const what = `note of ${count} channels as ${format.toUpperCase()}`;
      rows.push({
        ...{ what: `${what}, the first of a process, wall clock`, median: first.wall, unit: 'ms' },
        ...{ runs: FIRSTS, ...(count === 100 && { target: 1500 }) },
        note: `processor time ${first.work.toFixed(0)} ms`,
      });
      const { solved, times } = await told(format, count, RUNS);
      const warm = medians(times.slice(WARM));
      rows.push({
        ...{ what: `${what}, further ones, wall clock`, median: warm.wall, unit: 'ms', runs: RUNS - WARM },
        note: `processor time ${warm.work.toFixed(0)} ms; ${(warm.wall / solved).toPrecision(3)} x solving it with all junctions once`,
      });
    }
  }
  return rows;
}
