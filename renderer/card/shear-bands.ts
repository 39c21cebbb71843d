import type { PerimeterCurve } from '../../solver/section/perimeter-curve.ts';

/** A stretch of wall with its shear drawn outward. */
export interface Band {
  /** Two places on the wall, two outside of it, m. */
  readonly corners: readonly (readonly [number, number])[];
  /** Mean of the two ends, per unit of the driving gradient, m. */
  readonly shear: number;
}

/** The wall cut into bands that reach `out` (m) outward at each point; the curve runs counter-clockwise. */
export function bandsOf(curve: PerimeterCurve, out: (i: number) => number): Band[] {
  const bands: Band[] = [];
  for (let i = 0; i + 1 < curve.x.length; i += 1) {
    const ax = curve.x[i]!;
    const ay = curve.y[i]!;
    const bx = curve.x[i + 1]!;
    const by = curve.y[i + 1]!;
    const length = Math.hypot(bx - ax, by - ay);
    if (length === 0) continue;
    // outward is to the right of a counter-clockwise wall
    const nx = (by - ay) / length;
    const ny = -(bx - ax) / length;
    const a = out(i);
    const b = out(i + 1);
    bands.push({
      corners: [
        [ax, ay],
        [bx, by],
        [bx + b * nx, by + b * ny],
        [ax + a * nx, ay + a * ny],
      ],
      shear: (curve.shear[i]! + curve.shear[i + 1]!) / 2,
    });
  }
  return bands;
}
