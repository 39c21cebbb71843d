/**
 * The one place through which the project file and the file system are reached, so that a test can
 * make the k-th step fail, before it is done or after it was done but reported as failed.
 */
export const seam: { watch: ((step: string, when: 'before' | 'after') => void) | null } = { watch: null };

export function step<T>(name: string, work: () => T): T {
  if (!seam.watch) return work();
  seam.watch(name, 'before');
  const result = work();
  seam.watch(name, 'after');
  return result;
}

export async function stepAsync<T>(name: string, work: () => Promise<T>): Promise<T> {
  if (!seam.watch) return await work();
  seam.watch(name, 'before');
  const result = await work();
  seam.watch(name, 'after');
  return result;
}
