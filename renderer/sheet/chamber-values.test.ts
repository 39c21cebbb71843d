import { expect, test } from 'vitest';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { solve } from '../../solver/solve.ts';
import { channel, emptyChip, port } from '../testing/chips.ts';
import { shown } from './overlay.ts';
import { chamberShades } from './scene.ts';

const mm = 1_000_000;
/** 10 µL/min into a chamber of 4 mm by 3 mm, 50 µm deep, and out of it by two ways of one length. */
const chip = {
  ...emptyChip(),
  channels: [
    channel('feed', [
      [5 * mm, 13 * mm],
      [20 * mm, 13 * mm],
    ]),
    channel('up', [
      [24 * mm, 14 * mm],
      [40 * mm, 14 * mm],
    ]),
    channel('down', [
      [24 * mm, 12 * mm],
      [40 * mm, 12 * mm],
    ]),
  ],
  chambers: [
    {
      id: 'well',
      layer: 'flow',
      outline: [
        [20 * mm, 11.5 * mm],
        [24 * mm, 11.5 * mm],
        [24 * mm, 14.5 * mm],
        [20 * mm, 14.5 * mm],
      ] as const,
    },
    {
      id: 'alone',
      layer: 'flow',
      outline: [
        [60 * mm, 20 * mm],
        [62 * mm, 20 * mm],
        [62 * mm, 22 * mm],
      ] as const,
    },
  ],
  ports: [
    port('in', [5 * mm, 13 * mm], { kind: 'flow', flow: 1e-8 / 60 }),
    port('a', [40 * mm, 14 * mm], { kind: 'pressure', pressure: 0 }),
    port('b', [40 * mm, 12 * mm], { kind: 'pressure', pressure: 0 }),
  ],
};
const result = solve(chip, { junctions: 'ideal' });
const graph = readGraph(chip);
const of = (overlay: Parameters<typeof shown>[0]) => shown(overlay, chip, result, graph);

test('a chamber is filled anew in its volume by its flow: 0.6 µL at 10 µL/min take 3.6 s', () => {
  const { chambers, to } = of('time');
  expect(chambers.get('well')).toBeCloseTo(3.6, 6);
  expect(to).toBeGreaterThanOrEqual(3.6);
  // nothing goes through the other
  expect([...chambers.keys()]).toEqual(['well']);
  expect(chamberShades(chip, of('time'))[1]).toBe(-1);
});

test('all of the flow goes through it, at the pressure between feed and outlets, at the depth of its layer', () => {
  expect(of('share').chambers.get('well')).toBeCloseTo(1, 6);
  const feed = result.channels.find(({ id }) => id === 'feed')!.pieces[0]!;
  const at = of('pressure').chambers.get('well')!;
  expect(at).toBeCloseTo(result.ports[0]!.pressure - feed.pressureDrop, 6);
  expect(of('depth').chambers.get('alone')).toBeCloseTo(50e-6, 12);
});

test('a chamber whose hole lies in it counts what comes by the hole', () => {
  const within = {
    ...chip,
    channels: chip.channels.slice(1),
    ports: [port('in', [22 * mm, 13 * mm], { kind: 'flow', flow: 1e-8 / 60 }), ...chip.ports.slice(1)],
  };
  const answer = solve(within, { junctions: 'ideal' });
  expect(shown('time', within, answer, readGraph(within)).chambers.get('well')).toBeCloseTo(3.6, 6);
});

test('a chamber that a finding names is filled, lightly where it is a note', () => {
  const said = (severity: 'note' | 'warn') =>
    shown('findings', chip, {
      ...result,
      findings: [{ kind: 'x', severity, where: 'chamber:well', says: '', do: '' }],
    }).chambers.get('well');
  expect(said('note')).toBeLessThan(said('warn')!);
});
