import type { Chip } from '../../solver/chip/chip.ts';
import { FIGURE_FACE, type Palette, SIZES } from '../look/tokens.ts';
import { type Camera, chipOnScreen, type Size, toPlan, toScreen } from './camera.ts';
import { TICKS } from './edge.ts';
import type { Room } from './room.ts';
import type { Spatial } from './spatial.ts';
import type { PortWords } from './words.ts';

/** px: a port's ring is never smaller. */
const LEAST_RING = 5;

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

const LINE = 14;
/** px that words may come closer to their port than they stand where there is room. */
const CLOSER = 5;

/** `around` has the name above and the figure below; `beyond` has below what has room there, the rest beneath the edge. */
type Side = PortWords['side'] | 'around' | 'beyond';

/** Where else words may go when their own side is taken. */
const OTHERS: Readonly<Record<Side, readonly Side[]>> = {
  around: [],
  beyond: [],
  // ports that feed to the right mostly stand at the left edge, where its figures are
  left: ['around', 'above', 'below', 'beyond', 'left', 'right'],
  right: ['right', 'above', 'below', 'beyond', 'left'],
  above: ['above', 'right', 'left', 'below', 'beyond'],
  below: ['below', 'right', 'left', 'beyond', 'above'],
};

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

/** Names and figures beside the ports, as many as have room. */
export function drawPortWords(
  ctx: CanvasRenderingContext2D,
  words: readonly PortWords[],
  camera: Camera,
  size: Size,
  palette: Palette,
  room: Room,
  /** What words cross only where they have no other place. */
  edge: Room,
  spatial: Spatial,
  /** A picture lies beneath all of them. */
  onPicture = false,
): void {
  const covered = coverage(camera, size, spatial);
  const { left: chipLeft, right: chipRight, bottom } = chipOnScreen(spatial.chip.outline, camera, size);
  ctx.textBaseline = 'middle';
  for (const { port, name, figure, side, missed } of words) {
    const [x, y] = toScreen(camera, size, port.at);
    if (!onScreen([x, y], size, 80)) continue;
    const away = Math.max(LEAST_RING, (port.diameter / 2) * camera.scale) + 6;
    const short = name.length > 24 ? `${name.slice(0, 23)}…` : name;
    ctx.font = `600 ${SIZES.label}px ${FIGURE_FACE}`;
    const nameWide = ctx.measureText(short).width;
    ctx.font = `${missed ? 650 : 400} ${SIZES.label}px ${FIGURE_FACE}`;
    const wide = Math.max(nameWide, ctx.measureText(figure).width);
    /** Top of the upper line where lines that would cross the lower edge go beneath its ticks. */
    const beneath = bottom + TICKS + 1;
    const beyond = (): readonly [number, number] => {
      const first = y + away;
      const close = bottom - 1 - 2 * LINE;
      if (close >= first - CLOSER) return [close, close + LINE];
      if (first + LINE > bottom - 1) return [beneath, beneath + LINE];
      return [first, first + 2 * LINE > bottom - 1 ? beneath : first + LINE];
    };
    /** Left of what stands over or under the port: about its middle, aside where that keeps it off the upright edges. */
    const middle = x - wide / 2;
    const aside = Math.min(Math.max(middle, chipLeft + 4), chipRight - 4 - wide);
    const over = aside <= x - LEAST_RING && aside + wide >= x + LEAST_RING ? aside : middle;
    /** Left, tops of the two lines. */
    const box = (where: Side): readonly [number, number, number] =>
      where === 'beyond'
        ? [over, ...beyond()]
        : where === 'right'
          ? [x + away, y - LINE, y]
          : where === 'left'
            ? [x - away - wide, y - LINE, y]
            : where === 'around'
              ? [over, y - away - LINE, y + away]
              : where === 'above'
                ? [over, y - away - 2 * LINE, y - away - LINE]
                : [over, y + away, y + away + LINE];
    const fits = (where: Side): boolean => {
      const [left, first, second] = box(where);
      const under = covered(left, first, wide, second + LINE - first);
      return (
        left > 2 &&
        left + wide < size.width - 2 &&
        (where !== 'beyond' || y < bottom) &&
        (where === side || under <= (where === 'around' ? 1 : 0)) &&
        room.free(left - 2, first, wide + 4, LINE) &&
        room.free(left - 2, second, wide + 4, LINE)
      );
    };
    const clear = (where: Side): boolean => {
      const [left, first, second] = box(where);
      return edge.free(left - 2, first, wide + 4, LINE) && edge.free(left - 2, second, wide + 4, LINE);
    };
    const able = OTHERS[side].filter(fits);
    const found = able.find(clear) ?? able[0];
    if (!found) continue;
    const [left, first, second] = box(found);
    room.fill(left - 2, first, wide + 4, LINE);
    room.fill(left - 2, second, wide + 4, LINE);
    ctx.textAlign = found === 'right' ? 'left' : found === 'left' ? 'right' : 'center';
    const at = found === 'right' ? left : found === 'left' ? left + wide : left + wide / 2;
    const rim = onPicture || !clear(found);
    const say = (text: string, y: number, colour: string): void => {
      if (rim) rimText(ctx, text, at, y, palette);
      ctx.fillStyle = colour;
      ctx.fillText(text, at, y);
    };
    say(figure, second + LINE / 2, missed ? palette.alarm : palette.soft);
    ctx.font = `600 ${SIZES.label}px ${FIGURE_FACE}`;
    say(short, first + LINE / 2, palette.ink);
  }
}
