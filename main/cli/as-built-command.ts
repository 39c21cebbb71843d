import { readFile, realpath, stat } from 'node:fs/promises';
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
import { readChipFile } from './read-chip.ts';
import { allMet } from './report.ts';
import { type Io, problemOf, problemText } from './say.ts';

/** Throws where two files of the call are one, which would lose one of them. */
async function checkPlaces(named: readonly string[]): Promise<void> {
  const places = await Promise.all(named.map((path) => realpath(path).catch(() => path)));
  const twice = places.findIndex((place, i) => places.indexOf(place) < i);
  if (twice < 0) return;
  throw new Problem(
    'output',
    'One file is named twice in the call.',
    named[twice]!,
    'Give each file a place of its own.',
  );
}

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
  if (json === '-' && description === '-') {
    throw new Problem(
      'output',
      'Both --json and --chip are standard output.',
      'the command',
      'Give one of them a file.',
    );
  }
  await checkPlaces(
    [file, measurements, json, description].filter((path) => path !== undefined && path !== '-') as string[],
  );
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
  let call: AsBuiltCall | null = null;
  try {
    call = asBuiltCall(argv);
    if (call === null) {
      io.out(AS_BUILT_USAGE);
      return 0;
    }
    return await run(call, io);
  } catch (error) {
    const problem = problemOf(error);
    const measured = call !== null && problem.where.startsWith(call.measurements);
    io.err(problemText(problem, call === null || measured ? '' : call.file));
    return 2;
  }
}
