import { mkdir, rm, stat } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import type { Chip } from '../solver/chip/chip.ts';
import { Problem } from '../solver/problem/problem.ts';
import { makeFile } from './make.ts';
import { openForReading, openForWork } from './open.ts';
import { isLock, type Lock, markPath, type Opener, takeLock } from './place/lock.ts';
import { moveOver, moveToFree, siblingOf, syncFile, writeProblem } from './place/replace.ts';
import type { Project } from './project.ts';
import { readProjectChip } from './read.ts';

export interface WorkplaceSettings {
  /** Folder for drafts, private copies and backups. */
  readonly userData: string;
  /** Version of the program. */
  readonly program: string;
  /** The place or the mode changed without being asked. */
  readonly onChange: () => void;
  /** Something went wrong that no request waits for. */
  readonly onTrouble: (problem: Problem) => void;
}

export type Mode = 'kept' | 'draft' | 'read-only' | 'private copy';

export interface Standing {
  readonly name: string;
  readonly path: string | null;
  readonly mode: Mode;
  readonly modeSays: string;
  readonly edited: boolean;
}

/** The bare file is whole this long after the last step. */
const SETTLE_MS = 2_000;

/** One open project: its file, where that lies, who may write to it, and how it gets whole to its place. */
export class Workplace {
  readonly project: Project;
  readonly notes: readonly string[];
  readonly #settings: WorkplaceSettings;
  readonly #path: string;
  readonly #mode: Mode;
  readonly #modeSays: string;
  readonly #lock: Lock | null;
  readonly #firstSeq: number;
  #timer: NodeJS.Timeout | undefined;

  private constructor(
    settings: WorkplaceSettings,
    project: Project,
    opened: { path: string; mode: Mode; modeSays: string; lock: Lock | null; notes: readonly string[] },
  ) {
    this.#settings = settings;
    this.project = project;
    this.#path = opened.path;
    this.#mode = opened.mode;
    this.#modeSays = opened.modeSays;
    this.#lock = opened.lock;
    this.notes = opened.notes;
    this.#firstSeq = project.position.seq;
  }

  /** A new draft, kept in the program's own folder until the person chooses a place. */
  static async draft(settings: WorkplaceSettings, chip: Chip): Promise<Workplace> {
    const folder = draftFolder(settings);
    await mkdir(folder, { recursive: true });
    const path = join(folder, `draft-${Date.now().toString(36)}-${process.pid}-${nextDraft()}.chw`);
    try {
      makeFile(path, chip, { program: settings.program });
    } catch (error) {
      await removeFile(path);
      throw writeProblem(error, path);
    }
    return await Workplace.open(settings, path);
  }

  static async open(settings: WorkplaceSettings, path: string): Promise<Workplace> {
    const whole = resolve(path);
    const lock = await takeLock(whole).catch((error) => {
      throw writeProblem(error, whole);
    });
    if (!isLock(lock)) {
      const project = await openForReading(whole);
      return new Workplace(settings, project, {
        path: whole,
        mode: 'read-only',
        modeSays: openElsewhere(lock),
        lock: null,
        notes: [],
      });
    }
    try {
      const project = await openForWork(whole);
      const mode = dirname(whole) === draftFolder(settings) ? 'draft' : 'kept';
      const modeSays =
        mode === 'draft' ? 'Every edit is kept in the program’s own folder. Save it to choose a place.' : '';
      return new Workplace(settings, project, { path: whole, mode, modeSays, lock, notes: [] });
    } catch (error) {
      await lock.release();
      throw error;
    }
  }

