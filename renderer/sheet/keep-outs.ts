import type { Chip } from '../../solver/chip/chip.ts';
import { boxOf } from '../geometry/path.ts';
import { FIGURE_FACE, type Palette, SIZES } from '../look/tokens.ts';
import { type Camera, type Size, toScreen } from './camera.ts';

/** px between the lines of the hatching, whatever the zoom. */
const PITCH = 9;
/** px that a keep-out must have both ways before its name stands in it. */
const ROOM_FOR_NAME = 44;

/** What is to stay clear: hatched in the soft ink under everything drawn, its outline broken, its clearance a finer line. */
export function drawKeepOuts(
  ctx: CanvasRenderingContext2D,
  chip: Chip,
  camera: Camera,
  size: Size,
  palette: Palette,
): void {
  for (const { id, outline, clearance } of chip.keepOuts ?? []) {
    const corners = outline.map((p) => toScreen(camera, size, p));
    const box = boxOf(corners)!;
    const around = clearance * camera.scale;
    if (
      box.right + around < 0 ||
      box.left - around > size.width ||
      box.top + around < 0 ||
      box.bottom - around > size.height
    ) {
      continue;
    }
    const body = new Path2D();
    corners.forEach(([x, y], i) => {
      if (i === 0) body.moveTo(x, y);
      else body.lineTo(x, y);
    });
    body.closePath();
    ctx.save();
    ctx.lineJoin = 'round';
    if (around > 2) {
      // twice the clearance round the outline, less what lies inside, leaves its outer edge
      ctx.globalAlpha = 0.1;
      ctx.strokeStyle = palette.soft;
      ctx.lineWidth = 2 * around;
      ctx.stroke(body);
      ctx.globalAlpha = 1;
    }
    ctx.strokeStyle = palette.soft;
    ctx.lineWidth = 1;
    ctx.save();
    ctx.clip(body);
    ctx.globalAlpha = 0.55;
    ctx.beginPath();
    const [left, right] = [Math.max(0, box.left), Math.min(size.width, box.right)];
    const [low, high] = [Math.max(0, box.bottom), Math.min(size.height, box.top)];
    const first = Math.floor((left + low) / PITCH) * PITCH;
    for (let sum = first; sum <= right + high; sum += PITCH) {
      ctx.moveTo(sum - low, low);
      ctx.lineTo(sum - high, high);
    }
    ctx.stroke();
    ctx.restore();
    ctx.setLineDash([8, 3, 2, 3]);
    ctx.stroke(body);
    ctx.setLineDash([]);
    if (right - left > ROOM_FOR_NAME && high - low > ROOM_FOR_NAME) {
      ctx.font = `${SIZES.note}px ${FIGURE_FACE}`;
      ctx.textAlign = 'center';
      ctx.textBaseline = 'middle';
      const [x, y] = [(left + right) / 2, (low + high) / 2];
      const wide = ctx.measureText(id).width;
      if (wide < right - left) {
        ctx.fillStyle = palette.chip;
        ctx.fillRect(x - wide / 2 - 4, y - 9, wide + 8, 18);
        ctx.fillStyle = palette.soft;
        ctx.fillText(id, x, y);
      }
    }
    ctx.restore();
  }
}
