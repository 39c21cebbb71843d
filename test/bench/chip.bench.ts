import { execFileSync } from 'node:child_process';
import { join } from 'node:path';
import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { Session } from '../../solver/session.ts';
import { solve } from '../../solver/solve.ts';
import { lattice } from './lattice.ts';
import { type BenchRow, timed } from './row.ts';

const IDEAL = { junctions: 'ideal' } as const;

/** One width of a chip changed by a micrometre, to and fro. */
function widened(chip: Chip, step: number): Chip {
  const index = (step * 37) % chip.channels.length;
  const one = chip.channels[index];
  const width = one.width[0] + (step % 2 === 0 ? 1000 : -1000);
  const channels: Channel[] = [...chip.channels];
  channels[index] = { ...one, width: [width, width] };
  return { ...chip, channels };
}

/** Median, ms, of readings each in a process of its own, as the command line reads a description. */
function once(channels: number, runs: number): number {
  const script = join(import.meta.dirname, 'native', 'read-once.ts');
  const times = Array.from({ length: runs }, () =>
    Number(execFileSync(process.execPath, [script, String(channels)], { encoding: 'utf8' })),
  );
  return times.sort((a, b) => a - b)[runs >> 1]!;
}

export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  const small = lattice(10_000);
  const large = lattice(100_000);
  const what = (count: string, how: string) => `parse and geometry of ${count} channels, ${how}`;
  const fresh = 'the first read by a process';
  const one = once(10_000, 9);
  const ten = once(100_000, 5);
  const against = 'the same of 10,000';
  rows.push({ what: what('10,000', fresh), median: one, unit: 'ms', runs: 9, target: 300 });
  rows.push({
    what: what('100,000', fresh),
    median: ten,
    unit: 'ms',
    runs: 5,
    against,
    ratio: ten / one,
    target: 12,
  });
  const read = (text: string) => (): void => {
    readGraph(readDescription(text));
  };
  // Both as often warmed as it takes until the times settle, so that neither has the better code.
  const again = 'over and over in one';
  const warmOne = timed(read(small), 41, 80);
  const warmTen = timed(read(large), 11, 8);
  rows.push({ what: what('10,000', again), median: warmOne, unit: 'ms', runs: 41 });
  rows.push({
    what: what('100,000', again),
    median: warmTen,
    unit: 'ms',
    runs: 11,
    against,
    ratio: warmTen / warmOne,
  });
  const parsed = readDescription(small);
  rows.push({
    what: 'description read to result, 10,000 channels',
    median: timed(() => solve(parsed, IDEAL), 5),
    unit: 'ms',
    runs: 5,
  });
  const session = new Session();
  let chip = readDescription(lattice(100));
  let step = 0;
  const edit = timed(
    () => {
      chip = widened(chip, step);
      step += 1;
      session.update(chip, IDEAL);
    },
    501,
    400,
  );
  rows.push({
    what: 'one width edited, 100 channels, chip to result',
    median: edit,
    unit: 'ms',
    runs: 501,
    target: 1,
  });
  return rows;
}
