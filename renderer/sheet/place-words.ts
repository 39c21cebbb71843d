import { FIGURE_FACE, type Palette, SIZES, TEXT_FACE } from '../look/tokens.ts';
import { type Camera, chipOnScreen, type Size, toScreen } from './camera.ts';
import { coverage, onScreen } from './marks.ts';
import type { Room } from './room.ts';
import type { Spatial } from './spatial.ts';
import type { PlaceWords } from './words.ts';

const RING = 11;
/** px of a line of the head and of what is smaller beneath it. */
const HEAD = 18;
const MORE = 16;
/** px at the foot of the sheet, where the legend and the bar of the scale are. */
const FOOT = 58;
/** What it costs to cover a run of a channel or a chamber: more than to stand far off. */
const COVERS = 6;
/** Words that would cost more hide more than they say: the ring stays, and what is missed speaks all the same. */
const DEAR = 36;
/** px round the words that are theirs. */
const RIM = 4;
/** px from the words to what is drawn, its least drawn width and the mark of its choice: at their ends, over and under. */
const CLEAR = 6;
const CLEAR_OVER = 3;

/** Signs to a line, of the head and of what is beneath: as it reads best, wide and low, narrow and high. */
const WRAPS = [
  [40, 60],
  [58, 84],
  [80, 110],
  [26, 40],
] as const;
/** Lines at the most; the card has the whole of it. */
const LINES = 4;

/** px: how far above or below their place words may stand; from the third on a line leads to them. */
const FAR = [0, 10, 34, 72, 120, 180] as const;

/** px from the middle of the ring: words farther off are led to by a line. */
const LED = RING + 16;
/** px: how far to either side; a line leads to them. */
const ASIDE = [90, 180, 280, 400, 540] as const;

interface Laid {
  readonly heads: readonly string[];
  readonly rests: readonly string[];
  readonly wide: number;
  readonly high: number;
  /** What it costs to set them so. */
  readonly cost: number;
}

interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: boolean;
  readonly laid: Laid;
  readonly cost: number;
}

/**
 * A ring round each place and, where it is `worded`, the words beside it, in the drawing's own area: off its edge and
 * off one another.
 */
export function drawPlaceWords(
  ctx: CanvasRenderingContext2D,
  words: readonly PlaceWords[],
  camera: Camera,
  size: Size,
  palette: Palette,
  room: Room,
  edge: Room,
  spatial: Spatial,
  worded: (entry: PlaceWords) => boolean = () => true,
): void {
  const covered = coverage(camera, size, spatial);
  const chip = chipOnScreen(spatial.chip.outline, camera, size);
  const inner = {
    left: Math.max(0, chip.left),
    right: Math.min(size.width, chip.right),
    top: Math.max(0, chip.top),
    bottom: Math.min(size.height - FOOT, chip.bottom),
  };
  const rings: (readonly [number, number])[] = [];
  for (const entry of words) {
    const at = toScreen(camera, size, entry.at);
    if (!onScreen(at, size, 20)) continue;
    const colour = entry.alarm ? palette.alarm : palette.ink;
    // one ring where several findings name the same place
    const ring = rings.find(([x, y]) => Math.hypot(x - at[0], y - at[1]) < RING) ?? at;
    ctx.strokeStyle = colour;
    if (ring === at) {
      rings.push(at);
      ctx.lineWidth = 1.5;
      ctx.beginPath();
      ctx.arc(at[0], at[1], RING, 0, 2 * Math.PI);
      ctx.stroke();
    }
    if (!worded(entry)) continue;
    const place = roomBeside(ring, waysToSet(ctx, entry), inner, size, room, edge, covered);
    if (!place) continue;
    const { left, top, right, laid, cost } = place;
    if (cost > DEAR && !entry.alarm) continue;
    const { heads, rests, wide, high } = laid;
    const x = right ? left + wide : left;
    room.fill(left - RIM, top - 2, wide + 2 * RIM, high + 4);
    const near = [held(ring[0], left, left + wide), held(ring[1], top - 2, top + high + 2)] as const;
    const away = Math.hypot(near[0] - ring[0], near[1] - ring[1]);
    if (away > LED) {
      const [ux, uy] = [(near[0] - ring[0]) / away, (near[1] - ring[1]) / away];
      ctx.lineWidth = 1;
      ctx.beginPath();
      ctx.moveTo(ring[0] + RING * ux, ring[1] + RING * uy);
      ctx.lineTo(near[0], near[1]);
      ctx.stroke();
    }
    // a ground under the words, so that channels do not run through them
    ctx.globalAlpha = 0.86;
    ctx.fillStyle = palette.chip;
    ctx.fillRect(left - RIM, top - 2, wide + 2 * RIM, high + 4);
    ctx.globalAlpha = 1;
    ctx.textAlign = right ? 'right' : 'left';
    ctx.textBaseline = 'middle';
    ctx.font = `600 ${SIZES.verdict}px ${TEXT_FACE}`;
    ctx.fillStyle = colour;
    for (const [i, line] of heads.entries()) ctx.fillText(line, x, top + 10 + HEAD * i);
    ctx.font = `${SIZES.label}px ${FIGURE_FACE}`;
    ctx.fillStyle = palette.soft;
    for (const [i, line] of rests.entries()) ctx.fillText(line, x, top + HEAD * heads.length + 9 + MORE * i);
  }
}

/** The lines of each way, kept with the words: they are drawn anew in every frame of a pan. */
const parted = new WeakMap<PlaceWords, readonly Pick<Laid, 'heads' | 'rests'>[]>();

