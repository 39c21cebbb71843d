import { boxOf } from '../geometry/path.ts';
import { FIGURE_FACE, type Palette, SIZES } from '../look/tokens.ts';
import { plusMinus } from '../words/band.ts';
import { figure } from '../words/figure.ts';
import { type Camera, inView, type Size, toScreen } from './camera.ts';
import { rimText } from './marks.ts';
import { type Shown, spanOn } from './overlay.ts';
import type { Room } from './room.ts';
import type { Scene } from './scene.ts';
import type { Spatial } from './spatial.ts';

/** px: a stretch must be this long on screen before its figure is written along it. */
const LEAST_LENGTH = 110;
const MOST = 60;

/** The figure that the colour stands for, beside each chamber and along the longest run of each channel that is near enough. */
export function drawChannelWords(
  ctx: CanvasRenderingContext2D,
  scene: Scene,
  shown: Shown,
  camera: Camera,
  size: Size,
  palette: Palette,
  room: Room,
  spatial: Spatial,
  /** A picture lies beneath all of them. */
  onPicture = false,
): void {
  if (shown.overlay === 'findings') return;
  const near = spatial.channelsIn(inView(camera, size));
  if (near.length > 400) return;
  ctx.font = `${SIZES.note}px ${FIGURE_FACE}`;
  ctx.textBaseline = 'middle';
  ctx.textAlign = 'center';
  drawChamberWords(ctx, scene, shown, camera, size, palette, room, onPicture);
  let written = 0;
  for (const index of near) {
    for (let i = scene.first[index]!; i < scene.first[index + 1]! && written < MOST; i += 1) {
      const stretch = scene.stretches[i]!;
      const span = spanOn(shown, stretch.channel.id, stretch.start, stretch.stop);
      if (span?.value == null) continue;
      let best = 0;
      let at = 0;
      for (let s = 0; s + 1 < stretch.path.length; s += 1) {
        const a = stretch.path[s]!;
        const b = stretch.path[s + 1]!;
        const length = Math.hypot(b[0] - a[0], b[1] - a[1]) * camera.scale;
        // words stand level: upright runs carry none
        if (length > best && Math.abs(b[0] - a[0]) >= Math.abs(b[1] - a[1])) {
          best = length;
          at = s;
        }
      }
      if (best < LEAST_LENGTH) continue;
      const a = toScreen(camera, size, stretch.path[at]!);
      const b = toScreen(camera, size, stretch.path[at + 1]!);
      const x = (a[0] + b[0]) / 2;
      const half = (Math.max(...stretch.width) / 2) * camera.scale;
      const y = (a[1] + b[1]) / 2 - half - 9;
      const told = toldAs(span.value, shown);
      const text = `${told}${plusMinus(span.band)}`;
      const wide = ctx.measureText(text).width;
      if (Math.abs(b[1] - a[1]) > Math.abs(b[0] - a[0]) * 0.2 || x < 0 || x > size.width || y < 0) continue;
      if (!room.take(x - wide / 2 - 3, y - 7, wide + 6, 14)) continue;
      if (onPicture) rimText(ctx, text, x, y, palette);
      ctx.fillStyle = palette.soft;
      ctx.fillText(text, x, y);
      written += 1;
    }
  }
}

const toldAs = (value: number, shown: Shown): string =>
  figure(value, shown.kind, {
    digits: 3,
    ...(shown.kind === 'share' && { unit: '%', signed: shown.overlay === 'off target' }),
  });

/** Above the upper edge of each chamber that is wide enough for its figure. */
function drawChamberWords(
  ctx: CanvasRenderingContext2D,
  scene: Scene,
  shown: Shown,
  camera: Camera,
  size: Size,
  palette: Palette,
  room: Room,
  onPicture: boolean,
): void {
  if (shown.chambers.size === 0) return;
  let written = 0;
  for (const { id, outline } of scene.chip.chambers) {
    const value = shown.chambers.get(id);
    if (value === undefined || written >= MOST) continue;
    const box = boxOf(outline)!;
    const [left, top] = toScreen(camera, size, [box.left, box.top]);
    const [right, bottom] = toScreen(camera, size, [box.right, box.bottom]);
    const text = toldAs(value, shown);
    const wide = ctx.measureText(text).width;
    const x = (left + right) / 2;
    if (right - left < wide || x < 0 || x > size.width || bottom < 0 || top > size.height) continue;
    // a chamber that reaches beyond the sheet is told at the edge of the sheet
    const y = Math.max(top - 9, 12);
    if (!room.take(x - wide / 2 - 3, y - 7, wide + 6, 14)) continue;
    if (y > top) {
      ctx.fillStyle = palette.chip;
      ctx.fillRect(x - wide / 2 - 3, y - 8, wide + 6, 16);
    }
    if (onPicture) rimText(ctx, text, x, y, palette);
    ctx.fillStyle = palette.soft;
    ctx.fillText(text, x, y);
    written += 1;
  }
}
