import type { Channel, Chip, Point } from '../../../solver/chip/chip.ts';
import { inUnit, metres } from '../../../solver/chip/units.ts';
import { textWidth } from '../../cli/width.ts';
import type { At, Item, Mm } from './picture.ts';

/** Names and numbers on the plan, put where they cover least. */

interface Box {
  readonly left: Mm;
  readonly right: Mm;
  readonly top: Mm;
  readonly bottom: Mm;
}

export interface Labels {
  readonly chip: Chip;
  readonly frame: Box;
  readonly place: (point: Point) => At;
  readonly scale: number;
  /** Boxes of labels that are already there. */
  readonly taken: Box[];
}

/** More than so many are not labelled one by one. */
const MOST_NAMES = 40;
const MOST_HOLES = 200;
const MOST_CHANNELS = 80;
/** Pieces of centrelines that a place is tried against. */
const MOST_TRIED = 4000;
const HOLE_SIZE: Mm = 2.5;
const CHANNEL_SIZE: Mm = 2.1;

/** Scripts that no face of the note has: their signs stand by their numbers, some columns more than they would take. */
const NUMBERED = /[\p{Script=Han}\p{Script=Hiragana}\p{Script=Katakana}\p{Script=Hangul}]/gu;
const MORE = 6;
/** About as wide as the type sets it: mean advance of the figures' face. */
const widthOf = (text: string, size: Mm): Mm =>
  (textWidth(text) + MORE * (text.match(NUMBERED)?.length ?? 0)) * size * 0.56;

const apart = (a: Box, b: Box): boolean =>
  a.right <= b.left || b.right <= a.left || a.bottom <= b.top || b.bottom <= a.top;

/** Whether a straight stretch meets a box: by its parts inside each side (Liang and Barsky). */
function crosses([x0, y0]: At, [x1, y1]: At, box: Box): boolean {
  // most are all on one side
  if ((x0 < box.left && x1 < box.left) || (x0 > box.right && x1 > box.right)) return false;
  if ((y0 < box.top && y1 < box.top) || (y0 > box.bottom && y1 > box.bottom)) return false;
  let from = 0;
  let to = 1;
  for (const [p, q] of [
    [x0 - x1, x0 - box.left],
    [x1 - x0, box.right - x0],
    [y0 - y1, y0 - box.top],
    [y1 - y0, box.bottom - y0],
  ] as const) {
    if (p === 0) {
      if (q < 0) return false;
      continue;
    }
    const at = q / p;
    if (p < 0) from = Math.max(from, at);
    else to = Math.min(to, at);
    if (from > to) return false;
  }
  return true;
}

function stretches({ chip, place }: Labels): [At, At][] {
  const found: [At, At][] = [];
  for (const { path } of chip.channels)
    for (let i = 1; i < path.length && found.length < MOST_TRIED; i += 1)
      found.push([place(path[i - 1]!), place(path[i]!)]);
  return found;
}

/** A hole of a port or via, with what is to stand beside it. */
export interface Mark {
  readonly at: Point;
  readonly diameter: number;
  /** '' where it has no number. */
  readonly number: string;
  readonly name: string;
}

const short = (name: string): string => {
  const signs = [...name];
  return signs.length > 24 ? `${signs.slice(0, 23).join('')}…` : name;
};

/** Numbers beside holes, with the names where there are few. */
export function holeLabels(labels: Labels, marks: readonly Mark[]): Item[] {
  const named = marks.length <= MOST_NAMES;
  if (marks.length > MOST_HOLES) return [];
  const { place, scale, frame, taken } = labels;
  const lines = stretches(labels);
  const holes = marks.map(({ at, diameter }): Box => {
    const [x, y] = place(at);
    const radius = Math.max(0.9, inUnit(metres(diameter / 2), 'mm') * scale);
    return { left: x - radius, right: x + radius, top: y - radius, bottom: y + radius };
  });
  const placeFor = (text: string, at: Box): { readonly cost: number; readonly box: Box } => {
    const wide = widthOf(text, HOLE_SIZE);
    let best = { cost: Number.POSITIVE_INFINITY, box: at };
    for (const [left, top] of around(at, wide)) {
      const box: Box = { left, right: left + wide, top, bottom: top + HOLE_SIZE };
      let cost = lines.reduce((sum, [a, b]) => sum + (crosses(a, b, box) ? 1 : 0), 0);
      for (const other of [...taken, ...holes]) if (!apart(box, other)) cost += 8;
      if (box.left < frame.left || box.right > frame.right) cost += 4;
      if (box.top < frame.top || box.bottom > frame.bottom) cost += 4;
      if (cost < best.cost) best = { cost, box };
      if (cost === 0) break;
    }
    return best;
  };
  return marks.flatMap(({ number, name }, i): Item[] => {
    const full = named ? `${number} ${short(name)}`.trim() : number;
    if (full === '') return [];
    const at = holes[i]!;
    let text = full;
    let best = placeFor(full, at);
    // a name that would lie across a channel or another name gives way to its number
    if (best.cost > 0 && number !== '' && number !== full) {
      const brief = placeFor(number, at);
      if (brief.cost < best.cost) {
        text = number;
        best = brief;
      }
    }
    taken.push(best.box);
    return [
      {
        kind: 'label',
        at: [best.box.left, best.box.bottom - HOLE_SIZE * 0.18],
        text,
        size: HOLE_SIZE,
        anchor: 'start',
        strong: number !== '',
      },
    ];
  });
}

