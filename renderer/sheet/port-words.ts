import { FIGURE_FACE, type Palette, SIZES } from '../look/tokens.ts';
import { type Camera, chipOnScreen, type Size, toScreen } from './camera.ts';
import { TICKS } from './edge.ts';
import { coverage, LEAST_RING, onScreen, rimText } from './marks.ts';
import type { Room } from './room.ts';
import type { Spatial } from './spatial.ts';
import type { PortWords } from './words.ts';

const LINE = 14;
/** px that words may come closer to their port than they stand where there is room. */
const CLOSER = 5;

/** `around` has the name above and the figure below; `beyond` has below what has room there, the rest beneath the edge. */
type Side = PortWords['side'] | 'around' | 'beyond';

/** Where else words may go when their own side is taken. */
const OTHERS: Readonly<Record<PortWords['side'], readonly Side[]>> = {
  // ports that feed to the right mostly stand at the left edge, where its figures are
  left: ['around', 'above', 'below', 'beyond', 'left', 'right'],
  right: ['right', 'above', 'below', 'beyond', 'left'],
  above: ['above', 'right', 'left', 'below', 'beyond'],
  below: ['below', 'right', 'left', 'beyond', 'above'],
};

const NAME_FONT = `600 ${SIZES.label}px ${FIGURE_FACE}`;
const figureFont = (missed: boolean): string => `${missed ? 650 : 400} ${SIZES.label}px ${FIGURE_FACE}`;

/** One line on the screen: its left, its top, its width. */
type Slot = readonly [left: number, top: number, wide: number];

interface Place {
  readonly slots: readonly Slot[];
  readonly align: 'left' | 'right' | 'center';
  /** It crosses the edge of the chip or its ticks. */
  readonly crosses: boolean;
}

/** Names and figures beside the ports; where both have no room the name alone, where that has none nothing. */
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
  const chip = chipOnScreen(spatial.chip.outline, camera, size);
  const free = (on: Room, slots: readonly Slot[]): boolean =>
    slots.every(([left, top, wide]) => on.free(left - 2, top, wide + 4, LINE));

  const placeFor = (
    [x, y]: readonly [number, number],
    away: number,
    side: PortWords['side'],
    /** px of each line. */
    widths: readonly number[],
  ): Place | null => {
    const wide = Math.max(...widths);
    let crossing: Place | null = null;
    for (const where of OTHERS[side]) {
      if (where === 'around' && widths.length < 2) continue;
      if (where === 'beyond' && y >= chip.bottom) continue;
      const tops = topsOf(where, y, away, widths.length, chip.bottom);
      const left =
        where === 'right'
          ? x + away
          : where === 'left'
            ? x - away - wide
            : overOf(x, wide, chip.left, chip.right);
      if (left <= 2 || left + wide >= size.width - 2) continue;
      const align = where === 'right' ? 'left' : where === 'left' ? 'right' : 'center';
      const share = { left: 0, center: 0.5, right: 1 }[align];
      const slots = widths.map((own, i): Slot => [left + share * (wide - own), tops[i]!, own]);
      // where ports crowd this says no at once, and what is drawn need not be searched
      if (!free(room, slots)) continue;
      if (where !== side) {
        const under = covered(left, tops[0]!, wide, tops.at(-1)! + LINE - tops[0]!);
        if (under > (where === 'around' ? 1 : 0)) continue;
      }
      if (free(edge, slots)) return { slots, align, crosses: false };
      crossing ??= { slots, align, crosses: true };
    }
    return crossing;
  };

  const take = ({ slots }: Place): void => {
    for (const [left, top, wide] of slots) room.fill(left - 2, top, wide + 4, LINE);
  };
  const say = (text: string, { slots, align, crosses }: Place, line: number, colour: string): void => {
    const [left, top, wide] = slots[line]!;
    const at = align === 'left' ? left : align === 'right' ? left + wide : left + wide / 2;
    ctx.textAlign = align;
    if (onPicture || crosses) rimText(ctx, text, at, top + LINE / 2, palette);
    ctx.fillStyle = colour;
    ctx.fillText(text, at, top + LINE / 2);
  };

  ctx.textBaseline = 'middle';
  const left: (() => void)[] = [];
  for (const { port, name, figure, side, missed } of words) {
    const at = toScreen(camera, size, port.at);
    if (!onScreen(at, size, 80)) continue;
    const away = Math.max(LEAST_RING, (port.diameter / 2) * camera.scale) + 6;
    const short = name.length > 24 ? `${name.slice(0, 23)}…` : name;
    ctx.font = NAME_FONT;
    const nameWide = ctx.measureText(short).width;
    ctx.font = figureFont(missed);
    const both = placeFor(at, away, side, [nameWide, ctx.measureText(figure).width]);
    if (both) {
      take(both);
      say(figure, both, 1, missed ? palette.alarm : palette.soft);
      ctx.font = NAME_FONT;
      say(short, both, 0, palette.ink);
    } else
      left.push(() => {
        const alone = placeFor(at, away, side, [nameWide]);
        if (!alone) return;
        take(alone);
        say(short, alone, 0, missed ? palette.alarm : palette.ink);
      });
  }
  ctx.font = NAME_FONT;
  // names alone take only what words with figures leave
  for (const again of left) again();
}

/** Left of what stands over or under the port: about its middle, aside where that keeps it off the upright edges. */
function overOf(x: number, wide: number, chipLeft: number, chipRight: number): number {
  const middle = x - wide / 2;
  const aside = Math.min(Math.max(middle, chipLeft + 4), chipRight - 4 - wide);
  return aside <= x - LEAST_RING && aside + wide >= x + LEAST_RING ? aside : middle;
}

/** Tops of the lines, upper first. */
function topsOf(where: Side, y: number, away: number, lines: number, bottom: number): readonly number[] {
  const from = (top: number): readonly number[] => Array.from({ length: lines }, (_, i) => top + i * LINE);
  switch (where) {
    case 'left':
    case 'right':
      return from(y - (lines * LINE) / 2);
    case 'around':
      return [y - away - LINE, y + away];
    case 'above':
      return from(y - away - lines * LINE);
    case 'below':
      return from(y + away);
    case 'beyond': {
      const first = y + away;
      const close = bottom - 1 - lines * LINE;
      if (close >= first - CLOSER) return from(Math.min(close, first));
      // what would cross the lower edge goes beneath its ticks
      const beneath = bottom + TICKS + 1;
      if (first + LINE > bottom - 1) return from(beneath);
      return [first, beneath].slice(0, lines);
    }
  }
}
