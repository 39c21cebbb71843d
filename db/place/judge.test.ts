import { chmodSync, mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { inFolder } from '../../test/faults/sample.ts';
import { judgePlace } from './judge.ts';

test('an ordinary folder is trusted, one that a sync client keeps is not', async () => {
  await inFolder(async (folder) => {
    expect(await judgePlace(join(folder, 'a.chw'))).toEqual({ kind: 'trusted' });
    for (const name of [
      'Dropbox',
      'OneDrive',
      'OneDrive - Some Institute',
      'Google Drive',
      'Nextcloud',
      'CloudStorage',
    ]) {
      mkdirSync(join(folder, name, 'deep', 'down'), { recursive: true });
      expect(await judgePlace(join(folder, name, 'deep', 'down', 'a.chw')), name).toEqual({ kind: 'synced' });
    }
    for (const name of ['Dropbox notes', 'my OneDrive', 'sync']) {
      mkdirSync(join(folder, name));
      expect(await judgePlace(join(folder, name, 'a.chw')), name).toEqual({ kind: 'trusted' });
    }
    const marked = join(folder, 'marked', 'below');
    mkdirSync(marked, { recursive: true });
    mkdirSync(join(folder, 'marked', '.stfolder'));
    expect(await judgePlace(join(marked, 'a.chw'))).toEqual({ kind: 'synced' });
  });
});

test('a place that cannot be written to is told apart', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    writeFileSync(path, '');
    chmodSync(path, 0o444);
    // The superuser may write to it all the same.
    const kind = process.getuid?.() === 0 ? 'trusted' : 'write-protected';
    expect(await judgePlace(path)).toEqual({ kind });
  });
});
