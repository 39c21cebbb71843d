import { expect, test } from 'vitest';
import type { Problem } from '../problem/problem.ts';
import type { Chip, KeepOut } from './chip.ts';
import { readDescription } from './description.ts';
import { writeDescription } from './description-write.ts';
import { applyEdit, type ChipEdit, makeEdit } from './edit.ts';
import { readEdit } from './edit-read.ts';
import { readChip } from './schema-chip.ts';

const TEXT = `{
  "format": "channelwright-chip", "version": 1,
  "name": "kept",
  "lengthUnit": "um",
  "outline": { "width": 20000, "height": 10000 },
  "layers": [
    { "id": "flow", "depth": 50, "profile": { "kind": "rectangle" }, "fillet": 0 }
  ],
  "channels": [
    { "id": "a", "layer": "flow", "path": [[1000, 5000], [19000, 5000]], "width": 100 }
  ],
  "ports": [
    { "id": "in", "at": [1000, 5000], "layer": "flow", "diameter": 0, "drive": { "flow": "1 uL/min" } },
    { "id": "out", "at": [19000, 5000], "layer": "flow", "diameter": 0, "drive": { "pressure": "0 Pa" } }
  ],
  "fluid": { "viscosity": "1 mPa.s", "density": "1000 kg/m3" }`;
const KEPT = `${TEXT},
  "keepOuts": [
    { "id": "clamp", "outline": [[0, 0], [3000, 0], [3000, 2000]], "clearance": 250, "note": "bolt head" },
    { "id": "window", "layer": "flow", "outline": [[8000.5, 1000], [9000, 1000], [8500, 3000]] }
  ]
}
`;
const chip = readDescription(KEPT);

test('a description with keep-outs is written back byte for byte, and as data it is the same chip', () => {
  expect(chip.keepOuts).toEqual([
    {
      id: 'clamp',
      outline: [
        [0, 0],
        [3_000_000, 0],
        [3_000_000, 2_000_000],
      ],
      clearance: 250_000,
      note: 'bolt head',
    },
    {
      id: 'window',
      layer: 'flow',
      outline: [
        [8_000_500, 1_000_000],
        [9_000_000, 1_000_000],
        [8_500_000, 3_000_000],
      ],
      clearance: 0,
    },
  ]);
  const written = writeDescription(chip);
  expect(written.slice(written.indexOf('"keepOuts"'))).toBe(KEPT.slice(KEPT.indexOf('"keepOuts"')));
  expect(writeDescription(readDescription(written))).toBe(written);
  expect(readChip(structuredClone(chip))).toEqual(chip);
});

test('without keep-outs nothing of a description changes, and an empty list is none', () => {
  const plain = readDescription(`${TEXT}\n}\n`);
  expect(Object.hasOwn(plain, 'keepOuts')).toBe(false);
  expect(writeDescription(plain)).not.toContain('keepOuts');
  expect(readDescription(`${TEXT}, "keepOuts": []}`)).toStrictEqual(plain);
  expect(readChip({ ...structuredClone(plain), keepOuts: [] })).toStrictEqual(plain);
  const written = writeDescription(chip);
  expect(writeDescription(plain)).toBe(`${written.slice(0, written.indexOf(',\n  "keepOuts"'))}\n}\n`);
});

const edit = (...changes: ChipEdit['changes']): ChipEdit => readEdit({ label: 'x', changes });
const part = chip.keepOuts![1]!;

test('keep-outs are put in, moved, renamed, taken away, and each step undone', () => {
  const steps: ((at: Chip) => ChipEdit)[] = [
    () => edit({ kind: 'remove', list: 'keepOuts', id: 'clamp' }),
    () =>
      edit({
        kind: 'put',
        list: 'keepOuts',
        id: 'window',
        part: { ...part, outline: part.outline.map(([x, y]) => [x + 1000, y] as const), clearance: 7 },
      }),
    () => edit({ kind: 'rename', list: 'keepOuts', id: 'window', to: 'sensor' }),
    () => edit({ kind: 'rename', list: 'layers', id: 'flow', to: 'lower' }),
    () => edit({ kind: 'remove', list: 'keepOuts', id: 'sensor' }),
    () => edit({ kind: 'insert', list: 'keepOuts', index: 0, part: { ...part, layer: 'lower' } }),
  ];
  let now = chip;
  const back: ChipEdit[] = [];
  for (const step of steps) {
    const made = makeEdit(now, step(now));
    expect(applyEdit(made.chip, made.inverse)).toStrictEqual(now);
    back.unshift(made.inverse);
    now = made.chip;
  }
  expect(now.keepOuts).toEqual([{ ...part, layer: 'lower' }]);
  for (const inverse of back) now = applyEdit(now, inverse);
  expect(now).toStrictEqual(chip);
  // the last one gone leaves a chip as if there had never been one
  const none = applyEdit(
    chip,
    edit(
      { kind: 'remove', list: 'keepOuts', id: 'clamp' },
      { kind: 'remove', list: 'keepOuts', id: 'window' },
    ),
  );
  expect(none).toStrictEqual(readDescription(`${TEXT}\n}\n`));
});

const entry = (more: Partial<Record<keyof KeepOut, unknown>> & { size?: unknown }): string =>
  `${TEXT}, "keepOuts": [${JSON.stringify({
    id: 'k',
    outline: [
      [0, 0],
      [10, 0],
      [0, 10],
    ],
    ...more,
  })}]}`;

test.each([
  ['a layer that is not there', entry({ layer: 'flaw' }), /"flaw".*no such layer/, /"flow"/],
  [
    'an outline that crosses itself',
    entry({
      outline: [
        [0, 0],
        [10, 10],
        [10, 0],
        [0, 10],
      ],
    }),
    /crosses/,
    /Order/,
  ],
  [
    'an outline that encloses nothing',
    entry({
      outline: [
        [0, 0],
        [10, 0],
      ],
    }),
    /encloses nothing/,
    /three points/,
  ],
  ['a clearance below zero', entry({ clearance: -1 }), /clearance|zero|negative/i, /./],
  ['a clearance in another kind of unit', entry({ clearance: '5 Pa' }), /Pa/, /./],
  ['an unknown key', entry({ size: 3 }), /size.*no known key/, /layer|outline/],
  ['an id of a channel', entry({ id: 'a' }), /"a" is borne/, /keep-out an id of its own/],
  ['no outline', `${TEXT}, "keepOuts": [{"id": "k"}]}`, /"outline"/, /Add/],
  ['too many', `${TEXT}, "keepOuts": [${'{},'.repeat(2000)}{}]}`, /2,000/, /./],
  [
    'a limit that names it',
    `${TEXT}, "keepOuts": [{"id": "k", "outline": [[0, 0], [10, 0], [0, 10]]}], "limits": [{"name": "cells", "shear": "1 Pa", "where": "k"}]}`,
    /"k"/,
    /./,
  ],
])('%s is refused in words', (_, text, what, remedy) => {
  let problem: Problem | null = null;
  try {
    readDescription(text);
  } catch (error) {
    problem = error as Problem;
  }
  expect(problem).not.toBeNull();
  expect(`${problem!.where} ${problem!.what}`).toMatch(what);
  expect(problem!.remedy).toMatch(remedy);
});
