import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { copyFile, mkdir, readFile, rename, stat } from 'node:fs/promises';
import { hostname } from 'node:os';
import { basename, dirname, join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import { z } from 'zod';
import { Problem } from '../../solver/problem/problem.ts';
import { hasLog } from '../read.ts';
import { copyOut, removeFile, type Source } from './copy-out.ts';
import { replaceFile, syncFile } from './replace.ts';

/** A file as it was when last looked at. */
const stamp = z.object({ size: z.number(), changed: z.number() });
type Stamp = z.infer<typeof stamp>;

/** What is known of the original: where, how it looked, and the copy that was the same as it. */
const originSchema = z.object({ path: z.string(), stamp, copy: z.string() });
type Origin = z.infer<typeof originSchema>;

async function stampOf(path: string): Promise<Stamp | null> {
  const there = await stat(path).catch(() => null);
  return there ? { size: there.size, changed: there.mtimeMs } : null;
}

function sameStamp(a: Stamp | null, b: Stamp | null): boolean {
  return a !== null && b !== null && a.size === b.size && a.changed === b.changed;
}

async function hashOf(path: string): Promise<string> {
  const hash = createHash('sha256');
  await pipeline(createReadStream(path), hash);
  return hash.digest('hex');
}

/**
 * A project in a place that cannot be trusted, worked on in the program's own folder: every step is
 * kept there at once, and the whole file goes back to its place when no further step follows.
 */
export class PrivateCopy {
  /** The file that is worked on. */
  readonly file: string;
  readonly notes: string[] = [];
  #path: string;
  readonly #record: string;
  #origin: Origin | null = null;

  private constructor(userData: string, path: string) {
    const key = createHash('sha256').update(path).digest('hex').slice(0, 24);
    const folder = join(userData, 'copies', key);
    this.#path = path;
    this.file = join(folder, 'work.chw');
    this.#record = join(folder, 'origin.json');
  }

  /** Where it goes back to; another name where someone else changed the original meanwhile. */
  get path(): string {
    return this.#path;
  }

  /** Takes the copy of `path`, or takes up one that had not gone back yet. `drafts` keeps what would else be lost. */
  static async take(userData: string, path: string, drafts: string): Promise<PrivateCopy> {
    const copy = new PrivateCopy(userData, path);
    await mkdir(dirname(copy.file), { recursive: true });
    const known = await copy.#readRecord();
    const there = await stampOf(path);
    const unwritten = await copy.#isUnwritten(known);
    if (known && sameStamp(known.stamp, there) && (await stampOf(copy.file))) {
      copy.#origin = known;
      if (unwritten)
        copy.notes.push('Steps that had not reached this place yet were kept and are taken up again.');
      return copy;
    }
    if (unwritten) await copy.#setAside(drafts);
    await copy.#fetch();
    return copy;
  }

  /** Whether the copy holds steps that the original does not. */
  async isDue(): Promise<boolean> {
    return await this.#isUnwritten(this.#origin);
  }

  /** Writes the copy back whole. Where the original was changed by someone else, it goes beside it instead. */
  async writeBack(source: Source): Promise<void> {
    const there = await stampOf(this.#path);
    let told: Problem | null = null;
    if (there && !sameStamp(there, this.#origin?.stamp ?? null)) {
      const other = this.#besideName();
      told = new Problem(
        'project',
        `The file was changed by someone else meanwhile. Your work goes to "${basename(other)}" beside it; both are whole.`,
        this.#path,
        'Compare the two and keep what you want.',
      );
      this.#path = other;
      this.#origin = null;
    }
    await copyOut(source, this.#path, true);
    await this.#note();
    if (told) throw told;
  }

  /** The copy is no longer wanted: all of it is in its place. */
  async discard(): Promise<void> {
    await removeFile(this.file);
  }

  async #isUnwritten(origin: Origin | null): Promise<boolean> {
    if (!(await stampOf(this.file))) return false;
    if (!origin || (await hasLog(this.file))) return true;
    return (await hashOf(this.file)) !== origin.copy;
  }

  async #readRecord(): Promise<Origin | null> {
    try {
      return originSchema.parse(JSON.parse(await readFile(this.#record, 'utf8')));
    } catch {
      return null;
    }
  }

  async #fetch(): Promise<void> {
    await removeFile(this.file);
    const fresh = `${this.file}.new`;
    await removeFile(fresh);
    await copyFile(this.#path, fresh);
    await syncFile(fresh);
    if (await hasLog(this.#path)) await copyFile(`${this.#path}-wal`, `${this.file}-wal`);
    await rename(fresh, this.file);
    await this.#note();
  }

  /** Notes that copy and original are the same now. */
  async #note(): Promise<void> {
    const there = await stampOf(this.#path);
    if (!there) return;
    this.#origin = { path: this.#path, stamp: there, copy: await hashOf(this.file) };
    await replaceFile(this.#record, JSON.stringify(this.#origin));
  }

  async #setAside(drafts: string): Promise<void> {
    await mkdir(drafts, { recursive: true });
    const name = `${basename(this.#path, '.chw')} (not written back) ${Date.now().toString(36)}.chw`;
    const kept = join(drafts, name);
    if (await hasLog(this.file)) await rename(`${this.file}-wal`, `${kept}-wal`);
    await rename(this.file, kept);
    this.notes.push(
      `The file was changed by someone else since you worked on it here. Your steps that had not reached it are kept as the draft "${name}".`,
    );
  }

  #besideName(): string {
    const when = new Date().toISOString().slice(0, 16).replace('T', ' ').replace(':', '.');
    const stem = basename(this.#path, '.chw');
    return join(dirname(this.#path), `${stem} (edited on ${hostname()} ${when}).chw`);
  }
}
