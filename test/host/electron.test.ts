import { mkdirSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { afterEach, expect, test, vi } from 'vitest';
import { makeFile } from '../../db/make.ts';
import type { Reply } from '../../main/contract/contract.ts';
import { decode, encode } from '../../main/contract/wire.ts';
import { ENGINE } from '../../main/electron/engine.ts';
import { madeUpChip, random, randomEdit } from '../faults/random.ts';
import { inFolder } from '../faults/sample.ts';
import type * as Double from './electron-double.ts';

type Electron = typeof Double;

interface Desktop {
  readonly folder: string;
  readonly electron: Electron;
  readonly noted: Double.Noted;
  /** A request of a window's page. */
  ask(window: Double.BrowserWindow, name: string, input: unknown): Promise<Reply>;
  window(index?: number): Double.BrowserWindow;
}

const keptData = process.env.CHANNELWRIGHT_DATA;
const keptArgs = process.argv;
afterEach(() => {
  if (keptData === undefined) delete process.env.CHANNELWRIGHT_DATA;
  else process.env.CHANNELWRIGHT_DATA = keptData;
  process.argv = keptArgs;
  vi.doUnmock('electron');
});

const until = async (done: () => boolean): Promise<void> => {
  for (let round = 0; round < 1_500 && !done(); round += 1) await wait(20);
  expect(done()).toBe(true);
};

/** Runs the desktop's entry itself against the double. */
async function withDesktop(
  work: (desktop: Desktop) => Promise<void>,
  before: (noted: Double.Noted, folder: string) => void = () => undefined,
): Promise<void> {
  await inFolder(async (folder) => {
    vi.resetModules();
    const electron = (await vi.importActual('./electron-double.ts')) as Electron;
    vi.doMock('electron', () => electron);
    const { noted } = electron;
    const page = join(folder, 'dist', 'renderer');
    mkdirSync(page, { recursive: true });
    writeFileSync(join(page, 'index.html'), '<!doctype html><title>page</title>');
    writeFileSync(join(folder, 'secret.txt'), 'secret');
    noted.appPath = folder;
    process.env.CHANNELWRIGHT_DATA = join(folder, 'data');
    process.argv = ['electron', folder];
    before(noted, folder);
    await import('../../main/electron/main.ts');
    try {
      electron.app.ready();
      if (noted.first) await until(() => noted.windows.some((window) => window.shown > 0));
      await work({
        folder,
        electron,
        noted,
        window: (index = 0) => noted.windows[index]!,
        ask: async (window, name, input) => {
          const handler = noted.handlers.get('channelwright:request')!;
          const event = { sender: window.webContents, senderFrame: window.webContents.mainFrame };
          return decode((await handler(event, name, encode(input))) as Uint8Array) as Reply;
        },
      });
    } finally {
      electron.app.quit();
      await until(() => noted.windows.length === 0);
    }
  });
}

const good = (reply: Reply): unknown => {
  if (!reply.ok) throw new Error(reply.problem.what);
  return reply.output;
};

test('a window is closed to everything but the page', async () => {
  await withDesktop(async ({ noted, window, electron }) => {
    expect(noted.sandboxed).toBe(true);
    expect(noted.switches).toEqual([`--js-flags=${ENGINE}`]);
    const { webPreferences, minWidth } = window().options as { webPreferences: object; minWidth: number };
    expect(webPreferences).toMatchObject({
      contextIsolation: true,
      sandbox: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webSecurity: true,
      allowRunningInsecureContent: false,
      webviewTag: false,
      navigateOnDragDrop: false,
    });
    expect(minWidth).toBeGreaterThan(600);
    const { webContents } = window();
    expect(webContents.opening!()).toEqual({ action: 'deny' });
    for (const name of ['will-navigate', 'will-frame-navigate', 'will-redirect', 'will-attach-webview']) {
      const preventDefault = vi.fn();
      webContents.emit(name, { preventDefault }, 'https://evil.example/');
      expect(preventDefault, name).toHaveBeenCalledOnce();
    }
    const other = new electron.WebContents(99);
    electron.app.emit('web-contents-created', {}, other);
    expect(other.opening!()).toEqual({ action: 'deny' });
  });
});

test('permissions, devices, downloads and every request beyond the page are refused', async () => {
  await withDesktop(async ({ noted, window }) => {
    const { session } = noted;
    const asked = (permission: string, requestingUrl: string, isMainFrame = true): boolean => {
      let answer: boolean | null = null;
      session.permissionRequest!(window().webContents, permission, (granted) => (answer = granted), {
        requestingUrl,
        isMainFrame,
      });
      return answer!;
    };
    const page = 'channelwright://app/';
    const kinds = [
      'media',
      'geolocation',
      'notifications',
      'midi',
      'midiSysex',
      'pointerLock',
      'fullscreen',
      'openExternal',
      'hid',
      'serial',
      'usb',
      'display-capture',
      'fileSystem',
      'idle-detection',
      'storage-access',
      'window-management',
      'local-fonts',
      'local-network-access',
      'speaker-selection',
      'unknown',
      'deprecated-sync-clipboard-read',
    ];
    for (const kind of kinds) {
      expect(asked(kind, page), kind).toBe(false);
      expect(session.permissionCheck!(null, kind, page, { isMainFrame: true }), kind).toBe(false);
    }
    // Text to and from the clipboard on the person's command, for the page alone.
    for (const kind of ['clipboard-sanitized-write', 'clipboard-read']) {
      expect(asked(kind, page), kind).toBe(true);
      expect(asked(kind, page, false), kind).toBe(false);
      for (const foreign of ['https://evil.example/', 'channelwright://other/', 'file:///etc/passwd', ''])
        expect(asked(kind, foreign), `${kind} ${foreign}`).toBe(false);
      expect(session.permissionCheck!(null, kind, 'https://evil.example', { isMainFrame: true })).toBe(false);
    }
    expect(session.device!()).toBe(false);
    session.display!({}, (streams) => expect(streams).toEqual({}));
    const preventDefault = vi.fn();
    session.emit('will-download', { preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
    const cancelled = (url: string): boolean => {
      let answer: { cancel?: boolean } = {};
      session.beforeRequest!({ url }, (given) => (answer = given));
      return answer.cancel === true;
    };
    for (const url of [
      'https://example.com/',
      'http://127.0.0.1/',
      'file:///etc/passwd',
      'ws://x/',
      'channelwright://app.evil.example/',
      'channelwright://other/',
      'blob:https://x/1',
      'ftp://x/',
    ])
      expect(cancelled(url), url).toBe(true);
    for (const url of [page, `${page}assets/a.js`, 'blob:channelwright://app/1', 'data:image/png;base64,'])
      expect(cancelled(url), url).toBe(false);
  });
});

test('the scheme serves the page under its policy and nothing beside it', async () => {
  await withDesktop(async ({ noted }) => {
    expect(noted.schemes).toEqual([
      {
        scheme: 'channelwright',
        privileges: { standard: true, secure: true, supportFetchAPI: true, codeCache: true },
      },
    ]);
    const serve = noted.served.get('channelwright')!;
    const page = await serve(new Request('channelwright://app/'));
    expect(page.status).toBe(200);
    expect(await page.text()).toContain('<title>page');
    const policy = page.headers.get('content-security-policy')!;
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self'");
    expect(policy).not.toContain('unsafe');
    for (const path of [
      '../secret.txt',
      '..%2f..%2fsecret.txt',
      '%2e%2e/%2e%2e/secret.txt',
      'a/../../../secret.txt',
      '..\\..\\secret.txt',
      'secret.txt',
      '/etc/passwd',
    ])
      expect((await serve(new Request(`channelwright://app/${path}`))).status, path).toBe(404);
    expect((await serve(new Request('channelwright://other/'))).status).toBe(404);
    expect((await serve(new Request('channelwright://app/', { method: 'POST' }))).status).toBe(404);
  });
});

test('requests are taken from the page in the main frame of a window of ours, and from nothing else', async () => {
  await withDesktop(async ({ noted, window, ask, electron }) => {
    expect(good(await ask(window(), 'about', {}))).toMatchObject({
      host: 'desktop',
      dialogs: true,
      version: '1.2.3',
    });
    const handler = noted.handlers.get('channelwright:request')!;
    const { webContents } = window();
    const body = encode({});
    const frame = webContents.mainFrame;
    const bad: [unknown, unknown, unknown][] = [
      [{ sender: webContents, senderFrame: { ...frame } }, 'about', body],
      [{ sender: webContents, senderFrame: null }, 'about', body],
      [{ sender: webContents, senderFrame: frame }, 'no.such', body],
      [{ sender: webContents, senderFrame: frame }, '__proto__', body],
      [{ sender: webContents, senderFrame: frame }, 7, body],
      [{ sender: webContents, senderFrame: frame }, 'about', {}],
      [{ sender: webContents, senderFrame: frame }, 'about', 'text'],
    ];
    const stranger = new electron.WebContents(12_345);
    stranger.mainFrame.url = 'channelwright://app/';
    bad.push([{ sender: stranger, senderFrame: stranger.mainFrame }, 'about', body]);
    for (const [event, name, content] of bad)
      await expect(handler(event, name, content)).rejects.toThrow('refused');
    for (const url of [
      'https://evil.example/',
      'channelwright://app.evil.example/',
      'channelwright://other/',
      'about:blank',
      'nonsense',
    ]) {
      frame.url = url;
      await expect(handler({ sender: webContents, senderFrame: frame }, 'about', body), url).rejects.toThrow(
        'refused',
      );
    }
    expect([...noted.handlers.keys()]).toEqual(['channelwright:request']);
  });
});

test('title, edited mark and recent documents follow the project', async () => {
  await withDesktop(async ({ folder, window, ask, noted }) => {
    good(await ask(window(), 'project.new', { chip: madeUpChip(3) }));
    await until(() => window().title !== '');
    expect(window()).toMatchObject({ title: 'made up – Channelwright', edited: false, represented: '' });
    good(await ask(window(), 'project.edit', { edit: randomEdit(madeUpChip(3), random(1)), seq: 1 }));
    await until(() => window().edited);
    expect(window().title).toBe('made up (edited) – Channelwright');
    const path = join(folder, 'mine.chw');
    good(await ask(window(), 'project.saveAs', { path }));
    await until(() => window().represented === path);
    expect(window()).toMatchObject({ title: 'mine.chw – Channelwright', edited: false });
    expect(noted.recent).toEqual([path]);
    const preventDefault = vi.fn();
    window().emit('page-title-updated', { preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
  });
});

const opened = (window: Double.BrowserWindow | undefined): boolean =>
  window?.webContents.sent.some(([, name]) => name === 'opened') ?? false;

test('a file is opened by the command line, and by the system before the first window', async () => {
  await withDesktop(
    async ({ folder, noted }) => {
      await until(() => noted.windows.length === 2 && noted.windows.every(opened));
      const titles = noted.windows.map((window) => window.represented).sort();
      expect(titles).toEqual([join(folder, 'a.chw'), join(folder, 'b.chw')]);
    },
    (noted, folder) => {
      for (const name of ['a.chw', 'b.chw']) makeFile(join(folder, name), madeUpChip(2), { program: 'test' });
      process.argv = ['electron', folder, '--flag.chw', join(folder, 'a.chw')];
      setImmediate(async () => {
        await until(() => noted.sandboxed);
        const { app } = (await import('electron')) as unknown as Electron;
        app.emit('open-file', { preventDefault: () => undefined }, join(folder, 'b.chw'));
      });
    },
  );
});

test('a second start hands its file over; a file that is open comes to the front; drop and recent open by the page', async () => {
  await withDesktop(async ({ folder, noted, electron, window, ask }) => {
    const [a, b, c] = ['a.chw', 'b.chw', 'c.chw'].map((name) => join(folder, name)) as [
      string,
      string,
      string,
    ];
    for (const path of [a, b, c]) makeFile(path, madeUpChip(2), { program: 'test' });
    electron.app.emit('second-instance', {}, ['electron', folder, 'a.chw'], folder);
    await until(() => window().represented === a);
    expect(noted.windows).toHaveLength(1);
    const preventDefault = vi.fn();
    electron.app.emit('open-file', { preventDefault }, b);
    expect(preventDefault).toHaveBeenCalledOnce();
    await until(() => noted.windows.length === 2 && window(1).represented === b);
    window(1).focused = false;
    electron.app.emit('second-instance', {}, ['electron', folder, b], '/');
    await wait(100);
    expect(noted.windows).toHaveLength(2);
    expect(window(1).focused).toBe(true);
    // Dropped on the window or chosen from the recent ones: the page asks, in its own window.
    good(await ask(window(), 'project.open', { path: c }));
    await until(() => window().represented === c);
    electron.app.emit('second-instance', {}, ['electron', folder], '/');
    expect(noted.windows).toHaveLength(2);
    electron.app.emit('second-instance', {}, ['electron', folder, '/nowhere/x.chw'], '/');
    await until(
      () => noted.windows.length === 3 && window(2).webContents.sent.some(([, name]) => name === 'problem'),
    );
  });
});

test('files that come at once each have a window, also while the first is still on its way into its own', async () => {
  await withDesktop(async ({ folder, noted, electron }) => {
    const files = ['a.chw', 'b.chw'].map((name) => join(folder, name));
    for (const path of files) makeFile(path, madeUpChip(2), { program: 'test' });
    // The empty window takes one of them; a file named twice is opened once.
    electron.app.emit('second-instance', {}, ['electron', folder, ...files, files[0]], folder);
    await until(() => noted.windows.length === 2 && noted.windows.every(opened));
    expect(noted.windows.map((window) => window.represented).sort()).toEqual(files);
  });
});

test('where the program runs already, a second one only hands over and goes', async () => {
  await withDesktop(
    async ({ noted }) => {
      expect(noted.quits).toBe(1);
      expect(noted.windows).toEqual([]);
      expect(noted.handlers.size).toBe(0);
    },
    (noted) => {
      noted.first = false;
    },
  );
});

test('the menu has the system’s roles, and its commands reach the page', async () => {
  await withDesktop(async ({ noted, window, electron }) => {
    const all = (items: readonly Double.MenuItem[]): Double.MenuItem[] =>
      items.flatMap((item) => [item, ...all(item.submenu ?? [])]);
    const items = all(noted.menu);
    const roles = items.flatMap((item) => item.role ?? []);
    for (const role of [
      'cut',
      'copy',
      'paste',
      'zoomIn',
      'zoomOut',
      'resetZoom',
      'togglefullscreen',
      'windowMenu',
      'help',
      'quit',
    ])
      expect(roles).toContain(role);
    for (const role of ['reload', 'forceReload', 'toggleDevTools']) expect(roles).not.toContain(role);
    electron.BrowserWindow.prototype.focus.call(window());
    items.find((item) => item.label === 'Save as …')!.click!();
    expect(window().webContents.sent).toContainEqual([
      'channelwright:event',
      'command',
      '{"name":"save as"}',
    ]);
    items.find((item) => item.label === 'New window')!.click!();
    await until(() => noted.windows.length === 2);
  });
});

test('the commands of the menu are commands of the page', async () => {
  const { readFileSync, readdirSync } = await import('node:fs');
  const folder = resolve(import.meta.dirname, '../../renderer/commands');
  const source = readdirSync(folder)
    .map((name) => readFileSync(join(folder, name), 'utf8'))
    .join('\n');
  vi.resetModules();
  vi.doMock('electron', () => vi.importActual('./electron-double.ts'));
  const { menuTemplate } = await import('../../main/electron/menu.ts');
  const named = new Set<string>();
  const press = (items: readonly { click?: unknown; submenu?: unknown }[]): void => {
    for (const item of items) {
      if (typeof item.click === 'function') (item.click as () => void)();
      if (Array.isArray(item.submenu)) press(item.submenu as typeof items);
    }
  };
  for (const mac of [true, false])
    press(menuTemplate({ command: (name) => named.add(name), newWindow: () => undefined }, mac) as never);
  expect(named.size).toBeGreaterThan(8);
  for (const name of named) expect(source, name).toContain(`id: '${name}'`);
});

test('the system’s dialogs are asked for, on the window, with what the page names', async () => {
  await withDesktop(async ({ noted, window, ask }) => {
    const kinds = [{ name: 'Project', extensions: ['chw'] }];
    noted.answer = { canceled: false, filePaths: ['/a/b.chw'] };
    const open = { purpose: 'open', title: 'Open', kinds };
    expect(good(await ask(window(), 'files.choose', open))).toEqual({ path: '/a/b.chw' });
    noted.answer = { canceled: true, filePaths: [] };
    expect(good(await ask(window(), 'files.choose', open))).toEqual({ path: null });
    noted.answer = { canceled: false, filePath: '/a/c.csv' };
    expect(good(await ask(window(), 'files.choose', { ...open, purpose: 'save', suggest: 'c.csv' }))).toEqual(
      { path: '/a/c.csv' },
    );
    expect(noted.dialogs.map(({ kind }) => kind)).toEqual(['open', 'open', 'save']);
    expect(noted.dialogs[0]!.options).toMatchObject({ filters: kinds, properties: ['openFile'] });
    expect((await ask(window(), 'files.choose', { purpose: 'delete' })).ok).toBe(false);
  });
});

test('a window comes back where it was left, and onto a screen where that is gone', async () => {
  const left = (frame: object) => (_noted: Double.Noted, folder: string) => {
    mkdirSync(join(folder, 'data'), { recursive: true });
    writeFileSync(join(folder, 'data', 'window.json'), JSON.stringify(frame));
  };
  await withDesktop(async ({ window }) => {
    expect(window().options).toMatchObject({ width: 1440, height: 900 });
  });
  await withDesktop(
    async ({ window }) => {
      expect(window().options).toMatchObject({ x: 100, y: 50, width: 1200, height: 800 });
      expect(window().maximised).toBe(true);
    },
    left({ x: 100, y: 50, width: 1200, height: 800, maximised: true }),
  );
  await withDesktop(
    async ({ window }) => {
      expect(window().options.x).toBeUndefined();
      expect(window().options).toMatchObject({ width: 1920, height: 1040 });
    },
    left({ x: 5000, y: -3000, width: 4000, height: 3000, maximised: false }),
  );
  await withDesktop(
    async ({ window }) => {
      expect(window().options).toMatchObject({ x: 1800, y: 0 });
    },
    left({ x: 1800, y: -20, width: 1200, height: 800, maximised: false }),
  );
  await withDesktop(
    async ({ window, folder }) => {
      expect(window().options).toMatchObject({ width: 1440, height: 900 });
      window().bounds = { x: 7, y: 8, width: 1111, height: 777 };
      window().emit('resize');
      const { readFileSync } = await import('node:fs');
      const read = (): string => readFileSync(join(folder, 'data', 'window.json'), 'utf8');
      await until(() => read().includes('1111'));
      expect(JSON.parse(read())).toEqual({ x: 7, y: 8, width: 1111, height: 777, maximised: false });
    },
    (_noted, folder) => {
      mkdirSync(join(folder, 'data'), { recursive: true });
      writeFileSync(join(folder, 'data', 'window.json'), '{"x":"far"}');
    },
  );
});

test('the window’s ground follows the system’s light and dark', async () => {
  await withDesktop(async ({ window, noted, electron }) => {
    const light = window().options.backgroundColor;
    noted.dark = true;
    electron.nativeTheme.emit('updated');
    expect(window().options.backgroundColor).not.toBe(light);
  });
});

test('a page that breaks comes back to its project', async () => {
  await withDesktop(async ({ window, ask }) => {
    good(await ask(window(), 'project.new', { chip: madeUpChip(3) }));
    window().webContents.emit('render-process-gone');
    expect(window().webContents.reloads).toBe(1);
    expect(good(await ask(window(), 'project.state', {}))).toMatchObject({ state: { chip: madeUpChip(3) } });
  });
});

test('quitting asks nothing, waits no longer than a second, and what was acknowledged is there', async () => {
  await withDesktop(async ({ folder, window, ask, noted, electron }) => {
    const path = join(folder, 'q.chw');
    good(await ask(window(), 'project.new', { chip: madeUpChip(3) }));
    good(await ask(window(), 'project.saveAs', { path }));
    const edit = randomEdit(madeUpChip(3), random(6));
    good(await ask(window(), 'project.edit', { edit, seq: 1 }));
    const asked = noted.dialogs.length;
    electron.app.quit();
    await until(() => noted.windows.length === 0);
    expect(noted.dialogs).toHaveLength(asked);
    const { readProjectChip } = await import('../../db/read.ts');
    const { applyEdit } = await import('../../solver/chip/edit.ts');
    expect(await readProjectChip(path)).toEqual(applyEdit(madeUpChip(3), edit));
  });
});
