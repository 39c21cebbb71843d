import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { randomChip } from '../../test/chips/random-chip.ts';
import { randomEdit, seeded } from '../../test/chips/random-edit.ts';
import { Problem } from '../problem/problem.ts';
import type { Chip } from './chip.ts';
import { readDescription } from './description.ts';
import { writeDescription } from './description-write.ts';
import { applyEdit, type ChipEdit, invertEdit, makeEdit } from './edit.ts';
import { readEdit } from './edit-read.ts';
import { readChip } from './schema-chip.ts';

const CHIP = readDescription(`{
  "format": "channelwright-chip", "version": 1, "name": "tee",
  "outline": { "width": 20000, "height": 10000 },
  "layers": [{ "id": "flow", "depth": 50 }, { "id": "upper", "depth": 30, "profile": { "kind": "circle" } }],
  "channels": [
    { "id": "a", "layer": "flow", "path": [[0, 0], [5000, 0]], "width": 100 },
    { "id": "b", "layer": "flow", "path": [[5000, 0], [9000, 4000]], "width": 100 },
    { "id": "c", "layer": "flow", "path": [[5000, 0], [9000, -4000]], "width": 100 }
  ],
  "vias": [{ "id": "v", "at": [9000, 4000], "layers": ["flow", "upper"], "diameter": 200 }],
  "ports": [
    { "id": "in", "at": [0, 0], "layer": "flow", "drive": { "flow": "10 uL/min" } },
    { "id": "left", "at": [9000, 4000], "layer": "flow", "drive": { "pressure": 0 } },
    { "id": "right", "at": [9000, -4000], "layer": "flow", "drive": { "pressure": 0 } }
  ],
  "fluid": { "name": "water", "temperature": "25 degC" },
  "targets": [{ "port": "left", "share": 0.5, "within": "2 %" }, { "channel": "b", "flow": "5 uL/min", "within": "2 %" }],
  "limits": [
    { "name": "all", "shear": "1 Pa" },
    { "name": "one", "shear": "1 Pa", "where": "b" },
    { "name": "way", "shear": "1 Pa", "where": ["in", "left"] }
  ]
}`);

const edit = (...changes: ChipEdit['changes']): ChipEdit => ({ label: 'a test', changes });
const ids = (entries: readonly { readonly id: string }[]): string => entries.map(({ id }) => id).join(' ');

