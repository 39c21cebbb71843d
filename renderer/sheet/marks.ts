import type { Chip } from '../../solver/chip/chip.ts';
import { FIGURE_FACE, type Palette, SIZES, TEXT_FACE } from '../look/tokens.ts';
import { type Camera, type Size, toPlan, toScreen } from './camera.ts';
import { TICKS } from './edge.ts';
import type { Room } from './room.ts';
import type { Spatial } from './spatial.ts';
import type { PlaceWords, PortWords } from './words.ts';

/** px: a port's ring is never smaller. */
const LEAST_RING = 5;

const onScreen = ([x, y]: readonly [number, number], { width, height }: Size, more: number): boolean =>
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

/** How many runs of channels lie under a rectangle of the screen. */
const coverage =
  (camera: Camera, size: Size, spatial: Spatial) =>
  (left: number, top: number, width: number, height: number): number => {
    const [a, b] = toPlan(camera, size, [left, top + height]);
    const [c, d] = toPlan(camera, size, [left + width, top]);
    return spatial.runsIn({ left: a, bottom: b, right: c, top: d });
  };

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
): void {
  const covered = coverage(camera, size, spatial);
  const [, bottom] = toScreen(camera, size, [0, 0]);
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
    /** Left, tops of the two lines. */
    const box = (where: Side): readonly [number, number, number] =>
      where === 'beyond'
        ? [x - wide / 2, ...beyond()]
        : where === 'right'
          ? [x + away, y - LINE, y]
          : where === 'left'
            ? [x - away - wide, y - LINE, y]
            : where === 'around'
              ? [x - wide / 2, y - away - LINE, y + away]
              : where === 'above'
                ? [x - wide / 2, y - away - 2 * LINE, y - away - LINE]
                : [x - wide / 2, y + away, y + away + LINE];
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
    const at = found === 'right' ? left : found === 'left' ? left + wide : x;
    // where the edge runs under the words, a rim of ground round each sign keeps them legible
    const say = (text: string, y: number, colour: string): void => {
      if (!clear(found)) {
        ctx.strokeStyle = palette.chip;
        ctx.lineWidth = 4;
        ctx.lineJoin = 'round';
        ctx.strokeText(text, at, y);
      }
      ctx.fillStyle = colour;
      ctx.fillText(text, at, y);
    };
    say(figure, second + LINE / 2, missed ? palette.alarm : palette.soft);
    ctx.font = `600 ${SIZES.label}px ${FIGURE_FACE}`;
    say(short, first + LINE / 2, palette.ink);
  }
}

/** A ring round the place and the words beside it. */
export function drawPlaceWords(
  ctx: CanvasRenderingContext2D,
  words: readonly PlaceWords[],
  camera: Camera,
  size: Size,
  palette: Palette,
  room: Room,
  edge: Room,
  spatial: Spatial,
): void {
  const covered = coverage(camera, size, spatial);
  for (const { at: plan, head, more, alarm } of words) {
    const at = toScreen(camera, size, plan);
    if (!onScreen(at, size, 20)) continue;
    const colour = alarm ? palette.alarm : palette.ink;
    ctx.strokeStyle = colour;
    ctx.lineWidth = 1.5;
    ctx.beginPath();
    ctx.arc(at[0], at[1], 11, 0, 2 * Math.PI);
    ctx.stroke();
    const heads = linesOf(head, 40);
    const rests = linesOf(more, 60);
    const widest = (lines: readonly string[]): number =>
      lines.reduce((most, line) => Math.max(most, ctx.measureText(line).width), 0);
    ctx.font = `600 ${SIZES.verdict}px ${TEXT_FACE}`;
    const headWide = widest(heads);
    ctx.font = `${SIZES.label}px ${FIGURE_FACE}`;
    const wide = Math.max(headWide, widest(rests));
    const high = 18 * heads.length + 16 * rests.length + 2;
    const place = roomBeside(at, wide, high, size, room, edge, covered);
    if (!place) continue;
    if (Math.min(Math.abs(place.top + high - at[1]), Math.abs(place.top - at[1])) > 20) {
      ctx.lineWidth = 1;
      ctx.beginPath();
      ctx.moveTo(at[0], at[1] + (place.top > at[1] ? 11 : -11));
      ctx.lineTo(place.right ? place.left + wide + 6 : place.left - 6, place.top + high / 2);
      ctx.stroke();
    }
    // a ground under the words, so that channels do not run through them
    ctx.globalAlpha = 0.86;
    ctx.fillStyle = palette.chip;
    ctx.fillRect(place.left - 4, place.top - 2, wide + 8, high + 4);
    ctx.globalAlpha = 1;
    ctx.textAlign = place.right ? 'right' : 'left';
    const x = place.right ? place.left + wide : place.left;
    ctx.textBaseline = 'middle';
    ctx.font = `600 ${SIZES.verdict}px ${TEXT_FACE}`;
    ctx.fillStyle = colour;
    for (const [i, line] of heads.entries()) ctx.fillText(line, x, place.top + 10 + 18 * i);
    ctx.font = `${SIZES.label}px ${FIGURE_FACE}`;
    ctx.fillStyle = palette.soft;
    for (const [i, line] of rests.entries())
      ctx.fillText(line, x, place.top + 18 * heads.length + 9 + 16 * i);
  }
}

/** A sentence in lines of about `most` signs, three at the most; the card has the whole of it. */
export function linesOf(text: string, most: number): readonly string[] {
  const lines: string[] = [];
  for (const word of text.split(' ')) {
    const last = lines.at(-1);
    if (last !== undefined && last.length + 1 + word.length <= most)
      lines[lines.length - 1] = `${last} ${word}`;
    else if (lines.length < 3) lines.push(word);
    else return [...lines.slice(0, 2), `${lines[2]} …`];
  }
  return lines;
}

/** px: how far the words may stand from their place; beyond the first a line leads to them. */
const FAR = [0, 34, 72] as const;

/** The free place beside that covers least of what is drawn, near before far. */
function roomBeside(
  [x, y]: readonly [number, number],
  wide: number,
  high: number,
  size: Size,
  room: Room,
  edge: Room,
  covered: (left: number, top: number, width: number, height: number) => number,
): { readonly left: number; readonly top: number; readonly right: boolean } | null {
  let best: { left: number; top: number; right: boolean } | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const [step, far] of FAR.entries())
    for (const up of [true, false])
      for (const right of [true, false]) {
        const left = right ? x - 18 - wide : x + 18;
        const top = up ? y - high - 4 - far : y + 6 + far;
        const inside = left > 4 && left + wide < size.width - 4 && top > 4 && top + high < size.height - 4;
        if (!inside || !room.free(left - 4, top - 2, wide + 8, high + 4)) continue;
        // words across the graduated edge take its figures away
        const across = edge.free(left - 4, top - 2, wide + 8, high + 4) ? 0 : 3;
        const cost = 2 * covered(left - 4, top - 2, wide + 8, high + 4) + across + step;
        if (cost < least) {
          least = cost;
          best = { left, top, right };
        }
      }
  if (best) room.fill(best.left - 4, best.top - 2, wide + 8, high + 4);
  return best;
}
