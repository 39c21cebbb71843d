import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { MASK_FORMATS, type MaskFormat } from '../../main/contract/mask.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { fresh, median, medians, type Times } from './fresh.ts';
import { lattice } from './mask-lattice.ts';
import type { BenchRow } from './row.ts';

/** Processes of which the first mask is taken. */
const FIRSTS = 3;
const RUNS = 7;
/** The first of these are left to the runtime to compile what they take. */
const WARM = 3;

async function told(format: MaskFormat, count: number, bends: boolean, runs: number): Promise<Times[]> {
  const script = join(import.meta.dirname, 'mask-process.ts');
  const args = [format, String(count), bends ? 'bends' : 'straight', String(runs)];
  return JSON.parse(await fresh('mask', script, args)) as Times[];
}

async function first(format: MaskFormat, count: number, bends: boolean): Promise<Times> {
  const times: Times[] = [];
  for (let i = 0; i < FIRSTS; i += 1) times.push((await told(format, count, bends, 1))[0]!);
  return medians(times);
}

/** The command from its start to its end, with the description read and the file written, ms of wall clock. */
async function command(format: MaskFormat, count: number, bends: boolean): Promise<number> {
  const folder = await mkdtemp(join(tmpdir(), 'channelwright-bench-'));
  try {
    const file = join(folder, 'lattice.json');
    await writeFile(file, writeDescription(lattice(count, bends)));
    const times: number[] = [];
    for (let i = 0; i < FIRSTS; i += 1) {
      const start = performance.now();
      await fresh('mask', 'main/cli/mask.ts', [file, '--format', format, '--out', join(folder, 'mask')]);
      times.push(performance.now() - start);
    }
    return median(times);
  } finally {
    await rm(folder, { recursive: true });
  }
}

/**
 * Masks from the chip to bytes read back and compared. What the issue asks is held against the first of a process,
 * each in a process of its own, for that is what the command line and a person wait for. How it grows is told by
 * processor time (of all threads, so that other work on the machine counts less).
 */
export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const [what, bends] of [
    ['straight channels', false],
    ['channels, half of them with two rounded bends', true],
  ] as const) {
    for (const format of MASK_FORMATS) {
      const few = await first(format, 2500, bends);
      const many = await first(format, 10_000, bends);
      const against = 'that of 2,500';
      rows.push({
        ...{ what: `10,000 ${what}, ${format}, the first of a process, wall clock`, median: many.wall },
        ...{ unit: 'ms', runs: FIRSTS, target: 3000 },
      });
      // four times as many; a sort grows a little faster
      rows.push({
        ...{ what: 'the same, processor time', median: many.work, unit: 'ms', runs: FIRSTS },
        ...{ against, ratio: many.work / few.work, target: 5 },
      });
      const whole = await command(format, 10_000, bends);
      rows.push({ what: 'the whole command, wall clock', median: whole, unit: 'ms', runs: FIRSTS });
      const warm = medians((await told(format, 10_000, bends, RUNS)).slice(WARM));
      const fewWarm = medians((await told(format, 2500, bends, RUNS)).slice(WARM));
      rows.push({
        ...{ what: 'further ones of a process, processor time', median: warm.work, unit: 'ms' },
        ...{ runs: RUNS - WARM, against, ratio: warm.work / fewWarm.work, target: 5 },
        note: `wall clock ${warm.wall.toFixed(0)} ms`,
      });
    }
  }
  return rows;
}
