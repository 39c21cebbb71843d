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

/** ms between two looks at a build that another start has begun, and after which it is waited for no longer. */
const LOOK_MS = 500;
const LONGEST_MS = 180_000;

/** Builds what is older than its sources, or waits for another start that does. Returns its folder. */
export async function built(root: string, made: Made, says: (line: string) => void): Promise<string> {
  const folder = join(root, made.folder);
  for (let waited = 0; !(await isFresh(root, made)); waited += LOOK_MS) {
    if (waited === 0) says(`Building the ${made.what} …`);
    const outcome = await build(root, made);
    if (outcome === 'done') break;
    if (outcome === 'failed' || waited >= LONGEST_MS)
      throw new Problem(
        'output',
        `The ${made.what} could not be built.`,
        made.settings,
        'See the messages above; "npm ci" may help.',
      );
    await new Promise((done) => setTimeout(done, LOOK_MS));
  }
  return folder;
}

async function isFresh(root: string, made: Made): Promise<boolean> {
  const when = await newest(join(root, made.folder, made.mark));
  if (when === 0) return false;
  const times = await Promise.all(made.sources.map((source) => newest(join(root, source))));
  return Math.max(...times) < when;
}

/** What the bundler says where another build of the same program is under way: two starts at once. */
const BUSY = /another Vite build process/i;

function build(root: string, made: Made): Promise<'done' | 'busy' | 'failed'> {
  const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');
  const args = [vite, 'build', '--config', join(root, made.settings), '--logLevel', 'error'];
  return new Promise((done) => {
    const child = spawn(process.execPath, args, { cwd: root, stdio: ['ignore', 'ignore', 'pipe'] });
    let said = '';
    child.stderr.on('data', (chunk: Buffer) => {
      said += chunk.toString();
    });
    child.on('error', () => done('failed'));
    child.on('close', (code) => {
      const outcome = code === 0 ? 'done' : BUSY.test(said) ? 'busy' : 'failed';
      if (outcome !== 'busy') process.stderr.write(said);
      done(outcome);
    });
  });
}
