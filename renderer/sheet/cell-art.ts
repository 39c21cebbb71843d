import { SHADES, shades } from '../look/ramp.ts';
import { scheme } from '../look/theme.ts';
import type { Palette } from '../look/tokens.ts';
import type { PlacedPicture } from '../solving/messages.ts';
import type { Desk } from '../state/desk.ts';
import { type Camera, inView, type Size } from './camera.ts';
import { placeOn, type Shown } from './overlay.ts';

/** px per nm from which the inside of a junction is drawn: a channel of 100 µm is then 12 px wide. */
const NEAR = 0.00012;
/** Junctions asked for at once, and kept. */
const MOST = 24;
/** px: width of the band of wall shear outside the walls. */
const BAND = 7;
const LINES = 14;

/** A picture as paths in plan coordinates relative to its origin, cut by shade once. */
interface Art {
  readonly picture: PlacedPicture;
  readonly fluid: readonly Path2D[];
}

/**
 * The solved field inside junctions, when near: speed at half depth as shade, the wall shear as a band
 * along the walls (the alarm colour beyond the limit), the peak marked, streamlines on request. Asked of
 * the solving thread as junctions come into view; kept until the answer changes.
 */
export class CellArt {
  private readonly desk: Desk;
  private readonly changed: () => void;
  private of: unknown = null;
  private readonly art = new Map<string, Art | null>();

  constructor(desk: Desk, changed: () => void) {
    this.desk = desk;
    this.changed = changed;
  }

  draw(ctx: CanvasRenderingContext2D, shown: Shown, camera: Camera, size: Size, palette: Palette): void {
    if (camera.scale < NEAR) return;
    if (shown.overlay !== 'wall shear' && shown.overlay !== 'speed') return;
    const { solved, live } = this.desk.solver;
    const { result } = live.get() ?? solved.get();
    if (!result) return;
    if (this.of !== result) {
      this.of = result;
      this.art.clear();
    }
    const box = inView(camera, size, 200);
    let asked = 0;
    for (const { id, at, pressures } of result.cells) {
      if (!pressures) continue;
      const [x, y] = [at[0] * 1e9, at[1] * 1e9];
      if (x < box.left || x > box.right || y < box.bottom || y > box.top) continue;
      const art = this.art.get(id);
      if (art === undefined && asked < MOST) {
        asked += 1;
        this.ask(id, result);
      } else if (art) this.drawOne(ctx, art, shown, camera, size, palette);
    }
  }

  private ask(id: string, result: unknown): void {
    this.art.set(id, null);
    void this.desk.solver.picture(id, LINES).then((picture) => {
      if (!picture || this.of !== result) return;
      this.art.set(id, { picture, fluid: fluidPaths(picture) });
      this.changed();
    });
  }

  private drawOne(
    ctx: CanvasRenderingContext2D,
    { picture, fluid }: Art,
    shown: Shown,
    camera: Camera,
    size: Size,
    palette: Palette,
  ): void {
    const { scale, centre } = camera;
    const [ox, oy] = picture.origin;
    ctx.save();
    ctx.transform(
      scale,
      0,
      0,
      -scale,
      size.width / 2 + (ox - centre[0]) * scale,
      size.height / 2 - (oy - centre[1]) * scale,
    );
    const colours = shades(scheme(), 'amount');
    ctx.lineWidth = 0.7 / scale;
    ctx.lineJoin = 'round';
    fluid.forEach((path, shade) => {
      ctx.fillStyle = colours[shade]!;
      ctx.strokeStyle = colours[shade]!;
      ctx.fill(path);
      ctx.stroke(path);
    });
    if (this.desk.view.get().streamlines) {
      ctx.strokeStyle = palette.card;
      ctx.lineWidth = 1 / scale;
      for (const line of picture.lines) ctx.stroke(polyline(line));
    }
    this.drawWalls(ctx, picture, shown, scale, palette);
    ctx.restore();
  }

  private drawWalls(
    ctx: CanvasRenderingContext2D,
    { walls, shear, peak }: PlacedPicture,
    shown: Shown,
    scale: number,
    palette: Palette,
  ): void {
    const colours = shades(scheme(), 'amount');
    const band = BAND / scale;
    const to =
      shown.overlay === 'wall shear'
        ? shown
        : { from: 0, to: Math.max(1e-12, peak?.value ?? Math.max(...shear)) };
    for (let w = 0; w < shear.length; w += 1) {
      const [ax, ay, bx, by, nx, ny] = walls.subarray(6 * w, 6 * w + 6).map((v, i) => (i < 4 ? v * 1e9 : v));
      const beyond = shown.limit !== null && shear[w]! > shown.limit;
      ctx.fillStyle = beyond ? palette.alarm : colours[Math.round(placeOn(to, shear[w]!) * (SHADES - 1))]!;
      ctx.beginPath();
      ctx.moveTo(ax!, ay!);
      ctx.lineTo(bx!, by!);
      ctx.lineTo(bx! + nx! * band, by! + ny! * band);
      ctx.lineTo(ax! + nx! * band, ay! + ny! * band);
      ctx.fill();
    }
    ctx.strokeStyle = palette.ink;
    ctx.lineWidth = 1.5 / scale;
    ctx.beginPath();
    for (let w = 0; w < shear.length; w += 1) {
      ctx.moveTo(walls[6 * w]! * 1e9, walls[6 * w + 1]! * 1e9);
      ctx.lineTo(walls[6 * w + 2]! * 1e9, walls[6 * w + 3]! * 1e9);
    }
    ctx.stroke();
    if (!peak) return;
    ctx.beginPath();
    ctx.arc(peak.at[0] * 1e9, peak.at[1] * 1e9, 4.5 / scale, 0, 2 * Math.PI);
    ctx.fillStyle = palette.card;
    ctx.fill();
    ctx.strokeStyle = shown.limit !== null && peak.value > shown.limit ? palette.alarm : palette.ink;
    ctx.stroke();
  }
}

function fluidPaths({ points, triangles, speed }: PlacedPicture): Path2D[] {
  const paths = Array.from({ length: SHADES }, () => new Path2D());
  for (let t = 0; t < triangles.length; t += 3) {
    const [a, b, c] = [triangles[t]!, triangles[t + 1]!, triangles[t + 2]!];
    const mean = (speed[a]! + speed[b]! + speed[c]!) / 3;
    const path = paths[Math.min(SHADES - 1, Math.round(mean * (SHADES - 1)))]!;
    path.moveTo(points[2 * a]! * 1e9, points[2 * a + 1]! * 1e9);
    path.lineTo(points[2 * b]! * 1e9, points[2 * b + 1]! * 1e9);
    path.lineTo(points[2 * c]! * 1e9, points[2 * c + 1]! * 1e9);
    path.closePath();
  }
  return paths;
}

function polyline(line: Float32Array): Path2D {
  const path = new Path2D();
  for (let i = 0; i < line.length; i += 2) {
    if (i === 0) path.moveTo(line[0]! * 1e9, line[1]! * 1e9);
    else path.lineTo(line[i]! * 1e9, line[i + 1]! * 1e9);
  }
  return path;
}
