import type { Chip } from '../../solver/chip/chip.ts';
import { type Case, chipOf, ends, line, port } from './chips.ts';

export const film = (parts: Record<string, unknown> = {}): Chip => made('film-mask', parts);
export const made = (
  kind: string,
  parts: Record<string, unknown> = {},
  own: Record<string, unknown> = {},
): Chip => chipOf({ process: { kind, ...own }, ...parts });
export const layer = (more: Record<string, unknown>) => ({
  layers: [{ id: 'flow', depth: 100, fillet: 5, ...more }],
});
const two = (y: number, width = 200) => ({
  channels: [line('a', 12000, width), line('b', y, width)],
  ports: [
    ...ends('a', 12000),
    port('b in', [6000, 15000], { flow: '1 uL/min' }),
    port('b out', [66000, 15000], { pressure: 0 }),
  ],
});
/** Two channels, the second led away at its ends so that only its middle lies near the first. */
export const beside = (y: number, width = 200) => ({
  ...two(y, width),
  channels: [
    line('a', 12000, width),
    {
      id: 'b',
      layer: 'flow',
      path: [
        [6000, 15000],
        [9000, 15000],
        [9000, y],
        [63000, y],
        [63000, 15000],
        [66000, 15000],
      ],
      width,
    },
  ],
});
export const well = (height: number) => ({
  chambers: [
    {
      id: 'well',
      layer: 'flow',
      outline: [
        [30000, 12000 - height / 2],
        [40000, 12000 - height / 2],
        [40000, 12000 + height / 2],
        [30000, 12000 + height / 2],
      ],
    },
  ],
});

/** A keep-out above the channel of y 12000, 200 wide: its top wall is at 12100. */
export const clamp = (from: number, more: Record<string, unknown> = {}) => ({
  keepOuts: [
    {
      id: 'clamp',
      outline: [
        [30000, from],
        [34000, from],
        [34000, from + 3000],
        [30000, from + 3000],
      ],
      ...more,
    },
  ],
});

/**
 * For each kind a chip that just passes and one that just fails. The thresholds are worked out by hand from
 * the sources in `FINDING_KINDS` and `PROCESSES`; lengths in µm.
 */
