import type { Chip } from '../../solver/chip/chip.ts';
import { FIGURE_FACE, type Palette, SIZES } from '../look/tokens.ts';
import { type Camera, chipOnScreen, graduation, type Size, toScreen } from './camera.ts';
import type { Room } from './room.ts';

/** The chip's own graduated edge: it carries its measure on all four sides, numbered at top and left. */
export function drawEdge(
  ctx: CanvasRenderingContext2D,
  chip: Pick<Chip, 'outline'>,
  camera: Camera,
  size: Size,
  palette: Palette,
): void {
  const { width, height } = chip.outline;
  const [left, bottom] = toScreen(camera, size, [0, 0]).map(Math.round) as [number, number];
  const [right, top] = toScreen(camera, size, [width, height]).map(Math.round) as [number, number];
  ctx.fillStyle = palette.chip;
  ctx.fillRect(left, top, right - left, bottom - top);
  ctx.strokeStyle = palette.line;
  ctx.lineWidth = 1;
  ctx.strokeRect(left + 0.5, top + 0.5, right - left - 1, bottom - top - 1);

  const { major, minor } = graduation(camera.scale, 72);
  ctx.strokeStyle = palette.soft;
  ctx.fillStyle = palette.soft;
  ctx.font = `${SIZES.note}px ${FIGURE_FACE}`;
  ctx.textBaseline = 'middle';
  const mm = 1e6;
  const label = (nm: number): string => String(Number((nm / mm).toPrecision(10)));

  ctx.beginPath();
  ctx.textAlign = 'center';
  const across = visible(
    0,
    width,
    minor,
    -(size.width / 2) / camera.scale + camera.centre[0],
    size.width / camera.scale,
  );
  for (const nm of across) {
    const x = Math.round(toScreen(camera, size, [nm, 0])[0]) + 0.5;
    const long = isMajor(nm, major);
    const tick = long ? 9 : 4;
    ctx.moveTo(x, top);
    ctx.lineTo(x, top - tick);
    ctx.moveTo(x, bottom);
    ctx.lineTo(x, bottom + tick);
    if (long) ctx.fillText(label(nm), x, top - 17);
  }
  ctx.textAlign = 'right';
  const up = visible(
    0,
    height,
    minor,
    -(size.height / 2) / camera.scale + camera.centre[1],
    size.height / camera.scale,
  );
  for (const nm of up) {
    const y = Math.round(toScreen(camera, size, [0, nm])[1]) + 0.5;
    const long = isMajor(nm, major);
    const tick = long ? 9 : 4;
    ctx.moveTo(left, y);
    ctx.lineTo(left - tick, y);
    ctx.moveTo(right, y);
    ctx.lineTo(right + tick, y);
    if (long) ctx.fillText(label(nm), left - 13, y);
  }
  ctx.stroke();
  ctx.textAlign = 'left';
  ctx.fillText('mm', right + 14, bottom + 1);
}

/** px that the graduated edge takes outside of the chip: its ticks, and where they are numbered. */
export const TICKS = 10;
const NUMBERED = 26;

/** The places of the edge itself, so that no words run across it. */
export function takeEdge(room: Room, chip: Pick<Chip, 'outline'>, camera: Camera, size: Size): void {
  const { left, right, top, bottom } = chipOnScreen(chip.outline, camera, size);
  const fill = (x: number, y: number, wide: number, high: number): void => {
    // only what is on the screen: near the chip its edges are far away and long
    const from = [Math.max(0, x), Math.max(0, y)] as const;
    const to = [Math.min(size.width, x + wide), Math.min(size.height, y + high)] as const;
    if (to[0] > from[0] && to[1] > from[1]) room.fill(from[0], from[1], to[0] - from[0], to[1] - from[1]);
  };
  fill(left, top - NUMBERED, right - left, NUMBERED + 1);
  fill(left, bottom - 1, right - left, TICKS);
  fill(left - NUMBERED, top, NUMBERED + 1, bottom - top);
  fill(right - 1, top, TICKS, bottom - top);
}

const isMajor = (nm: number, major: number): boolean => Math.abs(nm / major - Math.round(nm / major)) < 1e-6;

/** Multiples of `by` from `first` to `last` that lie within a stretch of view. */
function visible(first: number, last: number, by: number, from: number, length: number): number[] {
  const start = Math.max(first, Math.floor(from / by) * by);
  const stop = Math.min(last, from + length);
  const out: number[] = [];
  for (let i = Math.ceil(start / by); i * by <= stop + 1e-6; i += 1) out.push(i * by);
  return out;
}

/** A bar of round length at the lower right, with its figure. */
export function drawScaleBar(
  ctx: CanvasRenderingContext2D,
  camera: Camera,
  size: Size,
  palette: Palette,
): void {
  const { major } = graduation(camera.scale, 72);
  const length = major * camera.scale;
  const x = size.width - 24 - length;
  const y = size.height - 30;
  ctx.globalAlpha = 0.86;
  ctx.fillStyle = palette.sheet;
  ctx.fillRect(x - 10, y - 10, length + 20, 32);
  ctx.globalAlpha = 1;
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 1;
  ctx.beginPath();
  ctx.moveTo(Math.round(x) + 0.5, y - 4.5);
  ctx.lineTo(Math.round(x) + 0.5, y + 4.5);
  ctx.moveTo(Math.round(x) + 0.5, y);
  ctx.lineTo(Math.round(x + length) - 0.5, y);
  ctx.moveTo(Math.round(x + length) - 0.5, y - 4.5);
  ctx.lineTo(Math.round(x + length) - 0.5, y + 4.5);
  ctx.stroke();
  ctx.fillStyle = palette.soft;
  ctx.font = `${SIZES.note}px ${FIGURE_FACE}`;
  ctx.textAlign = 'center';
  ctx.textBaseline = 'top';
  ctx.fillText(lengthText(major), x + length / 2, y + 6);
}

const lengthText = (nm: number): string => {
  if (nm >= 1e6) return `${Number((nm / 1e6).toPrecision(6))} mm`;
  return nm >= 1e3 ? `${Number((nm / 1e3).toPrecision(6))} µm` : `${nm} nm`;
};
