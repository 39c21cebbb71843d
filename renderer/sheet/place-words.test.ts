import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { PALETTES } from '../look/tokens.ts';
import { teeChip } from '../testing/chips.ts';
import { fitted, INSET, toScreen } from './camera.ts';
import { takeEdge } from './edge.ts';
import { drawPlaceWords, evenLines, linesOf } from './place-words.ts';
import { Room } from './room.ts';
import { Spatial } from './spatial.ts';
import type { PlaceWords } from './words.ts';

const MM = 1e6;
/** px of a sign, about that of the larger face; words at the foot of the sheet would cross its legend. */
const SIGN = 7.2;
const FOOT = 58;

interface Line {
  readonly text: string;
  readonly left: number;
  readonly right: number;
  readonly y: number;
}

/** A canvas that only remembers which texts were set where, and how many rings. */
function listening() {
  const lines: Line[] = [];
  let rings = 0;
  const ctx = {
    textAlign: 'left',
    measureText: (text: string) => ({ width: SIGN * text.length }),
    fillText(text: string, x: number, y: number) {
      const wide = SIGN * text.length;
      const left = this.textAlign === 'right' ? x - wide : x;
      lines.push({ text, left, right: left + wide, y });
    },
    beginPath: () => undefined,
    arc: () => {
      rings += 1;
    },
    moveTo: () => undefined,
    lineTo: () => undefined,
    stroke: () => undefined,
    fillRect: () => undefined,
  };
  return { ctx: ctx as unknown as CanvasRenderingContext2D, lines, rings: () => rings };
}

const LONG =
  'Channels of different depths meet in junction 1, which is solved at one depth between them: resistance inside may be 8.2\u00a0% off.';
const DO = 'Take that for the error of the split there, or give what meets there one depth.';

function set(
  places: readonly (readonly [number, number])[],
  size: { width: number; height: number },
  chambers: Chip['chambers'] | null = null,
  worded?: (entry: PlaceWords) => boolean,
) {
  const drawn = teeChip();
  const chip: Chip = {
    ...drawn,
    ...(chambers && { chambers, channels: [], ports: [] }),
    outline: { width: 76 * MM, height: 26 * MM },
  };
  const camera = fitted({ left: 0, bottom: 0, right: 76 * MM, top: 26 * MM }, size, INSET);
  const edge = new Room();
  takeEdge(edge, chip, camera, size);
  const { ctx, lines, rings } = listening();
  const words: PlaceWords[] = places.map(([x, y], i) => ({
    at: [x * MM, y * MM],
    head: `${i}. ${LONG}`,
    more: DO,
    alarm: i === 0,
    where: '',
  }));
  drawPlaceWords(ctx, words, camera, size, PALETTES.light, new Room(), edge, new Spatial(chip), worded);
  return { lines, rings: rings(), chip, camera, edge };
}

/** Sizes of the sheet beside a card: pages of 1280 by 720 and of 1440 by 900. */
const SIZES = [
  { width: 973, height: 355 },
  { width: 1095, height: 420 },
];

test('long words of findings stay in the sheet, off the graduated edge and off the legend, wherever their place is', () => {
  for (const size of SIZES)
    for (let x = 1; x < 76; x += 5)
      for (let y = 1; y < 26; y += 4) {
        const { lines, edge } = set([[x, y]], size);
        const where = `${x}, ${y} mm at ${size.width} px`;
        expect(lines.length, where).toBeGreaterThan(2);
        for (const { text, left, right, y: middle } of lines) {
          expect(left, `${where}: ${text}`).toBeGreaterThanOrEqual(0);
          expect(right, `${where}: ${text}`).toBeLessThanOrEqual(size.width);
          expect(middle - 8, `${where}: ${text}`).toBeGreaterThanOrEqual(0);
          expect(middle + 8, `${where}: ${text}`).toBeLessThanOrEqual(size.height - FOOT);
          expect(edge.free(left, middle - 7, right - left, 14), `${where}: ${text}`).toBe(true);
        }
        expect(lines.map(({ text }) => text).join(' '), where).toBe(`0. ${LONG} ${DO}`);
      }
});

test('of what is in the hand only limits speak on the sheet; what else is found keeps its ring', () => {
  const size = SIZES[0]!;
  const places = [
    [20, 13],
    [50, 13],
  ] as const;
  const { lines, rings } = set(places, size, null, ({ alarm }) => alarm);
  expect(lines.map(({ text }) => text).join(' ')).toBe(`0. ${LONG} ${DO}`);
  expect(rings).toEqual(set(places, size).rings);
});

