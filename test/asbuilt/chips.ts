import type { Chip } from '../../solver/chip/chip.ts';
import { chipOf } from '../checks/chips.ts';

type Json = Record<string, unknown>;

/** Two inlets that join to two outlets, pressure-driven; plates of 1000 by 20 µm, so that R ~ w⁻¹ h⁻³. Lengths in µm. */
export const cross = (more: Json = {}): Chip =>
  chipOf({
    layers: [{ id: 'flow', depth: 20, fillet: 0, tolerance: { depth: '5 %', width: '10 um' } }],
    channels: [
      {
        id: 'a',
        layer: 'flow',
        path: [
          [8000, 20000],
          [30000, 13000],
        ],
        width: 1000,
      },
      {
        id: 'b',
        layer: 'flow',
        path: [
          [8000, 6000],
          [30000, 13000],
        ],
        width: 1000,
      },
      {
        id: 'c',
        layer: 'flow',
        path: [
          [30000, 13000],
          [52000, 20000],
        ],
        width: 1000,
      },
      {
        id: 'd',
        layer: 'flow',
        path: [
          [30000, 13000],
          [52000, 6000],
        ],
        width: 1000,
      },
    ],
    ports: [
      { id: 'in a', at: [8000, 20000], layer: 'flow', diameter: 0, drive: { pressure: '100 mbar' } },
      { id: 'in b', at: [8000, 6000], layer: 'flow', diameter: 0, drive: { pressure: '100 mbar' } },
      { id: 'out c', at: [52000, 20000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
      { id: 'out d', at: [52000, 6000], layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
    targets: [
      { port: 'in a', share: 0.5, within: '1 %' },
      { port: 'out c', share: 0.5, within: '1 %' },
    ],
    ...more,
  });

/** Rows of a table as a host hands them over, the head being row 1. */
export const table = (text: string) => {
  const rows = text
    .trim()
    .split('\n')
    .map((line) => line.split(',').map((cell) => cell.trim()));
  return { rows, lines: rows.map((_, i) => i + 1) };
};
