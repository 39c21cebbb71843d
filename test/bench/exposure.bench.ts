import { memoryStore } from '../../solver/cell/store.ts';
import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Crossing } from '../../solver/exposure/crossing.ts';
import { ductCrossing } from '../../solver/exposure/duct-crossing.ts';
import { type FlowNet, orderOf } from '../../solver/exposure/flow-net.ts';
import { RouteFinder } from '../../solver/exposure/routes.ts';
import { Session } from '../../solver/session.ts';
import { type BenchRow, timed } from './row.ts';

/** A tree of levels that part in two, to 2^levels outlets, with a duct on every branch. */
function tree(levels: number): FlowNet {
  const nodes = 2 ** (levels + 1);
  const edges = nodes - 2;
  const tail = new Int32Array(edges);
  const head = new Int32Array(edges);
  const flow = new Float64Array(edges);
  const crossing: Crossing[] = [];
  const element = { name: 'a', layer: 'flow', ids: new Set(['a']) };
  for (let e = 0; e < edges; e += 1) {
    const node = e + 2;
    tail[e] = node >> 1;
    head[e] = node;
    flow[e] = 1e-9 / 2 ** Math.floor(Math.log2(node));
    crossing.push(
      ductCrossing({
        profile: { kind: 'rectangle' },
        width: [1e-4, 1e-4],
        depth: 5e-5,
        length: 1e-3,
        flow: flow[e],
        drop: 1,
        volume: 5e-12,
        peakWallShear: flow[e],
        rheology: { viscosity: 1e-3 },
        where: '',
      }),
    );
  }
  return {
    nodes,
    tail,
    head,
    flow,
    crossing,
    element: crossing.map(() => element),
    pressure: new Float64Array(nodes),
    inlets: [{ id: 'in', node: 1, flow: 1e-9 }],
    outlets: Array.from({ length: 2 ** levels }, (_, i) => ({
      id: `${i}`,
      node: 2 ** levels + i,
      flow: 1e-9 / 2 ** levels,
    })),
  };
}

function routesOf(net: FlowNet): number {
  const of = (value: (how: Crossing) => number): Float64Array => Float64Array.from(net.crossing, value);
  const along = net.crossing.map((how) => how.hugging(1e-5));
  const ofAlong = (value: (how: NonNullable<(typeof along)[0]>) => number): Float64Array =>
    Float64Array.from(along, (how) => (how ? value(how) : Number.POSITIVE_INFINITY));
  const finder = new RouteFinder(net, orderOf(net), {
    mean: [of(({ time }) => time), of((how) => how.dose(3))],
    main: [ofAlong(({ time }) => time)],
    most: [of(({ slow }) => slow), ofAlong((how) => how.dose(3))],
    least: [of(({ fast }) => fast)],
    peak: [of(({ peakWallShear }) => peakWallShear ?? 0)],
  });
  return finder.from(net.inlets[0]).length;
}

const LIMITS = [
  { name: 'stress', shear: '2 Pa', cellDiameter: '12 um' },
  {
    name: 'law',
    law: { constant: 3.62e-5, stress: 2.416, time: 0.785 },
    damage: '0.1 %',
    cellDiameter: '12 um',
  },
  {
    name: 'curve',
    curve: [
      ['1 s', '10 Pa'],
      ['10 s', '1 Pa'],
    ],
  },
];

/** A lattice of about `count` channels, each crossing solved in three dimensions or ideal. */
function lattice(count: number, limits: readonly object[]): Chip {
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
      layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
      channels,
      ports: [
        { id: 'in', at: at(0, 0), layer: 'flow', drive: { flow: '10 uL/min' } },
        { id: 'out', at: at(1, side >> 1), layer: 'flow', drive: { pressure: 0 } },
      ],
      fluid: { name: 'water', temperature: '25 degC' },
      limits,
    }),
  );
}

