import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { randomFrom } from '../sparse/matrices.ts';

type Place = readonly [number, number];

/** How arms leave their junctions: names, ends in widths of the feed, and the drive of a port at the far end. */
interface Arm {
  readonly id: string;
  readonly from: Place;
  readonly to: Place;
  readonly port?: 'in' | 'out';
}

/**
 * A chip by seed, compact enough for its junctions to matter: by turns a tee, a fork at an angle, a cross
 * with two inlets, a comb of three arms, a tree of two levels and a line that bends and widens before it
 * parts. Widths 60 to 300 µm, depths a fifth to one and a half of the feed's width, fillets a twentieth to a
 * third of the narrowest, arms 4 to 40 widths long; driven by flow or by pressure, so viscous that inertia is
 * nothing.
 */
export function bandChip(seed: number): Chip {
  const random = randomFrom(seed * 104_729 + 11);
  const between = (low: number, high: number): number => low + (high - low) * random();
  const width = Math.round(60 * 5 ** random());
  const arms = SHAPES[seed % SHAPES.length]!(() => 4 * 10 ** random(), between);
  const widths = arms.map(({ port }) => (port === 'in' ? width : Math.round(width * 2 ** between(-1, 0.3))));
  const narrowest = Math.min(...widths);
  const depth = Math.max(10, Math.round(width * between(0.2, 1.5)));
  const place = ([x, y]: Place): [number, number] => [
    Math.round(20_000 + x * width),
    Math.round(20_000 + y * width),
  ];
  const byFlow = random() < 0.5;
  const ports = arms.filter(({ port }) => port !== undefined);
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: `band ${seed}`,
      outline: { width: 60_000, height: 60_000 },
      layers: [{ id: 'flow', depth, fillet: Math.max(1, Math.round(narrowest * between(0.05, 0.33))) }],
      channels: arms.map(({ id, from, to }, i) => ({
        id,
        layer: 'flow',
        path: [place(from), place(to)],
        width: widths[i],
      })),
      ports: ports.map(({ id, to, from, port }) => ({
        id: `port ${id}`,
        at: place(port === 'in' ? from : to),
        layer: 'flow',
        drive:
          port === 'out'
            ? { pressure: Math.round(20 * random()) }
            : byFlow
              ? { flow: '1 uL/min' }
              : { pressure: 500 },
      })),
      fluid: { viscosity: '1 Pa.s', density: 1000 },
    }),
  );
}

type Shape = (long: () => number, between: (low: number, high: number) => number) => Arm[];
const turned = (degrees: number, length: number, [x, y]: Place = [0, 0]): Place => [
  x + length * Math.cos((degrees * Math.PI) / 180),
  y + length * Math.sin((degrees * Math.PI) / 180),
];

const SHAPES: readonly Shape[] = [
  (long) => [
    { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
    { id: 'a', from: [0, 0], to: [0, long()], port: 'out' },
    { id: 'b', from: [0, 0], to: [0, -long()], port: 'out' },
  ],
  (long, between) => [
    { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
    { id: 'a', from: [0, 0], to: turned(between(30, 80), long()), port: 'out' },
    { id: 'b', from: [0, 0], to: turned(between(-80, -30), long()), port: 'out' },
  ],
  (long) => [
    { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
    { id: 'side', from: [0, -long()], to: [0, 0], port: 'in' },
    { id: 'a', from: [0, 0], to: [0, long()], port: 'out' },
    { id: 'b', from: [0, 0], to: [long(), 0], port: 'out' },
  ],
  (long, between) => {
    const [one, two] = [between(3, 8), between(11, 18)];
    return [
      { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
      { id: 'a', from: [0, 0], to: [0, long()], port: 'out' },
      { id: 'on', from: [0, 0], to: [one, 0] },
      { id: 'b', from: [one, 0], to: [one, long()], port: 'out' },
      { id: 'further', from: [one, 0], to: [two, 0] },
      { id: 'c', from: [two, 0], to: [two, -long()], port: 'out' },
      { id: 'd', from: [two, 0], to: [two + long(), 0], port: 'out' },
    ];
  },
  (long, between) => {
    const [up, down] = [between(4, 9), -between(4, 9)];
    return [
      { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
      { id: 'upper', from: [0, 0], to: [0, up] },
      { id: 'lower', from: [0, 0], to: [0, down] },
      { id: 'a', from: [0, up], to: [long(), up], port: 'out' },
      { id: 'b', from: [0, up], to: [-long(), up], port: 'out' },
      { id: 'c', from: [0, down], to: [long(), down], port: 'out' },
      { id: 'd', from: [0, down], to: [-long(), down], port: 'out' },
    ];
  },
  (long, between) => {
    const [bend, on] = [between(4, 8), between(4, 8)];
    return [
      { id: 'feed', from: [-long(), 0], to: [0, 0], port: 'in' },
      { id: 'leg', from: [0, 0], to: [0, bend] },
      { id: 'wide', from: [0, bend], to: [0, bend + on] },
      { id: 'a', from: [0, bend + on], to: [long(), bend + on], port: 'out' },
      { id: 'b', from: [0, bend + on], to: [-long(), bend + on], port: 'out' },
    ];
  },
];
