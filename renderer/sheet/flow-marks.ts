import type { Result } from '../../solver/chip/result.ts';
import type { Palette } from '../look/tokens.ts';
import { type Camera, inView, type Size, toScreen } from './camera.ts';
import { type Shown, valueOn } from './overlay.ts';
import type { Scene } from './scene.ts';
import type { Spatial } from './spatial.ts';

/** px between marks along a channel, and from which length on a stretch bears one. */
const APART = 72;
const LEAST = 28;
/** Beyond these nothing could be told apart. */
const MOST_CHANNELS = 400;
const MOST_MARKS = 1500;
/** px a second where the flow is fastest, and the least that still shows a direction. */
const FASTEST = 48;
const SLOWEST = 4;

/** Which way each channel's pieces flow: along the path, against it, or not at all. */
export type Directions = ReadonlyMap<
  string,
  readonly { readonly start: number; readonly stop: number; readonly sign: number }[]
>;

export function directionsOf(result: Result | null): Directions {
  const out = new Map<string, { start: number; stop: number; sign: number }[]>();
  for (const { id, pieces } of result?.channels ?? [])
    out.set(
      id,
      pieces.map(({ along, length, flow }) => ({
        start: (along?.[0] ?? 0) * 1e9,
        stop: (along?.[1] ?? length) * 1e9,
        sign: Math.sign(flow ?? 0),
      })),
    );
  return out;
}

/** The sign that holds over most of a stretch. */
export function signOn(directions: Directions, id: string, start: number, stop: number): number {
  let most = 0;
  let sign = 0;
  for (const piece of directions.get(id) ?? []) {
    const overlap = Math.min(stop, piece.stop) - Math.max(start, piece.start);
    if (overlap > most) {
      most = overlap;
      sign = piece.sign;
    }
  }
  return sign;
}

/**
 * Places of marks along a polyline of screen places, with the direction there; `shift` (px) moves them
 * along, and whole steps of it change nothing.
 */
export function marksAlong(
  path: readonly (readonly [number, number])[],
  shift: number,
): { readonly x: number; readonly y: number; readonly ux: number; readonly uy: number }[] {
  const out: { x: number; y: number; ux: number; uy: number }[] = [];
  let total = 0;
  for (let i = 1; i < path.length; i += 1)
    total += Math.hypot(path[i]![0] - path[i - 1]![0], path[i]![1] - path[i - 1]![1]);
  if (total < LEAST) return out;
  // one mark in the middle of a short stretch, and as many more as there is room for
  const apart = total / Math.max(1, Math.round(total / APART));
  let next = (((apart / 2 + shift) % apart) + apart) % apart;
  let along = 0;
  for (let i = 1; i < path.length; i += 1) {
    const [ax, ay] = path[i - 1]!;
    const dx = path[i]![0] - ax;
    const dy = path[i]![1] - ay;
    const length = Math.hypot(dx, dy);
    for (; length > 0 && next < along + length; next += apart) {
      const t = (next - along) / length;
      out.push({ x: ax + t * dx, y: ay + t * dy, ux: dx / length, uy: dy / length });
    }
    along += length;
  }
  return out;
}

/** Small arrowheads along the channels in view, each as fast as its flow is; `seconds` is null at rest. */
export function drawFlowMarks(
  ctx: CanvasRenderingContext2D,
  scene: Scene,
  shown: Shown,
  directions: Directions,
  camera: Camera,
  size: Size,
  palette: Palette,
  spatial: Spatial,
  seconds: number | null,
): void {
  const near = spatial.channelsIn(inView(camera, size));
  if (near.length > MOST_CHANNELS) return;
  let left = MOST_MARKS;
  ctx.beginPath();
  for (const index of near)
    for (let i = scene.first[index]!; i < scene.first[index + 1]! && left > 0; i += 1) {
      const { channel, path, width, start, stop } = scene.stretches[i]!;
      const sign = signOn(directions, channel.id, start, stop);
      const speed = valueOn(shown, channel.id, start, stop);
      if (sign === 0 || speed === null) continue;
      const pace = Math.max(SLOWEST, FASTEST * (speed / shown.to));
      const half = Math.min(6, Math.max(2.5, Math.max(...width) * camera.scale * 0.3));
      const marks = marksAlong(
        path.map((p) => toScreen(camera, size, p)),
        sign * pace * (seconds ?? 0),
      );
      for (const { x, y, ux, uy } of marks) {
        left -= 1;
        const [vx, vy] = [sign * ux * half, sign * uy * half];
        ctx.moveTo(x - vx - vy, y - vy + vx);
        ctx.lineTo(x + vx, y + vy);
        ctx.lineTo(x - vx + vy, y - vy - vx);
      }
    }
  ctx.lineJoin = 'round';
  ctx.lineCap = 'round';
  ctx.strokeStyle = palette.chip;
  ctx.lineWidth = 3.5;
  ctx.stroke();
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 1.5;
  ctx.stroke();
}
