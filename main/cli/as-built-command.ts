import { readFile, stat } from 'node:fs/promises';
import { asBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Measured } from '../../solver/asbuilt/measured.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { MOST_BYTES, readTable } from '../measurements/read-table.ts';
import { asBuiltJson } from './as-built-json.ts';
import { AS_BUILT_USAGE, type AsBuiltCall, asBuiltCall } from './as-built-options.ts';
import { asBuiltText } from './as-built-report.ts';
import { checkPlaces, checkStandard, runCommand } from './command.ts';
import { readChipFile } from './read-chip.ts';
import { allMet } from './report.ts';
import type { Io } from './say.ts';

async function textOf(path: string): Promise<string> {
  try {
    if ((await stat(path)).size > MOST_BYTES) {
      throw new Problem(
        'too-many',
        'The file is larger than any table of measurements.',
        '',
        'Check that it is the right file.',
      );
    }
    return await readFile(path, 'utf8');
  } catch (error) {
    if (error instanceof Problem) throw error;
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT' || code === 'ENOTDIR')
      throw new Problem('not-readable', 'There is no such file.', '', 'Check the path.');
    if (code === 'EISDIR') throw new Problem('not-readable', 'This is a folder.', '', 'Name a table as CSV.');
    throw new Problem('not-readable', 'The file cannot be read.', '', 'Check that it is yours to read.');
  }
}

/** The measurements of a file; a `Problem` names the file, row and column. */
async function measuredOf(path: string, chip: Chip): Promise<Measured[]> {
  try {
    return readMeasured(readTable(await textOf(path)), chip);
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    const { kind, what, where, remedy } = error;
    throw new Problem(kind, what, where === '' ? path : `${path}, ${where}`, remedy);
  }
}

async function run(call: AsBuiltCall, io: Io): Promise<number> {
  const { file, measurements, json, chip: description, options } = call;
  checkStandard({ '--json': json, '--chip': description });
  await checkPlaces([file, measurements], [json, description]);
  const chip = await readChipFile(file);
  const built = asBuilt(chip, await measuredOf(measurements, chip), options);
  const outputs: Output[] = [];
  let toStandard: string | undefined;
  for (const [path, content] of [
    [json, () => `${JSON.stringify(asBuiltJson(built), null, 2)}\n`],
    [description, () => writeDescription(built.chip)],
  ] as const) {
    if (path === '-') toStandard = content();
    else if (path !== undefined) outputs.push({ path, content: content() });
  }
  const text = toStandard ?? asBuiltText(chip, built);
  await writeFiles(outputs);
  io.out(text);
  return allMet(built.result) ? 0 : 1;
}

/** `npm run as-built -- FILE MEASUREMENTS …`. Returns the exit code; nothing is written unless all of it can be. */
export async function main(argv: readonly string[], io: Io): Promise<number> {
  const about = ({ file, measurements }: AsBuiltCall, { where }: Problem): string =>
    where.startsWith(measurements) ? '' : file;
  return await runCommand({ usage: AS_BUILT_USAGE, options: asBuiltCall, run, about }, argv, io);
}
