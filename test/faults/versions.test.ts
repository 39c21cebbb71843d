import { copyFileSync, existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { expect, test } from 'vitest';
import { canonical } from '../../db/chip/canonical.ts';
import { migrate, strangeLayout } from '../../db/layout/layout.ts';
import { MIGRATIONS, type Migration, VERSION } from '../../db/layout/tables.ts';
import { openForWork } from '../../db/open.ts';
import { readProjectChip } from '../../db/read.ts';
import { seam } from '../../db/seam.ts';
import { Store } from '../../db/store/store.ts';
import { Workplace } from '../../db/workplace.ts';
import { madeUpChip } from './random.ts';
import { inFolder, madeUpResult } from './sample.ts';

const FIXTURES = resolve(import.meta.dirname, '../fixtures/projects');

test('forms are numbered from 1 without a gap, and each has its fixture', () => {
  expect(MIGRATIONS.map((migration) => migration.to)).toEqual(MIGRATIONS.map((_, index) => index + 1));
  for (let version = 1; version <= VERSION; version += 1) {
    expect(existsSync(join(FIXTURES, `form-${version}.chw`)), `form ${version}`).toBe(true);
  }
});

for (const file of readdirSync(FIXTURES).filter((name) => name.endsWith('.chw'))) {
  test(`${file} opens with all that is in it`, async () => {
    await inFolder(async (folder) => {
      const path = join(folder, file);
      copyFileSync(join(FIXTURES, file), path);
      const known = JSON.parse(readFileSync(join(FIXTURES, file.replace('.chw', '.json')), 'utf8')) as {
        position: unknown;
        undoable: number;
        chip: unknown;
      };
      const { project } = await openForWork(path, folder);
      expect(JSON.parse(canonical(project.chip))).toEqual(known.chip);
      expect(project.position).toEqual(known.position);
      const [trial] = project.listTrials();
      expect(project.getTrial(trial!.id)).toMatchObject({
        trial: { name: 'as drawn' },
        result: madeUpResult(4),
      });
      expect(project.findResult('ideal')).toEqual(madeUpResult(4));
      expect(project.getCells(['a cell'])[0]?.bytes[250]).toBe(250);
      project.redo();
      for (let back = 0; back <= known.undoable; back += 1) project.undo();
      expect(project.position.undo).toBeNull();
      expect(project.chip).toEqual(madeUpChip(6));
      project.close();
    });
  });
}

test('a newer form is refused, both named, and the file stays as it is', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'newer.chw');
    const bytes = readFileSync(join(FIXTURES, 'form-1.chw'));
    bytes.writeInt32BE(VERSION + 6, 60);
    writeFileSync(path, bytes);
    const settings = {
      userData: folder,
      program: 'test',
      onChange: () => undefined,
      onTrouble: () => undefined,
    };
    const told = `made by a newer version of the program (project format ${VERSION + 6}; this one knows up to ${VERSION})`;
    await expect(Workplace.open(settings, path)).rejects.toThrow(told);
    await expect(readProjectChip(path)).rejects.toThrow(told);
    expect(readFileSync(path).equals(bytes)).toBe(true);
    expect(readdirSync(folder)).toEqual(['newer.chw']);
  });
});

const NEXT: readonly Migration[] = [
  ...MIGRATIONS,
  { to: VERSION + 1, statements: ['CREATE TABLE extra (a INTEGER) STRICT', 'INSERT INTO extra VALUES (1)'] },
  { to: VERSION + 2, statements: ['ALTER TABLE extra ADD COLUMN b TEXT', 'UPDATE extra SET b = 2'] },
];

test('going up is one step: wherever it fails, the file is as it was; done, it is all there', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    for (let k = 1; ; k += 1) {
      copyFileSync(join(FIXTURES, 'form-1.chw'), path);
      const before = readFileSync(path);
      const store = Store.open(path, 'write');
      let step = 0;
      let failed = false;
      seam.watch = (_name, when) => {
        if (when === 'before') step += 1;
        if (when === 'after' && step === k) {
          failed = true;
          throw Object.assign(new Error('made to fail'), { code: 'SQLITE_FULL' });
        }
      };
      try {
        migrate(store, 1, NEXT);
      } catch (error) {
        if (!failed) throw error;
      } finally {
        seam.watch = null;
      }
      const version = store.pragma('user_version');
      const committed = version === NEXT.length;
      if (committed) expect(store.all('SELECT * FROM extra')).toEqual([{ a: 1, b: '2' }]);
      else expect(strangeLayout(store, 1)).toEqual([]);
      store.close();
      if (!committed) expect(readFileSync(path).equals(before)).toBe(true);
      if (!failed) break;
    }
  });
});
