import { MASK_FORMATS } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { channel, chipOf, layer } from '../chip/drawings.ts';
import type { BenchRow } from './row.ts';

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

const median = (times: number[]): number => times.sort((a, b) => a - b)[times.length >> 1]!;

/** Processor time of this process, ms: other work on the machine does not count. */
const spent = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
};

async function measured(work: () => Promise<unknown>, runs: number): Promise<number> {
  const times: number[] = [];
  for (let i = 0; i < runs; i += 1) {
    const from = spent();
    await work();
    times.push(spent() - from);
  }
  return median(times);
}

export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  const note = 'processor time, from the chip to bytes read back and compared';
  for (const [what, bends] of [
    ['straight channels', false],
    ['channels, half of them with two rounded bends', true],
  ] as const) {
    const [small, large] = [lattice(2500, bends), lattice(10_000, bends)];
    for (const format of MASK_FORMATS) {
      const make = (chip: Chip) => () =>
        makeMasks(chip, { formats: [format], options: {}, version: '0', made: new Date(0) });
      await make(small)();
      const few = await measured(make(small), 3);
      const many = await measured(make(large), 3);
      const row = { median: many, unit: 'ms', runs: 3 };
      rows.push({ ...row, what: `10,000 ${what}, ${format}`, target: 3000, note });
      // four times as many; a sort grows a little faster
      rows.push({ ...row, what: 'the same', against: 'that of 2,500', ratio: many / few, target: 5 });
    }
  }
  return rows;
}
