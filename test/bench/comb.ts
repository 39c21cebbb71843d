import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';

/** A feed with outlets along it, channel after channel: `count` channels, half of them outlets with a target each. */
export function comb(count: number): Chip {
  const outlets = Math.floor(count / 2);
  const channels = Array.from({ length: outlets }, (_, i) => [
    {
      id: `feed ${i + 1}`,
      layer: 'flow',
      path: [
        [1000 + 1200 * i, 13_000],
        [2200 + 1200 * i, 13_000],
      ],
      width: 400,
    },
    {
      id: `lane ${i + 1}`,
      layer: 'flow',
      path: [
        [2200 + 1200 * i, 13_000],
        [2200 + 1200 * i, 4000],
      ],
      width: 60,
    },
  ]).flat();
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: `comb of ${count}`,
      outline: { width: 1200 * outlets + 4000, height: 16_000 },
      layers: [{ id: 'flow', depth: 50, fillet: 5, tolerance: { depth: '3 %', width: '2 um' } }],
      channels,
      ports: [
        { id: 'in', at: [1000, 13_000], layer: 'flow', diameter: 800, drive: { flow: '50 uL/min' } },
        ...Array.from({ length: outlets }, (_, i) => ({
          id: `out ${i + 1}`,
          at: [2200 + 1200 * i, 4000],
          layer: 'flow',
          diameter: 700,
          drive: { pressure: 0 },
          tubing: [{ bore: '0.5 mm', length: '200 mm' }],
        })),
      ],
      fluid: { name: 'water', temperature: '25 degC' },
      targets: Array.from({ length: outlets }, (_, i) => ({
        port: `out ${i + 1}`,
        share: 1 / outlets,
        within: '5 %',
      })),
      limits: [{ name: 'cells', shear: '2 Pa', cellDiameter: '12 um' }],
      process: { kind: 'film-mask' },
    }),
  );
}
