import { loadavg } from 'node:os';
import { BOMBS, readBomb, readMutated, SEEDS } from '../import/hostile.ts';
import { harmMany, opening } from './damage.ts';
import { fillDisk } from './full-disk.ts';
import { HAND_MADE, handMade, openMutated } from './hostile.ts';
import { CODES, injectInto, SCENARIOS } from './inject.ts';
import { killMany } from './kill.ts';
import { salvageEveryPage } from './salvage.ts';
import { inFolder, sampleBytes } from './sample.ts';

/**
 * The tests of the project file and of drawings that come in, in full:
 * `npm run faults [-- kill inject damage salvage hostile full drawings]`.
 * Prints what was done and found; ends with 1 where something was lost.
 */
const wanted = process.argv.slice(2);
let failed = false;

async function part(name: string, work: () => Promise<{ line: string; good: boolean }>): Promise<void> {
  if (wanted.length > 0 && !wanted.includes(name)) return;
  const start = performance.now();
  const { line, good } = await work();
  if (!good) failed = true;
  const seconds = ((performance.now() - start) / 1000).toFixed(0);
  console.log(`${good ? 'good' : 'BAD '} ${name}: ${line} (${seconds} s, load ${loadavg()[0]!.toFixed(1)})`);
}

await part('kill', async () => {
  const total = { kills: 0, acknowledged: 0, lost: 0, damaged: 0, undoBroken: 0 };
  for (let round = 0; round < 10; round += 1) {
    const count = await killMany(100, 7_000 + round);
    for (const key of Object.keys(total) as (keyof typeof total)[]) total[key] += count[key];
  }
  const line = `${total.kills} kills, ${total.acknowledged} steps acknowledged, ${total.lost} lost, ${total.damaged} files damaged, ${total.undoBroken} undos broken`;
  return { line, good: total.lost + total.damaged + total.undoBroken === 0 };
});

await part('inject', async () => {
  let runs = 0;
  const wrong: string[] = [];
  for (const scenario of SCENARIOS) {
    await inFolder(async (folder) => {
      const plans = CODES.flatMap((code) =>
        (['before', 'after'] as const).flatMap((when) => [true, false].map((once) => ({ when, once, code }))),
      );
      const count = await injectInto(scenario, folder, plans);
      runs += count.runs;
      wrong.push(...count.wrong);
    });
  }
  for (const line of wrong.slice(0, 20)) console.log(`     ${line}`);
  return { line: `${runs} failures made, ${wrong.length} with anything lost`, good: wrong.length === 0 };
});

await part('damage', async () => {
  const total = { found: 0, missed: 0, harmless: 0 };
  for (let round = 0; round < 10; round += 1) {
    const count = harmMany(await sampleBytes(round + 1), 1000, 100 + round);
    total.found += count.found;
    total.missed += count.missed;
    total.harmless += count.harmless;
    for (const miss of count.misses) console.log(`     missed: ${miss}`);
  }
  const share = total.found / (total.found + total.missed);
  const line = `10,000 files harmed, content changed in ${total.found + total.missed}, found ${(100 * share).toFixed(2)} %, harmless ${total.harmless}`;
  return { line, good: share >= 0.999 };
});

await part('salvage', async () => {
  const lost: string[] = [];
  let recovered = 0;
  let bad = 0;
  for (let round = 0; round < 10; round += 1) {
    await inFolder(async (folder) => {
      const count = await salvageEveryPage(await sampleBytes(50 + round), folder);
      recovered += count.recovered;
      bad += count.silent + count.refused;
      lost.push(...count.rowsLost);
    });
  }
  return {
    line: `${recovered} files with a broken page recovered, ${lost.length} undamaged rows lost, ${bad} refused or silent`,
    good: lost.length === 0 && bad === 0,
  };
});

await part('hostile', async () => {
  const bytes = await sampleBytes(2);
  const count = openMutated(bytes, 10_000, 99);
  const wrong: string[] = [];
  await inFolder(async (folder) => {
    for (const made of HAND_MADE) {
      const { verdict, store } = opening(handMade(bytes, made, folder));
      store?.close();
      if (!made.expect.includes(verdict)) wrong.push(`${made.name}: ${verdict}`);
    }
  });
  for (const line of wrong) console.log(`     ${line}`);
  return {
    line: `10,000 mutated files (${count.refused} refused, ${count.opened} opened whole, slowest ${count.slowest.toFixed(0)} ms of processor time), ${HAND_MADE.length} made by hand, ${wrong.length} with the wrong verdict`,
    good: wrong.length === 0 && count.slowest < 2_000,
  };
});

await part('full', async () => {
  const full = await fillDisk();
  return {
    line: `${full.how}: ${full.acknowledged} steps acknowledged, all there: ${full.same}; told: ${full.told}`,
    good: full.same && full.seq === full.acknowledged + 1,
  };
});

await part('drawings', async () => {
  const counts: string[] = [];
  let longest = 0;
  for (const kind of Object.keys(SEEDS)) {
    const read = readMutated(kind, 3000, 1000 + kind.charCodeAt(0));
    counts.push(`${read.refused} of 3,000 ${kind}`);
    longest = Math.max(longest, read.longest);
  }
  let [slowest, largest, refused] = [0, 0, 0];
  for (const name of Object.keys(BOMBS)) {
    const { ended, seconds, megabytes } = await readBomb(name);
    if (ended.kind === 'failed' && !/stopped\.$/.test(ended.problem.what)) refused += 1;
    else console.log(`     not refused by name: ${name}`);
    slowest = Math.max(slowest, seconds);
    largest = Math.max(largest, megabytes);
  }
  const bombs = Object.keys(BOMBS).length;
  return {
    line: `mutated files refused by name: ${counts.join(', ')}, the others read, longest ${longest.toFixed(2)} s; ${refused} of ${bombs} bombs refused, slowest ${slowest.toFixed(1)} s, most ${largest.toFixed(0)} MB`,
    good: longest < 5 && refused === bombs && slowest < 5 && largest < 500,
  };
});

process.exitCode = failed ? 1 : 0;
