import type { PieceResult } from '../chip/result.ts';
import type { Duct } from '../lump/duct.ts';
import type { Stretch } from '../lump/stretches.ts';
import type { DuctFlowLaw } from '../section/rheology/duct-law.ts';

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
  const base = {
    from: stretch.fromName,
    to: stretch.toName,
    length: stretch.length,
    along: stretch.along,
    resistance,
  };
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

/**
 * The same for a duct that follows a law of its own (a shear-thinning fluid, a soft roof): what the law
 * says of its state at the pressures of its ends. The resistance is pressure drop over flow, the Reynolds
 * number stands on the viscosity that a constant one would need for the same drop.
 */
export function lawPieceResult(
  stretch: Stretch,
  duct: Duct,
  law: DuctFlowLaw,
  flow: number | null,
  pFrom: number,
  pTo: number,
  density: number,
): PieceResult {
  const pressureDrop = pFrom - pTo || 0;
  const size = Math.abs(flow ?? 0);
  const apparent =
    size > 0 ? Math.abs(pressureDrop) / (size * duct.resistance * stretch.length) : Number.POSITIVE_INFINITY;
  const plain = pieceResult(stretch, duct, flow, pressureDrop, apparent, density);
  if (flow === null) return { ...plain, resistance: 0 };
  const state = law.state(pFrom, pTo);
  return {
    ...plain,
    resistance: size > 0 ? Math.abs(pressureDrop) / size : 0,
    reynolds: size > 0 ? plain.reynolds : 0,
    peakVelocity: state.peakVelocity,
    peakWallShear: state.peakShear,
    meanWallShear: state.meanShear,
    residenceTime: size > 0 ? plain.residenceTime : null,
  };
}
