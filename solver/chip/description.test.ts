import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { randomChip } from '../../test/chips/random-chip.ts';
import { Problem } from '../problem/problem.ts';
import { readDescription } from './description.ts';
import { writeDescription } from './description-write.ts';
import { nearest } from './schema-nearest.ts';

const EXAMPLE = `{
  "format": "channelwright-chip", "version": 1, "name": "example", "lengthUnit": "um",
  "outline": { "width": 76000, "height": 26000 },
  "layers": [
    { "id": "upper", "depth": "30 µm", "profile": { "kind": "trapezoid", "wallAngle": 54.74 } },
    { "id": "flow", "depth": 50, "profile": { "kind": "rectangle" }, "fillet": 5,
      "tolerance": { "depth": "5 %", "width": "2 um" },
      "roof": { "modulus": "2 MPa", "thickness": "5 mm", "poisson": 0.5, "law": "thick", "constant": 0.5 } }
  ],
  "channels": [
    { "id": "feed", "layer": "flow", "path": [[1000, 13000], ["20 mm", 13000]], "width": 200 },
    { "id": "taper", "layer": "flow", "path": [[20000, 13000], [30000, 13000]], "width": ["0.2 mm", 100], "bendRadius": 300 }
  ],
  "chambers": [ { "id": "well", "layer": "flow", "outline": [[30000, 12000], [34000, 12000], [34000, 14000], [30000, 14000]] } ],
  "vias": [ { "id": "v1", "at": [34000, 13000], "layers": ["flow", "upper"], "diameter": 300 } ],
  "ports": [
    { "id": "in", "at": [1000, 13000], "layer": "flow", "diameter": 0, "drive": { "flow": "10 uL/min" } },
    { "id": "out", "at": [34000, 13000], "layer": "flow", "diameter": 750, "drive": { "pressure": 0 },
      "tubing": [ { "bore": "0.5 mm", "length": "300 mm" } ] },
    { "id": "top", "at": [36000, 13000], "layer": "upper", "drive": { "head": "-0.25 m" } },
    { "id": "shut", "at": [38000, 13000], "layer": "upper", "drive": { "closed": true } }
  ],
  "fluid": { "name": "water", "temperature": "25 degC" },
  "targets": [ { "port": "out", "share": 0.25, "within": "5 %" }, { "channel": "feed", "flow": "5 uL/min", "within": "2 %" } ],
  "limits": [
    { "name": "suspended cells", "shear": "1.5 Pa", "where": ["in", "out"], "cellDiameter": "15 um" },
    { "name": "floor", "floor": ["0.5 Pa", "1.5 Pa"], "area": 0.9, "where": "well" },
    { "name": "curve", "curve": [["0.1 s", "100 Pa"], ["1 s", "50 Pa"]] },
    { "name": "law", "law": { "constant": 3.62e-5, "stress": 2.416, "time": 0.785 }, "damage": "0.1 %" }
  ]
}`;

/** The example with one text put for another. */
const but = (from: string, to: string): string => {
  if (!EXAMPLE.includes(from)) throw new Error(`the example holds no ${from}`);
  return EXAMPLE.replace(from, to);
};

