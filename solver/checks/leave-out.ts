import type { PieceResult } from '../chip/result.ts';

/** How much of what the solver leaves out there is: formulas that findings and bands share. */

/** Below this Reynolds number an entrance is that of creeping flow, which solved junctions hold. */
export const CREEPING = 1;
/** Excess pressure of a developing flow over ½ density × velocity²: a pipe; no duct has more by much. */
const EXCESS = 1.31;

/** Entrance length over hydraulic diameter: Durst, Ray, Ünsal and Bayoumi 2005, J. Fluids Eng. 127, 1154. */
export function entranceLength(reynolds: number): number {
  return (0.619 ** 1.6 + (0.0567 * reynolds) ** 1.6) ** (1 / 1.6);
}

/** Share of its pressure drop that a stretch needs besides, to develop its flow. @param area of its narrow end, m² */
export function entranceError(
  { reynolds, flow, pressureDrop }: Pick<PieceResult, 'reynolds' | 'flow' | 'pressureDrop'>,
  area: number,
  density: number,
): number {
  if (!((reynolds ?? 0) > CREEPING) || pressureDrop === 0) return 0;
  const speed = Math.abs(flow ?? 0) / area;
  return (EXCESS * density * speed ** 2) / 2 / Math.abs(pressureDrop);
}

/**
 * Share by which more flows under a roof that gives by x of the depth at the inlet, and by nothing at the
 * outlet: Gervais et al. 2006, Lab Chip 6, 500 (formula from memory).
 */
export function softRoofError(x: number): number {
  return x > 1e-6 ? ((1 + x) ** 4 - 1) / (4 * x) - 1 : 0;
}
