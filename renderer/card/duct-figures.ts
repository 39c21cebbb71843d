import type { Chip } from '../../solver/chip/chip.ts';
import { fluidOf } from '../../solver/fluid/fluid.ts';
import { sectionOf } from '../../solver/section/section-of.ts';

/**
 * Resistance per length (Pa·s/m⁴) and area (m²) of a straight channel of one width (nm) on a layer, null
 * where the section or the fluid gives none.
 */
export function ductFigures(
  chip: Chip,
  layerId: string,
  width: number,
): { readonly resistance: number; readonly area: number } | null {
  const layer = chip.layers.find((found) => found.id === layerId);
  if (!layer) return null;
  try {
    const section = sectionOf(layer.profile, width / 1e9, layer.depth / 1e9);
    const { viscosity } = fluidOf(chip.fluid);
    return viscosity === null ? null : { resistance: viscosity / section.conductance, area: section.area };
  } catch {
    return null;
  }
}
