import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { MaskReport } from '../contract/mask.ts';
import { makeMasks } from '../export/mask/make.ts';
import { placesFor } from '../export/mask/places.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { checkPlaces, runCommand } from './command.ts';
import { MASK_USAGE, type MaskCliOptions, maskCliOptions } from './mask-options.ts';
import { readChipFile } from './read-chip.ts';
import type { Io } from './say.ts';
import { tableLines } from './table.ts';

async function programVersion(): Promise<string> {
  const text = await readFile(join(import.meta.dirname, '../../package.json'), 'utf8');
  return (JSON.parse(text) as { version: string }).version;
}

async function run({ file, out, json, formats, options }: MaskCliOptions, io: Io): Promise<number> {
  const chip = await readChipFile(file);
  const made = await makeMasks(chip, {
    formats,
    options,
    version: await programVersion(),
    made: new Date(),
  });
  const places = await placesFor(
    out,
    made.files.map(({ name }) => name),
  );
  const report: MaskReport = {
    ...made.report,
    files: made.report.files.map((entry, i) => ({ ...entry, path: places[i]! })),
  };
  const outputs: Output[] = made.files.map(({ content }, i) => ({ path: places[i]!, content }));
  const text = `${JSON.stringify(report, null, 2)}\n`;
  if (json !== undefined && json !== '-') outputs.push({ path: json, content: text });
  await checkPlaces(
    [file],
    outputs.map(({ path }) => path),
  );
  await writeFiles(outputs);
  io.out(json === '-' ? text : maskText(report));
  return report.findings.length === 0 ? 0 : 1;
}

/** What was made, for a person. */
function maskText(report: MaskReport): string {
  const { chip, planes, files, placed, findings, notes } = report;
  const layers = tableLines([
    { head: 'layer', words: planes.map(({ name }) => name) },
    { head: 'cavities', words: planes.map(({ cavities }) => String(cavities)) },
    { head: 'area', kind: 'area', unit: 'mm^2', values: planes.map(({ area }) => area) },
    { head: 'perimeter', kind: 'length', unit: 'mm', values: planes.map(({ perimeter }) => perimeter) },
    { head: 'undercut', kind: 'length', unit: 'um', values: planes.map(({ undercut }) => undercut) },
    { head: 'scale', kind: 'number', values: planes.map(({ scale }) => scale), digits: 7 },
  ]);
  const lines = files.map(({ path, name, size, unit, compared }) => {
    const share = Math.max(...compared.map(({ difference, allowed }) => difference / allowed));
    const percent = Number((share * 100).toPrecision(2));
    return `  ${path ?? name}\n    ${size} bytes, unit ${unit}; read back, it differs by ${percent} % of what the chord error allows`;
  });
  return [
    `Masks of ${chip}${placed.length > 1 ? `, ${placed.length} on a wafer` : ''}`,
    '',
    ...layers,
    '',
    'Files',
    ...lines,
    ...(findings.length > 0 ? ['', 'Findings', ...findings.map(({ says }) => `  ${says}`)] : []),
    '',
    'Notes on the masks',
    ...notes.map((note) => `  ${note}`),
    '',
  ].join('\n');
}

/** `npm run mask -- FILE …`: makes masks of a chip. Returns the exit code; all files are written, or none. */
export async function main(argv: readonly string[], io: Io): Promise<number> {
  return await runCommand({ usage: MASK_USAGE, options: maskCliOptions, run }, argv, io);
}
