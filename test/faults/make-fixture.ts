import { copyFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { canonical } from '../../db/chip/canonical.ts';
import { VERSION } from '../../db/layout/tables.ts';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import { madeUpChip } from './random.ts';
import { inFolder, madeUpResult, workAtRandom } from './sample.ts';

/**
 * Makes the fixture of the present form of the project file, once, when that form ships:
 * `node test/faults/make-fixture.ts`. A fixture that is there is never made again.
 */
const folder = resolve(import.meta.dirname, '../fixtures/projects');
const name = `form-${VERSION}`;

await inFolder(async (scratch) => {
  const path = join(scratch, `${name}.chw`);
  makeFile(path, madeUpChip(6), { program: 'fixture' });
  const { project } = await openForWork(path, scratch);
  const outline = [
    [1_000_000, 1_000_000],
    [5_000_000, 1_000_000],
    [5_000_000, 4_000_000],
  ] as const;
  const part = { id: 'clamp', layer: 'flow', outline, clearance: 250_000, note: 'bolt head' };
  project.edit(
    { label: 'draw a keep-out', changes: [{ kind: 'insert', list: 'keepOuts', index: 0, part }] },
    project.position.seq,
  );
  workAtRandom(project, 25, 11);
  project.freezeTrial('as drawn', project.position.seq, madeUpResult(4));
  project.undo();
  project.putCells([{ key: 'a cell', bytes: Uint8Array.from({ length: 300 }, (_, index) => index % 251) }]);
  project.keepResult(project.position.seq, 'ideal', madeUpResult(4));
  const { chip, position } = project;
  const undoable = project.history(10_000).filter((mark) => !mark.undone).length;
  project.close();
  copyFileSync(path, join(folder, `${name}.chw`), 1);
  writeFileSync(
    join(folder, `${name}.json`),
    `${JSON.stringify({ position, undoable, chip: JSON.parse(canonical(chip)) }, null, 2)}\n`,
    { flag: 'wx' },
  );
});
