import { spawn } from 'node:child_process';
import { readdir, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';

/** What the page is made from. */
const SOURCES = ['renderer', 'solver', join('main', 'contract'), 'assets', 'package-lock.json'];

/** Time of the newest change in a file or folder, ms; 0 where there is none. */
async function newest(path: string): Promise<number> {
  const there = await stat(path).catch(() => null);
  if (!there) return 0;
  if (!there.isDirectory()) return there.mtimeMs;
  let latest = 0;
  for (const entry of await readdir(path, { withFileTypes: true, recursive: true })) {
    if (!entry.isFile() || /\.test\.tsx?$/.test(entry.name)) continue;
    const file = await stat(join(entry.parentPath, entry.name)).catch(() => null);
    if (file && file.mtimeMs > latest) latest = file.mtimeMs;
  }
  return latest;
}

/** Builds the page into `dist/renderer` where its sources are newer than what is there. Returns that folder. */
export async function builtPage(root: string, says: (line: string) => void): Promise<string> {
  const folder = join(root, 'dist', 'renderer');
  const built = await newest(join(folder, 'index.html'));
  if (built > 0) {
    const times = await Promise.all(SOURCES.map((source) => newest(join(root, source))));
    if (Math.max(...times) < built) return folder;
  }
  says('Building the page …');
  await build(root);
  return folder;
}

function build(root: string): Promise<void> {
  const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');
  const settings = ['build', '--config', join(root, 'renderer', 'vite.config.ts'), '--logLevel', 'error'];
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, [vite, ...settings], {
      cwd: root,
      stdio: ['ignore', 'ignore', 'inherit'],
    });
    const failed = (): void =>
      fail(
        new Problem(
          'output',
          'The page could not be built.',
          'renderer',
          'See the messages above; "npm ci" may help.',
        ),
      );
    child.on('error', failed);
    child.on('exit', (code) => (code === 0 ? done() : failed()));
  });
}
