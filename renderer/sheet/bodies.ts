import { shades } from '../look/ramp.ts';
import type { Palette, Scheme } from '../look/tokens.ts';
import type { Camera, Size } from './camera.ts';
import { inView } from './camera.ts';
import type { Scene, Stretch } from './scene.ts';
import type { Spatial } from './spatial.ts';

/**
 * Channels as bodies of fluid: first everything in the colour of the wall, a little wider, then the fluid
 * on top, so that one thin wall goes round what is one cavity. Straight bodies of one width and shade are
 * one path, made once for a scene; near the chip only what is in view is drawn, one by one.
 */

export interface BodyStyle {
  readonly scheme: Scheme;
  readonly palette: Palette;
  readonly ramp: 'amount' | 'deviation';
}

/** px: a channel is never thinner than this. */
export const THINNEST = 1.5;
const WALL = 1;
/** Above this many channels in view, whole groups are drawn instead of single bodies. */
const MANY = 1200;

interface Group {
  /** -1 for tapers, which are outlines to fill. */
  readonly width: number;
  readonly shade: number;
  readonly path: Path2D;
}

/** Whether a body must be filled as an outline. */
const tapered = (stretch: Stretch): boolean => stretch.width[0] !== stretch.width[1];

type Tracer = Pick<Path2D, 'moveTo' | 'lineTo' | 'arcTo' | 'closePath'>;

/** The centreline, bends as arcs where they have a radius. */
export function traceLine(to: Tracer, { path, bendRadius }: Pick<Stretch, 'path' | 'bendRadius'>): void {
  to.moveTo(path[0]![0], path[0]![1]);
  for (let i = 1; i < path.length; i += 1) {
    const [x, y] = path[i]!;
    const next = path[i + 1];
    if (bendRadius > 0 && next) to.arcTo(x, y, next[0], next[1], bendRadius);
    else to.lineTo(x, y);
  }
}

/** The outline of a body whose width changes along its length, `more` nm wider on each side. */
export function traceTaper(to: Tracer, stretch: Stretch, more: number): void {
  const { path, width } = stretch;
  const lengths = [0];
  for (let i = 1; i < path.length; i += 1)
    lengths.push(lengths[i - 1]! + Math.hypot(path[i]![0] - path[i - 1]![0], path[i]![1] - path[i - 1]![1]));
  const total = lengths.at(-1)! || 1;
  const side = (sign: number, i: number): readonly [number, number] => {
    const a = path[Math.max(0, i - 1)]!;
    const b = path[Math.min(path.length - 1, i + 1)]!;
    const d = Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;
    const half = (width[0] + (width[1] - width[0]) * (lengths[i]! / total)) / 2 + more;
    return [path[i]![0] - (sign * half * (b[1] - a[1])) / d, path[i]![1] + (sign * half * (b[0] - a[0])) / d];
  };
  path.forEach((_, i) => {
    const [x, y] = side(1, i);
    if (i === 0) to.moveTo(x, y);
    else to.lineTo(x, y);
  });
  for (let i = path.length - 1; i >= 0; i -= 1) {
    const [x, y] = side(-1, i);
    to.lineTo(x, y);
  }
  to.closePath();
}

/** Groups of a scene for one colouring; kept until either changes. */
export class Bodies {
  private readonly scene: Scene;
  private readonly shade: Int16Array;
  private groups: readonly Group[] | null = null;
  private grounds: ReadonlyMap<number, Path2D> | null = null;
  private readonly chamberShade: readonly number[];

  constructor(scene: Scene, shade: Int16Array, chamberShade: readonly number[]) {
    this.scene = scene;
    this.shade = shade;
    this.chamberShade = chamberShade;
  }