/** Upper left corners of the places round a hole that a label is tried at, the best to read first. */
function around(at: Box, wide: Mm): readonly At[] {
  const [x, y] = [(at.left + at.right) / 2, (at.top + at.bottom) / 2];
  const gap = 0.9;
  const [above, below] = [at.top - gap - HOLE_SIZE, at.bottom + gap];
  return [
    [x - wide / 2, above],
    [x - wide / 2, below],
    [at.right + gap, y - HOLE_SIZE / 2],
    [at.left - gap - wide, y - HOLE_SIZE / 2],
    [at.right + gap / 2, above],
    [at.left - gap / 2 - wide, above],
    [at.right + gap / 2, below],
    [at.left - gap / 2 - wide, below],
  ];
}

/** Places beside a channel to try its number at: along its longest stretches, the middle first, on either side. */
function* beside(path: Channel['path'], width: number): Generator<readonly [at: Point, away: Point]> {
  const parts = path.slice(1).map((to, i) => {
    const from = path[i]!;
    return { from, to, length: Math.hypot(to[0] - from[0], to[1] - from[1]) };
  });
  parts.sort((a, b) => b.length - a.length);
  for (const { from, to, length } of parts.slice(0, 4)) {
    if (length === 0) continue;
    // upward or to the left first: where a reader looks
    const [nx, ny] = [-(to[1] - from[1]) / length, (to[0] - from[0]) / length];
    const sign = ny > 1e-9 || (Math.abs(ny) <= 1e-9 && nx < 0) ? 1 : -1;
    for (const t of [0.5, 0.35, 0.65, 0.2, 0.8])
      for (const side of [sign, -sign])
        yield [
          [
            from[0] + (to[0] - from[0]) * t + (side * nx * width) / 2,
            from[1] + (to[1] - from[1]) * t + (side * ny * width) / 2,
          ],
          [side * nx, side * ny],
        ];
  }
}

/** Numbers of channels on the layers shown, beside them: a channel that was broken by its number would read as a gap. */
export function channelLabels(labels: Labels, shown: ReadonlySet<string>): Item[] {
  const { chip, place, taken } = labels;
  if (chip.channels.length > MOST_CHANNELS) return [];
  const lines = stretches(labels);
  return chip.channels.flatMap(({ layer, path, width }, i): Item[] => {
    if (!shown.has(layer)) return [];
    const text = String(i + 1);
    const wide = widthOf(text, CHANNEL_SIZE);
    for (const [at, [nx, ny]] of beside(path, Math.max(...width))) {
      const [px, py] = place(at);
      const x = px + nx * (wide / 2 + 0.5);
      const y = py - ny * (CHANNEL_SIZE * 0.36 + 0.5);
      const box: Box = {
        left: x - wide / 2,
        right: x + wide / 2,
        top: y - CHANNEL_SIZE * 0.36,
        bottom: y + CHANNEL_SIZE * 0.36,
      };
      if (taken.some((other) => !apart(box, other)) || lines.some(([a, b]) => crosses(a, b, box))) continue;
      taken.push(box);
      return [
        {
          kind: 'label',
          at: [x, y + CHANNEL_SIZE * 0.36],
          text,
          size: CHANNEL_SIZE,
          anchor: 'middle',
          tone: 'soft',
        },
      ];
    }
    return [];
  });
}
