import { chmodSync, mkdirSync, mkdtempSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { startOptions } from './options.ts';
import { fetchRuntime, runtimePath } from './runtime.ts';

test('what the start takes, and what it takes it for', () => {
  expect(startOptions([], {})).toEqual({ browser: false, open: true, port: 0, idleMs: 300_000, files: [] });
  expect(startOptions(['a.chw', '--browser', '--port', '4000', '--idle', '0'], {})).toEqual({
    browser: true,
    open: true,
    port: 4000,
    idleMs: 0,
    files: ['a.chw'],
  });
  expect(startOptions(['--no-open'], {})).toMatchObject({ browser: true, open: false });
  expect(startOptions([], { CHANNELWRIGHT_NO_OPEN: '1' })).toMatchObject({ browser: true, open: false });
  expect(startOptions([], { CHANNELWRIGHT_HOST: 'browser', CHANNELWRIGHT_IDLE_MINUTES: '2' })).toMatchObject({
    browser: true,
    open: true,
    idleMs: 120_000,
  });
});

test('what it does not take is named', () => {
  expect(() => startOptions(['--prot', '1'], {})).toThrow(/--prot/);
  for (const port of ['x', '-1', '65536', '1.5', '', ' '])
    expect(() => startOptions([`--port=${port}`], {}), port).toThrow('--port takes a');
  expect(() => startOptions(['--idle', 'long'], {})).toThrow('--idle takes a number from 0');
});

test('the desktop runtime is found where it was put, and only there', async () => {
  const root = mkdtempSync(join(tmpdir(), 'channelwright-runtime-'));
  try {
    expect(await runtimePath(root, {})).toBeNull();
    const folder = join(root, 'node_modules', 'electron');
    mkdirSync(join(folder, 'dist'), { recursive: true });
    writeFileSync(join(folder, 'path.txt'), 'electron\n');
    expect(await runtimePath(root, {})).toBeNull();
    const executable = join(folder, 'dist', 'electron');
    writeFileSync(executable, '');
    chmodSync(executable, 0o755);
    expect(await runtimePath(root, {})).toBe(executable);
    expect(await runtimePath(root, { ELECTRON_OVERRIDE_DIST_PATH: join(root, 'none') })).toBeNull();
  } finally {
    rmSync(root, { recursive: true, force: true });
  }
});

test('a start that found no way to the runtime is remembered for a day; the next ones do not wait', async () => {
  const root = mkdtempSync(join(tmpdir(), 'channelwright-runtime-'));
  try {
    let asked = 0;
    const refuse = async (): Promise<boolean> => {
      asked += 1;
      return false;
    };
    const told: string[] = [];
    const fetched = (): Promise<boolean> => fetchRuntime(root, (line) => told.push(line), refuse);
    expect(await fetched()).toBe(false);
    expect(await fetched()).toBe(false);
    expect(asked).toBe(1);
    const mark = join(root, 'node_modules', '.cache', 'channelwright', 'no-runtime');
    const twoDaysAgo = new Date(Date.now() - 2 * 24 * 3_600_000);
    utimesSync(mark, twoDaysAgo, twoDaysAgo);
    expect(await fetched()).toBe(false);
    expect(asked).toBe(2);
    // A way that leads to an installer which is not there.
    utimesSync(mark, twoDaysAgo, twoDaysAgo);
    expect(
      await fetchRuntime(
        root,
        (line) => told.push(line),
        async () => true,
      ),
    ).toBe(false);
    expect(told).toHaveLength(1);
  } finally {
    rmSync(root, { recursive: true, force: true });
  }
});
