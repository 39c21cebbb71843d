import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { inFolder } from './sample.ts';

export interface FullDisk {
  readonly acknowledged: number;
  readonly seq: number;
  /** What the person was told when the disk was full. */
  readonly told: string;
  readonly copy: string;
  /** Whether the file holds, afterwards, exactly what was acknowledged. */
  readonly same: boolean;
  readonly how: string;
}

const CHILD = join(import.meta.dirname, 'full-disk-child.ts');

/**
 * Fills a real file system of 2 MB: a small one in memory, mounted for the child alone. Where the
 * system lets nobody mount one, a bound on the size of files stands for the disk's end.
 */
export async function fillDisk(): Promise<FullDisk> {
  return await inFolder(async (folder) => {
    const run = `"${process.execPath}" "${CHILD}" "${folder}"`;
    const mounted = `mount -t tmpfs -o size=2m tmpfs "${folder}" && exec ${run}`;
    const ways: readonly (readonly [string, string, string[]])[] = [
      ['a disk of 2 MB', 'unshare', ['--mount', 'sh', '-c', mounted]],
      ['a disk of 2 MB', 'unshare', ['--mount', '--map-root-user', 'sh', '-c', mounted]],
      ['files of at most 2 MB', 'sh', ['-c', `trap '' XFSZ; ulimit -f 4096; exec ${run}`]],
    ];
    const said: string[] = [];
    for (const [how, command, args] of ways) {
      const child = spawnSync(command, args, { encoding: 'utf8', timeout: 50_000 });
      if (child.status === 0) return { ...(JSON.parse(child.stdout) as Omit<FullDisk, 'how'>), how };
      said.push(`${how}: ${child.stderr}`);
    }
    throw new Error(said.join('\n'));
  });
}