/** One width changed by a micrometre, to and fro. */
function widened(chip: Chip, step: number): Chip {
  const index = (step * 37) % chip.channels.length;
  const one = chip.channels[index];
  const width = one.width[0] + (step % 2 === 0 ? 1000 : -1000);
  const channels: Channel[] = [...chip.channels];
  channels[index] = { ...one, width: [width, width] };
  return { ...chip, channels };
}

/** Times of edits, and the mean of the processor's over all threads, ms. */
interface Series {
  readonly times: readonly number[];
  readonly processor: number;
}

/**
 * Widths edited one after the other with junctions solved: median and mean of an edit, ms, where all shapes are
 * known beforehand but no flow through them is. With limits and without, on the same shapes.
 */
function solvedEdits(count: number): { readonly limited: Series; readonly plain: Series } {
  const options = { accuracy: 0.02 };
  const store = memoryStore();
  const series = (limits: readonly object[]): Series => {
    const session = new Session(store);
    let now = lattice(100, limits);
    session.update(now, options);
    const before = process.cpuUsage();
    const times = Array.from({ length: count }, (_, step) => {
      now = widened(now, step);
      const start = performance.now();
      session.update(now, options);
      return performance.now() - start;
    });
    const { user, system } = process.cpuUsage(before);
    return { times, processor: (user + system) / 1000 / count };
  };
  series([]);
  return { plain: series([]), limited: series(LIMITS) };
}

const middle = (times: readonly number[]): number => [...times].sort((a, b) => a - b)[times.length >> 1];

/** Median of an edit from chip to result. */
function edits(chip: Chip, runs: number, warmup: number): number {
  const session = new Session();
  let now = chip;
  let step = 0;
  return timed(
    () => {
      now = widened(now, step);
      step += 1;
      session.update(now, { junctions: 'ideal' });
    },
    runs,
    warmup,
  );
}

/** Mean of the processor time of `work`, ms: what other programs on the machine leave alone. */
function processor(work: () => void, runs: number): string {
  const before = process.cpuUsage();
  for (let i = 0; i < runs; i += 1) work();
  const { user, system } = process.cpuUsage(before);
  return `${((user + system) / 1000 / runs).toPrecision(3)} ms of processor, all threads`;
}

export default async function bench(): Promise<BenchRow[]> {
  const net = tree(12);
  if (routesOf(net) !== 4096) throw new Error('not every outlet was reached');
  const with100 = edits(lattice(100, LIMITS), 201, 100);
  const without100 = edits(lattice(100, []), 201, 100);
  const { limited, plain: unlimited } = solvedEdits(120);
  const large = lattice(10_000, LIMITS);
  const plain = lattice(10_000, []);
  const with10000 = timed(() => new Session().update(large, { junctions: 'ideal' }), 3, 1);
  const without10000 = timed(() => new Session().update(plain, { junctions: 'ideal' }), 3, 1);
  return [
    {
      what: 'routes through a 12-level splitting tree, 4,096 outlets, with doses',
      median: timed(() => routesOf(net), 9),
      unit: 'ms',
      runs: 9,
      target: 100,
      note: processor(() => void routesOf(net), 9),
    },
    {
      what: 'one width edited, 100 channels, three limits (ideal junctions)',
      median: with100,
      unit: 'ms',
      runs: 201,
      against: 'the same without limits',
      ratio: with100 / without100,
    },
    {
      what: 'what limits add to one edit of 100 channels',
      median: with100 - without100,
      unit: 'ms',
      runs: 201,
      target: 10,
    },
    {
      what: 'what limits add to one width edited of 100 channels, junctions solved and their shapes known',
      median: middle(limited.times) - middle(unlimited.times),
      unit: 'ms',
      runs: limited.times.length,
      target: 10,
      note: `${(limited.processor - unlimited.processor).toPrecision(3)} ms of processor; the edit without limits ${unlimited.processor.toPrecision(3)} ms of processor`,
    },
    {
      what: '10,000 channels with three limits, chip to result from the beginning',
      median: with10000,
      unit: 'ms',
      runs: 3,
      against: 'the same without limits',
      ratio: with10000 / without10000,
      note: `${(with10000 - without10000).toPrecision(3)} ms more; target 1000`,
    },
  ];
}
