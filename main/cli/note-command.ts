import { readFile } from 'node:fs/promises';
import type { Result } from '../../solver/chip/result.ts';
import { type Documents, noteFiles, splitFile } from '../export/note/documents.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { solveChip } from '../solving/solve-chip.ts';
import { checkPlaces, runCommand } from './command.ts';
import { NOTE_USAGE, type NoteCall, noteCall, splitFormat } from './note-options.ts';
import { readChipFile } from './read-chip.ts';
import { allMet } from './report.ts';
import type { Io } from './say.ts';

async function made(all: Documents, { outputs }: NoteCall): Promise<Output[]> {
  const { pdf, html, csv, split, json } = outputs;
  return [
    ...(pdf === undefined ? [] : await noteFiles(all, 'pdf', pdf)),
    ...(html === undefined ? [] : await noteFiles(all, 'html', html)),
    ...(csv === undefined ? [] : await noteFiles(all, 'csv', csv)),
    ...(split === undefined ? [] : [await splitFile(all, splitFormat(split)!, split)]),
    ...(json === undefined ? [] : [{ path: json, content: `${JSON.stringify(all.result, null, 2)}\n` }]),
  ];
}

/** What is met and what is not, as the last line of what the command says. */
function metLine({ targets, limits }: Result): string {
  const missed = [
    ...targets.filter(({ met }) => !met).map(({ port, channel }) => port ?? channel ?? ''),
    ...limits.filter(({ met }) => met === false).map(({ name }) => name),
  ];
  const open = limits.filter(({ met }) => met === null).map(({ name }) => name);
  const said = [
    ...(missed.length > 0
      ? [`Missed: ${missed.slice(0, 10).join(', ')}${missed.length > 10 ? ', …' : ''}.`]
      : []),
    ...(open.length > 0 ? [`Not judged: ${open.slice(0, 10).join(', ')}.`] : []),
  ];
  if (said.length > 0) return said.join(' ');
  return targets.length + limits.length === 0
    ? 'No target and no limit is set.'
    : 'All targets and limits are met.';
}

/** Name and version as they stand in the package's own description. */
export async function programName(): Promise<string> {
  const text = await readFile(new URL('../../package.json', import.meta.url), 'utf8');
  const { productName, version } = JSON.parse(text) as { productName: string; version: string };
  return `${productName} ${version}`;
}

async function run(call: NoteCall, io: Io): Promise<number> {
  const chip = await readChipFile(call.file);
  const result = await solveChip(chip, call.solve);
  const all: Documents = { chip, result, paper: call.paper, program: await programName(), date: new Date() };
  const outputs = await made(all, call);
  const files = outputs.filter(({ path }) => path !== '-');
  await checkPlaces(
    [call.file],
    files.map(({ path }) => path),
  );
  await writeFiles(files);
  const spoken = outputs.find(({ path }) => path === '-');
  if (spoken) io.out(String(spoken.content));
  else io.out(`${files.map(({ path }) => `Written: ${path}`).join('\n')}\n${metLine(result)}\n`);
  return allMet(result) ? 0 : 1;
}

/**
 * `npm run note -- FILE …`: writes the fabrication note of a chip. Returns the exit code; nothing is
 * written unless all of it can be.
 */
export async function noteMain(argv: readonly string[], io: Io): Promise<number> {
  return await runCommand({ usage: NOTE_USAGE, options: noteCall, run }, argv, io);
}
