import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { writeDxf } from '../../main/export/mask/dxf.ts';
import { writeGdsii } from '../../main/export/mask/gdsii.ts';
import { writeSvg } from '../../main/export/mask/svg.ts';
import { planPicture } from '../../main/export/note/drawing.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { modelOf } from '../export/mask-drawings.ts';

const demo = join(import.meta.dirname, '../../assets/demo/eight-way-splitter.json');
const bare = readDescription(readFileSync(demo, 'utf8'));
const kept = {
  ...bare,
  keepOuts: [
    {
      id: 'clamp',
      outline: [
        [1_000_000, 1_000_000],
        [7_000_000, 1_000_000],
        [7_000_000, 5_000_000],
        [1_000_000, 5_000_000],
      ] as const,
      clearance: 0,
    },
  ],
};

test('a keep-out is in no mask: every format is the same to the byte', () => {
  const [with_, without] = [modelOf(kept), modelOf(bare)];
  expect(writeDxf(with_)).toBe(writeDxf(without));
  expect(writeSvg({ ...with_, planes: with_.planes.slice(0, 1) })).toBe(
    writeSvg({ ...without, planes: without.planes.slice(0, 1) }),
  );
  expect(Buffer.compare(writeGdsii(with_), writeGdsii(without))).toBe(0);
});

test('a keep-out is hatched in the note’s drawing, inside its outline, and named', () => {
  const options = {
    layers: bare.layers.map(({ id }) => id),
    paper: { width: 180, height: 120 },
    caption: 'The chip.',
    numbers: false,
  };
  const [drawn, plain] = [kept, bare].map((chip) => planPicture(chip, readGraph(chip), options));
  expect(plain!.caption).not.toContain('Hatched');
  expect(drawn!.caption).toContain('Hatched: to stay clear, no part of any mask.');
  const more = drawn!.items.slice(1, 4);
  expect(drawn!.items.length).toBe(plain!.items.length + more.length);
  const [hatch, outline, name] = more;
  if (hatch?.kind !== 'shape' || outline?.kind !== 'shape' || name?.kind !== 'label')
    throw new Error('no hatch');
  expect(outline.dashed).toBe(true);
  expect(name.text).toBe('clamp');
  const [xs, ys] = [0, 1].map((axis) => outline.loops[0]!.map((at) => at[axis as 0 | 1]));
  expect(hatch.loops.length).toBeGreaterThan(3);
  for (const [x, y] of hatch.loops.flat()) {
    expect(x).toBeGreaterThanOrEqual(Math.min(...xs!) - 1e-9);
    expect(x).toBeLessThanOrEqual(Math.max(...xs!) + 1e-9);
    expect(y).toBeGreaterThanOrEqual(Math.min(...ys!) - 1e-9);
    expect(y).toBeLessThanOrEqual(Math.max(...ys!) + 1e-9);
  }
});
