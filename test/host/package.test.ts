import { spawnSync } from 'node:child_process';
import { chmodSync, existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join, relative, resolve } from 'node:path';
import { runInNewContext } from 'node:vm';
import { FuseV1Options, getCurrentFuseWire } from '@electron/fuses';
import { build } from 'vite';
import { beforeAll, expect, test } from 'vitest';
import { icnsOf, icoOf } from '../../assets/icons/containers.ts';
import { inFolder } from '../faults/sample.ts';

// The packages as far as they can be made and looked at without the desktop's runtime: a file that
// has the runtime's switches in it stands for it.

/** How a switch that is on stands in the runtime: the figure 1. */
const ON = 0x31;

const ROOT = resolve(import.meta.dirname, '../..');
const builder = createRequire(createRequire(import.meta.url).resolve('electron-builder'));
const asar = builder('@electron/asar') as {
  listPackage(archive: string, options: object): string[];
  extractAll(archive: string, to: string): void;
  getRawHeader(archive: string): { header: AsarEntry };
};
const yaml = builder('js-yaml') as { load(text: string): unknown };

interface AsarEntry {
  readonly files?: Readonly<Record<string, AsarEntry>>;
  readonly unpacked?: boolean;
  readonly integrity?: { readonly hash: string };
}

interface Config {
  readonly fileAssociations: readonly { ext: string; icon: string }[];
  readonly mac: { icon: string; target: readonly { target: string; arch: string[] }[] };
  readonly win: { icon: string; target: readonly { target: string; arch: string[] }[] };
  readonly linux: { icon: string; target: readonly { target: string; arch: string[] }[] };
  readonly electronFuses: Readonly<Record<string, boolean>>;
  readonly npmRebuild: boolean;
}

const config = yaml.load(readFileSync(join(ROOT, 'electron-builder.yml'), 'utf8')) as Config;

beforeAll(async () => {
  await build({ configFile: join(ROOT, 'main/vite.config.ts'), logLevel: 'error' });
}, 120_000);

/** A folder that passes for the runtime's: its executable has the switches, all as they come. */
function standIn(folder: string): void {
  mkdirSync(join(folder, 'resources'), { recursive: true });
  mkdirSync(join(folder, 'locales'));
  const switches = Buffer.concat([
    Buffer.from('\x7fELF', 'latin1'),
    Buffer.alloc(500),
    Buffer.from('dL7pKGdnNz796PbbjQWNKmHXBZaB9tsX', 'latin1'),
    Buffer.from([1, 8]),
    Buffer.from('10111011', 'latin1'),
    Buffer.alloc(500),
  ]);
  writeFileSync(join(folder, 'electron'), switches);
  chmodSync(join(folder, 'electron'), 0o755);
  for (const file of [
    'version',
    'LICENSE',
    'LICENSES.chromium.html',
    'chrome-sandbox',
    'resources.pak',
    'locales/en-US.pak',
  ])
    writeFileSync(join(folder, file), '0');
}

test('targets for the three systems, associations, icons of ours', () => {
  const architectures = (targets: Config['mac']['target']): string[] => targets.flatMap((one) => one.arch);
  for (const system of [config.mac, config.win, config.linux]) {
    expect(new Set(architectures(system.target))).toEqual(new Set(['x64', 'arm64']));
    expect(system.icon).toMatch(/^dist\/icons\/mark/);
  }
  expect(config.mac.target.map((one) => one.target)).toEqual(['dmg']);
  expect(config.win.target.map((one) => one.target)).toEqual(['nsis']);
  expect(config.linux.target.map((one) => one.target)).toEqual(['AppImage', 'deb']);
  expect(config.fileAssociations).toMatchObject([{ ext: 'chw', icon: 'dist/icons/project' }]);
  expect(config.npmRebuild).toBe(false);
  for (const name of ['mark', 'project']) {
    const drawing = readFileSync(join(ROOT, 'assets/icons', `${name}.svg`), 'utf8');
    expect(drawing).not.toMatch(/<(text|image|script|use)\b|href/);
  }
  const { files } = JSON.parse(
    readFileSync(join(ROOT, 'node_modules/better-sqlite3/package.json'), 'utf8'),
  ) as { files: string[] };
  expect(files).toContain('prebuilds/**');
  for (const binary of ['darwin-x64', 'darwin-arm64', 'win32-x64', 'win32-arm64', 'linux-x64', 'linux-arm64'])
    expect(existsSync(join(ROOT, 'node_modules/better-sqlite3/prebuilds', `${binary}.node`)), binary).toBe(
      true,
    );
});

