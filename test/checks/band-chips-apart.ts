import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { randomFrom } from '../sparse/matrices.ts';

type Place = readonly [number, number];

interface Line {
  readonly id: string;
  readonly path: readonly Place[];
  /** In widths of the feed, at both ends where it tapers. */
  readonly width?: number | readonly [number, number];
  readonly bendRadius?: number;
}

interface Drawn {
  readonly lines: readonly Line[];
  readonly chambers?: readonly { readonly id: string; readonly outline: readonly Place[] }[];
  readonly inlets: readonly Place[];
  readonly outlets: readonly Place[];
}

interface Luck {
  readonly between: (low: number, high: number) => number;
  /** Length of an arm. */
  readonly long: () => number;
  /** Width of an arm. */
  readonly wide: () => number;
}

/**
 * Chips that no factor of the bands was fitted on, by seed, of eight families that the fitted ones
 * (band-chips.ts) have none of: loops that part and join again, ladders of rungs, chambers with several
 * mouths, offset crossings, tapers that meet, round bends into a merger, stars of five arms, and combs on both
 * sides. Widths 40 to 400 µm, depths an eighth to twice the feed's width, fillets a fortieth to a third of the
 * narrowest, arms 3 to 60 widths long; so viscous that inertia is nothing.
 */
export function apartChip(seed: number): Chip {
  const random = randomFrom(seed * 15_485_863 + 977);
  const between = (low: number, high: number): number => low + (high - low) * random();
  const feed = Math.round(40 * 10 ** random());
  const luck: Luck = { between, long: () => 3 * 20 ** random(), wide: () => 2 ** between(-1.2, 0.5) };
  const { lines, chambers = [], inlets, outlets } = FAMILIES[seed % FAMILIES.length]!(luck);
  const um = (widths: number): number => Math.round(widths * feed);
  const place = ([x, y]: Place): [number, number] => [40_000 + um(x), 40_000 + um(y)];
  const widthOf = ({ width = 1 }: Line): number | number[] =>
    typeof width === 'number' ? um(width) : width.map(um);
  const narrowest = Math.min(...lines.flatMap((line) => widthOf(line)));
  const drives = inlets.map((_, i) => (i === 0 && random() < 0.5 ? 'flow' : 'pressure'));
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: `apart ${seed}`,
      outline: { width: 120_000, height: 120_000 },
      layers: [
        {
          id: 'flow',
          depth: Math.max(8, um(between(0.125, 2))),
          fillet: Math.max(1, Math.round(narrowest * between(0.025, 0.33))),
        },
      ],
      channels: lines.map((line) => ({
        id: line.id,
        layer: 'flow',
        path: line.path.map(place),
        width: widthOf(line),
        ...(line.bendRadius && { bendRadius: um(line.bendRadius) }),
      })),
      chambers: chambers.map(({ id, outline }) => ({ id, layer: 'flow', outline: outline.map(place) })),
      ports: [
        ...inlets.map((at, i) => ({
          id: `in ${i}`,
          at: place(at),
          layer: 'flow',
          drive: drives[i] === 'flow' ? { flow: '0.5 uL/min' } : { pressure: Math.round(between(400, 800)) },
        })),
        ...outlets.map((at, i) => ({
          id: `out ${i}`,
          at: place(at),
          layer: 'flow',
          drive: { pressure: Math.round(between(0, 30)) },
        })),
      ],
      fluid: { viscosity: '2 Pa.s', density: 1000 },
    }),
  );
}

const at = (degrees: number, length: number): Place => [
  length * Math.cos((degrees * Math.PI) / 180),
  length * Math.sin((degrees * Math.PI) / 180),
];

