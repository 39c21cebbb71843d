import { MASK_FORMATS, type MaskFormat } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { channel, chipOf, layer } from '../chip/drawings.ts';

/**
 * `node mask-process.ts FORMAT COUNT BENDS RUNS`: makes the masks of one lattice again and again in a process of its
 * own and prints processor and wall time of each as JSON, ms. So each size meets the same: a cold start, then a
 * runtime that has compiled what this size takes, and a heap that no other size has filled.
 */

/**
 * A lattice of about `count` channels: one cavity with thousands of islands. With `bends` those that go up
 * have two rounded bends each.
 */
function lattice(count: number, bends: boolean): Chip {
  const side = Math.ceil(Math.sqrt(count / 2));
  const pitch = 600;
  const at = (i: number, j: number): [number, number] => [1000 + pitch * i, 1000 + pitch * j];
  const channels: Channel[] = [];
  for (let j = 0; j <= side; j += 1) {
    for (let i = 0; i <= side; i += 1) {
      const width = 80 + ((i * 7 + j * 3) % 40);
      if (i < side && channels.length < count)
        channels.push(channel(`h${i}.${j}`, [at(i, j), at(i + 1, j)], width));
      if (j < side && channels.length < count) {
        const [x, y] = at(i, j);
        const path: [number, number][] = [
          [x, y],
          [x, y + 200],
          [x + 150, y + 200],
          [x + 150, y + 600],
        ];
        if (bends) channels.push(channel(`v${i}.${j}`, path, width, { bendRadius: 75 }));
        else channels.push(channel(`v${i}.${j}`, [at(i, j), at(i, j + 1)], width));
      }
    }
  }
  const size = 1000 * (side * pitch + 2000);
  return chipOf({
    name: 'lattice',
    outline: { width: size, height: size },
    layers: [layer('flow')],
    channels,
  });
}

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
