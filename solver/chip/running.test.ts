import { describe, expect, test } from 'vitest';
import { Problem } from '../problem/problem.ts';
import { readDescription } from './description.ts';
import { writeDescription } from './description-write.ts';
import { applyEdit, type ChipEdit, makeEdit } from './edit.ts';
import { readEdit } from './edit-read.ts';
import { readChip } from './schema-chip.ts';

const text = (port = '', chip = ''): string => `{
  "format": "channelwright-chip", "version": 1, "lengthUnit": "um",
  "outline": { "width": 20000, "height": 10000 },
  "layers": [{ "id": "flow", "depth": 50 }, { "id": "upper", "depth": 30 }],
  "channels": [{ "id": "a", "layer": "flow", "path": [[0, 0], [5000, 0]], "width": 100 }],
  "ports": [
    { "id": "in", "at": [0, 0], "layer": "flow", "drive": { "flow": "10 uL/min" }${port} },
    { "id": "out", "at": [5000, 0], "layer": "flow", "drive": { "pressure": 0 } }
  ],
  "fluid": { "name": "water", "temperature": "25 degC" },
  "limits": [{ "name": "all", "shear": "1 Pa", "where": "flow" }]${chip}
}`;
const edit = (...changes: ChipEdit['changes']): ChipEdit => ({ label: 'a test', changes });

describe('pumps, reservoirs, rating and assay', () => {
  test('are read with their units, written back, and absent where not given', () => {
    const plain = readDescription(text());
    for (const key of ['rating', 'assay']) expect(plain).not.toHaveProperty(key);
    for (const key of ['pump', 'reservoir']) expect(plain.ports[0]).not.toHaveProperty(key);
    const chip = readDescription(
      text(
        ', "pump": { "pressure": "2 bar", "flow": "1 mL/min", "bore": 4610, "volume": "1 mL" }, "reservoir": { "bore": "10 mm", "volume": "500 uL" }',
        ', "rating": { "pressure": "30 psi" }, "assay": { "time": "24 h" }',
      ),
    );
    const { pump, reservoir } = chip.ports[0];
    expect(pump!.pressure).toBe(200_000);
    expect(pump!.bore).toBeCloseTo(4.61e-3, 15);
    expect(pump!.volume).toBeCloseTo(1e-6, 18);
    expect(reservoir!.bore).toBeCloseTo(0.01, 15);
    expect(chip.rating!.pressure).toBeCloseTo(206_842.718_795, 5);
    expect(chip.assay).toEqual({ time: 86_400 });
    expect(readDescription(writeDescription(chip))).toEqual(chip);
    expect(readChip(JSON.parse(JSON.stringify(chip)))).toEqual(chip);
  });

  test.each([
    [', "pump": {}', '', /pump/, 'states nothing'],
    [', "pump": { "pressure": "-1 bar" }', '', /pump.*pressure/, 'must be above zero'],
    [', "pump": { "flow": "1 bar" }', '', /pump.*flow/, 'takes a flow'],
    [', "pump": { "speed": 3 }', '', /pump.*speed/, 'is no known key'],
    [', "reservoir": { "volume": "1 mL" }', '', /reservoir/, 'has neither "bore" nor "area"'],
    [', "reservoir": { "bore": "1 mm", "area": "2 mm^2" }', '', /reservoir/, 'has both'],
    [', "reservoir": { "area": "0 mm^2" }', '', /reservoir.*area/, 'must be above zero'],
    ['', ', "rating": {}', /rating/, 'has no "pressure"'],
    ['', ', "assay": { "time": "0 s" }', /assay.*time/, 'must be above zero'],
  ])('%s%s is refused', (port, chip, where, what) => {
    try {
      readDescription(text(port, chip));
    } catch (error) {
      expect(error).toBeInstanceOf(Problem);
      expect((error as Problem).where).toMatch(where);
      expect((error as Problem).what).toContain(what);
      return;
    }
    throw new Error('read');
  });

  test('are set and taken away by edits that lead back', () => {
    const chip = readDescription(text());
    const first = makeEdit(chip, edit({ kind: 'set', key: 'assay', value: { time: 60 } }));
    expect(first.chip.assay).toEqual({ time: 60 });
    expect(applyEdit(first.chip, readEdit(JSON.parse(JSON.stringify(first.inverse))))).toEqual(chip);
    const [port] = chip.ports;
    const put = { kind: 'put', list: 'ports', id: 'in', part: { ...port, pump: { flow: 1e-9 } } } as const;
    const next = applyEdit(chip, readEdit(JSON.parse(JSON.stringify(edit(put)))));
    expect(next.ports[0].pump).toEqual({ flow: 1e-9 });
    const bad = { ...put, part: { ...port, pump: { flow: -1 } } } as const;
    expect(() => applyEdit(chip, edit(bad))).toThrow(/pump/);
  });
});

describe('a limit of a layer', () => {
  test('needs a layer, channel, chamber, via or port of that name', () => {
    expect(() => readDescription(text().replace('"where": "flow"', '"where": "flwo"'))).toThrow(
      /no such channel, chamber, via, port or layer. Did you mean "flow"/,
    );
  });

  test('follows the layer to a new name and back', () => {
    const chip = readDescription(text());
    const rename = edit({ kind: 'rename', list: 'layers', id: 'flow', to: 'low' });
    const { chip: next, inverse } = makeEdit(chip, rename);
    expect(next.limits[0].where).toBe('low');
    expect(applyEdit(next, inverse)).toEqual(chip);
  });

  test('is not made one of a channel by a rename', () => {
    const chip = readDescription(text());
    expect(() => applyEdit(chip, edit({ kind: 'rename', list: 'layers', id: 'flow', to: 'a' }))).toThrow();
    const free = { ...chip, limits: [] };
    expect(applyEdit(free, edit({ kind: 'rename', list: 'layers', id: 'flow', to: 'a' })).layers[0].id).toBe(
      'a',
    );
  });
});
