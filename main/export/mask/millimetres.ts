import { inUnit, metres } from '../../../solver/chip/units.ts';
import type { TextBytes } from './bytes.ts';

/** Lengths in the formats that are drawn in millimetres, to a tenth of a nanometre. */
const DECIMALS = 7;

const inMm = (nm: number): number => inUnit(metres(nm), 'mm');

export function mm(nm: number): number {
  const rounded = Number(inMm(nm).toFixed(DECIMALS));
  return rounded === 0 ? 0 : rounded;
}

/** The same as text. */
export const putMm = (out: TextBytes, nm: number): void => out.fixed(nm, -6, DECIMALS, inMm);
