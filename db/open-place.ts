import { basename, dirname, extname } from 'node:path';
import { Problem } from '../solver/problem/problem.ts';
import { Backups, backupTime } from './backup/backups.ts';
import { Damage } from './check/damage.ts';
import { openForReading, openForWork } from './open.ts';
import { draftFolder, freeDraft } from './place/drafts.ts';
import { CopyHome, draftHome, type Home, keptHome, lookingHome } from './place/home.ts';
import { judgePlace, type Place } from './place/judge.ts';
import { isLock, type Lock, type Opener, takeLock } from './place/lock.ts';
import { PrivateCopy } from './place/private-copy.ts';
import { writeProblem } from './place/replace.ts';
import type { Project } from './project.ts';
import { checkedVersion } from './read.ts';
import { salvage } from './salvage/salvage.ts';
import { projectProblem } from './words.ts';
import type { WorkplaceSettings } from './workplace.ts';

/** An open project with where it lives; `path` is what it was opened by. */
export interface Opened {
  readonly project: Project;
  readonly home: Home;
  readonly path: string;
  /** What had to be done to open it, in sentences. */
  readonly notes: readonly string[];
}

/** Opens a project in the way its place and its state call for. */
export async function openPlace(settings: WorkplaceSettings, path: string): Promise<Opened> {
  await checkedVersion(path);
  const isDraft = dirname(path) === draftFolder(settings);
  const place: Place = isDraft ? { kind: 'trusted' } : await (settings.judge ?? judgePlace)(path);
  try {
    return place.kind === 'trusted'
      ? await openHere(settings, path, isDraft)
      : await openCopy(settings, path, place.kind);
  } catch (error) {
    if (error instanceof Damage) return await openSalvaged(settings, path, error);
    throw error;
  }
}

async function openHere(settings: WorkplaceSettings, path: string, isDraft: boolean): Promise<Opened> {
  const lock = await mark(path);
  if (!isLock(lock)) return await lookAt(path, lock);
  return await holding([lock], async () => {
    const { project, notes } = await openForWork(path, settings.userData);
    return { project, home: isDraft ? draftHome(lock) : keptHome(path, lock), path, notes };
  });
}

async function openCopy(
  settings: WorkplaceSettings,
  path: string,
  kind: Exclude<Place['kind'], 'trusted'>,
): Promise<Opened> {
  const there = kind === 'write-protected' ? null : await mark(path);
  if (there && !isLock(there)) return await lookAt(path, there);
  return await holding(there ? [there] : [], async () => {
    const copy = await PrivateCopy.take(settings.userData, path, draftFolder(settings)).catch((error) => {
      throw projectProblem(error, path);
    });
    const here = await mark(copy.file);
    if (!isLock(here)) {
      await there?.release();
      return await lookAt(path, here);
    }
    return await holding([here], async () => {
      const { project, notes } = await openForWork(copy.file, settings.userData);
      const lock = {
        release: async () => {
          await here.release();
          await there?.release();
        },
      };
      const home = new CopyHome(copy, kind, lock, settings.onChange);
      return { project, home, path, notes: [...copy.notes, ...notes] };
    });
  });
}

/** What can be read of a damaged project, as a draft; the damaged file stays as it is. */
async function openSalvaged(settings: WorkplaceSettings, path: string, damage: Damage): Promise<Opened> {
  const [newest] = await new Backups(settings.userData, path).list();
  const backup = newest ? ` There is a backup of ${backupTime(newest.id)}.` : '';
  const draft = await freeDraft(settings, `${basename(path, extname(path))} recovered`);
  let report: string[];
  try {
    report = await salvage(path, draft, settings.program);
  } catch (error) {
    const told = projectProblem(error, path);
    const remedy = newest ? `Go back to a backup.${backup}` : told.remedy;
    throw new Problem(told.kind, `${told.what} (${damage.reasons.join('; ')})`, told.where, remedy);
  }
  const opened = await openHere(settings, draft, true);
  const first = `"${basename(path)}" is damaged: ${damage.reasons.join('; ')}. It is left as it is; what could be read of it is here, as a draft.${backup}`;
  return { ...opened, notes: [first, ...report, ...opened.notes] };
}

async function lookAt(path: string, opener: Opener): Promise<Opened> {
  return { project: await openForReading(path), home: lookingHome(path, opener), path, notes: [] };
}

async function mark(path: string): Promise<Lock | Opener> {
  return await takeLock(path).catch((error) => {
    throw writeProblem(error, path);
  });
}

/** Runs `work` with the marks held; they are let go where it fails. */
async function holding<T>(locks: readonly Lock[], work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    for (const lock of locks) await lock.release();
    throw error;
  }
}
