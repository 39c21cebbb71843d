import { copyFile, stat } from 'node:fs/promises';
import { basename, dirname, extname, join, resolve } from 'node:path';
import type { Chip } from '../solver/chip/chip.ts';
import { Problem } from '../solver/problem/problem.ts';
import { Backups, backupTime } from './backup/backups.ts';
import { chipHash } from './chip/parts.ts';
import { makeFile } from './make.ts';
import { type Opened, openPlace } from './open-place.ts';
import { copyOut, removeFile } from './place/copy-out.ts';
import { freeDraft } from './place/drafts.ts';
import { inUse, type Mode } from './place/home.ts';
import type { Place } from './place/judge.ts';
import { isLock, takeLock } from './place/lock.ts';
import { writeProblem } from './place/replace.ts';
import type { Project } from './project.ts';
import { projectProblem } from './words.ts';

export interface WorkplaceSettings {
  /** Folder for drafts, private copies and backups. */
  readonly userData: string;
  /** Version of the program. */
  readonly program: string;
  /** The place or the mode changed without being asked. */
  readonly onChange: () => void;
  /** Something went wrong that no request waits for. */
  readonly onTrouble: (problem: Problem) => void;
  /** Whether a place can be worked in directly; by default as `judgePlace` says. */
  readonly judge?: (path: string) => Promise<Place>;
}

export interface Standing {
  readonly name: string;
  readonly path: string | null;
  readonly mode: Mode;
  readonly modeSays: string;
  readonly edited: boolean;
}

/** The bare file is whole this long after the last step. */
const SETTLE_MS = 2_000;
/** A backup is made at opening, and while working no more often than this. */
const BACKUP_EVERY_MS = 600_000;

/** One open project: its file, where that lies, who may write to it, and how it gets whole to its place. */
export class Workplace {
  readonly project: Project;
  readonly notes: readonly string[];
  readonly #settings: WorkplaceSettings;
  readonly #opened: Opened;
  readonly #firstSeq: number;
  #timer: NodeJS.Timeout | undefined;
  /** What is being written elsewhere at the moment, so that closing can wait for it. */
  #busy: Promise<void> = Promise.resolve();

  private constructor(settings: WorkplaceSettings, opened: Opened) {
    this.#settings = settings;
    this.#opened = opened;
    this.project = opened.project;
    this.notes = opened.notes;
    this.#firstSeq = opened.project.position.seq;
    if (!opened.project.readOnly) this.#later(0);
  }

  /** A new draft, kept in the program's own folder until the person chooses a place. */
  static async draft(settings: WorkplaceSettings, chip: Chip): Promise<Workplace> {
    const path = await freeDraft(settings, 'draft');
    try {
      makeFile(path, chip, { program: settings.program });
    } catch (error) {
      await removeFile(path);
      throw projectProblem(error, path);
    }
    return await Workplace.open(settings, path);
  }

  /** Opens a project: to work on where that is possible, to look at where someone else has it open. */
  static async open(settings: WorkplaceSettings, path: string): Promise<Workplace> {
    return new Workplace(settings, await openPlace(settings, resolve(path)));
  }

  get standing(): Standing {
    const { home } = this.#opened;
    return {
      name: home.name(this.project),
      path: home.path,
      mode: home.mode,
      modeSays: home.says,
      edited: this.project.position.seq !== this.#firstSeq,
    };
  }

  /** The path it was opened by; a draft's own file. */
  get path(): string {
    return this.#opened.path;
  }

  get backups(): Backups {
    return new Backups(resolve(this.#settings.userData), this.path);
  }

  /** Call after every step: the file is made whole, and carried to its place, when no further one follows. */
  touched(): void {
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => this.#later(BACKUP_EVERY_MS), SETTLE_MS).unref();
  }

  /** Waits for what is being written elsewhere at the moment. */
  async quiet(): Promise<void> {
    await this.#busy;
  }

  /** Writes a copy to `path`, or beside the file under the next free name; returns where. */
  async duplicate(path: string | null, replace: boolean): Promise<string> {
    if (path !== null) {
      const to = resolve(path);
      if (to === this.#opened.home.path) throw keptHere(to);
      await this.#copyTo(to, replace);
      return to;
    }
    const from = this.#opened.home.path ?? this.path;
    const stem = basename(from, extname(from));
    for (let number = 1; ; number += 1) {
      const copy = join(dirname(from), `${stem} copy${number === 1 ? '' : ` ${number}`}.chw`);
      if (await exists(copy)) continue;
      await this.#copyTo(copy, false);
      return copy;
    }
  }

  /** Writes the project to `path` and goes on there: returns the workplace that replaces this one. */
  async saveAs(path: string, replace: boolean): Promise<Workplace> {
    const to = resolve(path);
    if (to === this.#opened.home.path) throw keptHere(to);
    await this.#copyTo(to, replace);
    const next = await Workplace.open(this.#settings, to);
    const draft = this.standing.mode === 'draft';
    await this.close();
    if (draft) await removeFile(this.path);
    return next;
  }

  /** Puts a backup of `path` beside it under a name that says so, or among the drafts; returns where. */
  static async restored(settings: WorkplaceSettings, path: string, id: string): Promise<string> {
    const whole = resolve(path);
    const backup = new Backups(resolve(settings.userData), whole).file(id);
    const name = `${basename(whole, extname(whole))} (backup of ${backupTime(id)})`;
    const source = { backup: (to: string) => copyFile(backup, to) };
    const beside = join(dirname(whole), `${name}.chw`);
    try {
      await copyOut(source, beside, false);
      return beside;
    } catch {
      const draft = await freeDraft(settings, name);
      await copyOut(source, draft, false);
      return draft;
    }
  }

  /** Closes; everything acknowledged is kept. An untouched draft goes. */
  async close(): Promise<void> {
    clearTimeout(this.#timer);
    const { home } = this.#opened;
    const untouched = home.mode === 'draft' && this.#isUntouched();
    this.project.stopBackup();
    await this.#busy;
    try {
      this.project.settle();
      await home.settled(this.project);
    } catch (error) {
      // What is not in its place yet lies beside it, and is taken up at the next opening.
      this.#tell(error);
    }
    this.project.close();
    if (untouched) await removeFile(this.path);
    await home.left();
  }

  #isUntouched(): boolean {
    try {
      return this.project.position.seq === 1 && this.project.listTrials().length === 0;
    } catch {
      return false;
    }
  }

  async #copyTo(path: string, replace: boolean): Promise<void> {
    const lock = await takeLock(path).catch((error) => {
      throw writeProblem(error, path);
    });
    if (!isLock(lock)) throw inUse(lock, path);
    try {
      await copyOut(this.project, path, replace);
    } finally {
      await lock.release();
    }
  }

  /** Makes the file whole, then carries it to its place and backs it up, one such round at a time. */
  #later(backupAfterMs: number): void {
    this.#busy = this.#busy.then(async () => {
      const { project } = this;
      if (!project.isOpen) return;
      try {
        project.settle();
        await this.#opened.home.settled(project);
        if (project.position.seq > 1) await this.backups.make(project, chipHash(project.chip), backupAfterMs);
      } catch (error) {
        this.#tell(error);
      }
    });
  }

  #tell(error: unknown): void {
    if (this.project.isOpen) this.#settings.onTrouble(projectProblem(error, this.path));
  }
}

async function exists(path: string): Promise<boolean> {
  return await stat(path).then(
    () => true,
    () => false,
  );
}

function keptHere(path: string): Problem {
  return new Problem('output', 'The project is kept in this file already.', path, 'Choose another name.');
}