test('words of several findings keep off one another', () => {
  const size = SIZES[0]!;
  const { lines } = set(
    [
      [20, 13],
      [24, 13],
      [50, 13],
    ],
    size,
  );
  expect(lines.filter(({ text }) => /^\d\./.test(text)).length).toBeGreaterThan(1);
  for (const [i, a] of lines.entries())
    for (const b of lines.slice(i + 1)) {
      const across = a.left < b.right && b.left < a.right;
      expect(across && Math.abs(a.y - b.y) < 14, `${a.text} / ${b.text}`).toBe(false);
    }
});

test('words keep off what is drawn where there is room beside it', () => {
  const corners = [
    [20, 8],
    [56, 8],
    [56, 18],
    [20, 18],
  ] as const;
  const outline = corners.map(([x, y]) => [x * MM, y * MM] as const);
  const chamber = { id: 'wide', layer: 'flow', outline };
  const { lines, camera } = set(
    [
      [62, 13],
      [62.1, 13],
    ],
    SIZES[0]!,
    [chamber],
  );
  expect(lines.filter(({ text }) => /^\d\./.test(text))).toHaveLength(2);
  const [left, top] = toScreen(camera, SIZES[0]!, outline[3]!);
  const [right, bottom] = toScreen(camera, SIZES[0]!, outline[1]!);
  for (const line of lines)
    expect(
      line.left < right && line.right > left && line.y + 7 > top && line.y - 7 < bottom,
      `${line.text} at ${line.y}, the chamber from ${top} to ${bottom}`,
    ).toBe(false);
});

test('where words would hide what is drawn only what is missed speaks; the ring of what is found stays', () => {
  // as at 200 % on a small page: a chip of a few words' width, full of chambers
  const small = { width: 620, height: 300 };
  const cells = Array.from({ length: 60 }, (_, i) => {
    const [x, y] = [(4 + 7 * (i % 10)) * MM, (2 + 4 * Math.floor(i / 10)) * MM];
    const outline = [
      [x, y],
      [x + 5 * MM, y],
      [x + 5 * MM, y + 2 * MM],
      [x, y + 2 * MM],
    ] as const;
    return { id: `c${i}`, layer: 'flow', outline };
  });
  const { lines, rings } = set(
    [
      [20, 13],
      [55, 13],
    ],
    small,
    cells,
  );
  expect(rings).toBe(2);
  expect(lines.some(({ text }) => text.startsWith('0.'))).toBe(true);
  expect(lines.some(({ text }) => text.startsWith('1.'))).toBe(false);
});

test('several findings at one place have one ring', () => {
  expect(set([[20, 13]], SIZES[1]!).rings).toBe(1);
  const near = set(
    [
      [20, 13],
      [20.2, 13.1],
    ],
    SIZES[1]!,
  );
  expect(near.rings).toBe(1);
  const [x, y] = toScreen(near.camera, SIZES[1]!, [20 * MM, 13 * MM]);
  for (const { left, right, y: middle } of near.lines)
    expect(left < x + 11 && right > x - 11 && Math.abs(middle - y) < 18).toBe(false);
});

test('a sentence is parted at its spaces, and cut only where it has no more lines', () => {
  expect(linesOf('one two three four', 8, 4)).toEqual(['one two', 'three', 'four']);
  expect(linesOf('one two three four', 8, 2)).toEqual(['one two', 'three …']);
  expect(linesOf('may be 5.9\u00a0% off', 8, 4)).toEqual(['may be', '5.9\u00a0%', 'off']);
});

test('lines are as even as their number lets them be', () => {
  const text =
    'serpentine 1 ends 335 mm beyond the last place where anything flows, with no port: air stays in it when the chip is filled.';
  expect(linesOf(text, 40, 4).at(-1)).toBe('filled.');
  const even = evenLines(text, 40, 4);
  expect(even.join(' ')).toBe(text);
  expect(even).toHaveLength(4);
  const longest = Math.max(...even.map((line) => line.length));
  expect(longest).toBeLessThan(36);
  // one sign less, and there would be a line more
  expect(linesOf(text, longest - 1, 9).length).toBeGreaterThan(4);
  // what is cut stays as it is, and one line has nothing to share
  expect(evenLines(text, 26, 4)).toEqual(linesOf(text, 26, 4));
  expect(evenLines('one two', 40, 4)).toEqual(['one two']);
});