  get standing(): Standing {
    const draft = this.#mode === 'draft';
    return {
      name: draft ? this.project.chip.name || 'Untitled' : basename(this.#path),
      path: draft ? null : this.#path,
      mode: this.#mode,
      modeSays: this.#modeSays,
      edited: this.project.position.seq !== this.#firstSeq,
    };
  }

  /** Where the file lies, a draft's too. */
  get path(): string {
    return this.#path;
  }

  /** Call after every step: the file is made whole when no further one follows. */
  touched(): void {
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => this.#settle(), SETTLE_MS).unref();
  }

  /** Writes a whole, checked copy to `path`; what was there stays until the copy is complete. */
  async copyTo(path: string, replace: boolean): Promise<void> {
    const sibling = siblingOf(path);
    try {
      await this.project.backup(sibling);
      await readProjectChip(sibling);
      await syncFile(sibling);
      // A log left beside a file that goes would be taken for the new one's.
      for (const side of ['-wal', '-shm']) await rm(`${path}${side}`, { force: true });
      if (replace) await moveOver(sibling, path);
      else await moveToFree(sibling, path);
    } catch (error) {
      throw writeProblem(error, path);
    } finally {
      await removeFile(sibling);
    }
  }

  /** Writes a copy to `path`, or beside the file under the next free name; returns where. */
  async duplicate(path: string | null, replace: boolean): Promise<string> {
    if (path !== null) {
      await this.copyTo(resolve(path), replace);
      return resolve(path);
    }
    const stem = basename(this.#path, '.chw');
    for (let number = 1; ; number += 1) {
      const copy = join(dirname(this.#path), `${stem} copy${number === 1 ? '' : ` ${number}`}.chw`);
      try {
        await this.copyTo(copy, false);
        return copy;
      } catch (error) {
        if (!(error instanceof Problem) || number === 99 || !(await exists(copy))) throw error;
      }
    }
  }

  /** Writes the project to `path` and goes on there: returns the workplace that replaces this one. */
  async saveAs(path: string, replace: boolean): Promise<Workplace> {
    const whole = resolve(path);
    if (whole === this.#path)
      throw new Problem('output', 'The project is kept in this file already.', whole, 'Choose another name.');
    const lock = await takeLock(whole).catch((error) => {
      throw writeProblem(error, whole);
    });
    if (!isLock(lock)) throw new Problem('output', openElsewhere(lock), whole, 'Choose another name.');
    try {
      await this.copyTo(whole, replace);
    } finally {
      await lock.release();
    }
    const next = await Workplace.open(this.#settings, whole);
    await this.close();
    if (this.#mode === 'draft') await removeFile(this.#path);
    return next;
  }

  /** Closes; everything acknowledged is kept. An untouched draft goes. */
  async close(): Promise<void> {
    clearTimeout(this.#timer);
    const untouched = this.#mode === 'draft' && this.project.position.seq === 1;
    const trials = untouched ? this.project.listTrials().length : 0;
    this.project.close();
    if (untouched && trials === 0) await removeFile(this.#path);
    await this.#lock?.release();
  }

  #settle(): void {
    try {
      this.project.settle();
    } catch (error) {
      if (error instanceof Problem) this.#settings.onTrouble(error);
    }
  }
}

export function draftFolder(settings: { readonly userData: string }): string {
  return join(resolve(settings.userData), 'drafts');
}

async function exists(path: string): Promise<boolean> {
  return await stat(path).then(
    () => true,
    () => false,
  );
}

let drafts = 0;
function nextDraft(): number {
  drafts += 1;
  return drafts;
}

/** Takes a file away with what lies beside it. */
async function removeFile(path: string): Promise<void> {
  for (const file of [path, `${path}-wal`, `${path}-shm`, `${path}-journal`, markPath(path)])
    await rm(file, { force: true }).catch(() => undefined);
}

function openElsewhere(opener: Opener): string {
  const since = new Date(opener.since).toLocaleString('en-GB', { dateStyle: 'medium', timeStyle: 'short' });
  const who = opener.user ? ` by ${opener.user}` : '';
  const where = opener.host ? ` on ${opener.host}` : '';
  return `This project is open${who}${where} since ${since}. You see it as it was kept a moment ago; nothing is written from here.`;
}
