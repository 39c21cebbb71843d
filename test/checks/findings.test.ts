import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { FINDING_KINDS } from '../../solver/checks/kinds.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import { chipOf, ends, findings, line, ofKind, port } from './chips.ts';

const film = (parts: Record<string, unknown> = {}): Chip => made('film-mask', parts);
const made = (kind: string, parts: Record<string, unknown> = {}, own: Record<string, unknown> = {}): Chip =>
  chipOf({ process: { kind, ...own }, ...parts });
const layer = (more: Record<string, unknown>) => ({
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
const beside = (y: number, width = 200) => ({
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
const well = (height: number) => ({
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

/**
 * For each kind a chip that just passes and one that just fails. The thresholds are worked out by hand from
 * the sources in `FINDING_KINDS` and `PROCESSES`; lengths in µm.
 */
const PAIRS: readonly [kind: string, passes: Chip, fails: Chip, value: number, threshold: number][] = [
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
];

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

describe('each kind: one chip just passes, one just fails', () => {
  test.each(PAIRS)('%s', (kind, passes, fails, value, threshold) => {
    expect(ofKind(passes, kind), 'passes').toEqual([]);
    const found = ofKind(fails, kind);
    expect(found.length, 'fails').toBeGreaterThan(0);
    expect(found[0]!.value).toBeCloseTo(value, value < 0.01 ? 9 : 3);
    expect(found[0]!.threshold).toBeCloseTo(threshold, threshold < 0.01 ? 9 : 3);
    expect(FINDING_KINDS).toHaveProperty(kind);
  });

  test('after its remedy a finding is gone', () => {
    let tried = 0;
    for (const [kind, , fails] of PAIRS) {
      const [found] = ofKind(fails, kind);
      if (!found!.remedy) continue;
      tried += 1;
      const mended = applyEdit(fails, readEdit(structuredClone(found!.remedy)));
      expect(
        ofKind(mended, kind).filter(({ where }) => where === found!.where),
        kind,
      ).toEqual([]);
    }
    expect(tried).toBeGreaterThanOrEqual(9);
  });

  test('a chamber is spanned by the largest circle inside', () => {
    const [found] = ofKind(film({ ...well(1500) }), 'roof-sags');
    expect(found).toMatchObject({ where: 'chamber:well', severity: 'warn' });
    expect(found!.value).toBeCloseTo(15, 1);
    expect(ofKind(film({ ...well(2100) }), 'roof-sags')[0]!.severity).toBe('stop');
    expect(ofKind(film({ ...well(1000) }), 'roof-sags')).toEqual([]);
  });

  test('a tool rounds the corners of chambers and bends; one too thick does not fit', () => {
    const corners = ofKind(made('milling', well(1000)), 'tool-corner');
    expect(corners).toMatchObject([{ where: 'chamber:well', severity: 'note', threshold: 100e-6 }]);
    const thick = ofKind(made('milling', well(1000), { toolRadius: 501 }), 'tool-corner');
    expect(thick[0]!.severity).toBe('stop');
    const bend = {
      id: 'a',
      layer: 'flow',
      path: [
        [6000, 12000],
        [66000, 12000],
        [66000, 15000],
      ],
      width: 200,
    };
    const bent = (more: object) =>
      made('milling', {
        channels: [{ ...bend, ...more }],
        ports: [
          port('in', [6000, 12000], { flow: '1 uL/min' }),
          port('out', [66000, 15000], { pressure: 0 }),
        ],
      });
    const [sharp] = ofKind(bent({}), 'tool-corner');
    expect(sharp).toMatchObject({ where: 'a', severity: 'note' });
    expect(ofKind(applyEdit(bent({}), readEdit(sharp!.remedy)), 'tool-corner')).toEqual([]);
  });
});

describe('what is said of a chip', () => {
  test('without a process, only what every process must obey', () => {
    const thin = { channels: [line('a', 12000, 3)] };
    expect(ofKind(chipOf(thin), 'least-width')).toEqual([]);
    expect(ofKind(film(thin), 'least-width')).toHaveLength(1);
  });

  test('numbers of the workshop stand in place of the usual ones', () => {
    const own = made(
      'film-mask',
      { channels: [line('a', 12000, 40)], ...layer({ depth: 30 }) },
      { leastWidth: 50 },
    );
    expect(ofKind(own, 'least-width')[0]).toMatchObject({ threshold: 50e-6, severity: 'stop' });
    expect(ofKind(own, 'least-width')[0]!.says).toContain('own number');
  });

  test('accepted findings go on being listed, with the reason', () => {
    const chip = film({
      channels: [line('a', 12000, 24)],
      accepted: [{ kind: 'least-width', where: 'a', reason: 'held in three runs' }],
    });
    expect(ofKind(chip, 'least-width')).toMatchObject([{ where: 'a', accepted: 'held in three runs' }]);
  });

  test('many of a kind are listed to forty, the worst first, and the rest counted', () => {
    const channels = Array.from({ length: 60 }, (_, i) => ({
      id: `c${i}`,
      layer: 'flow',
      path: [
        [6000, 2000 + 400 * i],
        [66000, 2000 + 400 * i],
      ],
      width: 10 + (i % 10),
    }));
    const ports = channels.flatMap(({ id }, i) => [
      port(`${id} in`, [6000, 2000 + 400 * i], { flow: '1 nL/min' }, 0),
      port(`${id} out`, [66000, 2000 + 400 * i], { pressure: 0 }, 0),
    ]);
    const found = ofKind(film({ channels, ports, ...layer({ depth: 10 }) }), 'least-width');
    expect(found).toHaveLength(40);
    expect(found[0]!.value).toBeCloseTo(10e-6, 9);
    expect(found.at(-1)!.says).toContain('20 more');
  });

  test('the eight-way demo is clean for its process', () => {
    const text = readFileSync(join(import.meta.dirname, '../../assets/demo/eight-way-splitter.json'), 'utf8');
    const chip = readDescription(text);
    expect(chip.process).toEqual({ kind: 'film-mask' });
    expect(findings(chip).filter(({ severity }) => severity !== 'note')).toEqual([]);
  });
});
