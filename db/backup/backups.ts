import { createHash } from 'node:crypto';
import { mkdir, readdir, rename, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';
import { removeFile, type Source } from '../place/copy-out.ts';
import { siblingOf, syncFile } from '../place/replace.ts';

/** The newest are kept whatever their age, and one a day for two weeks. */
const RECENT = 5;
const DAYS = 14;
const DAY_MS = 86_400_000;

export interface Backup {
  /** Its file name without the ending. */
  readonly id: string;
  /** Milliseconds since 1970. */
  readonly made: number;
  readonly size: number;
  /** Kept as the last one of its day. */
  readonly daily: boolean;
}

const NAME = /^(\d{13})-([0-9a-f]{16})\.chw$/;

/** The backups of one project, in the program's own folder. */
export class Backups {
  readonly #folder: string;

  constructor(userData: string, path: string) {
    const key = createHash('sha256').update(path).digest('hex').slice(0, 24);
    this.#folder = join(userData, 'backups', key);
  }

  /** Newest first. */
  async list(): Promise<Backup[]> {
    const found: Omit<Backup, 'daily'>[] = [];
    for (const name of await readdir(this.#folder).catch(() => [])) {
      const made = NAME.exec(name)?.[1];
      if (!made) continue;
      const there = await stat(join(this.#folder, name)).catch(() => null);
      if (there) found.push({ id: name.slice(0, -'.chw'.length), made: Number(made), size: there.size });
    }
    found.sort((a, b) => b.made - a.made);
    return found.map((backup, index) => ({ ...backup, daily: isLastOfDay(found, index) }));
  }

  /** The file of one backup. */
  file(id: string): string {
    if (!NAME.test(`${id}.chw`))
      throw new Problem('reference', 'There is no such backup.', id, 'Choose one from the list.');
    return join(this.#folder, `${id}.chw`);
  }

  /**
   * Makes one of a project whose content has the hash `content`, unless the newest is of the same or
   * younger than `afterMs`.
   */
  async make(source: Source, content: Uint8Array, afterMs = 0, now = Date.now()): Promise<void> {
    const hash = Buffer.from(content).toString('hex').slice(0, 16);
    const [newest] = await this.list();
    if (newest && (newest.id.endsWith(hash) || now - newest.made < afterMs)) return;
    await mkdir(this.#folder, { recursive: true });
    const file = join(this.#folder, `${now}-${hash}.chw`);
    const sibling = siblingOf(file);
    try {
      await source.backup(sibling);
      await syncFile(sibling);
      await rename(sibling, file);
    } finally {
      await removeFile(sibling);
    }
    await this.prune(now);
  }

  /** Lets go of what is beyond the bounds. */
  async prune(now = Date.now()): Promise<void> {
    for (const [index, backup] of (await this.list()).entries()) {
      if (index < RECENT || (backup.daily && now - backup.made < DAYS * DAY_MS)) continue;
      await removeFile(this.file(backup.id));
    }
  }
}

/** When a backup was made, for a person and fit for a file name. */
export function backupTime(id: string): string {
  const made = new Date(Number(id.split('-')[0]));
  return made.toISOString().slice(0, 16).replace('T', ' ').replace(':', '.');
}

/** `sorted` newest first: whether nothing newer is of the same day. */
function isLastOfDay(sorted: readonly { readonly made: number }[], index: number): boolean {
  const day = Math.floor(sorted[index]!.made / DAY_MS);
  return index === 0 || Math.floor(sorted[index - 1]!.made / DAY_MS) !== day;
}
