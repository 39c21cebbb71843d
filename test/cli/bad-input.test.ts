import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { run, spawnSolve } from './run.ts';

/** A sound chip: a feed that splits in two, one branch on an upper layer. */
const GOOD = `{
  "format": "channelwright-chip", "version": 1, "name": "sound", "lengthUnit": "um",
  "outline": { "width": 76000, "height": 26000 },
  "layers": [
    { "id": "flow", "depth": 50, "profile": { "kind": "rectangle" }, "fillet": 5 },
    { "id": "upper", "depth": 50, "profile": { "kind": "rectangle" }, "fillet": 5 }
  ],
  "channels": [
    { "id": "feed", "layer": "flow", "path": [[1000, 13000], [20000, 13000]], "width": 200 },
    { "id": "left", "layer": "flow", "path": [[20000, 13000], [40000, 20000]], "width": 100 },
    { "id": "right", "layer": "flow", "path": [[20000, 13000], [40000, 6000]], "width": 100 },
    { "id": "over", "layer": "upper", "path": [[40000, 6000], [60000, 6000]], "width": 100 }
  ],
  "chambers": [{ "id": "well", "layer": "flow", "outline": [[5000, 12000], [8000, 12000], [8000, 14000], [5000, 14000]] }],
  "vias": [{ "id": "v1", "at": [40000, 6000], "layers": ["flow", "upper"], "diameter": 300 }],
  "ports": [
    { "id": "in", "at": [1000, 13000], "layer": "flow", "drive": { "flow": "10 uL/min" } },
    { "id": "a", "at": [40000, 20000], "layer": "flow", "drive": { "pressure": 0 } },
    { "id": "b", "at": [60000, 6000], "layer": "upper", "drive": { "pressure": 0 },
      "tubing": [{ "bore": "0.5 mm", "length": "300 mm" }] }
  ],
  "fluid": { "name": "water", "temperature": "25 degC" },
  "targets": [{ "port": "a", "share": 0.5, "within": "90 %" }],
  "limits": [{ "name": "cells", "shear": "9 kPa" }]
}`;

/** The sound chip with one text put for another. */
const but = (from: string, to: string): string => {
  if (!GOOD.includes(from)) throw new Error(`the sound chip holds no ${from}`);
  return GOOD.replace(from, to);
};
const fluid = (value: string): string => but('{ "name": "water", "temperature": "25 degC" }', value);
const limit = (value: string): string => but('"shear": "9 kPa"', value);
const profile = (value: string): string => but('"depth": 50, "profile": { "kind": "rectangle" }', value);
const path = (value: string): string => but('[[20000, 13000], [40000, 20000]]', value);

type Case = readonly [name: string, text: string | Uint8Array, what: RegExp, where: RegExp, remedy: RegExp];

