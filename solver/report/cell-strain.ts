import type { CellResult } from '../chip/result.ts';
import type { Lumped } from '../lump/lump.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { ChipNet } from './flow-net.ts';

/**
 * Cells with what harms cells that touch no wall: the fastest stretching, and viscous dissipation per volume
 * (the mean, power over volume; the peak, stress squared over the viscosity where the wall shear peaks).
 */
export function withStrain(
  cells: readonly CellResult[],
  net: ChipNet,
  lumped: Lumped,
  flow: NetworkSolution,
): CellResult[] {
  return cells.map((cell, index) => {
    const paths = net.cellPaths[index];
    if (!paths) return cell;
    const { spec } = lumped.cells[index];
    const into = flow.blockFlow[lumped.cellBlock[index]];
    let power = 0;
    spec.faces.forEach(({ node }, i) => {
      power += flow.pressure[node] * into[i];
    });
    // errors and tolerances stand last, whatever was found first
    const { band, making, ...found } = cell;
    return {
      ...found,
      stretch: paths.stretch,
      dissipation: {
        mean: power / paths.volume,
        peak: cell.peakWallShear === null ? null : cell.peakWallShear ** 2 / paths.viscosity,
      },
      ...(band && { band }),
      ...(making && { making }),
    };
  });
}
