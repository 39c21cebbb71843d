import type { Box } from '../geometry/path.ts';
import type { Xy } from '../geometry/vector.ts';

/**
 * How the plan lies on the screen: y of the plan points up, as on a mask. `scale` is CSS px per nm and
 * `centre` the place of the plan in the middle of the view.
 */
export interface Camera {
  readonly centre: Xy;
  readonly scale: number;
}

export interface Size {
  readonly width: number;
  readonly height: number;
}

/** px per nm: from a metre on a thumbnail to a nanometre per px. */
const LEAST = 2e-7;
const MOST = 1;

const bounded = (scale: number): number => Math.min(MOST, Math.max(LEAST, scale));

export const toScreen = ({ centre, scale }: Camera, { width, height }: Size, [x, y]: Xy): Xy => [
  width / 2 + (x - centre[0]) * scale,
  height / 2 - (y - centre[1]) * scale,
];

export const toPlan = ({ centre, scale }: Camera, { width, height }: Size, [x, y]: Xy): Xy => [
  centre[0] + (x - width / 2) / scale,
  centre[1] - (y - height / 2) / scale,
];

/** Larger or smaller by `factor`, the plan under the screen place `at` staying there. */
export function zoomed(camera: Camera, size: Size, at: Xy, factor: number): Camera {
  const scale = bounded(camera.scale * factor);
  const under = toPlan(camera, size, at);
  return {
    scale,
    centre: [under[0] - (at[0] - size.width / 2) / scale, under[1] + (at[1] - size.height / 2) / scale],
  };
}

/** Moved by px of the screen. */
export const panned = ({ centre, scale }: Camera, dx: number, dy: number): Camera => ({
  scale,
  centre: [centre[0] - dx / scale, centre[1] + dy / scale],
});

export interface Inset {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** px kept free round the chip when it is fitted: its figures, the words beside its ports, the legend. */
export const INSET: Inset = { left: 56, right: 56, top: 40, bottom: 92 };

/** The camera that shows a box as large as the view allows, with px of `inset` kept free. */
export function fitted(box: Box, size: Size, inset: Inset): Camera {
  const wide = Math.max(1, size.width - inset.left - inset.right);
  const high = Math.max(1, size.height - inset.top - inset.bottom);
  const scale = bounded(
    Math.min(wide / Math.max(1, box.right - box.left), high / Math.max(1, box.top - box.bottom)),
  );
  const x = (box.left + box.right) / 2;
  const y = (box.bottom + box.top) / 2;
  return {
    scale,
    centre: [x + (inset.right - inset.left) / 2 / scale, y + (inset.top - inset.bottom) / 2 / scale],
  };
}

/** The part of the plan that is in view, widened by px on each side. */
export function inView(camera: Camera, size: Size, widen = 0): Box {
  const [left, top] = toPlan(camera, size, [-widen, -widen]);
  const [right, bottom] = toPlan(camera, size, [size.width + widen, size.height + widen]);
  return { left, right, bottom, top };
}

/** Places of round steps between two values, at least `apart` px from one another: 1, 2 or 5 tens of nm. */
export function graduation(scale: number, apart: number): { readonly major: number; readonly minor: number } {
  const wanted = apart / scale;
  const power = 10 ** Math.floor(Math.log10(wanted));
  for (const factor of [1, 2, 5]) {
    if (factor * power >= wanted)
      return { major: factor * power, minor: (factor * power) / (factor === 1 ? 10 : factor === 2 ? 4 : 5) };
  }
  return { major: 10 * power, minor: power };
}

/** The outline of the chip on the screen, px. */
export function chipOnScreen(
  outline: { readonly width: number; readonly height: number },
  camera: Camera,
  size: Size,
): { readonly left: number; readonly right: number; readonly top: number; readonly bottom: number } {
  const [left, bottom] = toScreen(camera, size, [0, 0]);
  const [right, top] = toScreen(camera, size, [outline.width, outline.height]);
  return { left, right, top, bottom };
}
