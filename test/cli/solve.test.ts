import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { makeFile } from '../../db/make.ts';
import { tableLines } from '../../main/cli/table.ts';
import { textWidth, wrapped } from '../../main/cli/width.ts';
import { csvText } from '../../main/export/csv.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { run, spawnSolve } from './run.ts';

const CHIP = `{
  "format": "channelwright-chip", "version": 1, "name": "tee", "note": "One feed, two ways.",
  "outline": { "width": 76000, "height": 26000 },
  "layers": [{ "id": "flow", "depth": 50, "fillet": 5 }],
  "channels": [
    { "id": "=1+1", "layer": "flow", "path": [[1000, 13000], [20000, 13000]], "width": 200 },
    { "id": "a, \\"quoted\\"", "layer": "flow", "path": [[20000, 13000], [20000, 20000]], "width": 100 },
    { "id": "流路", "layer": "flow", "path": [[20000, 13000], [20000, 2000]], "width": [100, 150] }
  ],
  "ports": [
    { "id": "@in", "at": [1000, 13000], "layer": "flow", "drive": { "flow": "10 uL/min" } },
    { "id": "-up", "at": [20000, 20000], "layer": "flow", "drive": { "pressure": 0 } },
    { "id": "down", "at": [20000, 2000], "layer": "flow", "drive": { "pressure": "-120 Pa" } }
  ],
  "fluid": { "name": "water", "temperature": "25 degC" },
  "targets": [{ "port": "down", "share": "50 %", "within": "20 %" }, { "channel": "=1+1", "flow": "10 uL/min", "within": "1 %" }],
  "limits": [{ "name": "cells", "shear": "9 Pa" }]
}`;

let folder = '';
const file = (name: string): string => join(folder, name);
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'chip-solve-'));
  writeFileSync(file('tee.json'), CHIP);
  writeFileSync(file('missed.json'), CHIP.replace('"9 Pa"', '"1 mPa"'));
});
afterAll(() => rmSync(folder, { recursive: true }));

/** Records of a CSV text read strictly by RFC 4180: CRLF ends each, quotes only around whole fields. */
function records(text: string): string[][] {
  const rows: string[][] = [];
  let row: string[] = [];
  let at = 0;
  while (at < text.length) {
    const match = /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n)/y;
    match.lastIndex = at;
    const found = match.exec(text);
    if (!found) throw new Error(`no field at ${at}: ${text.slice(at, at + 40)}`);
    row.push(found[1] !== undefined ? found[1].replaceAll('""', '"') : found[2]!);
    if (found[3] === '\r\n') {
      rows.push(row);
      row = [];
    }
    at += found[0].length;
  }
  if (row.length > 0) throw new Error('the last record does not end');
  return rows;
}

describe('exit codes', () => {
  test('0 all met, 1 something missed, the table either way', async () => {
    const met = await run(file('tee.json'));
    expect(met.err).toBe('');
    expect(met.code).toBe(0);
    expect(met.out).toContain('All met: 2 targets and 1 limit.');
    const missed = await run(file('missed.json'));
    expect(missed.code).toBe(1);
    expect(missed.out).toContain('Missed: cells.');
    expect(missed.out).toMatch(/cells +1\.000 mPa .*MISSED/);
  });

  const CALLS: [name: string, argv: () => string[], what: RegExp][] = [
    ['no file', () => [], /No file is named/],
    ['two files', () => [file('tee.json'), file('missed.json')], /More than one file/],
    ['an unknown option', () => [file('tee.json'), '--fast'], /Unknown option '--fast'/],
    ['an option without its value', () => [file('tee.json'), '--csv'], /csv/],
    [
      'junctions of another kind',
      () => [file('tee.json'), '--junctions', 'real'],
      /ideal or solved, not "real"/,
    ],
    ['an accuracy of nothing', () => [file('tee.json'), '--accuracy', '0'], /takes a share from/],
    ['an accuracy in words', () => [file('tee.json'), '--accuracy', 'high'], /takes a share from/],
    [
      'both to standard output',
      () => [file('tee.json'), '--csv', '-', '--json', '-'],
      /Both --csv and --json/,
    ],
    [
      'the input as output',
      () => [file('tee.json'), '--json', file('tee.json')],
      /read would be overwritten/,
    ],
    ['one file for both', () => [file('tee.json'), '--json', file('o'), '--csv', file('o')], /named twice/],
    ['no such file', () => [file('none.json')], /no such file/],
    ['a folder', () => [folder], /folder|not a file/],
  ];
  test.each(CALLS)('2 for %s', async (_, argv, what) => {
    const ran = await run(...argv());
    expect(ran.code).toBe(2);
    expect(ran.out).toBe('');
    expect(ran.err).toMatch(/^\S.*\n {2}where: \S.*\n {2}do: {4}\S.*\n$/);
    expect(ran.err).toMatch(what);
    expect(readFileSync(file('tee.json'), 'utf8')).toBe(CHIP);
  });

  test('0 for help', async () => {
    const ran = await run('--help');
    expect(ran.code).toBe(0);
    expect(ran.out).toContain('npm run solve -- FILE');
  });
});