export const MADE_CASES: readonly Case[] = [
  // film masks hold 25 µm
  [
    'least-width',
    film({ channels: [line('a', 12000, 25)], ...layer({ depth: 20 }) }),
    film({ channels: [line('a', 12000, 24)], ...layer({ depth: 20 }) }),
    24e-6,
    25e-6,
  ],
  // a milled slot is never narrower than its tool: 2 × 100 µm
  [
    'least-width',
    made('milling', { channels: [line('a', 12000, 200)] }),
    made('milling', { channels: [line('a', 12000, 199)] }),
    199e-6,
    200e-6,
  ],
  // centrelines 200 + 25 apart leave 25; 1 less leaves 24; depth 20 keeps the wall from leaning
  [
    'least-gap',
    film({ ...beside(12225), ...layer({ depth: 20 }) }),
    film({ ...beside(12224), ...layer({ depth: 20 }) }),
    24e-6,
    25e-6,
  ],
  // wall of 50 at a depth of 100 stands 2 to 1
  ['wall-leans', film(beside(12250)), film(beside(12249)), 100 / 49, 2],
  ['near-miss', chipOf(beside(12201)), chipOf(beside(12200.9)), 0.9e-6, 1e-6],
  // wall of the channel at 12100, keep-out from 12600: 500 between
  [
    'keep-out',
    chipOf(clamp(12600, { clearance: 500 })),
    chipOf(clamp(12599, { clearance: 500 })),
    499e-6,
    500e-6,
  ],
  // no clearance asked: what only comes near is no fault; what touches lies in it
  ['keep-out', chipOf(clamp(12101)), chipOf(clamp(12100)), 0, 0],
  // an etch 30 deep adds 30 to the wall: of 530 only 500 are left
  [
    'keep-out',
    made('glass-etch', {
      ...clamp(12630, { clearance: 500 }),
      ...layer({ depth: 30, profile: { kind: 'rounded' } }),
    }),
    made('glass-etch', {
      ...clamp(12629, { clearance: 500 }),
      ...layer({ depth: 30, profile: { kind: 'rounded' } }),
    }),
    499e-6,
    500e-6,
  ],
  // an etch 30 deep takes 30 from both sides: 60 of the wall are gone at 60
  [
    'etch-merge',
    made('glass-etch', { ...beside(12261), ...layer({ depth: 30, profile: { kind: 'rounded' } }) }),
    made('glass-etch', { ...beside(12260), ...layer({ depth: 30, profile: { kind: 'rounded' } }) }),
    0,
    0,
  ],
  // and 20 more must stay
  [
    'least-gap',
    made('glass-etch', { ...beside(12280), ...layer({ depth: 30, profile: { kind: 'rounded' } }) }),
    made('glass-etch', { ...beside(12279), ...layer({ depth: 30, profile: { kind: 'rounded' } }) }),
    19e-6,
    20e-6,
  ],
  // a soft roof spans ten depths of 100
  [
    'roof-sags',
    film({ channels: [line('a', 12000, 1000)] }),
    film({ channels: [line('a', 12000, 1001)] }),
    10.01,
    10,
  ],
  // twice as deep as wide: 50 at 100
  [
    'too-deep',
    film({ channels: [line('a', 12000, 50)] }),
    film({ channels: [line('a', 12000, 49)] }),
    100 / 49,
    2,
  ],
  [
    'outside',
    chipOf({ channels: [line('a', 100)], ports: ends('a', 100, '1 uL/min', 0) }),
    chipOf({ channels: [line('a', 99)], ports: ends('a', 99, '1 uL/min', 0) }),
    1e-6,
    0,
  ],
  // a channel 200 wide at 1100 leaves 1000
  [
    'edge',
    film({ channels: [line('a', 1100)], ports: ends('a', 1100, '1 uL/min', 200) }),
    film({ channels: [line('a', 1099)], ports: ends('a', 1099, '1 uL/min', 200) }),
    999e-6,
    1000e-6,
  ],
  [
    'hole-narrow',
    chipOf({ ports: ends('a', 12000, '1 uL/min', 200) }),
    chipOf({ ports: ends('a', 12000, '1 uL/min', 199) }),
    199e-6,
    200e-6,
  ],
  [
    'port-edge',
    film({ channels: [line('a', 3000)], ports: ends('a', 3000) }),
    film({ channels: [line('a', 2999)], ports: ends('a', 2999) }),
    2.999e-3,
    3e-3,
  ],
  [
    'port-hole',
    film({ ports: ends('a', 12000, '1 uL/min', 400) }),
    film({ ports: ends('a', 12000, '1 uL/min', 399) }),
    399e-6,
    400e-6,
  ],
  [
    'port-hole',
    film({ ports: ends('a', 12000, '1 uL/min', 3500) }),
    film({ ports: ends('a', 12000, '1 uL/min', 3501) }),
    3501e-6,
    3500e-6,
  ],
  // the grid counts from 3 mm off the corner by 1.5 mm; 0.1 mm is let pass
  [
    'port-grid',
    film({ channels: [line('a', 12100)], ports: ends('a', 12100) }),
    film({ channels: [line('a', 12101)], ports: ends('a', 12101) }),
    101e-6,
    100e-6,
  ],
  // a stub as long as it is wide
  [
    'dead-end',
    chipOf({ channels: [line('a', 12000), stub(200)] }),
    chipOf({ channels: [line('a', 12000), stub(201)] }),
    201e-6,
    200e-6,
  ],
  // walls of KOH stand at 54.74°
  [
    'process-profile',
    made('silicon-etch', layer({ profile: { kind: 'trapezoid', wallAngle: 55.7 }, depth: 50 })),
    made('silicon-etch', layer({ profile: { kind: 'trapezoid', wallAngle: 55.8 }, depth: 50 })),
    55.8,
    54.735610317,
  ],
  // 0.5° over 60 mm is a rise of 523.6 µm
  ['off-axis', silicon(523), silicon(524), 0.50036, 0.5],
  ['via-land', made('film-mask', via(100)), made('film-mask', via(99)), 99e-6, 100e-6],
  // 1500 µm between centres
  ['port-pitch', film(pitch(1500)), film(pitch(1499)), 1.499e-3, 1.5e-3],
  // the chip holds 0.2 × 0.1 × 60 = 1.2 µL; 12 µL of tubing of 0.5 mm bore are 61.115 mm long
  ['tubing-volume', chipOf(tubed(61.1)), chipOf(tubed(61.2)), 10.0138, 10],
  // Re = rho Q Dh/(A mu) with Dh = 4 A/P, so rho 4 Q/(P mu), P = 600 µm: 2000 at 0.3 mL/s
  [
    'turbulent',
    chipOf({ ports: ends('a', 12000, '299 uL/s') }),
    chipOf({ ports: ends('a', 12000, '301 uL/s') }),
    2006.667,
    2000,
  ],
  // hydraulic diameter 133.333 µm, 59 mm from rim to rim: a tenth of it is 44.25 diameters, Re 779.9, 116.99 µL/s
  [
    'entrance-length',
    chipOf({ ports: ends('a', 12000, '116.9 uL/s') }),
    chipOf({ ports: ends('a', 12000, '117.2 uL/s') }),
    0.10018,
    0.1,
  ],
  [
    'aspect-ratio',
    chipOf({ channels: [line('a', 12000, 2000)], ports: ends('a', 12000, '1 uL/min', 2000) }),
    chipOf({ channels: [line('a', 12000, 2001)], ports: ends('a', 12000, '1 uL/min', 2001) }),
    20.01,
    20,
  ],
  ['blood-narrow', chipOf(blood(300)), chipOf(blood(299)), 299e-6, 300e-6],
  // W p/(E h) = 2 p/2 MPa: 0.05 at 50 kPa
  ['soft-roof', film({ ports: pressed('49.9 kPa') }), film({ ports: pressed('50.1 kPa') }), 0.0501, 0.05],
  ['chamber-neck', film(hourglass(25)), film(hourglass(24)), 24e-6, 25e-6],
  ['layer-wall', film(stacked(25)), film(stacked(24)), 24e-6, 25e-6],
  // a bend as drawn is sharp; rounded by its own width it is not
  ['tool-corner', made('milling', bent(200)), made('milling', bent(0)), 0, 100e-6],
];

