import type { Chip } from '../../solver/chip/chip.ts';
import type { Palette } from '../look/tokens.ts';
import { type Camera, type Size, toPlan, toScreen } from './camera.ts';
import type { Spatial } from './spatial.ts';

/** px: a port's ring is never smaller. */
export const LEAST_RING = 5;

export const onScreen = ([x, y]: readonly [number, number], { width, height }: Size, more: number): boolean =>
  x > -more && y > -more && x < width + more && y < height + more;

/** Rings with a point, and holes of vias as rings alone; all in two passes, whatever their number. */
export function drawPorts(
  ctx: CanvasRenderingContext2D,
  chip: Chip,
  camera: Camera,
  size: Size,
  palette: Palette,
): void {
  const rings: [number, number, number, boolean][] = [];
  const collect = (at: readonly [number, number], diameter: number, point: boolean): void => {
    const place = toScreen(camera, size, at);
    const radius = Math.max(point ? LEAST_RING : 3, (diameter / 2) * camera.scale);
    if (onScreen(place, size, radius)) rings.push([place[0], place[1], radius, point]);
  };
  for (const port of chip.ports) collect(port.at, port.diameter, true);
  for (const via of chip.vias) collect(via.at, via.diameter, false);
  ctx.beginPath();
  for (const [x, y, radius] of rings) {
    ctx.moveTo(x + radius, y);
    ctx.arc(x, y, radius, 0, 2 * Math.PI);
  }
  ctx.fillStyle = palette.chip;
  ctx.fill();
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 1.25;
  ctx.stroke();
  ctx.beginPath();
  for (const [x, y, , point] of rings) {
    if (!point) continue;
    ctx.moveTo(x + 1.75, y);
    ctx.arc(x, y, 1.75, 0, 2 * Math.PI);
  }
  ctx.fillStyle = palette.ink;
  ctx.fill();
}

/** How many runs of channels, chambers and holes lie under a rectangle of the screen. */
export const coverage =
  (camera: Camera, size: Size, spatial: Spatial) =>
  (left: number, top: number, width: number, height: number): number => {
    const [a, b] = toPlan(camera, size, [left, top + height]);
    const [c, d] = toPlan(camera, size, [left + width, top]);
    return spatial.runsIn({ left: a, bottom: b, right: c, top: d });
  };

/** A rim of ground round each sign keeps words legible where an edge or a picture lies under them. */
export function rimText(
  ctx: CanvasRenderingContext2D,
  text: string,
  x: number,
  y: number,
  palette: Palette,
): void {
  ctx.strokeStyle = palette.chip;
  ctx.lineWidth = 4;
  ctx.lineJoin = 'round';
  ctx.strokeText(text, x, y);
}
