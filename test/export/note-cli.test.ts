import { spawnSync } from 'node:child_process';
import {
  chmodSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { makeFile } from '../../db/make.ts';
import { noteMain } from '../../main/cli/note-command.ts';
import { readChipFile } from '../../main/cli/read-chip.ts';
import { run as solveRun } from '../cli/run.ts';
import { awkwardChip, demoPath, demos, NAMES, textOf, withPoppler } from './note-chips.ts';

/** `npm run note`, as people and scripts call it. */

const COMMAND = join(import.meta.dirname, '../../main/cli/note.ts');

let folder = '';
const file = (name: string): string => join(folder, name);
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'chip-note-cli-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

async function note(...argv: readonly string[]): Promise<{ code: number; out: string; err: string }> {
  const said = { out: '', err: '' };
  const code = await noteMain(argv, {
    out: (text) => {
      said.out += text;
    },
    err: (text) => {
      said.err += text;
    },
  });
  return { code, ...said };
}

const SPLITTER = demoPath('eight-way-splitter.json');
const IDEAL = ['--junctions', 'ideal'] as const;

describe('exit codes', () => {
  test('0 all met, 1 something missed; either way the files are there', async () => {
    const met = await note(SPLITTER, ...IDEAL, '--pdf', file('met.pdf'), '--html', file('met.html'));
    expect(met.err).toBe('');
    expect(met.code).toBe(0);
    expect(met.out).toContain('All targets and limits are met.');
    expect(readFileSync(file('met.pdf')).subarray(0, 5).toString()).toBe('%PDF-');
    expect(readFileSync(file('met.html'), 'utf8')).toMatch(/^<!doctype html>/);

    const missed = file('missed.json');
    writeFileSync(
      missed,
      readFileSync(SPLITTER, 'utf8').replace(
        '"targets": [',
        '"limits": [{ "name": "cells", "shear": "1 mPa" }],\n  "targets": [',
      ),
    );
    const second = await note(missed, ...IDEAL, '--split', file('missed.csv'));
    expect(second.code).toBe(1);
    expect(second.out).toContain('Missed: cells.');
    expect(existsSync(file('missed.csv'))).toBe(true);
  });

  const CALLS: [name: string, argv: () => string[], what: RegExp][] = [
    ['no file', () => [], /No file is named/],
    ['nothing to write', () => [SPLITTER], /Nothing is to be written/],
    ['an unknown option', () => [SPLITTER, '--word', 'x'], /Unknown option '--word'/],
    [
      'another paper',
      () => [SPLITTER, '--pdf', file('x.pdf'), '--paper', 'A3'],
      /--paper takes A4 or letter/,
    ],
    ['PDF on standard output', () => [SPLITTER, '--pdf', '-'], /cannot go to standard output/],
    [
      'a split of no known kind',
      () => [SPLITTER, '--split', file('x.doc')],
      /ends in \.csv, \.pdf or \.html/,
    ],
    [
      'two on standard output',
      () => [SPLITTER, '--html', '-', '--json', '-'],
      /Two outputs are standard output/,
    ],
    [
      'a file named twice',
      () => [SPLITTER, '--pdf', file('x.pdf'), '--html', file('x.pdf')],
      /One file is named twice/,
    ],
    [
      'an overwritten chip',
      () => [file('own.json'), '--json', file('own.json')],
      /what is read would be overwritten/,
    ],
    ['no such chip', () => [file('nowhere.json'), '--pdf', file('x.pdf')], /There is no such file/],
    ['no chip', () => [file('words.json'), '--pdf', file('x.pdf')], /./],
    ['no such folder', () => [SPLITTER, ...IDEAL, '--pdf', file('none/x.pdf')], /folder/i],
  ];
  test.each(CALLS)('2 for %s: what, where, what to do, and nothing written', async (_, argv, what) => {
    writeFileSync(file('own.json'), readFileSync(SPLITTER));
    writeFileSync(file('words.json'), 'not a chip');
    const before = readdirSync(folder).sort();
    const { code, out, err } = await note(...argv());
    expect(code).toBe(2);
    expect(out).toBe('');
    expect(err).toMatch(what);
    expect(err).toMatch(/\n {2}where: .+\n {2}do: {4}.+\n$/);
    expect(readdirSync(folder).sort()).toEqual(before);
    expect(readFileSync(file('own.json'), 'utf8')).toBe(readFileSync(SPLITTER, 'utf8'));
  });
});

test('help is no fault', async () => {
  const { code, out } = await note('--help');
  expect(code).toBe(0);
  expect(out).toContain('--paper      A4 (the default) or letter');
});

test('tables go to a file each, and the split alone to standard output', async () => {
  await note(SPLITTER, ...IDEAL, '--csv', file('tables.csv'));
  const made = readdirSync(folder).filter((name) => name.startsWith('tables '));
  expect(made).toContain('tables flow-split.csv');
  expect(made).toContain('tables ports.csv');
  const { out } = await note(SPLITTER, ...IDEAL, '--split', '-');
  expect(out).toBe(readFileSync(file('tables flow-split.csv'), 'utf8'));
});

test('a project gives the note of its chip', async () => {
  const chip = await readChipFile(SPLITTER);
  makeFile(file('splitter.chw'), chip, { program: 'test' });
  const [one, two] = [
    await note(file('splitter.chw'), ...IDEAL, '--split', '-'),
    await note(SPLITTER, ...IDEAL, '--split', '-'),
  ];
  expect(one).toEqual(two);
});

describe('the numbers are those of the command line', () => {
  test('the JSON is the same to the byte', async () => {
    const [one, two] = [
      await note(SPLITTER, ...IDEAL, '--json', '-'),
      await solveRun(SPLITTER, ...IDEAL, '--json', '-'),
    ];
    expect(one.out).toBe(two.out);
    expect(one.code).toBe(two.code);
  });

  const WANTED: Readonly<Record<string, readonly string[]>> = {
    Ports: ['pressure', 'flow in'],
    Routes: ['share', 'residence time', 'peak wall shear'],
  };
  for (const demo of demos())
    withPoppler(`${demo}: every figure of its tables stands in the note`, async () => {
      const solved = await solveRun(demoPath(demo), ...IDEAL);
      const made = await note(demoPath(demo), ...IDEAL, '--pdf', file(`${demo}.pdf`));
      expect(made.code).toBe(solved.code);
      const words = new Set(textOf(file(`${demo}.pdf`)).split(/\s+/));
      let checked = 0;
      for (const block of solved.out.split('\n\n')) {
        const [title, head, , ...rows] = block.split('\n');
        const wanted = WANTED[title!];
        if (!wanted) continue;
        const heads = head!.trim().split(/ {2,}/);
        for (const row of rows) {
          const cells = row.trim().split(/ {2,}/);
          const shown = wanted
            .map((name) => cells[heads.indexOf(name)]!)
            .filter((cell) => /^−?\d+\.\d+$/.test(cell));
          for (const figure of shown) {
            expect(words, `${title}: ${row}`).toContain(figure);
            checked += 1;
          }
        }
      }
      expect(checked).toBeGreaterThan(5);
    });
});

withPoppler('awkward names come through the command line into every output', async () => {
  const { writeDescription } = await import('../../solver/chip/description-write.ts');
  writeFileSync(file('names.json'), writeDescription(awkwardChip()));
  const { code } = await note(
    file('names.json'),
    ...IDEAL,
    '--pdf',
    file('names.pdf'),
    '--html',
    file('names.html'),
    '--csv',
    file('names.csv'),
  );
  expect(code).toBe(1);
  const html = readFileSync(file('names.html'), 'utf8');
  const csv = readFileSync(file('names ports.csv'), 'utf8');
  for (const name of [NAMES.greek, NAMES.hebrew, NAMES.arabic, NAMES.han, NAMES.long]) {
    expect(html).toContain(name);
    expect(csv).toContain(name);
  }
  expect(csv).toContain("'+1+1");
  expect(textOf(file('names.pdf'))).toContain('τ₀');
});

describe('what cannot be written leaves what was there', () => {
  const call = (to: string): string[] => [COMMAND, SPLITTER, ...IDEAL, '--html', to, '--pdf', `${to}.pdf`];

  test('a full disk', () => {
    const small = file('small');
    mkdirSync(small);
    const old = join(small, 'note.html');
    const program = `"${process.execPath}" "$@"; code=$?; cat "${old}"; ls -A "${small}"; exit $code`;
    const begin = `printf old > "${old}"`;
    const mounted = `mount -t tmpfs -o size=64k tmpfs "${small}" && ${begin} && ${program}`;
    // a small disk in memory for the child alone; where nobody may mount one, a bound on the size of files
    const ways: readonly (readonly [string, string[]])[] = [
      ['unshare', ['--mount', 'sh', '-c', mounted, 'sh']],
      ['unshare', ['--mount', '--map-root-user', 'sh', '-c', mounted, 'sh']],
      ['sh', ['-c', `${begin} && { trap '' XFSZ; ulimit -f 64; ${program}; }`, 'sh']],
    ];
    const said: string[] = [];
    let told: { status: number | null; stdout: string; stderr: string } | null = null;
    for (const [command, args] of ways) {
      const ran = spawnSync(command, [...args, ...call(old)], { encoding: 'utf8' });
      said.push(ran.stderr);
      if (!ran.stdout.startsWith('old')) continue;
      told = ran;
      break;
    }
    if (!told) throw new Error(said.join('\n'));
    expect(told.status).toBe(2);
    expect(told.stdout).toBe('oldnote.html\n');
    expect(told.stderr).toMatch(/where: .*note\.html/);
    expect(told.stderr).toMatch(/do: {4}.+/);
  }, 180_000);

  test('no permission', () => {
    const kept = file('kept');
    mkdirSync(kept);
    writeFileSync(join(kept, 'note.html'), 'old');
    chmodSync(kept, 0o555);
    chmodSync(folder, 0o755);
    // whoever may write everywhere asks as somebody who may not
    const somebody = process.getuid?.() === 0 ? { uid: 65_534, gid: 65_534 } : {};
    const { status, stderr } = spawnSync(process.execPath, call(join(kept, 'note.html')), {
      encoding: 'utf8',
      ...somebody,
    });
    expect(stderr).toMatch(/where: .*note\.html/);
    expect(status).toBe(2);
    expect(readFileSync(join(kept, 'note.html'), 'utf8')).toBe('old');
    expect(readdirSync(kept)).toEqual(['note.html']);
    chmodSync(kept, 0o755);
  }, 180_000);
});
