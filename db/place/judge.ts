import { constants } from 'node:fs';
import { access, realpath, stat, statfs } from 'node:fs/promises';
import { dirname, join, sep } from 'node:path';

/**
 * Whether a place can be worked in directly. Where not, the project is worked on in a private copy:
 * on network file systems two machines can write at once, sync clients carry half-written files away,
 * and removable disks are pulled out.
 */
export type Place =
  | { readonly kind: 'trusted' }
  | { readonly kind: 'network' | 'synced' | 'removable' | 'write-protected' };

/** File system numbers of statfs(2) on Linux, from memory of its manual page. */
const NETWORK = new Set([
  0x6969, 0x517b, 0xff534d42, 0xfe534d42, 0x564c, 0x73757245, 0x5346414f, 0x01021997, 0x65735546, 0x00c36400,
  0x0bd00bd0, 0x01161970, 0x7461636f,
]);
const REMOVABLE = new Set([0x4d44, 0x2011bab0, 0x9660, 0x15013346]);

/** Folders that sync clients keep, by the names they give them; and what they leave in them. */
const SYNCED =
  /^(dropbox|onedrive( - .*)?|google ?drive|my drive|icloud ?drive|mobile documents|cloudstorage|nextcloud|owncloud|seafile|syncthing|pcloud ?drive|mega(sync)?)$/i;
const SYNC_MARKS = ['.stfolder', '.dropbox', '.dropbox.cache', '.owncloudsync.log', '.sync'];

export async function judgePlace(path: string): Promise<Place> {
  const folder = await realpath(dirname(path)).catch(() => dirname(path));
  if (!(await mayWrite(folder)) || !(await mayWrite(path))) return { kind: 'write-protected' };
  if (folder.startsWith('\\\\')) return { kind: 'network' };
  if (process.platform === 'linux') {
    // As a 32-bit number without sign, whatever the platform's own type is.
    const type = Number((await statfs(folder).catch(() => null))?.type ?? 0) >>> 0;
    if (NETWORK.has(type)) return { kind: 'network' };
    if (REMOVABLE.has(type)) return { kind: 'removable' };
  }
  if (/^\/(media|run\/media|Volumes)\//.test(folder)) return { kind: 'removable' };
  return (await isSynced(folder)) ? { kind: 'synced' } : { kind: 'trusted' };
}

async function isSynced(folder: string): Promise<boolean> {
  if (folder.split(sep).some((part) => SYNCED.test(part))) return true;
  for (let at = folder; ; at = dirname(at)) {
    for (const mark of SYNC_MARKS) if (await stat(join(at, mark)).catch(() => null)) return true;
    if (dirname(at) === at) return false;
  }
}

async function mayWrite(path: string): Promise<boolean> {
  try {
    await access(path, constants.W_OK);
    return true;
  } catch (error) {
    // One that is not there yet is not in the way.
    return (error as NodeJS.ErrnoException).code === 'ENOENT';
  }
}
