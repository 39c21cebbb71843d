import { join } from 'node:path';
import { chipHash } from '../../db/chip/parts.ts';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import { copyOut } from '../../db/place/copy-out.ts';
import { readProjectChip } from '../../db/read.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { madeUpChip, random, randomEdit } from './random.ts';

/** Edits a project on a small disk until it is full, and tells what was acknowledged and what was said then. */
const [folder] = process.argv.slice(2) as [string];
const path = join(folder, 'project.chw');
makeFile(path, madeUpChip(20), { program: 'test' });
const { project } = await openForWork(path, folder);
const next = random(1);
let acknowledged = 0;
let told = '';
for (let step = 0; step < 200_000 && !told; step += 1) {
  try {
    project.edit(randomEdit(project.chip, next), project.position.seq);
    acknowledged += 1;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    told = error.message;
  }
}
const hash = Buffer.from(chipHash(project.chip)).toString('hex');
const { seq } = project.position;
const copy = await copyOut(project, join(folder, 'copy.chw'), true).then(
  () => 'copied',
  (error: unknown) => (error instanceof Problem ? error.message : String(error)),
);
try {
  project.close();
} catch (error) {
  if (!(error instanceof Problem)) throw error;
}
const found = await readProjectChip(path);
const same = Buffer.from(chipHash(found)).toString('hex') === hash;
process.stdout.write(JSON.stringify({ acknowledged, seq, told, copy, same }));
