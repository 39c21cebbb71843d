import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { Session } from '../../solver/session.ts';
import type { BenchRow } from './row.ts';

/** A lattice of about `count` channels with four outlets. */
function lattice(count: number, tolerance?: object): Chip {
  const side = Math.ceil(Math.sqrt(count / 2));
  const pitch = 1500;
  const at = (i: number, j: number): [number, number] => [1000 + pitch * i, 1000 + pitch * j];
  const channels: unknown[] = [];
  for (let j = 0; j <= side; j += 1) {
    for (let i = 0; i <= side; i += 1) {
      const width = 80 + 10 * ((i * 7 + j * 3) % 4);
      for (const [id, to] of [
        [`h${i}.${j}`, i < side ? at(i + 1, j) : null],
        [`v${i}.${j}`, j < side ? at(i, j + 1) : null],
      ] as const) {
        if (to && channels.length < count) channels.push({ id, layer: 'flow', path: [at(i, j), to], width });
      }
    }
  }
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'lattice',
      outline: { width: 900000, height: 900000 },
      layers: [{ id: 'flow', depth: 50, fillet: 5, ...(tolerance && { tolerance }) }],
      channels,
      ports: [
        { id: 'in', at: at(0, 0), layer: 'flow', drive: { flow: '10 uL/min' } },
        ...[1, 2, 3, 4].map((i) => ({
          id: `out ${i}`,
          at: at(i, side >> 1),
          layer: 'flow',
          drive: { pressure: 0 },
        })),
      ],
      fluid: { name: 'water', temperature: '25 degC' },
    }),
  );
}

/** One width changed by a micrometre, to and fro. */
function widened(chip: Chip, step: number): Chip {
  const index = (step * 37) % chip.channels.length;
  const one = chip.channels[index]!;
  const width = one.width[0] + (step % 2 === 0 ? 1000 : -1000);
  const channels: Channel[] = [...chip.channels];
  channels[index] = { ...one, width: [width, width] };
  return { ...chip, channels };
}

/**
 * Medians of an edit from chip to result of the three, their edits by turns: what else runs on the machine then
 * falls on all alike.
 */
function edits(chips: readonly Chip[], runs: number): number[] {
  const hands = chips.map((chip) => ({ session: new Session(), chip, times: [] as number[] }));
  for (let step = -10; step < runs; step += 1) {
    for (const hand of hands) {
      hand.chip = widened(hand.chip, step + 10);
      const start = performance.now();
      hand.session.update(hand.chip, { junctions: 'ideal' });
      if (step >= 0) hand.times.push(performance.now() - start);
    }
  }
  return hands.map(({ times }) => times.sort((a, b) => a - b)[times.length >> 1]!);
}

const TOLERANCE = { depth: '5 %', width: '2 um' };
/** Given, but of nothing: what finding that out costs. */
const NOUGHT = { depth: '0 %', width: '0 um' };

export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const [count, runs, target] of [
    [100, 201, 10],
    [1000, 41, 60],
    [10_000, 7, 800],
  ] as const) {
    const [none, nought, some] = edits(
      [lattice(count), lattice(count, NOUGHT), lattice(count, TOLERANCE)],
      runs,
    ) as [number, number, number];
    const name = `${count.toLocaleString('en')} channels`;
    rows.push(
      {
        what: `one width edited, ${name}, tolerances given`,
        median: some,
        unit: 'ms',
        runs,
        against: 'the same without',
        ratio: some / none,
      },
      { what: `what tolerances add to one edit, ${name}`, median: some - none, unit: 'ms', runs, target },
    );
    // Of larger chips it is lost in what else the machine does.
    if (count > 100) continue;
    rows.push({
      what: `what a chip without tolerances pays, ${name}`,
      median: Math.max(0, nought - none),
      unit: 'ms',
      runs,
      target: 1,
    });
  }
  return rows;
}
