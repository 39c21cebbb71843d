import { spawnSync } from 'node:child_process';
import {
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
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { main } from '../../main/cli/mask-command.ts';
import { maskReport } from '../../main/contract/mask.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { bend } from './mask-drawings.ts';

const ROOT = join(import.meta.dirname, '../..');
const DEMO = join(ROOT, 'assets/demo/gravity-crossing.json');
const BIG = join(ROOT, 'assets/demo/gradient-tree.json');

async function mask(...argv: readonly string[]): Promise<{ code: number; out: string; err: string }> {
  let out = '';
  let err = '';
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

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'channelwright-mask-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe('npm run mask', () => {
  let to = '';
  let count = 0;
  beforeEach(() => {
    count += 1;
    to = join(folder, `to ${count}`);
    mkdirSync(to);
  });

  test('every format at once, and as JSON what was made', async () => {
    const { code, out, err } = await mask(DEMO, '--format', 'dxf,gdsii,svg,pdf', '--out', to, '--json', '-');
    expect([code, err]).toEqual([0, '']);
    const report = maskReport.parse(JSON.parse(out));
    expect(report.planes.map(({ name }) => name)).toEqual(['lower', 'upper', 'ports and vias']);
    expect(report.files.map(({ format }) => format)).toEqual(['dxf', 'gdsii', 'svg', 'svg', 'svg', 'pdf']);
    expect(readdirSync(to).sort()).toEqual(report.files.map(({ name }) => name).sort());
    for (const { path, size, compared } of report.files) {
      expect(readFileSync(path!).length).toBe(size);
      expect(compared.length).toBeGreaterThan(0);
      for (const { difference, allowed } of compared) expect(difference).toBeLessThanOrEqual(allowed);
    }
    // the unit is in the name too
    for (const name of readdirSync(to)) expect(name).toMatch(/\.mask-(um|mm|true-size)\./);
    expect(report.options.polarity).toBe('dark-field');
    expect(report.notes.join(' ')).toMatch(/Not for diagnosis or treatment/);
  });

  test('options take units and layers, and say what was applied', async () => {
    const json = join(to, 'report.json');
    const { code, out } = await mask(
      ...[DEMO, '--format=gdsii', '--out', join(to, 'mine.gds'), '--json', json, '--layer', 'upper'],
      ...['--undercut', 'upper=2 um', '--shrink', '1.5 %', '--mirror', '--chord', '0.5um', '--lane', '0'],
      ...[
        '--polarity',
        'clear-field',
        '--no-marks',
        '--no-labels',
        '--wafer',
        '200 mm',
        '--pitch',
        '90 mm, 30mm',
      ],
    );
    expect(code).toBe(0);
    const report = maskReport.parse(JSON.parse(readFileSync(json, 'utf8')));
    expect(report.options).toMatchObject({
      layers: ['upper'],
      undercut: { upper: 2e-6 },
      shrink: { upper: 0.015 },
      mirror: true,
      chordError: 5e-7,
      lane: 0,
      polarity: 'clear-field',
      wafer: { diameter: 0.2, edge: 0.003, pitch: [0.09, 0.03] },
    });
    expect(report.placed.length).toBeGreaterThan(4);
    expect(report.files.map(({ path }) => path)).toEqual([join(to, 'mine.gds')]);
    expect(out).toMatch(/Mirrored left to right/);
    expect(readdirSync(to).sort()).toEqual(['mine.gds', 'report.json']);
  });

  test('every format and option of a demo reads back the same to the command too', async () => {
    for (const more of [
      ['--mirror'],
      ['--shrink', '1 %', '--wafer', '200 mm'],
      ['--pads', '--undercut', '5 um'],
    ]) {
      const { code, err } = await mask(BIG, '--format', 'dxf,gdsii,svg,pdf', '--out', to, ...more);
      expect([code, err], more.join(' ')).toEqual([0, '']);
    }
  });

  test('several files take the name that was chosen', async () => {
    expect((await mask(DEMO, '--format', 'svg', '--format', 'dxf', '--out', join(to, 'plate.x'))).code).toBe(
      0,
    );
    expect(readdirSync(to).sort()).toEqual([
      'plate.holes.mask-mm.svg',
      'plate.l1-lower.mask-mm.svg',
      'plate.l2-upper.mask-mm.svg',
      'plate.mask-um.dxf',
    ]);
    expect((await mask(DEMO, '--separate', '--out', `${to}/`)).code).toBe(0);
    expect(readdirSync(to).filter((name) => name.startsWith('Gravity')).length).toBe(3);
  });

  test('finer than the process holds: made, and code 1', async () => {
    const file = join(to, 'fine.json');
    writeFileSync(file, writeDescription({ ...bend(), process: { kind: 'film-mask' } }));
    const { code, out } = await mask(file, '--out', to);
    expect(code).toBe(1);
    expect(out).toMatch(/The opening of c is 4 µm wide on the mask; .* holds 25 µm/);
    expect(readdirSync(to)).toContain('bend.mask-um.dxf');
    const accepted = [{ kind: 'least-width', where: 'c', reason: 'a trial' }];
    writeFileSync(file, writeDescription({ ...bend(), process: { kind: 'film-mask' }, accepted }));
    expect((await mask(file, '--out', to)).code).toBe(0);
  });

  const BAD: readonly (readonly [string, RegExp, ...string[]])[] = [
    ['no file', /No file is named/],
    ['an option that is none', /Unknown option '--scale'/, DEMO, '--scale', '2'],
    ['a format that is none', /No mask format "dwg" is known/, DEMO, '--format', 'dwg'],
    ['a length without its unit', /--lane takes a value with its unit, not "200"/, DEMO, '--lane', '200'],
    ['a share that is a length', /--shrink takes a value/, DEMO, '--shrink', '2 um'],
    ['a shrinkage beyond bounds', /shrink/, DEMO, '--shrink', '50 %'],
    ['values for layers mixed', /names no layer/, DEMO, '--undercut', 'lower=1um', '--undercut', '2um'],
    ['a layer that is not there', /There is no layer "middle"/, DEMO, '--layer', 'middle'],
    ['an edge without a wafer', /belong to a wafer/, DEMO, '--edge', '3 mm'],
    ['a wafer too small', /does not fit on a wafer/, DEMO, '--wafer', '50 mm'],
    ['an etch that closes a channel', /would be closed/, DEMO, '--undercut', '300 um'],
    ['a file that is not there', /no such file/, 'nothing.json'],
  ];
  for (const [name, what, ...argv] of BAD) {
    test(`${name}: said in three lines, code 2, nothing written`, async () => {
      const { code, out, err } = await mask(...argv, '--out', to);
      expect([code, out]).toEqual([2, '']);
      expect(err).toMatch(what);
      expect(err).toMatch(/^[^\n]+\n {2}where: [^\n]+\n {2}do: {4}[^\n]+\n$/);
      expect(readdirSync(to)).toEqual([]);
    });
  }

  test('what is read is never overwritten', async () => {
    const file = join(to, 'chip.json');
    writeFileSync(file, writeDescription(bend()));
    const before = readFileSync(file, 'utf8');
    const { code, err } = await mask(file, '--out', file);
    expect(code).toBe(2);
    expect(err).toMatch(/what is read would be overwritten/);
    expect(readFileSync(file, 'utf8')).toBe(before);
  });
});

