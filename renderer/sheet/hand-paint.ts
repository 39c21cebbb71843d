import type { Chip } from '../../solver/chip/chip.ts';
import { findPart } from '../edits/parts.ts';
import type { Palette } from '../look/tokens.ts';
import type { Ref } from '../state/ref.ts';
import type { PartValue, Preview } from '../tools/tool.ts';
import { THINNEST, traceLine, traceTaper } from './bodies.ts';
import { type Camera, type Size, toScreen } from './camera.ts';
import type { Stretch } from './scene.ts';

/** What is chosen and what the hand is about to make: line, not colour. */
export function paintHand(
  ctx: CanvasRenderingContext2D,
  chip: Chip,
  selection: readonly Ref[],
  preview: Preview,
  camera: Camera,
  size: Size,
  palette: Palette,
  /** The chip is drawn as it would be already: what is made is ringed, not filled. */
  live: boolean,
): void {
  const hidden = new Set(preview.hides);
  for (const ref of selection) {
    if (hidden.has(ref)) continue;
    const part = findPart(chip, ref);
    if (part) paintChosen(ctx, part, camera, size, palette, selection.length === 1);
  }
  for (const part of preview.parts ?? [])
    if (live) paintChosen(ctx, part, camera, size, palette, false);
    else paintPart(ctx, part, camera, size, palette);
  ctx.setLineDash([]);
  if (preview.guide) {
    const [a, b] = preview.guide.map((p) => toScreen(camera, size, p)) as [
      [number, number],
      [number, number],
    ];
    ctx.strokeStyle = palette.soft;
    ctx.lineWidth = 1;
    ctx.setLineDash([4, 4]);
    ctx.beginPath();
    ctx.moveTo(a[0], a[1]);
    ctx.lineTo(b[0], b[1]);
    ctx.stroke();
    ctx.setLineDash([]);
  }
  if (preview.box) {
    const [a, b] = preview.box.map((p) => toScreen(camera, size, p)) as [[number, number], [number, number]];
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1;
    ctx.setLineDash([2, 3]);
    ctx.strokeRect(Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.abs(b[0] - a[0]), Math.abs(b[1] - a[1]));
    ctx.setLineDash([]);
  }
  if (preview.cursor) {
    const [x, y] = toScreen(camera, size, preview.cursor);
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1.25;
    ctx.beginPath();
    ctx.moveTo(x - 7, y);
    ctx.lineTo(x + 7, y);
    ctx.moveTo(x, y - 7);
    ctx.lineTo(x, y + 7);
    ctx.stroke();
  }
}

function inPlan(ctx: CanvasRenderingContext2D, camera: Camera, size: Size, draw: () => void): void {
  const { scale, centre } = camera;
  ctx.save();
  ctx.transform(scale, 0, 0, -scale, size.width / 2 - centre[0] * scale, size.height / 2 + centre[1] * scale);
  draw();
  ctx.restore();
}

function stretchOf(part: Extract<PartValue, { kind: 'channel' }>): Stretch {
  const { path, width, bendRadius } = part.value;
  return { channel: part.value, channelIndex: 0, path, width, bendRadius, start: 0, stop: 0 };
}

/** The body as it would be: outlined, and filled with the colour of what can be changed. */
function paintPart(
  ctx: CanvasRenderingContext2D,
  part: PartValue,
  camera: Camera,
  size: Size,
  palette: Palette,
): void {
  const { scale } = camera;
  inPlan(ctx, camera, size, () => {
    ctx.lineJoin = 'miter';
    for (const pass of [0, 1] as const) {
      const colour = pass === 0 ? palette.ink : palette.field;
      ctx.beginPath();
      if (part.kind === 'channel') {
        const stretch = stretchOf(part);
        const more = pass === 0 ? 1.25 / scale : 0;
        if (stretch.width[0] !== stretch.width[1]) {
          traceTaper(ctx, stretch, more);
          ctx.fillStyle = colour;
          ctx.fill();
        } else {
          traceLine(ctx, stretch);
          ctx.strokeStyle = colour;
          ctx.lineWidth = Math.max(stretch.width[0], THINNEST / scale) + 2 * more;
          ctx.stroke();
        }
      } else if (part.kind === 'chamber' || part.kind === 'keep-out') {
        part.value.outline.forEach(([x, y], i) => {
          if (i === 0) ctx.moveTo(x, y);
          else ctx.lineTo(x, y);
        });
        ctx.closePath();
        if (pass === 0) {
          ctx.strokeStyle = colour;
          ctx.lineWidth = 2.5 / scale;
          ctx.stroke();
        } else if (part.kind === 'chamber') {
          ctx.fillStyle = colour;
          ctx.fill();
        }
      } else if (pass === 0) {
        const radius = Math.max(part.value.diameter / 2, 5 / scale);
        ctx.arc(part.value.at[0], part.value.at[1], radius, 0, 2 * Math.PI);
        ctx.strokeStyle = colour;
        ctx.lineWidth = 1.5 / scale;
        ctx.stroke();
      }
    }
  });
}

