import { MASK_FORMATS, type MaskFormat } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import { lattice } from './mask-lattice.ts';

/**
 * `node mask-process.ts FORMAT COUNT BENDS RUNS`: makes the masks of one lattice again and again in a process of its
 * own and prints processor and wall time of each as JSON, ms. So each size meets the same: a cold start, then a
 * runtime that has compiled what this size takes, and a heap that no other size has filled.
 */

const [format, count, bends, runs] = process.argv.slice(2);
if (!MASK_FORMATS.includes(format as MaskFormat)) throw new Error(`no format ${format}`);
const chip = lattice(Number(count), bends === 'bends');
const times: { work: number; wall: number }[] = [];
for (let i = 0; i < Number(runs); i += 1) {
  const from = process.cpuUsage();
  const start = performance.now();
  await makeMasks(chip, { formats: [format as MaskFormat], options: {}, version: '0', made: new Date(0) });
  const { user, system } = process.cpuUsage(from);
  times.push({ work: (user + system) / 1000, wall: performance.now() - start });
}
console.log(JSON.stringify(times));