describe('reading', () => {
  test('the example becomes whole nanometres and SI', () => {
    const chip = readDescription(EXAMPLE);
    expect(chip.layers[0]).toEqual({
      id: 'upper',
      depth: 30_000,
      profile: { kind: 'trapezoid', wallAngle: 54.74 },
      fillet: 0,
    });
    expect(chip.layers[1]).toEqual({
      id: 'flow',
      depth: 50_000,
      profile: { kind: 'rectangle' },
      fillet: 5000,
      tolerance: { depth: { share: 0.05 }, width: { length: 2000 } },
      roof: { modulus: 2e6, thickness: 5e-3, poisson: 0.5, law: 'thick', constant: 0.5 },
    });
    expect(chip.channels).toEqual([
      {
        id: 'feed',
        layer: 'flow',
        path: [
          [1_000_000, 13_000_000],
          [20_000_000, 13_000_000],
        ],
        width: [200_000, 200_000],
        bendRadius: 0,
      },
      {
        id: 'taper',
        layer: 'flow',
        path: [
          [20_000_000, 13_000_000],
          [30_000_000, 13_000_000],
        ],
        width: [200_000, 100_000],
        bendRadius: 300_000,
      },
    ]);
    expect(chip.vias[0]).toEqual({
      id: 'v1',
      at: [34e6, 13e6],
      layers: ['flow', 'upper'],
      diameter: 300_000,
    });
    expect(chip.ports.map((port) => port.drive)).toEqual([
      { kind: 'flow', flow: 1e-8 / 60 },
      { kind: 'pressure', pressure: 0 },
      { kind: 'head', head: -0.25 },
      { kind: 'closed' },
    ]);
    expect(chip.ports[1]!.tubing).toEqual([{ bore: 5e-4, length: 0.3 }]);
    expect(chip.fluid).toEqual({ name: 'water', temperature: 298.15 });
    expect(chip.targets).toEqual([
      { port: 'out', share: 0.25, within: 0.05 },
      { channel: 'feed', flow: 5e-9 / 60, within: 0.02 },
    ]);
    expect(chip.limits).toEqual([
      { name: 'suspended cells', shear: 1.5, where: ['in', 'out'], cellDiameter: 15e-6 },
      { name: 'floor', floor: [0.5, 1.5], area: 0.9, where: 'well' },
      {
        name: 'curve',
        curve: [
          [0.1, 100],
          [1, 50],
        ],
      },
      { name: 'law', law: { constant: 3.62e-5, stress: 2.416, time: 0.785 }, damage: 0.001, passes: 1 },
    ]);
  });

  test('bare lengths of ports and roofs are in the length unit, all else bare is SI', () => {
    const chip = readDescription(
      but('"0.5 mm", "length": "300 mm"', '500, "length": 300000')
        .replace('"-0.25 m"', '-250000')
        .replace('"thickness": "5 mm"', '"thickness": 5000')
        .replace('"15 um"', '15e-6')
        .replace('"10 uL/min"', '1e-10'),
    );
    expect(chip.ports[1]!.tubing).toEqual([{ bore: 5e-4, length: 0.3 }]);
    expect(chip.ports[2]!.drive).toEqual({ kind: 'head', head: -0.25 });
    expect(chip.layers[1]!.roof!.thickness).toBe(5e-3);
    expect(chip.limits[0]!.cellDiameter).toBe(15e-6);
    expect(chip.ports[0]!.drive).toEqual({ kind: 'flow', flow: 1e-10 });
  });

  test('what may be left out is left out', () => {
    const chip = readDescription(
      `{"format": "channelwright-chip", "version": 1, "outline": {"width": 1, "height": 1},
        "layers": [], "ports": [], "fluid": {"viscosity": "1 cP", "density": "1 g/mL"}}`,
      'from the file name',
    );
    expect(chip).toEqual({
      name: 'from the file name',
      note: '',
      lengthUnit: 'um',
      outline: { width: 1000, height: 1000 },
      layers: [],
      channels: [],
      chambers: [],
      vias: [],
      ports: [],
      fluid: { viscosity: 1e-3, density: 1000 },
      targets: [],
      limits: [],
    });
  });
});