describe('one edit', () => {
  test('a key that may be absent is given, taken away and given back', () => {
    const first = makeEdit(CHIP, edit({ kind: 'set', key: 'process', value: { kind: 'milling' } }));
    expect(first.chip.process).toEqual({ kind: 'milling' });
    expect(applyEdit(first.chip, readEdit(JSON.parse(JSON.stringify(first.inverse))))).toEqual(CHIP);
    const gone = makeEdit(first.chip, edit({ kind: 'set', key: 'process', value: null }));
    expect(gone.chip).not.toHaveProperty('process');
    expect(readChip(gone.chip)).toEqual(CHIP);
    expect(applyEdit(gone.chip, gone.inverse)).toEqual(first.chip);
  });
  test('a new name is carried into what is accepted', () => {
    const accepted = ['b', 'b#2', 'bb', 'channel:b', 'port:b'].map((where) => ({
      kind: 'x',
      where,
      reason: 'y',
    }));
    const chip = applyEdit(CHIP, edit({ kind: 'set', key: 'accepted', value: accepted }));
    const next = applyEdit(chip, edit({ kind: 'rename', list: 'channels', id: 'b', to: 'd' }));
    expect(next.accepted!.map(({ where }) => where)).toEqual(['d', 'd#2', 'bb', 'channel:d', 'port:b']);
  });
  test('puts, inserts, removes and sets, and the inverse leads back', () => {
    const wide = { ...CHIP.channels[1]!, width: [200_000, 200_000] as const };
    const more = { ...CHIP.channels[0]!, id: 'd' };
    const { chip, inverse } = makeEdit(
      CHIP,
      edit(
        { kind: 'put', list: 'channels', id: 'b', part: wide },
        { kind: 'insert', list: 'channels', index: 1, part: more },
        { kind: 'remove', list: 'channels', id: 'c' },
        { kind: 'set', key: 'note', value: 'wider' },
      ),
    );
    expect(ids(chip.channels)).toBe('a d b');
    expect(chip.channels[2]).toBe(wide);
    expect(chip.note).toBe('wider');
    expect(makeEdit(chip, inverse).chip).toStrictEqual(CHIP);
    expect(inverse.label).toBe('a test');
  });

  test('what did not change keeps its identity', () => {
    const chip = applyEdit(
      CHIP,
      edit({ kind: 'put', list: 'channels', id: 'b', part: { ...CHIP.channels[1]!, bendRadius: 5 } }),
    );
    expect(chip.channels[0]).toBe(CHIP.channels[0]);
    expect(chip.channels[2]).toBe(CHIP.channels[2]);
    expect(chip.ports).toBe(CHIP.ports);
    expect(chip.layers).toBe(CHIP.layers);
    expect(chip.fluid).toBe(CHIP.fluid);
  });

  test('many at once come back to their places', () => {
    const chip: Chip = {
      ...CHIP,
      channels: Array.from({ length: 50 }, (_, i) => ({ ...CHIP.channels[0]!, id: `c${i}` })),
      targets: [],
      limits: [],
    };
    const some = [3, 41, 7, 0, 49, 20, 21, 22, 8, 9].map((i) => `c${i}`);
    const { chip: less, inverse } = makeEdit(
      chip,
      edit(...some.map((id) => ({ kind: 'remove', list: 'channels', id }) as const)),
    );
    expect(less.channels).toHaveLength(40);
    const back = makeEdit(less, inverse);
    expect(back.chip).toStrictEqual(chip);
    back.chip.channels.forEach((channel, i) => {
      expect(channel).toBe(chip.channels[i]);
    });
    expect(applyEdit(back.chip, back.inverse)).toStrictEqual(less);
  });

  test('a renamed part is followed by every reference to it', () => {
    const rename = (list: 'layers' | 'channels' | 'ports', id: string, to: string): Chip =>
      applyEdit(CHIP, edit({ kind: 'rename', list, id, to }));
    const layer = rename('layers', 'flow', 'floor');
    expect(layer.channels.every((channel) => channel.layer === 'floor')).toBe(true);
    expect(layer.vias[0]!.layers).toEqual(['floor', 'upper']);
    expect(layer.ports.every((port) => port.layer === 'floor')).toBe(true);
    const channel = rename('channels', 'b', 'branch');
    expect(channel.targets[1]).toMatchObject({ channel: 'branch' });
    expect(channel.limits[1]!.where).toBe('branch');
    expect(channel.targets[0]).toBe(CHIP.targets[0]);
    const port = rename('ports', 'left', 'waste');
    expect(port.targets[0]).toMatchObject({ port: 'waste' });
    expect(port.limits[2]!.where).toEqual(['in', 'waste']);
    expect(port.limits[1]).toBe(CHIP.limits[1]);
  });

  test('a layer that takes the name of a limited channel, and leaves its own to another, gets it back', () => {
    const chip = applyEdit(CHIP, edit({ kind: 'rename', list: 'channels', id: 'a', to: 'flow' }));
    const made = makeEdit(chip, edit({ kind: 'rename', list: 'layers', id: 'flow', to: 'b' }));
    expect(made.chip.limits[1]).toBe(CHIP.limits[1]);
    expect(applyEdit(made.chip, made.inverse)).toStrictEqual(chip);
  });

  const REFUSED: [name: string, changes: ChipEdit['changes'], where: string, what: RegExp][] = [
    [
      'removing what is not there',
      [{ kind: 'remove', list: 'channels', id: 'x' }],
      'changes[0].id (x)',
      /names "x"/,
    ],
    [
      'removing twice',
      [
        { kind: 'remove', list: 'vias', id: 'v' },
        { kind: 'remove', list: 'vias', id: 'v' },
      ],
      'changes[1].id (v)',
      /names "v"/,
    ],
    [
      'an id that is there',
      [{ kind: 'insert', list: 'channels', index: 0, part: CHIP.channels[0]! }],
      'changes[0]',
      /brings "a" into channels/,
    ],
    [
      'an id of another list',
      [{ kind: 'insert', list: 'channels', index: 0, part: { ...CHIP.channels[0]!, id: 'in' } }],
      'ports[0].id (in)',
      /"in" is borne by channels\[0\] too/,
    ],
    [
      'a place beyond the end',
      [{ kind: 'insert', list: 'channels', index: 4, part: { ...CHIP.channels[0]!, id: 'z' } }],
      'changes[0].index',
      /no place in channels/,
    ],
    [
      'what a target names',
      [{ kind: 'remove', list: 'channels', id: 'b' }],
      'targets[1].channel',
      /names "b", but there is no such channel/,
    ],
    [
      'a layer in use',
      [{ kind: 'remove', list: 'layers', id: 'flow' }],
      'channels[0].layer (a)',
      /no such layer/,
    ],
    [
      'a width of none',
      [{ kind: 'put', list: 'channels', id: 'a', part: { ...CHIP.channels[0]!, width: [0, 0] } }],
      'channels[0].width (a)',
      /must be above zero/,
    ],
    [
      'a layer that its channels do not suit',
      [
        {
          kind: 'put',
          list: 'layers',
          id: 'flow',
          part: { ...CHIP.layers[0]!, profile: { kind: 'circle' } },
        },
      ],
      'channels[0].width (a)',
      /round bores/,
    ],
    [
      'renaming to an id in use',
      [{ kind: 'rename', list: 'channels', id: 'a', to: 'right' }],
      'changes[0] (a)',
      /brings "right" into ports/,
    ],
  ];
  test.each(REFUSED)('refuses %s', (_, changes, where, what) => {
    let caught: unknown;
    try {
      applyEdit(CHIP, edit(...changes));
    } catch (error) {
      caught = error;
    }
    expect(caught).toBeInstanceOf(Problem);
    expect(caught).toMatchObject({ where, what: expect.stringMatching(what) });
  });
});

