import { join, resolve } from 'node:path';
import { startLoopbackHost } from '../loopback/host.ts';
import { createSessions } from '../session/sessions.ts';
import { userDataFolder } from '../user/folder.ts';
import { openBrowser } from './browser.ts';
import { built, PAGE } from './built.ts';
import type { StartOptions } from './options.ts';

/** Runs the browser host until it is idle or told to stop. */
export async function serve(
  root: string,
  version: string,
  options: StartOptions,
  says: (line: string) => void,
): Promise<void> {
  const sessions = createSessions({
    host: 'browser',
    dialogs: false,
    userData: userDataFolder(),
    assets: join(root, 'assets'),
    version,
  });
  // The project is read while the page is looked at and the browser starts.
  const [file] = options.files;
  sessions.ready(file === undefined ? undefined : resolve(file));
  const page = await built(root, PAGE, says).catch(async (error: unknown) => {
    await sessions.close();
    throw error;
  });
  let stopping = false;
  const host = await startLoopbackHost({
    sessions,
    page,
    port: options.port,
    idleMs: options.idleMs,
    onIdle: () => void stop(),
  });
  const stop = async (): Promise<void> => {
    if (stopping) return;
    stopping = true;
    const says = 'The program stops; everything is kept. Start it again to go on.';
    for (const window of sessions.windows()) sessions.emit(window, 'closing', { says });
    await sessions.close();
    await host.close();
    process.exit(0);
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => void stop());
  const opened = options.open && (await openBrowser(host.address));
  says(opened ? `Channelwright is open in your browser (${host.origin}).` : `Open ${host.address}`);
}
