import { checkFindings } from '../../solver/checks/check.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { fluidOf } from '../../solver/fluid/fluid.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import { type SolveOptions, solve } from '../../solver/solve.ts';
import { type Case, chipOf, ends, findings, line, port } from './chips.ts';

type Json = Record<string, unknown>;

/**
 * Findings about cells, pumps, the drawing and what was solved. By hand, for the plain chip (200 by 100 µm, 59 mm
 * from rim to rim, 1 mPa s, 1 µL/min): R = 12 µ L/(w h³ 0.686045031) = 5.16001e12 Pa s/m³ (the series of a
 * rectangle, h/w = 0.5: White, Viscous Fluid Flow, eq. 3-48), so 86.0001 Pa; wall shear at most 0.0677860 Pa;
 * volume 1.18 µL.
 */
const SOLVED: SolveOptions = { accuracy: 0.02 };
const LAW = { constant: 3.62e-5, stress: 2.416, time: 0.785 };

/** The plain chip with a pump, reservoir or tubing at its inlet. */
const pumped = (inlet: Json, more: Json = {}): Chip => {
  const [entry, exit] = ends('a', 12000);
  return chipOf({ ports: [{ ...entry, ...inlet }, exit], ...more });
};
const limited = (limit: Json, flow: unknown = '1 uL/min', more: Json = {}): Chip =>
  chipOf({ ports: ends('a', 12000, flow), limits: [{ name: 'cells', ...limit }], ...more });

/** A feed along y = 12000 to the middle, and arms up and down from there. */
const tee = (more: Json = {}, flow: unknown = '1 uL/min', layer: Json = {}): Chip =>
  chipOf({
    layers: [{ id: 'flow', depth: 100, fillet: 20, ...layer }],
    channels: [
      run('feed', [6000, 12000], [30000, 12000]),
      run('up', [30000, 12000], [30000, 20000]),
      run('down', [30000, 12000], [30000, 4000]),
    ],
    ports: [
      port('in', [6000, 12000], { flow }),
      port('top', [30000, 20000], { pressure: 0 }),
      port('bottom', [30000, 4000], { pressure: 0 }),
    ],
    ...more,
  });
const run = (id: string, from: number[], to: number[], more: Json = {}): Json => ({
  id,
  layer: 'flow',
  path: [from, to],
  width: 200,
  ...more,
});

/** A tee whose limit is its own largest wall shear times a factor. */
const close = (times: number): Chip => {
  const drawn = tee({ limits: [{ name: 'cells', shear: '100 Pa' }] });
  const { worst } = solve(drawn, SOLVED).limits[0]!;
  return { ...drawn, limits: [{ name: 'cells', shear: times * worst! }] };
};

/** Two inlets into one lane, which parts to as many outlets as are asked. */
const meeting = (outlets: number): Chip =>
  chipOf({
    channels: [
      run('p', [6000, 15000], [20000, 12000]),
      run('q', [6000, 9000], [20000, 12000]),
      run('lane', [20000, 12000], [40000, 12000]),
      run('r', [40000, 12000], [60000, 15000]),
      ...(outlets === 2 ? [run('s', [40000, 12000], [60000, 9000])] : []),
    ],
    ports: [
      port('one', [6000, 15000], { flow: '1 uL/min' }),
      port('two', [6000, 9000], { flow: '2 uL/min' }),
      port('up', [60000, 15000], { pressure: 0 }),
      ...(outlets === 2 ? [port('down', [60000, 9000], { pressure: 0 })] : []),
    ],
  });

/** A spine with inlets on its first part and outlets on its last: each of the one to each of the other. */
const comb = (inlets: number, outlets: number): Chip => {
  const teeth = Array.from({ length: inlets + outlets }, (_, i) => ({ x: 8000 + 400 * i, id: `t${i}` }));
  return chipOf({
    channels: [
      line('spine', 12000, 200),
      ...teeth.map(({ x, id }) => run(id, [x, 12000], [x, 15000], { width: 100 })),
    ],
    ports: teeth.map(({ x, id }, i) =>
      port(`p ${id}`, [x, 15000], i < inlets ? { flow: '1 uL/min' } : { pressure: 0 }, 0),
    ),
  });
};

/** A pump that takes out 3 µL/min where it puts them in; the side arm only says what the pressure is. */
const loop = (time: string): Chip =>
  chipOf({
    channels: [line('a', 12000), run('side', [36000, 12000], [36000, 20000])],
    ports: [
      port('a in', [6000, 12000], { flow: '3 uL/min' }),
      port('a out', [66000, 12000], { flow: '-3 uL/min' }),
      port('rest', [36000, 20000], { pressure: 0 }),
    ],
    assay: { time },
    limits: [{ name: 'loop', law: LAW, damage: '1 %', where: ['a in', 'a out'] }],
  });