/** The command on a disk of 64 kB, in a process of its own; `ways` as the system allows. */
function onSmallDisk(script: (disk: string, run: string) => string): { said: string; how: string } {
  const disk = join(folder, 'disk');
  rmSync(disk, { recursive: true, force: true });
  mkdirSync(disk);
  const run = `"${process.execPath}" "${join(ROOT, 'main/cli/mask.ts')}"`;
  const mounted = `mount -t tmpfs -o size=64k tmpfs "${disk}" && ${script(disk, run)}`;
  const ways: readonly (readonly [string, string, string[]])[] = [
    ['a disk of 64 kB', 'unshare', ['--mount', 'sh', '-c', mounted]],
    ['a disk of 64 kB', 'unshare', ['--mount', '--map-root-user', 'sh', '-c', mounted]],
    ['files of at most 64 kB', 'sh', ['-c', `trap '' XFSZ; ulimit -f 128; ${script(disk, run)}`]],
  ];
  for (const [how, command, args] of ways) {
    const child = spawnSync(command, args, { encoding: 'utf8', timeout: 50_000 });
    if (child.status === 0) return { said: child.stdout + child.stderr, how };
  }
  throw new Error('no small disk could be made');
}

describe('where it cannot be written', () => {
  test('on a full disk, and on one that is write-protected, the old file is untouched', () => {
    const { said, how } = onSmallDisk((disk, run) =>
      [
        `printf "the old file" > "${disk}/x.gds"`,
        `${run} "${BIG}" --format gdsii --out "${disk}/x.gds"; echo "code $?"`,
        `cat "${disk}/x.gds"; echo; ls -A "${disk}"`,
        `mount -o remount,ro "${disk}" 2>/dev/null && { ${run} "${DEMO}" --out "${disk}/x.gds"; echo "code $?"; cat "${disk}/x.gds"; }`,
        'echo; echo end',
      ].join('; '),
    );
    expect(said).toMatch(/code 2\nthe old file\nx\.gds\n/);
    if (how.startsWith('a disk')) {
      expect(said).toMatch(/no room left on the disk/);
      expect(said).toMatch(/cannot be written to/);
      expect(said.match(/the old file/g)!.length).toBe(2);
      expect(said.match(/code 2/g)!.length).toBe(2);
    }
    expect(said).toMatch(/end\n/);
  });

  test('one of several files that cannot be written: none is', async () => {
    const to = join(folder, 'several');
    mkdirSync(join(to, 'plate.mask-true-size.pdf'), { recursive: true });
    writeFileSync(join(to, 'plate.mask-um.dxf'), 'the old file');
    const { code, err } = await mask(DEMO, '--format', 'dxf,gdsii,pdf', '--out', join(to, 'plate.x'));
    expect(code).toBe(2);
    expect(err).toMatch(/folder/);
    expect(existsSync(join(to, 'plate.mask-um.gds'))).toBe(false);
    expect(readFileSync(join(to, 'plate.mask-um.dxf'), 'utf8')).toBe('the old file');
    expect(readdirSync(to).sort()).toEqual(['plate.mask-true-size.pdf', 'plate.mask-um.dxf']);
  });
});