test('icons are put into the containers that the systems read', () => {
  const sizes = [16, 24, 32, 48, 64, 128, 256, 512, 1024];
  const pictures = sizes.map((size) => ({ size, png: Buffer.from(`PNG of ${size}`) }));
  const ico = icoOf(pictures.filter(({ size }) => size <= 256));
  expect([ico.readUInt16LE(0), ico.readUInt16LE(2), ico.readUInt16LE(4)]).toEqual([0, 1, 7]);
  for (let entry = 0; entry < 7; entry += 1) {
    const at = ico.readUInt32LE(6 + 16 * entry + 12);
    const length = ico.readUInt32LE(6 + 16 * entry + 8);
    expect(ico.toString('latin1', at, at + length)).toBe(`PNG of ${ico[6 + 16 * entry] || 256}`);
  }
  const icns = icnsOf(pictures);
  expect(icns.toString('latin1', 0, 4)).toBe('icns');
  expect(icns.readUInt32BE(4)).toBe(icns.length);
  let at = 8;
  const kinds: string[] = [];
  while (at < icns.length) {
    kinds.push(icns.toString('latin1', at, at + 4));
    at += icns.readUInt32BE(at + 4);
  }
  expect(at).toBe(icns.length);
  expect(kinds).toEqual(['icp4', 'icp5', 'ic11', 'ic12', 'ic07', 'ic08', 'ic13', 'ic09', 'ic14', 'ic10']);
  expect(() => icnsOf(pictures.slice(1))).toThrow('no picture of 16');
});

test('the preload gives the page three named functions and nothing of the modules behind them', async () => {
  const exposed: Record<string, Record<string, (...args: unknown[]) => unknown>> = {};
  const invoked: unknown[][] = [];
  const heard: ((event: unknown, name: string, data: string) => void)[] = [];
  const off: unknown[] = [];
  const electron = {
    contextBridge: {
      exposeInMainWorld: (key: string, api: Record<string, () => unknown>) => {
        exposed[key] = api;
      },
    },
    ipcRenderer: {
      invoke: async (...args: unknown[]) => invoked.push(args),
      on: (channel: string, listener: (event: unknown, name: string, data: string) => void) => {
        expect(channel).toBe('channelwright:event');
        heard.push(listener);
      },
      off: (...args: unknown[]) => off.push(args),
    },
    webUtils: {
      getPathForFile: (file: { path?: string }) => {
        if (!file.path) throw new Error('no file');
        return file.path;
      },
    },
  };
  const code = readFileSync(join(ROOT, 'dist/main/preload.cjs'), 'utf8');
  runInNewContext(code, {
    require: (name: string) => {
      expect(name).toBe('electron');
      return electron;
    },
  });
  expect(Object.keys(exposed)).toEqual(['channelwright']);
  const { channelwright } = exposed;
  expect(Object.keys(channelwright!)).toEqual(['call', 'listen', 'pathOf']);
  const body = new Uint8Array([1]);
  await channelwright!.call!('about', body);
  expect(invoked).toEqual([['channelwright:request', 'about', body]]);
  const told: unknown[][] = [];
  const stop = channelwright!.listen!((...args: unknown[]) => told.push(args)) as () => void;
  heard[0]!({ sender: 'secret' }, 'project', '{}');
  expect(told).toEqual([['project', '{}']]);
  stop();
  expect(off).toHaveLength(1);
  expect(channelwright!.pathOf!({ path: '/a/b.chw' })).toBe('/a/b.chw');
  expect(channelwright!.pathOf!('text')).toBe('');
});