const FAMILIES: readonly ((luck: Luck) => Drawn)[] = [
  // parts, goes two ways around, joins again, and loses a side arm on the way
  ({ between, long, wide }) => {
    const [w, h, low, tap] = [between(8, 16), between(4, 8), between(4, 8), between(3, 5)];
    const [before, after, side] = [long(), long(), long()];
    return {
      lines: [
        {
          id: 'feed',
          path: [
            [-before, 0],
            [0, 0],
          ],
        },
        {
          id: 'upper',
          path: [
            [0, 0],
            [0, h],
            [w, h],
            [w, 0],
          ],
          width: wide(),
        },
        {
          id: 'lower',
          path: [
            [0, 0],
            [0, -low],
            [w, -low],
            [w, 0],
          ],
          width: wide(),
        },
        {
          id: 'on',
          path: [
            [w, 0],
            [w + after, 0],
          ],
        },
        {
          id: 'side',
          path: [
            [tap, h],
            [tap, h + side],
          ],
          width: wide(),
        },
      ],
      inlets: [[-before, 0]],
      outlets: [
        [w + after, 0],
        [tap, h + side],
      ],
    };
  },
  // two rails with three rungs
  ({ between, long, wide }) => {
    const gap = between(5, 10);
    const rungs = [0, between(5, 9), between(12, 18)];
    const [a, b] = [long(), long()];
    return {
      lines: [
        {
          id: 'rail',
          path: [
            [-a, 0],
            [rungs[2]!, 0],
          ],
        },
        {
          id: 'other',
          path: [
            [0, gap],
            [rungs[2]! + b, gap],
          ],
          width: wide(),
        },
        ...rungs.map(
          (x, i): Line => ({
            id: `rung ${i}`,
            path: [
              [x, 0],
              [x, gap],
            ],
            width: wide(),
          }),
        ),
      ],
      inlets: [[-a, 0]],
      outlets: [[rungs[2]! + b, gap]],
    };
  },
  // a chamber with three mouths
  ({ between, long, wide }) => {
    const [w, h] = [between(5, 10), between(2.5, 5)];
    const mouth = between(-h / 4, h / 4);
    const [a, b, c] = [long(), long(), long()];
    return {
      lines: [
        {
          id: 'feed',
          path: [
            [-a, 0],
            [0, 0],
          ],
        },
        {
          id: 'straight',
          path: [
            [w, mouth],
            [w + b, mouth],
          ],
          width: wide(),
        },
        {
          id: 'up',
          path: [
            [w / 2, h / 2],
            [w / 2, h / 2 + c],
          ],
          width: wide(),
        },
      ],
      chambers: [
        {
          id: 'well',
          outline: [
            [0, -h / 2],
            [w, -h / 2],
            [w, h / 2],
            [0, h / 2],
          ],
        },
      ],
      inlets: [[-a, 0]],
      outlets: [
        [w + b, mouth],
        [w / 2, h / 2 + c],
      ],
    };
  },
  // two side arms nearly opposite each other
  ({ between, long, wide }) => {
    const shift = between(0.2, 3);
    const [a, b, c, d] = [long(), long(), long(), long()];
    return {
      lines: [
        {
          id: 'main',
          path: [
            [-a, 0],
            [shift + b, 0],
          ],
        },
        {
          id: 'up',
          path: [
            [0, 0],
            [0, c],
          ],
          width: wide(),
        },
        {
          id: 'down',
          path: [
            [shift, 0],
            [shift, -d],
          ],
          width: wide(),
        },
      ],
      inlets: [[-a, 0]],
      outlets: [
        [shift + b, 0],
        [0, c],
        [shift, -d],
      ],
    };
  },
  // tapers that meet
  ({ between, long, wide }) => {
    const [a, b, c] = [8 + long(), 8 + long(), 8 + long()];
    const [up, down] = [at(between(60, 120), b), at(between(-120, -60), c)];
    return {
      lines: [
        {
          id: 'feed',
          path: [
            [-a, 0],
            [0, 0],
          ],
          width: [1, wide()],
        },
        { id: 'up', path: [[0, 0], up], width: [wide(), wide()] },
        { id: 'down', path: [[0, 0], down], width: [wide(), wide()] },
      ],
      inlets: [[-a, 0]],
      outlets: [up, down],
    };
  },
  // two inlets round their bends into one, which parts again
  ({ between, long, wide }) => {
    const [a, b, trunk, c, d] = [6 + long(), 6 + long(), between(4, 12), long(), long()];
    const corner = between(5, 8);
    const fork = between(35, 75);
    const [up, down] = [at(fork, c), at(-fork, d)];
    return {
      lines: [
        {
          id: 'one',
          path: [
            [-corner, a],
            [-corner, 0],
            [0, 0],
          ],
          width: wide(),
          bendRadius: between(0.8, 3),
        },
        {
          id: 'two',
          path: [
            [0, -b],
            [0, 0],
          ],
          width: wide(),
        },
        {
          id: 'trunk',
          path: [
            [0, 0],
            [trunk, 0],
          ],
        },
        {
          id: 'up',
          path: [
            [trunk, 0],
            [trunk + up[0], up[1]],
          ],
          width: wide(),
        },
        {
          id: 'down',
          path: [
            [trunk, 0],
            [trunk + down[0], down[1]],
          ],
          width: wide(),
        },
      ],
      inlets: [
        [-corner, a],
        [0, -b],
      ],
      outlets: [
        [trunk + up[0], up[1]],
        [trunk + down[0], down[1]],
      ],
    };
  },
  // five arms from one place
  ({ between, long, wide }) => {
    const turn = between(0, 72);
    const ends = [0, 1, 2, 3, 4].map((k) => at(turn + 72 * k + between(-12, 12), long() + 2));
    return {
      lines: ends.map(
        (end, k): Line => ({ id: `arm ${k}`, path: [[0, 0], end], width: k === 0 ? 1 : wide() }),
      ),
      inlets: [ends[0]!],
      outlets: ends.slice(1),
    };
  },
  // teeth on both sides of a channel that narrows in steps
  ({ between, long, wide }) => {
    const steps = [0, between(4, 7), between(9, 13), between(16, 20)];
    const [a, end] = [long(), long()];
    const teeth = steps.slice(0, 3).map((x, i): Line => {
      const reach = (i % 2 === 0 ? 1 : -1) * (2 + long());
      return {
        id: `tooth ${i}`,
        path: [
          [x, 0],
          [x, reach],
        ],
        width: wide(),
      };
    });
    return {
      lines: [
        {
          id: 'feed',
          path: [
            [-a, 0],
            [0, 0],
          ],
        },
        {
          id: 'second',
          path: [
            [0, 0],
            [steps[1]!, 0],
          ],
          width: 0.9,
        },
        {
          id: 'third',
          path: [
            [steps[1]!, 0],
            [steps[2]!, 0],
          ],
          width: 0.75,
        },
        {
          id: 'last',
          path: [
            [steps[2]!, 0],
            [steps[2]! + end, 0],
          ],
          width: 0.6,
        },
        ...teeth,
      ],
      inlets: [[-a, 0]],
      outlets: [[steps[2]! + end, 0], ...teeth.map(({ path }) => path[1]!)],
    };
  },
];