const vessel = (volume: string): Chip => {
  const [entry, exit] = ends('a', 12000);
  return chipOf({
    ports: [{ ...entry, drive: { head: '50 mm' }, reservoir: { area: '1000 mm^2', volume } }, exit],
    assay: { time: '60 s' },
  });
};

/** A fluid with a yield stress of 5 mPa in a round bore. */
const yielding = (pressure: number): Chip =>
  chipOf({
    layers: [{ id: 'flow', depth: 200, fillet: 5, profile: { kind: 'circle' } }],
    ports: [port('a in', [6000, 12000], { pressure }), port('a out', [66000, 12000], { pressure: 0 })],
    fluid: { density: 1000, shear: { kind: 'casson', yieldStress: 0.005, viscosity: 0.0035 } },
  });

/** A second channel that ends near the first, at a height over its centreline. */
const ending = (y: number): Chip =>
  chipOf({
    channels: [line('a', 12000), run('b', [30000, 18000], [30000, y])],
    ports: [...ends('a', 12000), port('b in', [30000, 18000], { flow: '1 uL/min' })],
  });

/** The second channel comes near the first in its middle. */
const near = (y: number): Chip =>
  chipOf({
    channels: [
      line('a', 12000),
      {
        ...run('b', [], []),
        path: [
          [6000, 18000],
          [20000, 18000],
          [20000, y],
          [40000, y],
          [40000, 18000],
          [66000, 18000],
        ],
      },
    ],
    ports: [...ends('a', 12000), ...ends('b', 18000)],
  });

const bent = (bendRadius: number): Chip =>
  chipOf({
    channels: [
      {
        ...run('a', [], []),
        path: [
          [6000, 12000],
          [66000, 12000],
          [66000, 15000],
        ],
        bendRadius,
      },
    ],
    ports: [
      port('in', [6000, 12000], { flow: '1 uL/min' }, 0),
      port('out', [66000, 15000], { pressure: 0 }, 0),
    ],
  });

/**
 * Three alike arms from 1000 Pa, to 0, and to almost the 500 Pa of their middle: of a difference d the third
 * carries d/750 of the flow.
 */
const trickle = (share: number): Chip =>
  chipOf({
    channels: [
      run('from', [6000, 12000], [16000, 12000]),
      run('to', [16000, 12000], [26000, 12000]),
      run('side', [16000, 12000], [16000, 22000]),
    ],
    ports: [
      port('in', [6000, 12000], { pressure: 1000 }, 0),
      port('out', [26000, 12000], { pressure: 0 }, 0),
      port('rest', [16000, 22000], { pressure: 500 - 750 * share }, 0),
    ],
  });

/** Findings of the checks alone about one junction that reached an accuracy. */
const reached = (accuracy: number) => (): readonly Finding[] => {
  const chip = tee();
  const junction = {
    id: 'junction:1',
    at: [0.03, 0.012],
    accuracy,
    upright: 0,
    uprightPeak: 0,
    depths: 0,
  } as const;
  return checkFindings({
    chip,
    graph: readGraph(chip),
    fluid: fluidOf(chip.fluid),
    stretches: [],
    ports: [],
    cells: [junction],
    asked: 0.004,
  });
};

/** A tee of which one arm was measured to be deeper than its layer. */
const deeper = (depth: number): Chip => {
  const chip = tee();
  const [first, ...others] = chip.channels;
  return { ...chip, channels: [{ ...first!, depth }, ...others] };
};

const soft = (time: string): Chip =>
  chipOf({
    layers: [
      {
        id: 'flow',
        depth: 100,
        fillet: 5,
        roof: { modulus: '2 MPa', thickness: '5 mm', poisson: 0.5, law: 'thick', constant: 1 },
      },
    ],
    assay: { time },
  });

const water = (temperature: string): Chip => chipOf({ fluid: { name: 'water', temperature } });
const leaning = (depth: number): Chip =>
  tee({}, '1 uL/min', { depth, profile: { kind: 'trapezoid', wallAngle: 54.74 } });
const thinning = (index: number): Chip =>
  tee({ fluid: { density: 1000, shear: { kind: 'power-law', consistency: 0.01, index } } });

