import type { Result } from '../../solver/chip/result.ts';
import { figure } from './figure.ts';

/**
 * " ± 0.4 %" to stand after a figure: how far it may be off by what the solver knows of its errors, relative to
 * it. Nothing where that is nought (what is imposed) or not known.
 */
export const plusMinus = (band: number | null | undefined): string =>
  band ? ` ±\u00a0${figure(band, 'share', { digits: 2, unit: '%' })}` : '';

/** Of a share or wall shear with a band of its own; in large chips the worst of the chip stands for it. */
export function bandOf<K extends 'share' | 'flow' | 'shear'>(
  result: Result | null,
  of: K,
  one: { readonly band?: { readonly [key in K]?: number } } | undefined,
): number | null {
  return one?.band?.[of] ?? result?.bands?.[of] ?? null;
}

/** The band of wall shear at a place as results name it: "feed#1", "junction:2". */
export function shearBandAt(result: Result, where: string): number | null {
  const cell = result.cells.find(({ id }) => id === where);
  if (cell) return bandOf(result, 'shear', cell);
  const cut = where.lastIndexOf('#');
  const pieces = result.channels.find(({ id }) => id === where.slice(0, cut))?.pieces;
  return bandOf(result, 'shear', pieces?.[Number(where.slice(cut + 1)) - 1]);
}