function bent(bendRadius: number) {
  return {
    channels: [
      {
        id: 'a',
        layer: 'flow',
        path: [
          [6000, 12000],
          [66000, 12000],
          [66000, 15000],
        ],
        width: 200,
        bendRadius,
      },
    ],
    ports: [port('in', [6000, 12000], { flow: '1 uL/min' }), port('out', [66000, 15000], { pressure: 0 })],
  };
}
function hourglass(waist: number) {
  return {
    ...layer({ depth: 20 }),
    channels: [
      {
        ...line('a', 12000),
        path: [
          [6000, 12000],
          [30100, 12000],
        ],
      },
      {
        ...line('b', 12000),
        path: [
          [39900, 12000],
          [66000, 12000],
        ],
      },
    ],
    chambers: [
      {
        id: 'well',
        layer: 'flow',
        outline: [
          [30000, 11000],
          [35000, 12000 - waist / 2],
          [40000, 11000],
          [40000, 13000],
          [35000, 12000 + waist / 2],
          [30000, 13000],
        ],
      },
    ],
  };
}
function stacked(roof: number) {
  return {
    layers: [
      {
        id: 'flow',
        depth: 100,
        fillet: 5,
        roof: { modulus: '2 MPa', thickness: `${roof} um`, poisson: 0.5 },
      },
      { id: 'upper', depth: 100, fillet: 5 },
    ],
    channels: [
      line('a', 12000),
      {
        id: 'b',
        layer: 'upper',
        path: [
          [30000, 6000],
          [30000, 18000],
        ],
        width: 200,
      },
    ],
    ports: [
      ...ends('a', 12000),
      { ...port('b in', [30000, 6000], { flow: '1 uL/min' }), layer: 'upper' },
      { ...port('b out', [30000, 18000], { pressure: 0 }), layer: 'upper' },
    ],
  };
}

function stub(length: number) {
  // its length counts from the centreline of the channel that it leaves
  return {
    id: 'stub',
    layer: 'flow',
    path: [
      [30000, 12000],
      [30000, 12000 + length],
    ],
    width: 200,
  };
}
function silicon(rise: number): Chip {
  return made('silicon-etch', {
    ...layer({ depth: 50, profile: { kind: 'trapezoid', wallAngle: 54.74 } }),
    channels: [
      {
        id: 'a',
        layer: 'flow',
        path: [
          [6000, 12000],
          [66000, 12000 + rise],
        ],
        width: 200,
      },
    ],
    ports: [
      port('in', [6000, 12000], { flow: '1 uL/min' }),
      port('out', [66000, 12000 + rise], { pressure: 0 }),
    ],
  });
}
function via(diameter: number) {
  return {
    layers: [
      { id: 'flow', depth: 60, fillet: 5 },
      { id: 'upper', depth: 60, fillet: 5 },
    ],
    channels: [
      {
        ...line('a', 12000, 80),
        path: [
          [6000, 12000],
          [30000, 12000],
        ],
      },
      {
        ...line('b', 12000, 80),
        layer: 'upper',
        path: [
          [30000, 12000],
          [66000, 12000],
        ],
      },
    ],
    vias: [{ id: 'v', at: [30000, 12000], layers: ['flow', 'upper'], diameter }],
    ports: [
      port('in', [6000, 12000], { flow: '1 uL/min' }),
      { ...port('out', [66000, 12000], { pressure: 0 }), layer: 'upper' },
    ],
  };
}
function pitch(apart: number) {
  return {
    channels: [
      line('a', 12000),
      {
        id: 'b',
        layer: 'flow',
        path: [
          [30000, 12000 + apart],
          [6000, 12000 + apart],
        ],
        width: 200,
      },
    ],
    ports: [
      ...ends('a', 12000, '1 uL/min', 500),
      port('b in', [6000, 12000 + apart], { flow: '1 uL/min' }, 500),
      port('b out', [30000, 12000 + apart], { pressure: 0 }, 500),
    ],
  };
}
function tubed(millimetres: number) {
  const [inlet, outlet] = ends('a', 12000);
  return { ports: [{ ...inlet, tubing: [{ bore: '0.5 mm', length: `${millimetres} mm` }] }, outlet] };
}
function blood(width: number) {
  return {
    ...layer({ depth: 400 }),
    channels: [line('a', 12000, width)],
    fluid: { name: 'blood', temperature: '37 degC' },
  };
}
function pressed(pressure: string) {
  return [port('in', [6000, 12000], { pressure }), port('out', [66000, 12000], { pressure: 0 })];
}