const CASES: readonly Case[] = [
  // What is no JSON, no description, or none of this version.
  ['an empty file', '', /text is empty/, /line 1, column 1/, /Write a chip description/],
  [
    'a trailing comma',
    but('"fillet": 5 }\n  ]', '"fillet": 5 },\n  ]'),
    /comma stands before "\]"/,
    /line 7, column 3/,
    /last comma/,
  ],
  ['a comment', but('"outline"', '// size\n  "outline"'), /no comments/, /line 3/, /note/],
  [
    'a file cut short',
    GOOD.slice(0, 700),
    /(ends too early|never closed)/,
    /line \d+/,
    /Complete it|Close it/,
  ],
  ['NaN', but('"width": 200', '"width": NaN'), /NaN is no number/, /line 9/, /finite number/],
  [
    'bytes that are no text',
    new Uint8Array([0xff, 0xfe, 0x00, 0x80]),
    /not text in UTF-8/,
    /bad\.json/,
    /UTF-8/,
  ],
  ['a list', '[1, 2]', /group of keys/, /bad\.json/, /Begin with/],
  [
    'another format',
    but('channelwright-chip', 'channelwright-result'),
    /format is not/,
    /format/,
    /Write "format"/,
  ],
  ['no version', but('"version": 1, ', ''), /version is missing/, /version/, /Write "version": 1/],
  [
    'a newer version',
    but('"version": 1', '"version": 2'),
    /version is 2; this program reads version 1/,
    /version/,
    /newer release/,
  ],
  // Keys.
  [
    'a key twice',
    but('"width": 200', '"width": 100, "width": 200'),
    /key "width" stands twice/,
    /line 9, column \d+/,
    /Take one/,
  ],
  [
    'an unknown key',
    but('"outline"', '"outlne"'),
    /outlne is no known key/,
    /outlne/,
    /Did you mean "outline"/,
  ],
  [
    'an unknown key of a channel',
    but('"width": 200', '"widht": 200'),
    /widht is no known key/,
    /channels\[0\]\.widht \(feed\)/,
    /Did you mean "width"/,
  ],
  ['no ports', but('"ports"', '"note": "x", "prots"'), /prots is no known key/, /prots/, /"ports"/],
  [
    'a missing key',
    but('"depth": 50, ', ''),
    /layers\[0\] has no "depth"/,
    /layers\[0\] \(flow\)/,
    /Add "depth"/,
  ],
  ['a missing fluid', fluid('{}').replace('"fluid": {},', ''), /has no "fluid"/, /bad\.json/, /Add "fluid"/],
  // Quantities.
  [
    'another dimension',
    but('"width": 200', '"width": "3 kPa"'),
    /width takes a length; 3 kPa is a pressure/,
    /channels\[0\]\.width \(feed\)/,
    /such as "120 um"/,
  ],
  [
    'an unknown unit',
    but('10 uL/min', '10 gpm'),
    /takes a flow; no unit "gpm"/,
    /ports\[0\]\.drive\.flow \(in\)/,
    /such as "10 uL\/min"/,
  ],
  [
    'capitals in a unit',
    but('9 kPa', '9 kpa'),
    /no unit "kpa"/,
    /limits\[0\]\.shear \(cells\)/,
    /Write it as "kPa"/,
  ],
  ['a decimal comma', but('9 kPa', '9,5 kPa'), /comma/, /limits\[0\]\.shear/, /decimal mark/],
  [
    'a text without a unit',
    but('"width": 200', '"width": "200"'),
    /"200" has no unit/,
    /width \(feed\)/,
    /with its unit/,
  ],
  [
    'a temperature without a unit',
    but('"25 degC"', '25'),
    /takes a temperature with its unit/,
    /fluid\.temperature/,
    /"25 degC"/,
  ],
  [
    'a number without end',
    but('"width": 200', '"width": 1e999'),
    /too large/,
    /channels\[0\]\.width/,
    /of a size that things have/,
  ],
  [
    'a list for a number',
    but('"fillet": 5', '"fillet": [5]'),
    /takes a length; this is a list/,
    /fillet \(flow\)/,
    /Write a length/,
  ],
  [
    'a point of three',
    but('[1000, 13000], [20000', '[1000, 13000, 0], [20000'),
    /takes a point/,
    /channels\[0\]\.path\[0\]/,
    /\[x, y\]/,
  ],
  [
    'a chip of two metres',
    but('[60000, 6000]]', '[2e9, 6000]]'),
    /more than one metre/,
    /channels\[3\]\.path\[1\]\[0\] \(over\)/,
    /Check the unit/,
  ],
  // Ranges.
  [
    'a negative width',
    but('"width": 200', '"width": -200'),
    /above zero/,
    /channels\[0\]\.width \(feed\)/,
    /above zero/,
  ],
  [
    'a depth of none',
    but('"depth": 50', '"depth": 0'),
    /above zero/,
    /layers\[0\]\.depth \(flow\)/,
    /above zero/,
  ],
  [
    'a negative fillet',
    but('"fillet": 5', '"fillet": -5'),
    /can't be negative/,
    /layers\[0\]\.fillet/,
    /zero or more/,
  ],
  [
    'a negative viscosity',
    fluid('{ "viscosity": "-1 mPa.s", "density": 1000 }'),
    /above zero/,
    /fluid\.viscosity/,
    /above zero/,
  ],
  ['boiling water', but('25 degC', '140 degC'), /(outside|range|°C)/, /fluid/, /temperature/i],
  [
    'half a tube',
    but('"bore": "0.5 mm"', '"bore": 0'),
    /above zero/,
    /ports\[2\]\.tubing\[0\]\.bore \(b\)/,
    /above zero/,
  ],
  [
    'a target of more than all',
    but('"share": 0.5', '"share": 1.5'),
    /must be above 0 and at most 1/,
    /targets\[0\]\.share/,
    /Correct/,
  ],
  // Ids and references.
  [
    'an id borne twice',
    but('"id": "right"', '"id": "feed"'),
    /"feed" is borne by channels\[0\] too/,
    /channels\[2\]\.id/,
    /id of its own/,
  ],
  [
    'an id shared by port and channel',
    but('"id": "a"', '"id": "left"'),
    /"left" is borne by channels\[1\] too/,
    /ports\[1\]\.id/,
    /id of its own/,
  ],
  ['an empty id', but('"id": "right"', '"id": " "'), /id is empty/, /channels\[2\]\.id/, /Give an id/],
  [
    'a control character',
    but('"id": "right"', '"id": "ri\\u0007ght"'),
    /control character/,
    /channels\[2\]\.id/,
    /printable/,
  ],
  [
    'an id too long',
    but('"id": "right"', `"id": "${'x'.repeat(65)}"`),
    /65 characters; at most 64/,
    /channels\[2\]\.id/,
    /Shorten/,
  ],
  [
    'a missing layer',
    but('"layer": "flow", "path": [[1000', '"layer": "flwo", "path": [[1000'),
    /no such layer/,
    /channels\[0\]\.layer \(feed\)/,
    /Did you mean "flow"/,
  ],
  [
    'a target for nothing',
    but('"port": "a"', '"port": "aa"'),
    /no such port/,
    /targets\[0\]\.port/,
    /Did you mean "a"/,
  ],
  [
    'a limit for nothing',
    limit('"shear": "1 Pa", "where": "fed"'),
    /no such channel/,
    /limits\[0\]\.where \(cells\)/,
    /Did you mean "feed"/,
  ],
  [
    'a limit on a way back to its start',
    limit('"shear": "1 Pa", "where": ["in", "in"]'),
    /to itself/,
    /limits\[0\]\.where/,
    /two different ports/,
  ],
  [
    'a via from a layer to itself',
    but('["flow", "upper"]', '["flow", "flow"]'),
    /to itself/,
    /vias\[0\]\.layers \(v1\)/,
    /two layers/,
  ],
  // Shapes and cross-sections.
  [
    'a channel without length',
    path('[[20000, 13000], [20000, 13000]]'),
    /has no length/,
    /channels\[1\]\.path \(left\)/,
    /two different points/,
  ],
  [
    'a path of one point',
    path('[[20000, 13000]]'),
    /has no length/,
    /channels\[1\]\.path/,
    /two different points/,
  ],
  [
    'a path that doubles back',
    path('[[20000, 13000], [40000, 20000], [30000, 16500]]'),
    /straight back/,
    /channels\[1\]\.path\[1\] \(left\)/,
    /bend/,
  ],
  [
    'a chamber that crosses itself',
    but('[8000, 12000], [8000, 14000]', '[8000, 14000], [8000, 12000]'),
    /crosses or touches itself/,
    /chambers\[0\]\.outline \(well\)/,
    /Order the points/,
  ],
  [
    'a chamber that encloses nothing',
    but('[8000, 12000], [8000, 14000], [5000, 14000]', '[8000, 12000]'),
    /encloses nothing/,
    /chambers\[0\]\.outline/,
    /three points/,
  ],
  [
    'a bore unlike its depth',
    profile('"depth": 50, "profile": { "kind": "circle" }'),
    /round bores/,
    /channels\[0\]\.width \(feed\)/,
    /ellipse/,
  ],
  [
    'a wall that lies down',
    profile('"depth": 50, "profile": { "kind": "trapezoid", "wallAngle": 200 }'),
    /leans from 10° to 170°/,
    /layers\[0\]\.profile\.wallAngle/,
    /90 is upright/,
  ],
  [
    'walls that meet',
    profile('"depth": 99, "profile": { "kind": "trapezoid", "wallAngle": 45 }'),
    /meet before the depth/,
    /channels\[1\]\.width \(left\)/,
    /wider than/,
  ],
  [
    'a profile without its angle',
    profile('"depth": 50, "profile": { "kind": "trapezoid" }'),
    /no "wallAngle"/,
    /layers\[0\]\.profile/,
    /needs it/,
  ],
  [
    'an unknown profile',
    profile('"depth": 50, "profile": { "kind": "square" }'),
    /takes one of "rectangle"/,
    /profile\.kind/,
    /Write "/,
  ],
  // Drives, fluids, limits.
  [
    'no drive',
    but(', "drive": { "flow": "10 uL/min" }', ''),
    /ports\[0\] has no drive/,
    /ports\[0\] \(in\)/,
    /Add "drive"/,
  ],
  [
    'two drives',
    but('{ "flow": "10 uL/min" }', '{ "flow": "10 uL/min", "head": "10 mm" }'),
    /imposes both flow and head/,
    /ports\[0\]\.drive \(in\)/,
    /Give one of/,
  ],
  [
    'a drive of nothing',
    but('{ "flow": "10 uL/min" }', '{}'),
    /imposes nothing/,
    /ports\[0\]\.drive/,
    /Give one of/,
  ],
  [
    'half closed',
    but('{ "flow": "10 uL/min" }', '{ "closed": false }'),
    /takes true/,
    /ports\[0\]\.drive\.closed/,
    /give a drive/,
  ],
  [
    'a fluid that no one knows',
    but('"water"', '"whater"'),
    /takes one of "water"/,
    /fluid\.name/,
    /Write "water"/,
  ],
  [
    'glycerol without its share',
    but('"water"', '"glycerol-water"'),
    /nothing of the share/,
    /fluid/,
    /massFraction/,
  ],
  ['half a fluid', fluid('{ "viscosity": "1 mPa.s" }'), /has no "density"/, /fluid/, /Give "density"/],
  [
    'a curve that does not rise',
    limit('"curve": [["1 s", "10 Pa"], ["0.5 s", "5 Pa"]]'),
    /not longer than the one before/,
    /limits\[0\]\.curve\[1\] \(cells\)/,
    /Order/,
  ],
  [
    'two limits in one',
    limit('"shear": "1 Pa", "curve": [["1 s", "10 Pa"]]'),
    /shear and curve at once/,
    /limits\[0\]/,
    /Give one of/,
  ],
  [
    'a floor without its area',
    limit('"floor": ["0.5 Pa", "1.5 Pa"]'),
    /has no "area"/,
    /limits\[0\]/,
    /Add "area"/,
  ],
  [
    'half a pass',
    limit('"law": { "constant": 1, "stress": 1, "time": 1 }, "damage": "1 %", "passes": 0.5'),
    /whole number of passes/,
    /limits\[0\]\.passes/,
    /1 or more/,
  ],
  // Absurd counts.
  [
    'a thousand layers',
    but('"layers": [', `"layers": [${'{ "id": "x", "depth": 1 },'.repeat(1000)}`),
    /at most 64 entries; it has 1,002/,
    /layers/,
    /Take some away/,
  ],
  [
    'more points than are kept',
    path(`[${'[1,2],'.repeat(1_000_001)}[40000, 20000]]`),
    /at most 1,000,000 entries/,
    /channels\[1\]\.path/,
    /Take some away/,
  ],
  // What only the solver can see.
  [
    'a port in the empty',
    but('"at": [40000, 20000]', '"at": [40000, 24000]'),
    /no fluid of layer flow under port a/,
    /port:a$/,
    /Move a onto a channel/,
  ],
  [
    'a via where one layer has nothing',
    but('"vias": [{ "id": "v1", "at": [40000, 6000]', '"vias": [{ "id": "v1", "at": [30000, 9500]'),
    /no fluid of layer upper under via v1/,
    /via:v1$/,
    /Move v1 onto a channel/,
  ],
  [
    'flows and no pressure',
    GOOD.replaceAll('{ "pressure": 0 }', '{ "flow": "-5 uL/min" }'),
    /impose flows, but no port of the same cavity has a pressure/,
    /port/,
    /Give one port of that cavity a pressure/,
  ],
  [
    'two pressures at one place',
    but(
      '{ "id": "a",',
      '{ "id": "c", "at": [40000, 20000], "layer": "flow", "drive": { "pressure": "1 kPa" } }, { "id": "a",',
    ),
    /pressure/,
    /port/,
    /./,
  ],
];

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'chip-bad-'));
});
beforeEach(() => writeFileSync(join(folder, 'kept.csv'), 'kept'));
afterAll(() => rmSync(folder, { recursive: true }));

