import type { PieceResult } from '../chip/result.ts';
import type { Duct } from '../lump/duct.ts';
import type { Stretch } from '../lump/stretches.ts';

/**
 * What flows in one stretch, from its flow and the figures of its duct:
 * G = mu Q / K at the narrow end, tau = G (tau/G), u_max = Q/A (u_max/u_mean).
 *
 * @param flow m^3/s along the path, null where it is below what can be resolved
 * @param viscosity Pa s
 */
export function pieceResult(
  stretch: Stretch,
  duct: Duct,
  flow: number | null,
  pressureDrop: number,
  viscosity: number,
  density: number,
): PieceResult {
  const { narrow } = duct;
  const resistance = viscosity * duct.resistance * stretch.length;
  const base = { from: stretch.fromName, to: stretch.toName, length: stretch.length, resistance };
  if (flow === null) {
    return {
      ...base,
      flow: null,
      pressureDrop,
      meanVelocity: null,
      peakVelocity: null,
      reynolds: null,
      peakWallShear: null,
      meanWallShear: null,
      residenceTime: null,
      accuracy: duct.error,
    };
  }
  const size = Math.abs(flow);
  const narrowVelocity = size / narrow.area;
  const gradient = (viscosity * size) / narrow.conductance;
  return {
    ...base,
    flow,
    pressureDrop,
    meanVelocity: size / duct.area,
    peakVelocity: narrowVelocity * narrow.peakVelocity,
    reynolds: (density * narrowVelocity * narrow.hydraulicDiameter) / viscosity,
    peakWallShear: narrow.peakShear === null ? null : gradient * narrow.peakShear,
    meanWallShear: viscosity * size * duct.meanShear,
    residenceTime: size > 0 ? (duct.area * stretch.length) / size : null,
    accuracy: duct.error,
  };
}
