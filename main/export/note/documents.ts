import type { Chip } from '../../../solver/chip/chip.ts';
import type { Result } from '../../../solver/chip/result.ts';
import type { NoteFormat } from '../../contract/note.ts';
import type { Output } from '../write-files.ts';
import { type Note, type NoteOptions, noteOf, splitNote, tablesOf } from './content.ts';
import { noteHtml } from './html.ts';
import { notePdf, paperOf } from './pdf.ts';
import type { PaperName } from './pdf-page.ts';
import { splitTable } from './split.ts';
import { csvPath, tableCsv } from './tables.ts';

export interface Documents {
  readonly chip: Chip;
  readonly result: Result;
  readonly paper: PaperName;
  /** "Channelwright 0.1.0" */
  readonly program: string;
  readonly date: Date;
}

const optionsOf = ({ paper, program, date }: Documents): NoteOptions => ({
  program,
  date,
  paper: paperOf(paper),
});

async function whole(note: Note, format: 'pdf' | 'html', paper: PaperName): Promise<string | Uint8Array> {
  return format === 'pdf' ? await notePdf(note, paper) : noteHtml(note);
}

/** The files of the note in one format; its tables are one file each, named after `path`. */
export async function noteFiles(all: Documents, format: NoteFormat, path: string): Promise<Output[]> {
  const note = noteOf(all.chip, all.result, optionsOf(all));
  if (format !== 'csv') return [{ path, content: await whole(note, format, all.paper) }];
  return tablesOf(note).map((table) => ({ path: csvPath(path, table.id), content: tableCsv(table) }));
}

/** The flow-split table alone. */
export async function splitFile(all: Documents, format: NoteFormat, path: string): Promise<Output> {
  const { chip, result, paper } = all;
  if (format === 'csv') return { path, content: tableCsv(splitTable(chip, result)) };
  return { path, content: await whole(splitNote(chip, result, optionsOf(all)), format, paper) };
}
