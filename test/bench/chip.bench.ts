import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { Session } from '../../solver/session.ts';
import { solve } from '../../solver/solve.ts';
import { type BenchRow, timed } from './row.ts';

const IDEAL = { junctions: 'ideal' } as const;

/** A lattice of about `count` channels, each from one crossing to the next, as a description. */
function lattice(count: number): string {
  const side = Math.ceil(Math.sqrt(count / 2));
  const pitch = 500;
  const channels: unknown[] = [];
  const at = (i: number, j: number): [number, number] => [1000 + pitch * i, 1000 + pitch * j];
  for (let j = 0; j <= side; j += 1) {
    for (let i = 0; i <= side; i += 1) {
      const width = 80 + ((i * 7 + j * 3) % 40);
      if (i < side && channels.length < count)
        channels.push({ id: `h${i}.${j}`, layer: 'flow', path: [at(i, j), at(i + 1, j)], width });
      if (j < side && channels.length < count)
        channels.push({ id: `v${i}.${j}`, layer: 'flow', path: [at(i, j), at(i, j + 1)], width });
    }
  }
  return JSON.stringify({
    format: 'channelwright-chip',
    version: 1,
    name: 'lattice',
    outline: { width: 400000, height: 400000 },
    layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
    channels,
    ports: [
      { id: 'in', at: at(0, 0), layer: 'flow', diameter: 0, drive: { flow: '10 uL/min' } },
      { id: 'out', at: at(1, side >> 1), layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
    fluid: { name: 'water', temperature: '25 degC' },
  });
}

/** One width of a chip changed by a micrometre, to and fro. */
function widened(chip: Chip, step: number): Chip {
  const index = (step * 37) % chip.channels.length;
  const one = chip.channels[index];
  const width = one.width[0] + (step % 2 === 0 ? 1000 : -1000);
  const channels: Channel[] = [...chip.channels];
  channels[index] = { ...one, width: [width, width] };
  return { ...chip, channels };
}

export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  const small = lattice(10_000);
  const large = lattice(100_000);
  const read = (text: string) => (): void => {
    readGraph(readDescription(text));
  };
  const one = timed(read(small), 7);
  const ten = timed(read(large), 3, 1);
  rows.push({ what: 'parse and geometry of 10,000 channels', median: one, unit: 'ms', runs: 7, target: 300 });
  rows.push({
    what: 'parse and geometry of 100,000 channels',
    median: ten,
    unit: 'ms',
    runs: 3,
    against: 'the same of 10,000',
    ratio: ten / one,
    target: 12,
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
