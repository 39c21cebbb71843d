import { basename, dirname } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';
import type { Project } from '../project.ts';
import { projectProblem } from '../words.ts';
import type { Place } from './judge.ts';
import type { Lock, Opener } from './lock.ts';
import type { PrivateCopy } from './private-copy.ts';

export type Mode = 'kept' | 'draft' | 'read-only' | 'private copy';

/** Where an open project lives and how it gets whole to its place. */
export interface Home {
  readonly mode: Mode;
  /** What is safe, what is not, what to do; '' where all is plain. */
  readonly says: string;
  /** Where the person keeps it; null for a draft. */
  readonly path: string | null;
  readonly name: (project: Project) => string;
  /** After the file was made whole: carries it to its place where that is another. Throws what went wrong. */
  settled(project: Project): Promise<void>;
  /** After the file was closed. */
  left(): Promise<void>;
}

const nothing = async (): Promise<void> => undefined;

export function keptHome(path: string, lock: Lock): Home {
  return {
    mode: 'kept',
    says: '',
    path,
    name: () => basename(path),
    settled: nothing,
    left: () => lock.release(),
  };
}

export function draftHome(lock: Lock): Home {
  return {
    mode: 'draft',
    says: 'Every edit is kept in the program’s own folder. Save the project to choose a place.',
    path: null,
    name: (project) => project.chip.name || 'Untitled',
    settled: nothing,
    left: () => lock.release(),
  };
}

export function lookingHome(path: string, opener: Opener): Home {
  return {
    mode: 'read-only',
    says: openElsewhere(opener),
    path,
    name: () => basename(path),
    settled: nothing,
    left: nothing,
  };
}

const WHY: Readonly<Record<Exclude<Place['kind'], 'trusted'>, string>> = {
  network: 'This folder is on the network',
  synced: 'This folder is kept in step with other machines',
  removable: 'This disk can be removed',
  'write-protected': 'This place cannot be written to',
};

/** A project worked on in a private copy; `lock` is null where the place cannot even hold a mark. */
export class CopyHome implements Home {
  readonly mode = 'private copy';
  readonly #copy: PrivateCopy;
  readonly #place: Exclude<Place['kind'], 'trusted'>;
  readonly #lock: Lock | null;
  readonly #changed: () => void;
  #failed: string | null = null;

  constructor(
    copy: PrivateCopy,
    place: Exclude<Place['kind'], 'trusted'>,
    lock: Lock | null,
    changed: () => void,
  ) {
    this.#copy = copy;
    this.#place = place;
    this.#lock = lock;
    this.#changed = changed;
  }

  get says(): string {
    const why = WHY[this.#place];
    if (this.#place === 'write-protected')
      return `${why}: every edit is kept in the program’s own folder. Save the project elsewhere to have it in a place of yours.`;
    if (this.#failed)
      return `${why} and cannot be reached since ${this.#failed}: every edit is kept in the program’s own folder and goes there as soon as it can be reached.`;
    return `${why}: every edit is kept at once in the program’s own folder, and the whole file goes there a moment after the last one.`;
  }

  get path(): string {
    return this.#copy.path;
  }

  name = (): string => basename(this.#copy.path);

  async settled(project: Project): Promise<void> {
    if (this.#place === 'write-protected' || !(await this.#copy.isDue())) return;
    const before = { path: this.#copy.path, failed: this.#failed };
    try {
      await this.#copy.writeBack(project);
      this.#failed = null;
    } catch (error) {
      // The work went to another name: it is there, and the person is told.
      const arrived = this.#copy.path !== before.path && !(await this.#copy.isDue());
      this.#failed = arrived ? null : (before.failed ?? new Date().toTimeString().slice(0, 5));
      if (arrived || before.failed === null) throw projectProblem(error, dirname(this.#copy.path));
    } finally {
      if (before.path !== this.#copy.path || before.failed !== this.#failed) this.#changed();
    }
  }

  async left(): Promise<void> {
    await this.#lock?.release();
  }
}

export function openElsewhere(opener: Opener): string {
  const since = new Date(opener.since).toLocaleString('en-GB', { dateStyle: 'medium', timeStyle: 'short' });
  const who = opener.user ? ` by ${opener.user}` : '';
  const where = opener.host ? ` on ${opener.host}` : '';
  return `This project is open${who}${where} since ${since}. You see it as it was kept a moment ago; nothing is written from here.`;
}

export function inUse(opener: Opener, path: string): Problem {
  return new Problem('output', openElsewhere(opener), path, 'Choose another name.');
}