test('a package holds what runs and nothing of the workshop, its switches set, its entry running', {
  timeout: 170_000,
}, async () => {
  await inFolder(async (folder) => {
    const runtime = join(folder, 'runtime');
    standIn(runtime);
    const out = join(folder, 'out');
    const cli = join(ROOT, 'node_modules/electron-builder/cli.js');
    const made = spawnSync(
      process.execPath,
      [
        cli,
        '--linux',
        'dir',
        '--x64',
        '--config',
        'electron-builder.yml',
        `-c.electronDist=${runtime}`,
        `-c.directories.output=${out}`,
      ],
      { cwd: ROOT, encoding: 'utf8', timeout: 150_000 },
    );
    expect(made.status, made.stdout + made.stderr).toBe(0);

    const app = join(out, 'linux-unpacked');
    const archive = join(app, 'resources', 'app.asar');
    const files = asar.listPackage(archive, {}).map((path) => path.replaceAll('\\', '/'));
    const header = asar.getRawHeader(archive).header;
    const entry = (path: string): AsarEntry =>
      path
        .split('/')
        .slice(1)
        .reduce<AsarEntry>((at, name) => at.files![name]!, header);
    const plain = files.filter((path) => !entry(path).files);
    const may =
      /^\/(package\.json|dist\/(main|renderer)\/.*|assets\/(demo|limits)\/.*|assets\/verification\.json|node_modules\/better-sqlite3\/(package\.json|LICENSE|lib\/.*|prebuilds\/linux-x64\.node))$/;
    expect(plain.filter((path) => !may.test(path))).toEqual([]);
    expect(
      plain.filter((path) => /\.(ts|tsx|cts|map|md)$|test/i.test(path.replace(/^\/node_modules\//, ''))),
    ).toEqual([]);
    for (const needed of [
      '/package.json',
      '/dist/main/electron.js',
      '/dist/main/session-worker.js',
      '/dist/main/preload.cjs',
      '/assets/demo/eight-way-splitter.json',
      '/node_modules/better-sqlite3/lib/index.js',
    ])
      expect(plain).toContain(needed);
    expect(plain.filter((path) => !entry(path).unpacked && !entry(path).integrity?.hash)).toEqual([]);
    const unpacked = `${archive}.unpacked`;
    const beside = readdirSync(unpacked, { recursive: true, withFileTypes: true }).filter((one) =>
      one.isFile(),
    );
    expect(beside.map((one) => relative(unpacked, join(one.parentPath, one.name)))).toEqual([
      'node_modules/better-sqlite3/prebuilds/linux-x64.node',
    ]);

    const switches = await getCurrentFuseWire(join(app, 'channelwright'));
    const on = (fuse: FuseV1Options): boolean => switches[fuse] === ON;
    expect({
      runAsNode: on(FuseV1Options.RunAsNode),
      cookies: on(FuseV1Options.EnableCookieEncryption),
      options: on(FuseV1Options.EnableNodeOptionsEnvironmentVariable),
      inspect: on(FuseV1Options.EnableNodeCliInspectArguments),
      integrity: on(FuseV1Options.EnableEmbeddedAsarIntegrityValidation),
      onlyAsar: on(FuseV1Options.OnlyLoadAppFromAsar),
      files: on(FuseV1Options.GrantFileProtocolExtraPrivileges),
    }).toEqual({
      runAsNode: false,
      cookies: true,
      options: false,
      inspect: false,
      integrity: true,
      onlyAsar: true,
      files: false,
    });

    const extracted = join(folder, 'extracted');
    asar.extractAll(archive, extracted);
    const module = join(extracted, 'node_modules', 'electron');
    mkdirSync(module);
    writeFileSync(join(module, 'package.json'), '{"name":"electron","type":"module","main":"index.js"}');
    writeFileSync(
      join(module, 'index.js'),
      `export * from ${JSON.stringify(join(import.meta.dirname, 'electron-double.ts'))};\n`,
    );
    const child = spawnSync(process.execPath, [join(import.meta.dirname, 'packaged-child.ts'), extracted], {
      encoding: 'utf8',
      timeout: 60_000,
      env: { ...process.env, CHANNELWRIGHT_DATA: join(folder, 'data') },
    });
    expect(child.stderr).toBe('');
    const said = JSON.parse(child.stdout) as {
      about: unknown;
      demo: { ok: boolean };
      preload: { preload: string };
    };
    expect(said.about).toMatchObject({ ok: true, output: { host: 'desktop' } });
    expect(said.demo).toMatchObject({ ok: true, output: { mode: 'draft' } });
    expect(existsSync(said.preload.preload)).toBe(true);
  });
});
