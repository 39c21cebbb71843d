import { join, resolve } from 'node:path';
import { app, session } from 'electron';
import { createSessions } from '../session/sessions.ts';
import { userDataFolder } from '../user/folder.ts';
import { chooseFile } from './choose.ts';
import { ENGINE } from './engine.ts';
import { takeRequests } from './ipc.ts';
import { setMenu } from './menu.ts';
import { declareScheme, serveScheme } from './scheme.ts';
import { closeContents, closeSession } from './security.ts';
import { Windows } from './windows.ts';

/** The desktop program: windows around the same page and the same threads that the browser host has. */

/** Quitting never waits longer: what is not in its place by then lies safe and goes there next time. */
const QUIT_MS = 1_000;

/** Projects and descriptions that a command line names. */
function filesOf(args: readonly string[], folder: string): string[] {
  return args
    .filter((arg) => /\.(chw|json)$/i.test(arg) && !arg.startsWith('-'))
    .map((arg) => resolve(folder, arg));
}

function start(): void {
  app.setName('Channelwright');
  app.setAppUserModelId('org.channelwright.app');
  app.enableSandbox();
  app.commandLine.appendSwitch('js-flags', ENGINE);
  declareScheme();
  closeContents();

  const root = app.getAppPath();
  const userData = userDataFolder();
  const sessions = createSessions({
    host: 'desktop',
    dialogs: true,
    userData,
    assets: join(root, 'assets'),
    version: app.getVersion(),
  });
  const windows = new Windows({ sessions, userData, preload: join(root, 'dist', 'main', 'preload.cjs') });
  // Files that the system names before there can be a window.
  let early: string[] | null = filesOf(process.argv.slice(1), process.cwd());

  const openFiles = (files: readonly string[]): void => {
    if (early) early.push(...files);
    else if (files.length === 0) void windows.bringUp();
    else for (const file of files) void windows.openFile(file);
  };

  app.on('open-file', (event, path) => {
    event.preventDefault();
    openFiles([path]);
  });
  app.on('second-instance', (_event, args, folder) => openFiles(filesOf(args.slice(1), folder)));
  app.on('activate', () => {
    if (windows.count === 0) void windows.make();
  });
  app.on('window-all-closed', () => {
    if (process.platform !== 'darwin') app.quit();
  });

  let kept = false;
  app.on('before-quit', (event) => {
    if (kept) return;
    event.preventDefault();
    const late = new Promise((done) => setTimeout(done, QUIT_MS).unref());
    void Promise.race([sessions.close(), late]).then(() => {
      kept = true;
      app.quit();
    });
  });

  takeRequests(async (contents, name, body) => {
    const thread = windows.nameOf(contents);
    const window = windows.windowOf(contents);
    if (thread === null || window === null) throw new Error('refused');
    return name === 'files.choose' ? await chooseFile(window, body) : await sessions.call(thread, name, body);
  });

  void app.whenReady().then(async () => {
    closeSession(session.defaultSession);
    await serveScheme(session.defaultSession.protocol, join(root, 'dist', 'renderer'));
    setMenu({ command: (name) => windows.command(name), newWindow: () => void windows.make() });
    const files = early ?? [];
    early = null;
    const [first, ...others] = files;
    await windows.make(first);
    for (const file of others) await windows.make(file);
  });
}

// A second start hands its files over to the first and goes.
if (app.requestSingleInstanceLock()) start();
else app.quit();
