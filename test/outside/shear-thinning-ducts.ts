import type { ShearModel } from '../../solver/fluid/spec.ts';
import { rateMoment } from '../../solver/section/rheology/closed-forms.ts';

/** Flow (m³/s) through a round tube under a pressure gradient (Pa/m); `radius` in m. */
export function tubeFlow(model: ShearModel, radius: number, gradient: number): number {
  const wall = (gradient * radius) / 2;
  return wall > 0 ? Math.PI * radius ** 3 * rateMoment(model, wall, 2) : 0;
}

/** Flow (m³/s) between parallel plates, side walls left out; `gap` and `width` in m. */
export function plateFlow(model: ShearModel, gap: number, width: number, gradient: number): number {
  const wall = (gradient * gap) / 2;
  return wall > 0 ? (width * gap ** 2 * rateMoment(model, wall, 1)) / 2 : 0;
}
