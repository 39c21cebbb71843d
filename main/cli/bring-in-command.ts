import { basename } from 'node:path';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { formatQuantity } from '../../solver/chip/units-format.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { BringInReport } from '../contract/bring-in.ts';
import { type Output, writeFiles } from '../export/write-files.ts';
import { readBytes } from '../files/read.ts';
import { problemFrom, startImport } from '../import/thread.ts';
import { BRING_IN_USAGE, type BringInCliOptions, bringInCliOptions } from './bring-in-options.ts';
import { checkPlaces, checkStandard, runCommand } from './command.ts';
import type { Io } from './say.ts';
import { type Column, tableLines } from './table.ts';

async function run({ file, out, json, settings }: BringInCliOptions, io: Io): Promise<number> {
  checkStandard({ '-o': out, '--json': json });
  await checkPlaces([file], [out, json]);
  const bytes = await readBytes(file);
  const ended = await startImport({ bytes, file: basename(file), settings }, () => undefined).ended;
  if (ended.kind === 'failed') throw problemFrom(ended.problem);
  if (ended.kind !== 'made')
    throw new Problem('output', 'The drawing was not brought in.', file, 'Try again.');
  const { chip, report } = ended.outcome;
  const description = writeDescription(chip);
  const told = `${JSON.stringify(report, null, 2)}\n`;
  const outputs: Output[] = [];
  if (out !== '-') outputs.push({ path: out, content: description });
  if (json !== undefined && json !== '-') outputs.push({ path: json, content: told });
  await writeFiles(outputs);
  io.out(out === '-' ? description : json === '-' ? told : reportText(report));
  return report.notUnderstood.length === 0 ? 0 : 1;
}

/** What became of a drawing, for a person. */
function reportText(report: BringInReport): string {
  const { chipLayers, layers, assumed, notUnderstood } = report;
  const counts = (head: string, values: readonly number[]): Column => ({ head, words: values.map(String) });
  const off = (pick: 'share' | 'meanOffset' | 'furthest') =>
    chipLayers.map(({ deviation }) => deviation?.[pick] ?? null);
  return [
    `${report.file}: ${report.drawing}, ${report.entities.toLocaleString('en')} entities; one unit is ${formatQuantity(report.unit.metres, 'length')}. ${report.unit.says}`,
    '',
    'Layers of the drawing',
    ...tableLines([
      { head: 'layer', words: layers.map(({ name }) => name) },
      { head: 'is', words: layers.map(({ role, on }) => (on === null ? role : `${role} of ${on}`)) },
      counts(
        'regions',
        layers.map(({ regions }) => regions),
      ),
      counts(
        'paths',
        layers.map(({ paths }) => paths),
      ),
      counts(
        'lines',
        layers.map(({ lines }) => lines),
      ),
    ]),
    '',
    'Layers of the chip, and how far they lie off the drawing',
    ...tableLines([
      { head: 'layer', words: chipLayers.map(({ id }) => id) },
      counts(
        'channels',
        chipLayers.map((layer) => layer.channelsFromPaths + layer.channelsFromRegions),
      ),
      counts(
        'of them tapered',
        chipLayers.map(({ tapered }) => tapered),
      ),
      counts(
        'chambers',
        chipLayers.map(({ chambers }) => chambers),
      ),
      { head: 'area off', kind: 'share', values: off('share'), digits: 2 },
      { head: 'walls off', kind: 'length', unit: 'um', values: off('meanOffset'), digits: 2 },
      { head: 'furthest', kind: 'length', unit: 'um', values: off('furthest'), digits: 2 },
    ]),
    `  ports: ${report.ports}`,
    '',
    'Taken for granted',
    ...assumed.map((says) => `  ${says}`),
    '',
    ...(notUnderstood.length === 0
      ? ['Everything in the drawing was understood.']
      : [
          'Not understood, and not in the chip',
          ...notUnderstood.map(
            ({ what, count, where }) => `  ${count} x ${what}${where ? ` (first at ${where})` : ''}`,
          ),
        ]),
    '',
  ].join('\n');
}

/** `npm run bring-in -- FILE …`: makes a chip of a drawing. Returns the exit code; all files are written, or none. */
export async function main(argv: readonly string[], io: Io): Promise<number> {
  return await runCommand({ usage: BRING_IN_USAGE, options: bringInCliOptions, run }, argv, io);
}
