import { Problem } from '../solver/problem/problem.ts';
import { Damage } from './check/damage.ts';
import { Project } from './project.ts';
import { checkedVersion, contentOf, damagedProblem, openInMemory } from './read.ts';
import { Store } from './store/store.ts';

/** Opens a project file for work. It is checked whole before anything could be written to it. */
export async function openForWork(path: string): Promise<Project> {
  await checkedVersion(path);
  return telling(path, () => {
    const checking = Store.open(path, 'read');
    try {
      contentOf(checking);
    } finally {
      checking.close();
    }
    const store = Store.open(path, 'write');
    return new Project(store, path, contentOf(store), false);
  });
}

/** Opens a project file as it stands, for looking only. */
export async function openForReading(path: string): Promise<Project> {
  await checkedVersion(path);
  const store = await openInMemory(path);
  return telling(path, () => new Project(store, path, contentOf(store), true));
}

function telling<T>(path: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof Problem) throw error;
    throw damagedProblem(error instanceof Damage ? error : new Damage(['it cannot be opened']), path);
  }
}
