import { realpath } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';
import { resultCsv } from '../export/csv-result.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { solveChip } from '../solving/solve-chip.ts';
import { type CliOptions, cliOptions, USAGE } from './options.ts';
import { readChipFile } from './read-chip.ts';
import { allMet, reportText } from './report.ts';
import { type Io, problemOf, problemText } from './say.ts';

/** The path that a file has, or will have, whatever links lead to it. */
export async function placeOf(path: string): Promise<string> {
  const whole = resolve(path);
  return await realpath(whole).catch(async () => {
    const folder = await realpath(dirname(whole)).catch(() => dirname(whole));
    return join(folder, basename(whole));
  });
}

/** Throws where two files of the call are one, which would lose one of them. */
async function checkPlaces({ file, csv, json }: CliOptions): Promise<void> {
  if (csv === '-' && json === '-') {
    throw new Problem(
      'output',
      'Both --csv and --json are standard output.',
      'the command',
      'Give one of them a file.',
    );
  }
  const named = [file, csv, json].filter((path) => path !== undefined && path !== '-') as string[];
  const places = await Promise.all(named.map(placeOf));
  const twice = places.findIndex((place, i) => places.indexOf(place) < i);
  if (twice < 0) return;
  throw new Problem(
    'output',
    `One file is named twice in the call${places[twice] === places[0] ? ', and what is read would be overwritten' : ''}.`,
    named[twice]!,
    'Give each output a file of its own.',
  );
}

async function run(options: CliOptions, io: Io): Promise<number> {
  await checkPlaces(options);
  const chip = await readChipFile(options.file);
  const result = await solveChip(chip, options.solve);
  const csv = options.csv && resultCsv(result, (i) => 'share' in chip.targets[i]!);
  const json = options.json && `${JSON.stringify(result, null, 2)}\n`;
  const outputs: Output[] = [];
  let toStandard: string | undefined;
  for (const [path, content] of [
    [options.csv, csv],
    [options.json, json],
  ] as const) {
    if (path === undefined || content === undefined) continue;
    if (path === '-') toStandard = content;
    else outputs.push({ path, content });
  }
  const text = toStandard ?? reportText(chip, result);
  await writeFiles(outputs);
  io.out(text);
  return allMet(result) ? 0 : 1;
}

/**
 * `npm run solve -- FILE …`: solves a chip and says what flows. Returns the exit code; nothing is written
 * unless all of it can be.
 */
export async function main(argv: readonly string[], io: Io): Promise<number> {
  let file = '';
  try {
    const options = cliOptions(argv);
    if (options === null) {
      io.out(USAGE);
      return 0;
    }
    file = options.file;
    return await run(options, io);
  } catch (error) {
    io.err(problemText(problemOf(error), file));
    return 2;
  }
}
