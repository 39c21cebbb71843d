import { mkdir, stat } from 'node:fs/promises';
import { join, resolve } from 'node:path';

/** Where projects are kept that the person has not chosen a place for yet. */
export function draftFolder(settings: { readonly userData: string }): string {
  return join(resolve(settings.userData), 'drafts');
}

/** A path in the folder of drafts that nothing bears yet; `name` becomes part of it. */
export async function freeDraft(settings: { readonly userData: string }, name: string): Promise<string> {
  const folder = draftFolder(settings);
  await mkdir(folder, { recursive: true });
  const plain = name.replaceAll(/[^\p{L}\p{N} ().,_-]/gu, '_').slice(0, 80);
  for (let number = 1; ; number += 1) {
    const path = join(folder, `${plain} ${Date.now().toString(36)}-${process.pid}-${number}.chw`);
    if (!(await stat(path).catch(() => null))) return path;
  }
}
