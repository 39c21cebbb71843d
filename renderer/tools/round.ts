import type { Point } from '../../solver/chip/chip.ts';
import { whole, type Xy } from '../geometry/vector.ts';

/** A circle as a polygon whose sides leave it by at most `error` nm. */
export function circle(centre: Xy, radius: number, error = 500): readonly Point[] {
  const share = Math.min(1, error / radius);
  const sides = Math.min(360, Math.max(16, 4 * Math.ceil(Math.PI / Math.acos(1 - share) / 4)));
  return Array.from({ length: sides }, (_, i) => {
    const angle = (2 * Math.PI * i) / sides;
    return whole([centre[0] + radius * Math.cos(angle), centre[1] + radius * Math.sin(angle)]);
  });
}
