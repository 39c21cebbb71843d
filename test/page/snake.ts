import { emptyChip } from '../../renderer/testing/chips.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';

/** A snake of channels joined end to end, 250 to a row, from one port to another; as a description. */
export function snakeChip(count: number): string {
  const STEP = 380_000;
  const PITCH = 400_000;
  const ROW = 250;
  const at = (i: number): readonly [number, number] => {
    const row = Math.floor(i / ROW);
    const along = i % ROW;
    return [1_000_000 + (row % 2 === 0 ? along : ROW - 1 - along) * STEP, 1_000_000 + row * PITCH];
  };
  const port = (id: string, place: readonly [number, number], drive: Chip['ports'][number]['drive']) =>
    ({ id, at: place, layer: 'flow', diameter: 0, drive, tubing: [] }) as const;
  const rows = Math.ceil(count / ROW) + 1;
  return writeDescription({
    ...emptyChip(),
    name: `snake of ${count}`,
    outline: { width: 2_000_000 + ROW * STEP, height: 2_000_000 + rows * PITCH },
    channels: Array.from({ length: count }, (_, i) => ({
      id: `c${i}`,
      layer: 'flow',
      path: [at(i), at(i + 1)] as const,
      width: [100_000, 100_000] as const,
      bendRadius: 0,
    })),
    ports: [
      port('in', at(0), { kind: 'flow', flow: 1e-9 / 60 }),
      port('out', at(count), { kind: 'pressure', pressure: 0 }),
    ],
  });
}
