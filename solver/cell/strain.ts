import { toCaller } from './canonical.ts';
import type { CellSolution } from './cell.ts';
import { depthValues } from './depth.ts';
import { flowField } from './flow-field.ts';
import { emptySample, sampleAt } from './sample.ts';

/** The largest strain rate in a cell. */
export interface PeakStrain {
  /**
   * sqrt(2 e : e) for viscosity 1: with pressures in Pa, divide by the viscosity for 1/s, square and
   * divide by the viscosity for the dissipation per volume in W/m^3.
   */
  readonly value: number;
  /** In the coordinates of the shape. */
  readonly at: readonly [number, number];
  /** Distance from half depth, 0 to 1 at floor and lid. */
  readonly height: number;
}

const LEVELS = 12;
/** Local coordinates of the six nodes. */
const NODE_A = [1, 0, 0, 0.5, 0, 0.5] as const;
const NODE_B = [0, 1, 0, 0.5, 0.5, 0] as const;

/**
 * Largest scalar strain rate for the given face pressures, looked for at all nodes and over the depth;
 * null where a corner is sharp (it has no bound there) or fields were not kept.
 */
export function peakStrain(solution: CellSolution, pressures: ArrayLike<number>): PeakStrain | null {
  if (solution.sharp) return null;
  const sample = emptySample();
  let value = 0;
  let at: [number, number] = [0, 0];
  let height = 0;
  for (const placement of solution.placements) {
    const field = flowField(solution, pressures, placement);
    if (!field) return null;
    const { mesh } = field;
    for (let level = 0; level <= LEVELS; level += 1) {
      const modes = depthValues(field.depth, level / LEVELS);
      for (let t = 0; t < mesh.triangles.length / 6; t += 1)
        for (let i = 0; i < 6; i += 1) {
          sampleAt(field, { triangle: t, la: NODE_A[i], lb: NODE_B[i] }, modes, sample);
          if (sample.strainRate <= value) continue;
          const node = mesh.triangles[6 * t + i];
          value = sample.strainRate;
          at = toCaller(placement, mesh.x[node], mesh.y[node]);
          height = level / LEVELS;
        }
    }
  }
  return { value, at, height };
}
