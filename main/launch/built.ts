import { spawn } from 'node:child_process';
import { readdir, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';

/** Something built: from which sources, by which settings, into which folder, known by which file. */
interface Made {
  readonly what: string;
  readonly sources: readonly string[];
  readonly settings: string;
  readonly folder: string;
  readonly mark: string;
}

export const PAGE: Made = {
  what: 'page',
  sources: ['renderer', 'solver', join('main', 'contract'), 'package-lock.json'],
  settings: join('renderer', 'vite.config.ts'),
  folder: join('dist', 'renderer'),
  mark: 'index.html',
};

export const DESKTOP: Made = {
  what: 'desktop program',
  sources: ['main', 'db', 'solver', 'package-lock.json'],
  settings: join('main', 'vite.config.ts'),
  folder: join('dist', 'main'),
  mark: 'preload.cjs',
};

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

/** Builds what is older than its sources. Returns its folder. */
export async function built(root: string, made: Made, says: (line: string) => void): Promise<string> {
  const folder = join(root, made.folder);
  const when = await newest(join(folder, made.mark));
  if (when > 0) {
    const times = await Promise.all(made.sources.map((source) => newest(join(root, source))));
    if (Math.max(...times) < when) return folder;
  }
  says(`Building the ${made.what} …`);
  await build(root, made);
  return folder;
}

function build(root: string, made: Made): Promise<void> {
  const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');
  const args = [vite, 'build', '--config', join(root, made.settings), '--logLevel', 'error'];
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, args, { cwd: root, stdio: ['ignore', 'ignore', 'inherit'] });
    const failed = (): void =>
      fail(
        new Problem(
          'output',
          `The ${made.what} could not be built.`,
          made.settings,
          'See the messages above; "npm ci" may help.',
        ),
      );
    child.on('error', failed);
    child.on('exit', (code) => (code === 0 ? done() : failed()));
  });
}
