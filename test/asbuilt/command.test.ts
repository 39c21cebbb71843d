import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { main } from '../../main/cli/as-built-command.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { cross } from './chips.ts';

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'channelwright-as-built-'));
  writeFileSync(at('chip.json'), writeDescription(cross()));
  writeFileSync(at('good.csv'), 'part,what,value,uncertainty\nflow,depth,20 um,0.1 um\nb,width,1001,1\n');
  writeFileSync(at('wide.csv'), 'part,what,value,uncertainty\nb,width,1100,5\n');
  writeFileSync(at('bad.csv'), 'part,what,value\nb,width,1100\nq,width,3\n');
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));
const at = (name: string): string => join(folder, name);

async function run(...argv: string[]): Promise<{ code: number; out: string; err: string }> {
  let [out, err] = ['', ''];
  const code = await main(argv, {
    out: (text) => {
      out += text;
    },
    err: (text) => {
      err += text;
    },
  });
  return { code, out, err };
}

test('all met: 0, and both chips side by side', async () => {
  const { code, out, err } = await run(at('chip.json'), at('good.csv'), '--junctions', 'ideal');
  expect(err).toBe('');
  expect(code).toBe(0);
  expect(out).toMatch(/test, as built/);
  expect(out).toMatch(/share drawn\s+share made/);
  expect(out).toMatch(/The width of 1 channel was measured; 3 more count as drawn/);
  expect(out).toMatch(/The made chip meets its targets as it is driven/);
});

test('a target missed: 1, with the drives that restore it, and the caution', async () => {
  const { code, out } = await run(at('chip.json'), at('wide.csv'), '--junctions', 'ideal');
  expect(code).toBe(1);
  expect(out).toMatch(/in a\s+50.00 %\s+50.00 %\s+47.\d+ %.*MISSED\s+50.00 %\s+met/);
  expect(out).toMatch(/Drives that restore the targets/);
  expect(out).toMatch(/in b: \d+\.\d+ \w+ in place of/);
  expect(out).toMatch(/can burst/);
});

test('JSON and the made chip’s description are written; what is set there is what the text says', async () => {
  const [json, made] = [at('out.json'), at('made.json')];
  const { code } = await run(
    at('chip.json'),
    at('wide.csv'),
    '--junctions',
    'ideal',
    '--json',
    json,
    '--chip',
    made,
  );
  expect(code).toBe(1);
  const report = JSON.parse(readFileSync(json, 'utf8'));
  expect(report).toMatchObject({ format: 'channelwright-as-built', version: 1 });
  expect(report.drawn.format).toBe('channelwright-result');
  expect(report.made.ports[0].making.share.likely).toBeGreaterThan(0);
  expect(report.restored.met).toBe(true);
  expect(report.restored.result.targets.every(({ met }: { met: boolean }) => met)).toBe(true);
  const chip = readDescription(readFileSync(made, 'utf8'));
  expect(chip.channels[1]).toMatchObject({
    width: [1_100_000, 1_100_000],
    tolerance: { width: { length: 5000 } },
  });
  const twice = await run(at('chip.json'), at('wide.csv'), '--junctions', 'ideal', '--json', '-');
  expect(JSON.parse(twice.out)).toEqual(report);
});

test('only the drives named are set', async () => {
  const { out } = await run(at('chip.json'), at('wide.csv'), '--junctions', 'ideal', '--set', 'in b');
  expect(out).toMatch(/in b: /);
  expect(out).not.toMatch(/in a: /);
});

const REFUSED: readonly (readonly [string, () => string[], RegExp])[] = [
  ['nothing named', () => [], /No chip is named.*where: the command/s],
  ['no table named', () => [at('chip.json')], /No table of measurements is named/],
  ['three files', () => [at('chip.json'), at('good.csv'), 'x'], /More than two files/],
  ['an unknown option', () => [at('chip.json'), at('good.csv'), '--depth', '3'], /--depth/],
  ['no such table', () => [at('chip.json'), at('none.csv')], /no such file.*where: .*none\.csv/is],
  ['a folder', () => [at('chip.json'), folder], /This is a folder/],
  ['no such chip', () => [at('none.json'), at('good.csv')], /no such file.*where: .*none\.json/is],
  [
    'a bad row',
    () => [at('chip.json'), at('bad.csv')],
    /no channel and no layer "q".*where: .*bad\.csv, row 3, column part/s,
  ],
  ['a port that is none', () => [at('chip.json'), at('wide.csv'), '--set', 'nowhere'], /no port "nowhere"/],
  ['one file twice', () => [at('chip.json'), at('good.csv'), '--json', at('chip.json')], /named twice/],
  [
    'two outputs to standard output',
    () => [at('chip.json'), at('good.csv'), '--json', '-', '--chip', '-'],
    /Both/,
  ],
  ['an accuracy of none', () => [at('chip.json'), at('good.csv'), '--accuracy', '7'], /--accuracy takes/],
];
test.each(REFUSED)('%s: 2, one message, nothing written', async (_, argv, message) => {
  const before = readdirSync(folder).sort();
  const { code, out, err } = await run(...argv(), '--junctions', 'ideal');
  expect(code).toBe(2);
  expect(out).toBe('');
  expect(err).toMatch(message);
  expect(err.split('\n').filter(Boolean)).toHaveLength(3);
  expect(readdirSync(folder).sort()).toEqual(before);
});

test('help is 0', async () => {
  expect(await run('--help')).toMatchObject({ code: 0, err: '' });
});
