import { resultCsv } from '../export/csv-result.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { solveChip } from '../solving/solve-chip.ts';
import { checkPlaces, checkStandard, runCommand } from './command.ts';
import { type CliOptions, cliOptions, USAGE } from './options.ts';
import { readChipFile } from './read-chip.ts';
import { allMet, reportText } from './report.ts';
import type { Io } from './say.ts';

async function run(options: CliOptions, io: Io): Promise<number> {
  checkStandard({ '--csv': options.csv, '--json': options.json });
  await checkPlaces([options.file], [options.csv, options.json]);
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
  return await runCommand({ usage: USAGE, options: cliOptions, run }, argv, io);
}