describe('files', () => {
  test('JSON is the result in its fixed form', async () => {
    const ran = await run(file('tee.json'), '--json', '-');
    const result = JSON.parse(ran.out) as Result;
    expect(Object.keys(result)).toEqual([
      'format',
      'version',
      'chip',
      'status',
      'junctions',
      'fluid',
      'ports',
      'channels',
      'cells',
      'routes',
      'targets',
      'limits',
      'pumps',
      'balance',
      'bands',
      'findings',
    ]);
    expect(result.format).toBe('channelwright-result');
    expect(result.version).toBe(1);
    expect(result.chip).toBe('tee');
    expect(result.ports.map(({ id }) => id)).toEqual(['@in', '-up', 'down']);
  });

  test('CSV is RFC 4180, its numbers those of the result, and no field a formula', async () => {
    const ran = await run(file('tee.json'), '--csv', file('o.csv'), '--json', file('o.json'));
    expect(ran.out).toContain('Channels');
    const text = readFileSync(file('o.csv'), 'utf8');
    const [head, ...rows] = records(text);
    expect(new Set(rows.map((row) => row.length))).toEqual(new Set([head!.length]));
    const column = (name: string): number => head!.findIndex((field) => field.startsWith(name));
    const result = JSON.parse(readFileSync(file('o.json'), 'utf8')) as Result;
    const pieces = result.channels.flatMap(({ pieces: list }) => list);
    const written = rows.filter(([kind]) => kind === 'piece');
    expect(written).toHaveLength(pieces.length);
    written.forEach((row, i) => {
      const near = (name: string, value: number): void =>
        expect(Number(row[column(name)])).toBeCloseTo(value, 9 - Math.ceil(Math.log10(Math.abs(value))));
      near('flow (uL/min)', pieces[i]!.flow! * 6e10);
      near('pressure drop (Pa)', pieces[i]!.pressureDrop);
      near('mean velocity (mm/s)', pieces[i]!.meanVelocity! * 1e3);
      near('peak wall shear (Pa)', pieces[i]!.peakWallShear!);
      near('length (mm)', pieces[i]!.length * 1e3);
    });
    expect(written.map((row) => row[1])).toEqual(["'=1+1#1", 'a, "quoted"#1', '流路#1']);
    expect(rows.filter(([kind]) => kind === 'port').map((row) => row[1])).toEqual(["'@in", "'-up", 'down']);
    expect(text).toContain('"a, ""quoted""#1"');
    for (const field of rows.flat()) expect(field).not.toMatch(/^(?:[=+@\t\r]|-(?!\d))/);
  });

  test('a field that a spreadsheet would run is kept text, a negative number is not', () => {
    expect(
      csvText(
        ['a', 'b'],
        [
          ['=1', -1],
          ['+1', null],
          ['@x', true],
          ['\tx', 'y\r\nz'],
          ['-x', 1e-20],
        ],
      ),
    ).toBe("a,b\r\n'=1,-1\r\n'+1,\r\n'@x,yes\r\n'\tx,\"y\r\nz\"\r\n'-x,1e-20\r\n");
  });

  test('where one output cannot be written none is, and what was there stays', async () => {
    writeFileSync(file('kept.csv'), 'kept');
    const before = readdirSync(folder).sort();
    for (const bad of [file('no/such/o.json'), file('tee.json/o.json')]) {
      const ran = await run(file('tee.json'), '--csv', file('kept.csv'), '--json', bad);
      expect(ran.code).toBe(2);
      expect(ran.out).toBe('');
      expect(ran.err).toContain(bad);
    }
    expect(readFileSync(file('kept.csv'), 'utf8')).toBe('kept');
    expect(readdirSync(folder).sort()).toEqual(before);
    const whole = await run(file('tee.json'), '--csv', file('kept.csv'));
    expect(whole.code).toBe(0);
    expect(readFileSync(file('kept.csv'), 'utf8')).toMatch(/^kind,/);
  });

  test('a project gives the same result as its description', async () => {
    const project = file('tee.chw');
    makeFile(project, readDescription(CHIP), { program: 'test' });
    const bytes = readFileSync(project);
    const fromProject = await run(project, '--json', '-');
    const fromText = await run(file('tee.json'), '--json', '-');
    expect(fromProject.err).toBe('');
    expect(fromProject).toEqual(fromText);
    expect(readFileSync(project).equals(bytes)).toBe(true);
  });

  test('a project that is cut short ends with 2', async () => {
    const project = file('cut.chw');
    makeFile(project, readDescription(CHIP), { program: 'test' });
    writeFileSync(project, readFileSync(project).subarray(0, 9000));
    const ran = await run(project, '--json', file('never.json'));
    expect(ran.code).toBe(2);
    expect(ran.err).toMatch(/^\S.*\n {2}where: .*cut\.chw\n {2}do: {4}\S.*\n$/);
    expect(existsSync(file('never.json'))).toBe(false);
  });

  test('the command itself: table, files and code', async () => {
    const ran = await spawnSolve(['missed.json', '--csv', 'spawned.csv', '--json', 'spawned.json'], folder);
    expect(ran.err).toBe('');
    expect(ran.code).toBe(1);
    expect(ran.out).toContain('Missed: cells.');
    expect(records(readFileSync(file('spawned.csv'), 'utf8')).length).toBeGreaterThan(5);
    expect((JSON.parse(readFileSync(file('spawned.json'), 'utf8')) as Result).chip).toBe('tee');
  });
});