function partedOf(entry: PlaceWords): readonly Pick<Laid, 'heads' | 'rests'>[] {
  let ways = parted.get(entry);
  if (!ways) {
    ways = WRAPS.map(([ofHead, ofMore]) => ({
      heads: evenLines(entry.head, ofHead, LINES),
      rests: evenLines(entry.more, ofMore, LINES),
    }));
    parted.set(entry, ways);
  }
  return ways;
}

function waysToSet(ctx: CanvasRenderingContext2D, entry: PlaceWords): readonly Laid[] {
  const widest = (lines: readonly string[]): number =>
    lines.reduce((most, line) => Math.max(most, ctx.measureText(line).width), 0);
  const ways: Laid[] = [];
  for (const [i, { heads, rests }] of partedOf(entry).entries()) {
    const same = ways.some((way) => way.heads.length === heads.length && way.rests.length === rests.length);
    if (same) continue;
    ctx.font = `600 ${SIZES.verdict}px ${TEXT_FACE}`;
    const headWide = widest(heads);
    ctx.font = `${SIZES.label}px ${FIGURE_FACE}`;
    const cut = [heads, rests].filter((lines) => lines.at(-1)?.endsWith(' …')).length;
    ways.push({
      heads,
      rests,
      wide: Math.max(headWide, widest(rests)),
      high: HEAD * heads.length + MORE * rests.length + 2,
      cost: i * 0.6 + 40 * cut,
    });
  }
  return ways;
}

/** A sentence in lines of about `most` signs, `lines` at the most. */
export function linesOf(text: string, most: number, lines: number): readonly string[] {
  const out: string[] = [];
  // what a space that does not break holds together stays together
  for (const word of text.split(' ')) {
    const last = out.at(-1);
    if (last !== undefined && last.length + 1 + word.length <= most) out[out.length - 1] = `${last} ${word}`;
    else if (out.length < lines) out.push(word);
    else return [...out.slice(0, -1), `${last} …`];
  }
  return out;
}

/** As many lines as `linesOf`, none longer than it must be: the narrower they are, the more places they fit in. */
export function evenLines(text: string, most: number, lines: number): readonly string[] {
  const wide = linesOf(text, most, lines);
  if (wide.length < 2 || wide.at(-1)!.endsWith(' …')) return wide;
  let from = Math.ceil(text.length / wide.length) - 1;
  let even = wide;
  // between `from`, which is too narrow or as good as can be, and `to`, which has just as many lines
  let to = most;
  while (to - from > 1) {
    const middle = Math.floor((from + to) / 2);
    const set = linesOf(text, middle, lines);
    if (set.length === wide.length && !set.at(-1)!.endsWith(' …')) [even, to] = [set, middle];
    else from = middle;
  }
  return even;
}

/** The free place beside that covers least of what is drawn, near before far; null where there is none. */
function roomBeside(
  [x, y]: readonly [number, number],
  ways: readonly Laid[],
  /** The chip on the screen. */
  inner: Frame,
  size: Size,
  room: Room,
  edge: Room,
  covered: (left: number, top: number, width: number, height: number) => number,
): Box | null {
  let best: Box | null = null;
  let least = Number.POSITIVE_INFINITY;
  const attempt = (laid: Laid, left: number, top: number, right: boolean, cheap: number): void => {
    if (cheap >= least) return;
    const box = [left - RIM, top - 2, laid.wide + 2 * RIM, laid.high + 4] as const;
    const [from, over, across, down] = box;
    if (from < 0 || from + across > size.width || over < 0 || over + down > size.height - FOOT) return;
    const ringed = from < x + RING && from + across > x - RING && over < y + RING && over + down > y - RING;
    if (ringed || !room.free(...box) || !edge.free(...box)) return;
    const cost =
      cheap + COVERS * covered(from - CLEAR, over - CLEAR_OVER, across + 2 * CLEAR, down + 2 * CLEAR_OVER);
    if (cost >= least) return;
    least = cost;
    best = { left, top, right, laid, cost };
  };
  for (const laid of ways) {
    const { wide, high } = laid;
    const within = (left: number): number => held(left, inner.left + 6, inner.right - 6 - wide);
    const under = (top: number): number => held(top, inner.top + 4, inner.bottom - 4 - high);
    for (const [step, far] of FAR.entries())
      for (const up of [true, false]) {
        const top = up ? y - high - 4 - far : y + 6 + far;
        for (const right of [true, false]) {
          const left = right ? x - RING - 7 - wide : x + RING + 7;
          const cheap = laid.cost + step;
          attempt(laid, left, top, right, cheap);
          // as near as the edges of the chip let it come
          attempt(laid, left, under(top), right, cheap + 0.6);
          attempt(laid, within(left), top, right, cheap + 0.7);
          attempt(laid, within(left), under(top), right, cheap + 1.2);
        }
        attempt(laid, within(x - wide / 2), under(top), false, laid.cost + step + 1.4);
        for (const [i, aside] of ASIDE.entries())
          for (const way of [1, -1]) {
            const left = way > 0 ? x + RING + 7 + aside : x - RING - 7 - aside - wide;
            attempt(laid, within(left), under(top), way < 0, laid.cost + step + 3 + i);
          }
      }
  }
  return best;
}

interface Frame {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** The number itself, or the nearer end of where it should be; where it cannot be, the first. */
const held = (value: number, from: number, to: number): number => Math.max(from, Math.min(value, to));
