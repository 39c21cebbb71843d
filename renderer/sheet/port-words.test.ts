import { expect, test } from 'vitest';
import { PALETTES } from '../look/tokens.ts';
import { emptyChip } from '../testing/chips.ts';
import { fitted, INSET, toScreen } from './camera.ts';
import { TICKS, takeEdge } from './edge.ts';
import { drawPortWords } from './port-words.ts';
import { Room } from './room.ts';
import { Spatial } from './spatial.ts';
import { portWords } from './words.ts';

/** A canvas that only remembers which texts were set where; 6 px a sign. */
function listening() {
  const said: { readonly text: string; readonly y: number }[] = [];
  const rimmed: string[] = [];
  const ctx = {
    measureText: (text: string) => ({ width: 6 * text.length }),
    fillText: (text: string, _: number, y: number) => said.push({ text, y }),
    strokeText: (text: string) => rimmed.push(text),
  } as unknown as CanvasRenderingContext2D;
  return { ctx, said, rimmed };
}

const MM = 1e6;

/** Three outlets side by side, each fed from above, so many mm from the lower edge of a slide. */
function outlets(from: number, onPicture = false, width = 900) {
  const at = (i: number, y: number) => [(20 + 12 * i) * MM, y * MM] as const;
  const chip = {
    ...emptyChip(),
    outline: { width: 76 * MM, height: 26 * MM },
    channels: [0, 1, 2].map((i) => ({
      id: `c${i}`,
      layer: 'flow',
      path: [at(i, 20), at(i, from)],
      width: [100_000, 100_000] as const,
      bendRadius: 0,
    })),
    ports: [0, 1, 2].map((i) => ({
      id: `out ${i}`,
      at: at(i, from),
      layer: 'flow',
      diameter: 1_000_000,
      drive: { kind: 'pressure', pressure: 0 } as const,
      tubing: [],
    })),
  };
  const size = { width, height: 360 };
  const camera = fitted({ left: 0, bottom: 0, right: 76 * MM, top: 26 * MM }, size, INSET);
  const edge = new Room();
  takeEdge(edge, chip, camera, size);
  const { ctx, said, rimmed } = listening();
  const words = portWords(chip, null).map((entry) => ({ ...entry, figure: '12.5 % ± 1.1 %' }));
  drawPortWords(ctx, words, camera, size, PALETTES.light, new Room(), edge, new Spatial(chip), onPicture);
  return { said, rimmed, bottom: toScreen(camera, size, [0, 0])[1] };
}

test('words of ports near the lower edge stand above or beneath its ticks, never across them', () => {
  for (const from of [1.2, 2, 3, 4, 5, 8]) {
    const { said, bottom } = outlets(from);
    expect(
      said.filter(({ text }) => text.startsWith('out')),
      `${from} mm`,
    ).toHaveLength(3);
    expect(said, `${from} mm`).toHaveLength(6);
    for (const { text, y } of said) {
      // lines are 14 px high, set about their middle
      const clear = y + 7 <= bottom || y - 7 >= bottom + TICKS;
      expect(clear, `${text}, ${from} mm from the edge: ${y} beside ${bottom}`).toBe(true);
    }
  }
});

test('words over a picture have a rim of ground round each sign, and need none on the bare chip', () => {
  expect(outlets(8).rimmed).toEqual([]);
  const { said, rimmed } = outlets(8, true);
  expect(rimmed).toEqual(said.map(({ text }) => text));
});

test('where names and figures have no room beside one another, every port keeps its name', () => {
  const { said } = outlets(8, false, 560);
  expect(said.filter(({ text }) => text.startsWith('out'))).toHaveLength(3);
  const figures = said.filter(({ text }) => text.startsWith('12.5'));
  expect(figures.length).toBeGreaterThan(0);
  expect(figures.length).toBeLessThan(3);
});
