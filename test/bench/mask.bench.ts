import { execFile } from 'node:child_process';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { MASK_FORMATS, type MaskFormat } from '../../main/contract/mask.ts';
import type { BenchRow } from './row.ts';

const RUNS = 9;
/** The first of these are left to the runtime to compile what they take. */
const WARM = 4;

interface Times {
  /** Of the first run of a process, ms. */
  readonly first: { readonly work: number; readonly wall: number };
  /** Medians of the runs after the warm-up, ms. */
  readonly work: number;
  readonly wall: number;
}

const median = (times: number[]): number => times.sort((a, b) => a - b)[times.length >> 1]!;

async function measured(format: MaskFormat, count: number, bends: boolean): Promise<Times> {
  const script = join(import.meta.dirname, 'mask-process.ts');
  const args = [script, format, String(count), bends ? 'bends' : 'straight', String(RUNS)];
  const { stdout } = await promisify(execFile)(process.execPath, args);
  const times = JSON.parse(stdout) as { work: number; wall: number }[];
  const warm = times.slice(WARM);
  return {
    first: times[0]!,
    work: median(warm.map(({ work }) => work)),
    wall: median(warm.map(({ wall }) => wall)),
  };
}

/**
 * Masks from the chip to bytes read back and compared. Processor time (of all threads of the process, so that other
 * work on the machine does not count) is held to the targets; each size in a process of its own.
 */
export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const [what, bends] of [
    ['straight channels', false],
    ['channels, half of them with two rounded bends', true],
  ] as const) {
    for (const format of MASK_FORMATS) {
      const few = await measured(format, 2500, bends);
      const many = await measured(format, 10_000, bends);
      const runs = RUNS - WARM;
      const against = 'that of 2,500';
      rows.push({
        ...{ what: `10,000 ${what}, ${format}, processor time`, median: many.work, unit: 'ms', runs },
        ...{ target: 3000, note: `wall clock ${many.wall.toFixed(0)} ms` },
      });
      // four times as many; a sort grows a little faster
      rows.push({
        ...{ what: 'the same', median: many.work, unit: 'ms', runs },
        ...{ against, ratio: many.work / few.work, target: 5 },
      });
      const first = many.first.work;
      rows.push({
        ...{ what: 'the first of a process, processor time', median: first, unit: 'ms', runs: 1 },
        ...{ against, ratio: first / few.first.work },
        note: `what compiles it included; wall clock ${many.first.wall.toFixed(0)} ms`,
      });
    }
  }
  return rows;
}
