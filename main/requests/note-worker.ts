import { parentPort, workerData } from 'node:worker_threads';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { NoteDocument, NoteFormat, NotePaper } from '../contract/note.ts';
import { type Documents, noteFiles, splitFile } from '../export/note/documents.ts';
import { refusal } from '../session/refusal.ts';

/** The thread of one note: it makes the files and ends. */
export interface NoteJob {
  readonly chip: Chip;
  readonly result: Result;
  readonly document: NoteDocument;
  readonly format: NoteFormat;
  readonly paper: NotePaper;
  readonly path: string;
  /** "Channelwright 0.1.0" */
  readonly program: string;
}

export type FromNoteJob =
  | {
      readonly kind: 'made';
      readonly files: readonly { readonly path: string; readonly content: string | Uint8Array }[];
    }
  | { readonly kind: 'failed'; readonly problem: ReturnType<typeof refusal> };

const port = parentPort!;
const { chip, result, document, format, paper, path, program } = workerData as NoteJob;

try {
  const all: Documents = { chip, result, paper, program, date: new Date() };
  const files =
    document === 'note' ? await noteFiles(all, format, path) : [await splitFile(all, format, path)];
  port.postMessage({ kind: 'made', files } satisfies FromNoteJob);
} catch (error) {
  port.postMessage({ kind: 'failed', problem: refusal(error) } satisfies FromNoteJob);
}
