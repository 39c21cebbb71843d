import type { Chip } from '../../solver/chip/chip.ts';
import { fluidOf } from '../../solver/fluid/fluid.ts';
import { sectionOf } from '../../solver/section/section-of.ts';

/**
 * Resistance per length (Pa·s/m⁴), area (m²) and peak wall shear per flow (Pa·s/m³, null where it is
 * unbounded) of a straight channel of one width (nm) on a layer; null where section or fluid gives none.
 */
export function ductFigures(
  chip: Chip,
  layerId: string,
  width: number,
): { readonly resistance: number; readonly area: number; readonly shear: number | null } | null {
  const layer = chip.layers.find((found) => found.id === layerId);
  if (!layer) return null;
  try {
    const section = sectionOf(layer.profile, width / 1e9, layer.depth / 1e9);
    const { viscosity } = fluidOf(chip.fluid);
    if (viscosity === null) return null;
    const resistance = viscosity / section.conductance;
    return {
      resistance,
      area: section.area,
      shear: section.peakShear === null ? null : section.peakShear * resistance,
    };
  } catch {
    return null;
  }
}