describe('messages', () => {
  const BAD: [text: string, where: string, what: string, remedy: string][] = [
    [
      but('"width": 200 }', '"width": "3 kPa" }'),
      'channels[0].width (feed)',
      'width takes a length; 3 kPa is a pressure.',
      'Write a length with its unit, such as "120 um".',
    ],
    [
      but('"bendRadius"', '"bendRadios"'),
      'channels[1].bendRadios (taper)',
      'bendRadios is no known key here.',
      'Did you mean "bendRadius"? Known: id, layer, path, width, bendRadius, depth, tolerance.',
    ],
    [
      but('[[1000, 13000], ["20 mm", 13000]]', '[[1000, 13000], ["20 mm", "x"]]'),
      'channels[0].path[1][1] (feed)',
      'path[1][1] takes a length; "x" is none.',
      'Write a length with its unit, such as "120 um".',
    ],
    [
      but('{ "flow": "10 uL/min" }', '{ "flow": "10 uL/min", "pressure": "1 kPa" }'),
      'ports[0].drive (in)',
      'drive imposes both pressure and flow.',
      'Give one of "pressure", "flow", "head" or "closed": true.',
    ],
    [
      but('"id": "v1"', '"id": "feed"'),
      'vias[0].id (feed)',
      'id "feed" is borne by channels[0] too.',
      'Give each channel, chamber, via, port and keep-out an id of its own, and each layer.',
    ],
    [
      but('"layer": "flow", "path": [[20000', '"layer": "flaw", "path": [[20000'),
      'channels[1].layer (taper)',
      'layer names "flaw", but there is no such layer.',
      'Did you mean "flow"? Or add the layer.',
    ],
    [
      but('"version": 1', '"version": 2'),
      'version',
      'version is 2; this program reads version 1.',
      'Open it with a newer release of this program.',
    ],
    [
      but('"name": "water", ', ''),
      'fluid',
      'fluid has no "viscosity".',
      'Give "viscosity": a fluid without a name takes viscosity, density.',
    ],
    [
      but('["1 s", "50 Pa"]', '["0.1 s", "50 Pa"]'),
      'limits[2].curve[1] (curve)',
      'curve[1] has a time that is not longer than the one before.',
      'Order the points by rising time.',
    ],
  ];
  test.each(BAD)('%#', (text, where, what, remedy) => {
    let caught: unknown;
    try {
      readDescription(text);
    } catch (error) {
      caught = error;
    }
    expect(caught).toBeInstanceOf(Problem);
    const { where: gotWhere, what: gotWhat, remedy: gotRemedy } = caught as Problem;
    expect([gotWhere, gotWhat, gotRemedy]).toEqual([where, what, remedy]);
  });

  test('any damage to a value gives a Problem or a chip, never anything else', () => {
    const root: unknown = JSON.parse(EXAMPLE);
    const places: (string | number)[][] = [];
    const walk = (value: unknown, path: (string | number)[]): void => {
      if (path.length > 0) places.push(path);
      if (Array.isArray(value)) {
        for (const [i, entry] of value.entries()) walk(entry, [...path, i]);
      } else if (value !== null && typeof value === 'object') {
        for (const [key, entry] of Object.entries(value)) walk(entry, [...path, key]);
      }
    };
    walk(root, []);
    const junk = [
      null,
      true,
      '',
      'x',
      0,
      -1,
      1e300,
      1.5,
      [],
      {},
      [1, 2],
      '5 %',
      '-3 um',
      { kind: 'circle' },
      ['in', 'in'],
    ];
    let refused = 0;
    for (const path of places) {
      for (const value of junk) {
        const copy: unknown = structuredClone(root);
        let holder = copy as Record<string | number, unknown>;
        for (const key of path.slice(0, -1)) holder = holder[key] as Record<string | number, unknown>;
        holder[path.at(-1)!] = value;
        try {
          readDescription(JSON.stringify(copy));
        } catch (error) {
          refused += 1;
          expect(error).toBeInstanceOf(Problem);
          const { what, remedy } = error as Problem;
          expect(what, `${path.join('.')} = ${JSON.stringify(value)}`).toMatch(/^\S.*[.!?]$/);
          expect(remedy).toMatch(/^[A-Z].*\S$/);
          expect(what).not.toMatch(/undefined|\[object|NaN/);
        }
      }
    }
    expect(refused).toBeGreaterThan(places.length * 5);
  });
});

describe('writing', () => {
  test('reading back gives an equal chip, and writing that the same bytes', () => {
    fc.assert(
      fc.property(randomChip, (chip) => {
        const text = writeDescription(chip);
        const back = readDescription(text);
        expect(back).toStrictEqual(chip);
        expect(writeDescription(back)).toBe(text);
      }),
      { numRuns: 200 },
    );
  });

  test('the example is written one entry to a line', () => {
    const lines = writeDescription(readDescription(EXAMPLE)).split('\n');
    expect(lines).toContain(
      '    { "id": "feed", "layer": "flow", "path": [[1000, 13000], [20000, 13000]], "width": 200 },',
    );
    expect(lines).toContain('  "fluid": { "name": "water", "temperature": "25 degC" },');
  });
});

describe('process and accepted findings', () => {
  const made = (more: string): string => EXAMPLE.replace(/\n\}$/, `,\n${more}\n}`);

  test('are read in the length unit, written back, and absent where not given', () => {
    expect(readDescription(EXAMPLE)).not.toHaveProperty('process');
    expect(readDescription(EXAMPLE)).not.toHaveProperty('accepted');
    const text = made(
      `"process": { "kind": "milling", "toolRadius": 150, "wall": 3, "modulus": "2 MPa" },
       "accepted": [{ "kind": "least-gap", "where": "feed", "reason": "made so before" }]`,
    );
    const chip = readDescription(text);
    expect(chip.process).toEqual({ kind: 'milling', toolRadius: 150_000, wall: 3, modulus: 2e6 });
    expect(chip.accepted).toEqual([{ kind: 'least-gap', where: 'feed', reason: 'made so before' }]);
    expect(readDescription(writeDescription(chip))).toEqual(chip);
  });

  test.each([
    ['"process": { "kind": "casting" }', /process.*kind/, 'takes one of "film-mask"'],
    ['"process": { "kind": "milling", "wall": 0 }', /process.*wall/, 'must be above zero'],
    ['"process": { "kind": "milling", "speed": 3 }', /process.*speed/, 'is no known key'],
    ['"accepted": []', /accepted/, 'takes 1 to'],
    ['"accepted": [{ "kind": "a", "where": "", "reason": " " }]', /accepted.*reason/, 'is empty'],
    [
      '"accepted": [{ "kind": "a", "where": "", "reason": "b" }, { "kind": "a", "where": "", "reason": "c" }]',
      /accepted.*1/,
      'twice',
    ],
  ])('%s is refused', (more, where, what) => {
    try {
      readDescription(made(more));
    } catch (error) {
      expect(error).toBeInstanceOf(Problem);
      expect((error as Problem).where).toMatch(where);
      expect((error as Problem).what).toContain(what);
      return;
    }
    throw new Error('read');
  });
});

test('the nearest known word forgives slips and capitals', () => {
  const known = ['width', 'path', 'bendRadius', 'layer', 'id'];
  expect(nearest('widht', known)).toBe('width');
  expect(nearest('bend_radius', known)).toBe('bendRadius');
  expect(nearest('LAYER', known)).toBe('layer');
  expect(nearest('x', [])).toBeUndefined();
});
