import { spawn } from 'node:child_process';
import { access, readFile } from 'node:fs/promises';
import { join } from 'node:path';

const RELEASES = 'https://github.com';
const PROBE_MS = 3_000;

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

/** Tries to fetch the desktop runtime by its own installer; false where there is no way to it. */
export async function fetchRuntime(root: string, says: (line: string) => void): Promise<boolean> {
  const reachable = await fetch(RELEASES, { method: 'HEAD', signal: AbortSignal.timeout(PROBE_MS) }).then(
    (response) => response.status < 500,
    () => false,
  );
  if (!reachable) return false;
  says('Fetching the desktop runtime (once, about 110 MB) …');
  const installer = join(root, 'node_modules', 'electron', 'install.js');
  return await new Promise((done) => {
    const child = spawn(process.execPath, [installer], { stdio: 'ignore' });
    child.on('error', () => done(false));
    child.on('exit', (code) => done(code === 0));
  });
}
