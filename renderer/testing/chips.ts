import type { Channel, Chip, Port } from '../../solver/chip/chip.ts';

/** Chips for tests. */
export const emptyChip = (): Chip => ({
  name: 'test',
  note: '',
  lengthUnit: 'um',
  outline: { width: 76_000_000, height: 26_000_000 },
  layers: [{ id: 'flow', depth: 50_000, profile: { kind: 'rectangle' }, fillet: 5_000 }],
  channels: [],
  chambers: [],
  vias: [],
  ports: [],
  fluid: { name: 'water', temperature: 298.15 },
  targets: [],
  limits: [],
});

export const channel = (
  id: string,
  path: readonly (readonly [number, number])[],
  width = 200_000,
): Channel => ({ id, layer: 'flow', path, width: [width, width], bendRadius: 0 });

export const port = (id: string, at: readonly [number, number], drive: Port['drive']): Port => ({
  id,
  at,
  layer: 'flow',
  diameter: 0,
  drive,
  tubing: [],
});

/** A feed that splits into two outlets; coordinates in mm for the reader, kept in nm. */
export function teeChip(): Chip {
  const mm = 1_000_000;
  return {
    ...emptyChip(),
    channels: [
      channel('feed', [
        [5 * mm, 13 * mm],
        [20 * mm, 13 * mm],
      ]),
      channel(
        'up',
        [
          [20 * mm, 13 * mm],
          [20 * mm, 20 * mm],
          [40 * mm, 20 * mm],
        ],
        120_000,
      ),
      channel(
        'down',
        [
          [20 * mm, 13 * mm],
          [20 * mm, 6 * mm],
          [40 * mm, 6 * mm],
        ],
        120_000,
      ),
    ],
    ports: [
      port('in', [5 * mm, 13 * mm], { kind: 'flow', flow: 1e-8 / 60 }),
      port('well 1', [40 * mm, 20 * mm], { kind: 'pressure', pressure: 0 }),
      port('well 2', [40 * mm, 6 * mm], { kind: 'pressure', pressure: 0 }),
    ],
  };
}
