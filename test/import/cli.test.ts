import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { main } from '../../main/cli/bring-in-command.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { dxf, outline } from './read.ts';

/** `npm run bring-in`: exit codes, what is written, and that nothing is where it fails. */

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'channelwright-bring-in-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

async function run(...argv: string[]): Promise<{ code: number; out: string; err: string }> {
  let [out, err] = ['', ''];
  const io = {
    out: (text: string) => {
      out += text;
    },
    err: (text: string) => {
      err += text;
    },
  };
  return { code: await main(argv, io), out, err };
}

const BOX = outline([
  [1000, 1000],
  [9000, 1000],
  [9000, 1100],
  [1000, 1100],
]);

function drawing(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

test('all understood is 0, a list of what was not is 1; the chip is a description and the report JSON', async () => {
  const out = join(folder, 'chip.json');
  const report = join(folder, 'report.json');
  const whole = await run(drawing('a.dxf', dxf(BOX)), '--depth', '50 um', '-o', out, '--json', report);
  expect(whole.err).toBe('');
  expect(whole.code).toBe(0);
  const chip = readDescription(readFileSync(out, 'utf8'));
  expect(chip.channels.map(({ width }) => width)).toEqual([[100_000, 100_000]]);
  expect(chip.layers.map(({ depth }) => depth)).toEqual([50_000]);
  const told = JSON.parse(readFileSync(report, 'utf8')) as { format: string; notUnderstood: unknown[] };
  expect([told.format, told.notUnderstood]).toEqual(['channelwright-bring-in', []]);
  const text = drawing('b.dxf', dxf([...BOX, 0, 'TEXT', 8, 'NOTES', 1, 'a']));
  const some = await run(text, '--depth', '50 um', '-o', '-');
  expect(some.code).toBe(1);
  expect(readDescription(some.out).channels).toHaveLength(1);
});

test('layers and units as they are given', async () => {
  const file = drawing('c.dxf', dxf(BOX, [], 0));
  const out = join(folder, 'c.json');
  const silent = await run(file, '--depth', '50 um', '-o', out);
  expect([silent.code, existsSync(out)]).toEqual([2, false]);
  expect(silent.err).toMatch(/does not say what its numbers are in/);
  const given = await run(
    file,
    '--depth',
    '50 um',
    '--unit',
    '10 nm',
    '--layer',
    'FLOW=cavity:20um:deep',
    '-o',
    out,
  );
  expect(given.code).toBe(0);
  const chip = readDescription(readFileSync(out, 'utf8'));
  expect(chip.layers.map(({ id, depth }) => [id, depth])).toEqual([['deep', 20_000]]);
  expect(chip.channels[0]!.width[0]).toBe(1000);
});

test.each([
  ['no drawing', [], /No drawing is named/],
  ['no depth', ['a.dxf', '-o', 'x'], /has no depth/],
  ['no place', ['a.dxf', '--depth', '50 um'], /No place for the chip/],
  ['a depth without its unit', ['a.dxf', '--depth', '50', '-o', 'x'], /--depth takes a length/],
  [
    'an unknown role',
    ['a.dxf', '--depth', '50 um', '-o', 'x', '--layer', 'A=water'],
    /--layer takes a layer/,
  ],
  ['an unknown option', ['a.dxf', '--width', '3'], /Unknown option/],
  ['no such file', ['none.dxf', '--depth', '50 um', '-o', 'x'], /cannot be read/],
])('%s: 2, in one message, nothing written', async (_, argv, says) => {
  const { code, out, err } = await run(...argv.map((part) => (part === 'x' ? join(folder, 'x') : part)));
  expect([code, out, existsSync(join(folder, 'x'))]).toEqual([2, '', false]);
  expect(err).toMatch(says);
  expect(err.split('\n')).toHaveLength(4);
});

test('a place that is the drawing itself, or that cannot be written, leaves what is there', async () => {
  const file = drawing('d.dxf', dxf(BOX));
  expect((await run(file, '--depth', '50 um', '-o', file)).code).toBe(2);
  expect(readFileSync(file, 'utf8')).toBe(dxf(BOX));
  const { code, err } = await run(file, '--depth', '50 um', '-o', join(folder, 'none', 'x.json'));
  expect(code).toBe(2);
  expect(err).toMatch(/do:/);
});
