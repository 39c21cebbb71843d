import { z } from 'zod';

/** Notes: which document is wanted, and how its making stands. */

export const NOTE_DOCUMENTS = ['note', 'split'] as const;
export const NOTE_FORMATS = ['pdf', 'html', 'csv'] as const;
export const NOTE_PAPERS = ['A4', 'letter'] as const;
export type NoteDocument = (typeof NOTE_DOCUMENTS)[number];
export type NoteFormat = (typeof NOTE_FORMATS)[number];
export type NotePaper = (typeof NOTE_PAPERS)[number];

export const noteWish = {
  /** The whole fabrication note, or its flow-split table alone. */
  document: z.enum(NOTE_DOCUMENTS),
  /** In CSV the note is its tables, a file each, named after the path. */
  format: z.enum(NOTE_FORMATS),
  paper: z.enum(NOTE_PAPERS),
} as const;

/** How a job stands; sent once, at its end. */
export const noteState = z.object({
  job: z.int().positive(),
  state: z.enum(['done', 'failed', 'cancelled']),
  /** What was done, or what went wrong and what to do, in words. */
  says: z.string(),
  /** The files that were written. */
  paths: z.array(z.string()),
});