export const SOLVED_CASES: readonly Case[] = [
  // cells
  [
    'cell-too-large',
    limited({ shear: '1 Pa', cellDiameter: '100 um' }),
    limited({ shear: '1 Pa', cellDiameter: '101 um' }),
  ],
  // the slowest hundredth meets less than the wall does
  [
    'limit-not-judged',
    limited({ curve: [['1000 s', '0.068 Pa']] }),
    limited({ curve: [['1000 s', '0.060 Pa']] }),
  ],
  [
    'law-mixed',
    limited({ law: LAW, damage: '1 %' }),
    limited({ law: { ...LAW, stress: 1.991, time: 0.765 }, damage: '1 %' }),
  ],
  // data up to 0.7 s: 1.18 µL in 0.7 s are 101.14 µL/min
  [
    'law-range',
    limited({ law: LAW, damage: '1 %' }, '101.3 uL/min'),
    limited({ law: LAW, damage: '1 %' }, '101.0 uL/min'),
  ],
  // once round takes 1.18 µL at 3 µL/min: 23.6 s
  ['loop-passes', loop('23.5 s'), loop('23.7 s'), 1.00424, 1],
  // the limit is met with half to spare, and with a thousandth, where corners are known to a few hundredths
  ['close-call', close(1.5), close(1.001), 0.001, undefined, SOLVED],
  ['streams-meet', meeting(1), meeting(2)],
  ['routes-summed', comb(70, 71), comb(71, 71)],
  // pumps
  ['pump-pressure', pumped({ pump: { pressure: '86.1 Pa' } }), pumped({ pump: { pressure: '85.9 Pa' } })],
  ['pump-flow', pumped({ pump: { flow: '1.001 uL/min' } }), pumped({ pump: { flow: '0.999 uL/min' } })],
  [
    'runs-out',
    pumped({ pump: { volume: '1 uL' } }, { assay: { time: '59.9 s' } }),
    pumped({ pump: { volume: '1 uL' } }, { assay: { time: '60.1 s' } }),
  ],
  // 50 mm of 1000 kg/m³ are 490.33 Pa, 9.5025e-11 m³/s, 5.7015 µL in a minute
  ['runs-dry', vessel('5.71 uL'), vessel('5.69 uL')],
  ['burst', chipOf({ rating: { pressure: '86.1 Pa' } }), chipOf({ rating: { pressure: '85.9 Pa' } })],
  // the drawing
  ['unconnected', chipOf(), chipOf({ channels: [line('a', 12000), line('b', 18000)] })],
  [
    'at-rest',
    chipOf({
      ports: [port('in', [6000, 12000], { pressure: 1 }), port('out', [66000, 12000], { pressure: 0 })],
    }),
    chipOf({
      ports: [port('in', [6000, 12000], { pressure: 1 }), port('out', [66000, 12000], { pressure: 1 })],
    }),
  ],
  // wall shear p d/(4 L) is 5 mPa at 5.9 Pa
  ['no-flow', yielding(5.91), yielding(5.89)],
  ['end-extended', ending(12000), ending(12050)],
  ['overlap-alongside', near(12201), near(12150)],
  ['bend-reduced', bent(3000), bent(3001)],
  ['same-line', chipOf(), chipOf({ channels: [line('a', 12000), run('b', [20000, 12000], [40000, 12000])] })],
  // what was solved
  ['ideal-junctions', () => findings(tee(), SOLVED), tee()],
  ['unresolved-flow', trickle(1.1e-9), trickle(0.9e-9)],
  ['cell-accuracy', reached(0.006), reached(0.0061), 0.0061, 0.006],
  ['sharp-corner', tee(), tee({}, '1 uL/min', { fillet: 0 }), undefined, undefined, SOLVED],
  ['thinning-junction', thinning(1), thinning(0.9), undefined, undefined, SOLVED],
  ['inertia', tee({}, '1 uL/min'), tee({}, '600 uL/min'), undefined, undefined, SOLVED],
  [
    'cell-ideal',
    tee(),
    tee({
      ports: [
        port('in', [6000, 12000], { flow: '1 uL/min' }),
        port('mid', [30000, 12000], { closed: true }, 0),
        port('top', [30000, 20000], { pressure: 0 }),
        port('bottom', [30000, 4000], { pressure: 0 }),
      ],
    }),
    undefined,
    undefined,
    SOLVED,
  ],
  // 0.003 + 0.03 × depth/tan 54.74°/200 is 0.01 at a depth of 66.008
  // between 100 and 100.6 µm the mean is 100.3, and (100.6/100.3)³ − 1 is 0.0090; for 100.7 it is 0.01053
  ['mixed-depths', deeper(100_600), deeper(100_700), 0.01053, 0.01, SOLVED],
  ['upright-walls', leaning(66), leaning(67), 0.010105, 0.01, SOLVED],
  // usual from 4 to 50 °C
  ['temperature', water('50 degC'), water('50.1 degC'), 323.25, 323.15],
  ['temperature', water('4 degC'), water('3.9 degC'), 277.05, 277.15],
  // C = W² L/E = 1.18e-15 m³/Pa; 3 C R = 18.2664 ms, a tenth of 182.7 ms
  ['settling', soft('0.183 s'), soft('0.182 s'), 0.10036, 0.1],
];
