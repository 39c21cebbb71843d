import { spawn } from 'node:child_process';
import { access, mkdir, readFile, stat, writeFile } from 'node:fs/promises';
import { dirname, join } from 'node:path';

const RELEASES = 'https://github.com';
const PROBE_MS = 3_000;
/** After a try that found no way, starts do not wait for another one so soon. */
const AGAIN_MS = 24 * 3_600_000;

/** Where the desktop runtime's executable lies, null where it is not installed. */
export async function runtimePath(root: string, environment = process.env): Promise<string | null> {
  const folder = join(root, 'node_modules', 'electron');
  try {
    const name = (await readFile(join(folder, 'path.txt'), 'utf8')).trim();
    const dist = environment.ELECTRON_OVERRIDE_DIST_PATH ?? join(folder, 'dist');
    const path = join(dist, name);
    await access(path);
    return path;
  } catch {
    return null;
  }
}

const reachable = async (): Promise<boolean> =>
  await fetch(RELEASES, { method: 'HEAD', signal: AbortSignal.timeout(PROBE_MS) }).then(
    (response) => response.status < 500,
    () => false,
  );

/**
 * Tries to fetch the desktop runtime by its own installer; false where there is no way to it, which is
 * remembered for a day beside what is installed.
 */
export async function fetchRuntime(
  root: string,
  says: (line: string) => void,
  isReachable = reachable,
): Promise<boolean> {
  const mark = join(root, 'node_modules', '.cache', 'channelwright', 'no-runtime');
  const tried = await stat(mark).then(
    ({ mtimeMs }) => mtimeMs,
    () => 0,
  );
  if (Math.abs(Date.now() - tried) < AGAIN_MS) return false;
  if (!(await isReachable())) {
    // Where nothing can be kept, the next start asks again.
    await mkdir(dirname(mark), { recursive: true })
      .then(() => writeFile(mark, ''))
      .catch(() => undefined);
    return false;
  }
  says('Fetching the desktop runtime (once, about 110 MB) …');
  const installer = join(root, 'node_modules', 'electron', 'install.js');
  return await new Promise((done) => {
    const child = spawn(process.execPath, [installer], { stdio: 'ignore' });
    child.on('error', () => done(false));
    child.on('exit', (code) => done(code === 0));
  });
}
