import { readdirSync } from 'node:fs';
import { availableParallelism, cpus, loadavg } from 'node:os';
import { join } from 'node:path';
import type { BenchRow } from './row.ts';

/** Runs every `*.bench.ts` beside this file (or those whose names contain an argument) and prints a table. */
const wanted = process.argv.slice(2);
const folder = import.meta.dirname;
const files = readdirSync(folder)
  .filter((name) => name.endsWith('.bench.ts'))
  .filter((name) => wanted.length === 0 || wanted.some((part) => name.includes(part)))
  .sort();

console.log(
  `${cpus()[0]?.model.trim()}, ${availableParallelism()} cores, Node ${process.version}; load ${loadavg()
    .map((value) => value.toFixed(1))
    .join(' ')}`,
);
for (const file of files) {
  const module = (await import(join(folder, file))) as { default: () => Promise<BenchRow[]> };
  console.log(`\n${file.replace('.bench.ts', '')}`);
  for (const row of await module.default()) {
    const value = `${row.median.toPrecision(3)} ${row.unit}`;
    const ratio = row.ratio === undefined ? '' : `  ${row.ratio.toPrecision(3)} x ${row.against}`;
    const measured = row.ratio ?? row.median;
    const target =
      row.target === undefined ? '' : `  target ${row.target} ${measured <= row.target ? 'met' : 'MISSED'}`;
    console.log(
      `  ${row.what}: ${value} (${row.runs} runs)${ratio}${target}${row.note ? `  ${row.note}` : ''}`,
    );
  }
}