const MESSAGE = /^(\S.*)\n {2}where: (\S.*)\n {2}do: {4}(\S.*)\n$/;

describe('a bad description ends with 2, one message, and nothing written', () => {
  test('the sound chip is sound', async () => {
    const file = join(folder, 'bad.json');
    writeFileSync(file, GOOD);
    const ran = await run(file);
    expect(ran.err).toBe('');
    expect(ran.code).toBe(0);
  });

  test.each(CASES)('%s', async (_, text, what, where, remedy) => {
    const file = join(folder, 'bad.json');
    writeFileSync(file, text);
    const before = readdirSync(folder).sort();
    const ran = await run(file, '--csv', join(folder, 'kept.csv'), '--json', join(folder, 'new.json'));
    expect(ran.code, ran.out + ran.err).toBe(2);
    expect(ran.out).toBe('');
    const parts = MESSAGE.exec(ran.err);
    expect(parts, ran.err).not.toBeNull();
    expect(parts![1]).toMatch(what);
    expect(parts![2]).toMatch(where);
    expect(parts![2]).toContain(file);
    expect(parts![3]).toMatch(remedy);
    expect(ran.err).not.toMatch(/\bat .*:\d+:\d+|undefined|\[object|The program failed/);
    expect(ran.err.length).toBeLessThan(1200);
    expect(readdirSync(folder).sort()).toEqual(before);
    expect(readFileSync(join(folder, 'kept.csv'), 'utf8')).toBe('kept');
  });

  test('there are at least 45 of them', () => {
    expect(CASES.length).toBeGreaterThanOrEqual(45);
  });

  const SPAWNED = ['NaN', 'two drives', 'a path that doubles back', 'a port in the empty'];
  test.each(CASES.filter(([name]) => SPAWNED.includes(name)))(
    'the command itself, %s',
    async (_, text, what) => {
      writeFileSync(join(folder, 'bad.json'), text);
      const ran = await spawnSolve(['bad.json', '--csv', 'kept.csv', '--json', 'new.json'], folder);
      expect(ran.code).toBe(2);
      expect(ran.out).toBe('');
      expect(MESSAGE.exec(ran.err)?.[1]).toMatch(what);
      expect(readFileSync(join(folder, 'kept.csv'), 'utf8')).toBe('kept');
      expect(readdirSync(folder).sort()).toEqual(['bad.json', 'kept.csv']);
    },
  );
});
