import { Problem } from '../solver/problem/problem.ts';
import { Damage } from './check/damage.ts';
import { Project } from './project.ts';
import { checkedVersion, contentOf, damagedProblem } from './read.ts';
import { Store } from './store/store.ts';

/** Opens a project file for work. */
export async function openProject(path: string): Promise<Project> {
  await checkedVersion(path);
  try {
    const checking = Store.open(path, 'read');
    try {
      contentOf(checking);
    } finally {
      checking.close();
    }
    const store = Store.open(path, 'write');
    return new Project(store, path, contentOf(store), false);
  } catch (error) {
    if (error instanceof Problem) throw error;
    throw damagedProblem(error instanceof Damage ? error : new Damage(['it cannot be opened']), path);
  }
}
