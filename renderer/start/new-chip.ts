import type { Chip } from '../../solver/chip/chip.ts';

/** Sizes a chip commonly has, mm. Microscope slide: ISO 8037-1. Plate footprint: ANSI/SLAS 1-2004. */
export const SIZES = [
  { id: 'slide', says: 'a slide, 76 × 26 mm', width: 76, height: 26 },
  { id: 'half slide', says: 'half a slide, 38 × 26 mm', width: 38, height: 26 },
  { id: 'square', says: 'a square, 25 × 25 mm', width: 25, height: 25 },
  { id: 'plate', says: 'a plate footprint, 127.76 × 85.48 mm', width: 127.76, height: 85.48 },
  { id: 'own', says: 'a size of my own', width: 50, height: 30 },
] as const;
export type SizeId = (typeof SIZES)[number]['id'];

/** A chip with nothing on it: one layer, water at 25 degrees. Lengths in nm. */
export function newChip(name: string, width: number, height: number, depth: number): Chip {
  return {
    name,
    note: '',
    lengthUnit: 'um',
    outline: { width, height },
    layers: [{ id: 'flow', depth, profile: { kind: 'rectangle' }, fillet: 5_000 }],
    channels: [],
    chambers: [],
    vias: [],
    ports: [],
    fluid: { name: 'water', temperature: 298.15 },
    targets: [],
    limits: [],
  };
}