describe('tables', () => {
  test('decimal points stand in one column, wide names take two columns a letter', () => {
    const lines = tableLines([
      { head: 'name', words: ['a', '流路', 'a rather long name'] },
      { head: 'flow', kind: 'flow', values: [1e-8 / 60, -2.5e-10 / 60, null] },
      { head: 'share', kind: 'share', values: [1, 0.025, 0] },
    ]);
    expect(lines).toEqual([
      '  name                    flow     share',
      '                        µL/min         %',
      '  a                    10.00     100.0',
      '  流路                 −0.2500     2.500',
      '  a rather long name    –          0',
    ]);
  });

  test('the columns of a whole report are aligned', async () => {
    const { out } = await run(file('tee.json'), '--junctions', 'ideal');
    const lines = out.split('\n');
    const start = lines.indexOf('Channels');
    const rows = lines.slice(start + 3, start + 6);
    const points = rows.map((line) => textWidth(line.slice(0, line.indexOf('.'))));
    expect(new Set(points).size).toBe(1);
    expect(lines[0]).toBe('tee');
    expect(lines[1]).toBe('One feed, two ways.');
    expect(out).toContain('Junctions are ideal');
    expect(out).toMatch(/Balance: flow kept to .* of the throughput; power in .*W, dissipated .*W\./);
  });

  test('a long table is cut on the terminal and whole in the file', async () => {
    const long = JSON.parse(CHIP) as { channels: unknown[] };
    for (let i = 0; i < 250; i += 1) {
      const x = 25_000 + 150 * i;
      long.channels.push({
        id: `dead ${i}`,
        layer: 'flow',
        path: [
          [x, 20_000],
          [x, 24_000],
        ],
        width: 50,
      });
    }
    writeFileSync(file('long.json'), JSON.stringify(long));
    const { out } = await run(file('long.json'), '--csv', file('long.csv'));
    expect(out).toContain('… and 53 more pieces of channels; --csv FILE holds them all.');
    expect(records(readFileSync(file('long.csv'), 'utf8')).filter(([kind]) => kind === 'piece')).toHaveLength(
      253,
    );
  });

  test('widths of letters, marks and emoji', () => {
    expect(['abc', 'é', 'e\u0301', '流路', '🧪', 'ｱ', 'µL'].map(textWidth)).toEqual([3, 1, 1, 4, 2, 1, 2]);
    expect(wrapped('one two three four', 9, '  ')).toEqual(['one two', '  three', '  four']);
  });
});