describe('random edits', () => {
  test('100 seeds of 200 edits: undone to the start, the chip and its description are what they were', () => {
    let made = 0;
    let refused = 0;
    for (let seed = 0; seed < 100; seed += 1) {
      const random = seeded(seed);
      const [start] = fc.sample(randomChip, { numRuns: 1, seed });
      const text = writeDescription(start!);
      const inverses: ChipEdit[] = [];
      let chip = start!;
      for (let i = 0; i < 200; i += 1) {
        const next = randomEdit(chip, random, i);
        try {
          const done = makeEdit(chip, next);
          expect(invertEdit(chip, next)).toStrictEqual(done.inverse);
          inverses.push(done.inverse);
          chip = done.chip;
          made += 1;
        } catch (error) {
          expect(error).toBeInstanceOf(Problem);
          refused += 1;
        }
        // Every chip on the way is one that a description and a project file can hold.
        if (i % 40 === 39) {
          expect(readDescription(writeDescription(chip))).toStrictEqual(chip);
          expect(readChip(JSON.parse(JSON.stringify(chip)))).toStrictEqual(chip);
        }
      }
      for (const inverse of inverses.reverse()) chip = applyEdit(chip, inverse);
      expect(chip).toStrictEqual(start);
      expect(writeDescription(chip)).toBe(text);
    }
    expect(made).toBeGreaterThan(12_000);
    expect(refused).toBeGreaterThan(500);
  });

  test('an edit goes over the wire unchanged, its inverse too', () => {
    for (let seed = 0; seed < 30; seed += 1) {
      const random = seeded(seed + 1000);
      const [start] = fc.sample(randomChip, { numRuns: 1, seed });
      for (let i = 0; i < 30; i += 1) {
        const next = randomEdit(start!, random, i);
        expect(readEdit(JSON.parse(JSON.stringify(next)))).toStrictEqual(next);
        try {
          const { inverse } = makeEdit(start!, next);
          expect(readEdit(JSON.parse(JSON.stringify(inverse)))).toStrictEqual(inverse);
        } catch (error) {
          expect(error).toBeInstanceOf(Problem);
        }
      }
    }
  });
});

describe('edits from outside', () => {
  const BAD: [value: unknown, where: string, what: RegExp][] = [
    [null, '', /The edit takes a group of keys/],
    [{ label: 'x' }, '', /has no "changes"/],
    [{ label: 'x\u0007', changes: [] }, 'label', /control character/],
    [{ label: 'x', changes: [{ kind: 'move' }] }, 'changes[0].kind', /takes one of put, insert/],
    [
      { label: 'x', changes: [{ kind: 'remove', list: 'cells', id: 'a' }] },
      'changes[0].list (a)',
      /takes one of layers/,
    ],
    [{ label: 'x', changes: [{ kind: 'remove', list: 'ports', id: '' }] }, 'changes[0].id', /is empty/],
    [
      {
        label: 'x',
        changes: [{ kind: 'put', list: 'channels', id: 'a', part: { ...CHIP.channels[0], width: [1.5, 2] } }],
      },
      'changes[0].part.width (a)',
      /whole nanometres/,
    ],
    [
      {
        label: 'x',
        changes: [
          { kind: 'put', list: 'ports', id: 'in', part: { ...CHIP.ports[0], drive: { kind: 'pump' } } },
        ],
      },
      'changes[0].part.drive (in)',
      /no known "kind"/,
    ],
    [
      { label: 'x', changes: [{ kind: 'insert', list: 'vias', index: -1, part: CHIP.vias[0] }] },
      'changes[0].index',
      /place in the list/,
    ],
    [
      { label: 'x', changes: [{ kind: 'set', key: 'channels', value: [] }] },
      'changes[0].key',
      /takes one of name/,
    ],
    [
      { label: 'x', changes: [{ kind: 'set', key: 'fluid', value: { viscosity: 1e-3 } }] },
      'changes[0].value',
      /has no "density"/,
    ],
    [
      { label: 'x', changes: [{ kind: 'set', key: 'limits', value: [{ name: 'a', shear: Number.NaN }] }] },
      'changes[0].value[0].shear',
      /takes a number/,
    ],
    [
      { label: 'x', changes: [{ kind: 'set', key: 'name', value: 'n', more: 1 }] },
      'changes[0].more',
      /no known key/,
    ],
  ];
  test.each(BAD)('%# is refused', (value, where, what) => {
    let caught: unknown;
    try {
      readEdit(value);
    } catch (error) {
      caught = error;
    }
    expect(caught).toBeInstanceOf(Problem);
    expect(caught).toMatchObject({ where, what: expect.stringMatching(what) });
  });
});
