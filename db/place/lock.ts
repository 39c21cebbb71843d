import { randomUUID } from 'node:crypto';
import { open, readFile, rename, rm, stat, utimes } from 'node:fs/promises';
import { hostname, userInfo } from 'node:os';
import { basename, dirname, join } from 'node:path';
import { z } from 'zod';

/** While a project is open its mark is renewed this often; one that was not for so long is stale. */
const BEAT_MS = 10_000;
const STALE_MS = 60_000;
/** Clocks of two machines differ. */
const STALE_ELSEWHERE_MS = 300_000;

const schema = z.object({
  mark: z.string().max(100),
  process: z.int(),
  host: z.string().max(300),
  user: z.string().max(300),
  since: z.number(),
});
export type Opener = z.infer<typeof schema>;

/** The mark beside a project that says who has it open. */
export function markPath(path: string): string {
  return join(dirname(path), `.${basename(path)}.open`);
}

/** A held mark; `release` takes it away. */
export interface Lock {
  release(): Promise<void>;
}

/** Takes the mark of `path`; whoever holds it already is returned instead. */
export async function takeLock(path: string): Promise<Lock | Opener> {
  const file = markPath(path);
  const own: Opener = {
    mark: randomUUID(),
    process: process.pid,
    host: hostname(),
    user: userName(),
    since: Date.now(),
  };
  for (let attempt = 0; attempt < 3; attempt += 1) {
    if (await create(file, own)) return hold(file, own.mark);
    const holder = await liveHolder(file);
    if (holder) return holder;
    // Stale: set aside under a name of its own first, so that of two who find it stale one takes it.
    const aside = `${file}.${own.mark}`;
    await rename(file, aside).catch(() => undefined);
    await rm(aside, { force: true });
  }
  return (await read(file)) ?? own;
}

export function isLock(found: Lock | Opener): found is Lock {
  return 'release' in found;
}

async function create(file: string, own: Opener): Promise<boolean> {
  let handle: Awaited<ReturnType<typeof open>>;
  try {
    handle = await open(file, 'wx');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'EEXIST') return false;
    throw error;
  }
  try {
    await handle.writeFile(JSON.stringify(own));
  } finally {
    await handle.close();
  }
  return true;
}

function hold(file: string, mark: string): Lock {
  const beat = setInterval(() => {
    const now = new Date();
    utimes(file, now, now).catch(() => undefined);
  }, BEAT_MS).unref();
  return {
    async release() {
      clearInterval(beat);
      const there = await read(file);
      if (there?.mark === mark) await rm(file, { force: true }).catch(() => undefined);
    },
  };
}

async function read(file: string): Promise<Opener | null> {
  try {
    return schema.parse(JSON.parse(await readFile(file, 'utf8')));
  } catch {
    return null;
  }
}

/** Whoever holds the mark and is still there. */
async function liveHolder(file: string): Promise<Opener | null> {
  const there = await stat(file).catch(() => null);
  if (!there) return null;
  const holder = await read(file);
  const age = Date.now() - there.mtimeMs;
  // One being written this moment cannot be read yet.
  if (!holder) return age < 2_000 ? { mark: '', process: 0, host: '', user: '', since: there.mtimeMs } : null;
  if (holder.host !== hostname()) return age < STALE_ELSEWHERE_MS ? holder : null;
  return age < STALE_MS && isRunning(holder.process) ? holder : null;
}

function isRunning(id: number): boolean {
  try {
    process.kill(id, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}

function userName(): string {
  try {
    return userInfo().username;
  } catch {
    return '';
  }
}