/** A fine double line round what is chosen, and its corners where one thing alone is. */
function paintChosen(
  ctx: CanvasRenderingContext2D,
  part: PartValue,
  camera: Camera,
  size: Size,
  palette: Palette,
  corners: boolean,
): void {
  const { scale } = camera;
  if (part.kind === 'port' || part.kind === 'via') {
    const [x, y] = toScreen(camera, size, part.value.at);
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1.5;
    ctx.beginPath();
    ctx.arc(x, y, Math.max(5, (part.value.diameter / 2) * scale) + 3, 0, 2 * Math.PI);
    ctx.stroke();
    return;
  }
  inPlan(ctx, camera, size, () => {
    if (part.kind !== 'channel') {
      ctx.beginPath();
      part.value.outline.forEach(([x, y], i) => {
        if (i === 0) ctx.moveTo(x, y);
        else ctx.lineTo(x, y);
      });
      ctx.closePath();
      ctx.strokeStyle = palette.ink;
      ctx.lineWidth = 2.5 / scale;
      ctx.setLineDash([6 / scale, 3 / scale]);
      ctx.stroke();
      return;
    }
    ringLine(ctx, stretchOf(part), scale, palette);
  });
  if (!corners) return;
  const places = part.kind === 'channel' ? part.value.path : part.value.outline;
  if (places.length > 200) return;
  ctx.setLineDash([]);
  ctx.fillStyle = palette.chip;
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 1.25;
  for (const place of places) {
    const [x, y] = toScreen(camera, size, place);
    ctx.beginPath();
    ctx.arc(x, y, 3, 0, 2 * Math.PI);
    ctx.fill();
    ctx.stroke();
  }
}

/** Two thin lines beside the body, at 3 px from it: the body itself keeps its colour. */
function ringLine(ctx: CanvasRenderingContext2D, stretch: Stretch, scale: number, palette: Palette): void {
  const away = 3.5 / scale;
  const half = Math.max(Math.max(...stretch.width), THINNEST / scale) / 2;
  // outside of the body only: a wide ink line with the inner part taken out again
  const { path } = stretch;
  for (const sign of [-1, 1]) {
    ctx.beginPath();
    traceSide(ctx, path, sign * (half + away));
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1.25 / scale;
    ctx.stroke();
  }
}

function traceSide(
  ctx: CanvasRenderingContext2D,
  path: readonly (readonly [number, number])[],
  by: number,
): void {
  path.forEach((p, i) => {
    const a = path[Math.max(0, i - 1)]!;
    const b = path[Math.min(path.length - 1, i + 1)]!;
    const before = i > 0 ? unit(a, p) : unit(p, b);
    const after = i + 1 < path.length ? unit(p, b) : before;
    const nx = -(before[1] + after[1]);
    const ny = before[0] + after[0];
    const square = nx * nx + ny * ny;
    const k = square < 1e-6 ? 0 : (2 * by) / square;
    const x = p[0] + k * nx;
    const y = p[1] + k * ny;
    if (i === 0) ctx.moveTo(x, y);
    else ctx.lineTo(x, y);
  });
}

function unit(a: readonly [number, number], b: readonly [number, number]): readonly [number, number] {
  const d = Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;
  return [(b[0] - a[0]) / d, (b[1] - a[1]) / d];
}
