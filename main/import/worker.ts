import { parentPort, workerData } from 'node:worker_threads';
import type { BringInOutcome, BringInSettings, DrawingSummary } from '../contract/bring-in.ts';
import type { Refusal } from '../contract/contract.ts';
import { refusal } from '../session/refusal.ts';
import { bringIn } from './bring-in.ts';
import { summary } from './look.ts';
import { readDrawing } from './read-drawing.ts';
import { type Stage, Work } from './work.ts';

/** The thread of one drawing that comes in: it reads, or reads and recognises, and ends. */
export interface ImportJob {
  readonly bytes: Uint8Array;
  readonly file: string;
  /** null: only say what the file holds. */
  readonly settings: BringInSettings | null;
}

export type FromImport =
  | { readonly kind: 'step'; readonly stage: Stage; readonly share: number }
  | { readonly kind: 'looked'; readonly summary: DrawingSummary }
  | { readonly kind: 'made'; readonly outcome: BringInOutcome }
  | { readonly kind: 'failed'; readonly problem: Refusal };

const port = parentPort!;
const send = (message: FromImport): void => port.postMessage(message);
const { bytes, file, settings } = workerData as ImportJob;

try {
  const work = new Work((stage, share) => send({ kind: 'step', stage, share }));
  if (settings) send({ kind: 'made', outcome: bringIn(bytes, file, settings, work) });
  else send({ kind: 'looked', summary: summary(readDrawing(bytes, work)) });
} catch (error) {
  send({ kind: 'failed', problem: refusal(error) });
}
