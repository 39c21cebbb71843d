import { copyFile, mkdir } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { Problem } from '../solver/problem/problem.ts';
import type { Content } from './check/content.ts';
import { Damage } from './check/damage.ts';
import { migrate } from './layout/layout.ts';
import { VERSION } from './layout/tables.ts';
import { syncFile, writeProblem } from './place/replace.ts';
import { Project } from './project.ts';
import { checkedVersion, contentOf, hasLog, isOfTheDisk, openInMemory } from './read.ts';
import { sameBytes } from './store/hash.ts';
import { Store } from './store/store.ts';
import { projectProblem } from './words.ts';

/**
 * Opens a project file for work. It is checked whole before anything could be written to it; one of an
 * older layout is set aside first and brought up in one go. Throws `Damage` where it is not whole.
 */
export async function openForWork(
  path: string,
  userData: string,
): Promise<{ readonly project: Project; readonly notes: readonly string[] }> {
  const version = await checkedVersion(path);
  const notes: string[] = [];
  let checked: Content | null = null;
  if (version < VERSION) {
    // Tried in memory first: what cannot be brought up is not touched.
    const trial = await openInMemory(path).catch((error) => {
      throw projectProblem(error, path);
    });
    telling(path, () => {
      try {
        contentOf(trial, version);
      } finally {
        trial.close();
      }
    });
    const aside = await setAside(path, userData, version);
    notes.push(`The project was brought up from an older form; the file as it was is kept as ${aside}.`);
  } else {
    checked = telling(path, () => {
      const checking = Store.open(path, 'read');
      try {
        return contentOf(checking, version);
      } finally {
        checking.close();
      }
    });
  }
  const project = telling(path, () => {
    const store = Store.open(path, 'write');
    try {
      if (version < VERSION) migrate(store, version);
      // What was checked a moment ago is not gone through again, where it is still the last.
      const content = checked && isStill(store, checked) ? checked : contentOf(store, VERSION);
      return new Project(store, path, content, false);
    } catch (error) {
      store.close();
      throw error;
    }
  });
  return { project, notes };
}

/** Opens a project file as it stands, for looking only. */
export async function openForReading(path: string): Promise<Project> {
  const version = await checkedVersion(path);
  const store = await openInMemory(path).catch((error) => {
    throw projectProblem(error, path);
  });
  return telling(path, () => {
    try {
      return new Project(store, path, contentOf(store, version), true);
    } catch (error) {
      store.close();
      throw error;
    }
  });
}

function isStill(store: Store, content: Content): boolean {
  const last = store.get('SELECT seq, hash FROM journal ORDER BY seq DESC LIMIT 1');
  return last?.seq === content.seq && sameBytes(last.hash, content.hash);
}

async function setAside(path: string, userData: string, version: number): Promise<string> {
  const folder = join(userData, 'before-update');
  const aside = join(folder, `${basename(path, '.chw')} (form ${version}) ${Date.now().toString(36)}.chw`);
  try {
    await mkdir(folder, { recursive: true });
    await copyFile(path, aside);
    if (await hasLog(path)) await copyFile(`${path}-wal`, `${aside}-wal`);
    await syncFile(aside);
    return aside;
  } catch (error) {
    throw writeProblem(error, aside);
  }
}

/** A file that the engine finds broken is damage; one that is held or cannot be reached is a problem. */
function telling<T>(path: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof Problem || error instanceof Damage) throw error;
    if (isOfTheDisk(error)) throw projectProblem(error, path);
    throw new Damage(['it cannot be opened']);
  }
}