  /** Draws into a context in CSS px; `layers` are drawn in their order. */
  draw(ctx: CanvasRenderingContext2D, camera: Camera, size: Size, spatial: Spatial, style: BodyStyle): void {
    const { stretches } = this.scene;
    ctx.save();
    const { scale } = camera;
    // the plan's own coordinates, y upward
    ctx.transform(
      scale,
      0,
      0,
      -scale,
      size.width / 2 - camera.centre[0] * scale,
      size.height / 2 + camera.centre[1] * scale,
    );
    ctx.lineJoin = 'miter';
    ctx.miterLimit = 10;
    ctx.lineCap = 'butt';
    const colours = shades(style.scheme, style.ramp);
    const fluid = (shade: number): string => (shade < 0 ? style.palette.field : colours[shade]!);
    this.grounds ??= this.chambers();
    ctx.lineWidth = (2 * WALL) / scale;
    ctx.strokeStyle = style.palette.ink;
    for (const path of this.grounds.values()) ctx.stroke(path);
    const near = spatial.channelsIn(inView(camera, size, 4));
    if (near.length > MANY) {
      this.groups ??= this.group();
      this.drawGroups(ctx, scale, style, fluid);
    } else {
      for (const pass of [0, 1] as const)
        for (const index of near)
          for (let i = this.scene.first[index]!; i < this.scene.first[index + 1]!; i += 1)
            drawOne(
              ctx,
              stretches[i]!,
              pass === 0 ? style.palette.ink : fluid(this.shade[i]!),
              pass === 0,
              scale,
            );
    }
    // over the ends of channels that reach into them: one cavity, one ground
    for (const [shade, path] of this.grounds) {
      ctx.fillStyle = fluid(shade);
      ctx.fill(path);
    }
    ctx.restore();
  }

  /** Outlines of chambers by their shade. */
  private chambers(): Map<number, Path2D> {
    const paths = new Map<number, Path2D>();
    this.scene.chip.chambers.forEach(({ outline }, nth) => {
      const shade = this.chamberShade[nth]!;
      const path = paths.get(shade) ?? new Path2D();
      paths.set(shade, path);
      outline.forEach(([x, y], i) => {
        if (i === 0) path.moveTo(x, y);
        else path.lineTo(x, y);
      });
      path.closePath();
    });
    return paths;
  }

  private drawGroups(
    ctx: CanvasRenderingContext2D,
    scale: number,
    style: BodyStyle,
    fluid: (shade: number) => string,
  ): void {
    // far out a wall is thinner than the fluid is wide only where there is room for one
    for (const { width, path } of this.groups!) {
      ctx.strokeStyle = style.palette.ink;
      if (width * scale < 2.5) continue;
      ctx.lineWidth = Math.max(width, 0) + (2 * WALL) / scale;
      ctx.stroke(path);
    }
    for (const { width, shade, path } of this.groups!) {
      if (width < 0) {
        ctx.fillStyle = fluid(shade);
        ctx.fill(path);
        ctx.lineWidth = THINNEST / scale;
      } else ctx.lineWidth = Math.max(width, THINNEST / scale);
      ctx.strokeStyle = shade < 0 ? style.palette.soft : fluid(shade);
      ctx.stroke(path);
    }
  }

  private group(): Group[] {
    const groups = new Map<string, Group>();
    this.scene.stretches.forEach((stretch, i) => {
      const width = tapered(stretch) ? -1 : stretch.width[0];
      const shade = this.shade[i]!;
      const key = `${width} ${shade}`;
      let group = groups.get(key);
      if (!group) {
        group = { width, shade, path: new Path2D() };
        groups.set(key, group);
      }
      if (width < 0) traceTaper(group.path, stretch, 0);
      else traceLine(group.path, stretch);
    });
    return [...groups.values()];
  }
}

function drawOne(
  ctx: CanvasRenderingContext2D,
  stretch: Stretch,
  colour: string,
  wall: boolean,
  scale: number,
): void {
  const more = wall ? WALL / scale : 0;
  ctx.beginPath();
  if (tapered(stretch)) {
    traceTaper(ctx, stretch, Math.max(more, (THINNEST / scale - Math.min(...stretch.width)) / 2));
    ctx.fillStyle = colour;
    ctx.fill();
    return;
  }
  traceLine(ctx, stretch);
  ctx.lineWidth = Math.max(stretch.width[0], THINNEST / scale) + 2 * more;
  ctx.strokeStyle = colour;
  ctx.stroke();
}
