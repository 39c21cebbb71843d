import { Worker } from 'node:worker_threads';
import { PROBLEM_KINDS, Problem } from '../../solver/problem/problem.ts';
import type { Refusal } from '../contract/contract.ts';
import type { Stage } from './work.ts';
import type { FromImport, ImportJob } from './worker.ts';

/** Most that the thread of one drawing may take, MB; beyond it the drawing is refused, and only it. */
const MEMORY = 300;
/** Room for what lives shortly, MB: most of what is made does, and in a small room it would be moved about before it goes. */
const YOUNG = 144;

export type Ended = Exclude<FromImport, { kind: 'step' }> | { readonly kind: 'cancelled' };

export interface ImportThread {
  readonly ended: Promise<Ended>;
  cancel(): Promise<void>;
}

const WORDS: Readonly<Record<Stage, string>> = {
  reading: 'Reading the drawing',
  uniting: 'Uniting its regions',
  recognising: 'Finding channels and chambers',
  comparing: 'Comparing with the drawing',
};
/** Where each stage begins in the whole, and how much of it it is. */
const PARTS: Readonly<Record<Stage, readonly [number, number]>> = {
  reading: [0, 0.3],
  uniting: [0.3, 0.15],
  recognising: [0.45, 0.4],
  comparing: [0.85, 0.15],
};

/** Reads a drawing in a thread of its own, with bounded memory, so that nothing waits and it can be ended. */
export function startImport(job: ImportJob, onStep: (part: number, says: string) => void): ImportThread {
  // The bundle puts the thread's code beside the host's.
  const entry = import.meta.url.endsWith('.ts') ? './worker.ts' : './bring-in-worker.js';
  const worker = new Worker(new URL(entry, import.meta.url), {
    workerData: job,
    resourceLimits: { maxOldGenerationSizeMb: MEMORY, maxYoungGenerationSizeMb: YOUNG },
  });
  let cancelled = false;
  let told = 0;
  const ended = new Promise<Ended>((done) => {
    worker.on('message', (message: FromImport) => {
      if (message.kind !== 'step') done(message);
      else {
        const [from, size] = PARTS[message.stage];
        // Layers come one after another, each with all stages: what is told goes on only.
        told = Math.max(told, from + size * message.share);
        onStep(told, WORDS[message.stage]);
      }
    });
    worker.on('error', (error: NodeJS.ErrnoException) => {
      done({ kind: 'failed', problem: error.code === 'ERR_WORKER_OUT_OF_MEMORY' ? TOO_LARGE : STOPPED });
    });
    worker.on('exit', () => done(cancelled ? { kind: 'cancelled' } : { kind: 'failed', problem: STOPPED }));
  });
  return {
    ended,
    async cancel() {
      cancelled = true;
      await worker.terminate();
    },
  };
}

const TOO_LARGE: Refusal = {
  kind: 'memory',
  what: `Bringing in this drawing takes more than ${MEMORY} MB.`,
  where: '',
  remedy: 'Leave out what is not part of the fluid, or split the drawing.',
};
const STOPPED: Refusal = {
  kind: 'output',
  what: 'The part of the program that reads drawings stopped.',
  where: '',
  remedy: 'Try again; keep the file so that the fault can be found.',
};

/** A refusal as it is thrown. */
export function problemFrom({ kind, what, where, remedy }: Refusal): Problem {
  return new Problem(PROBLEM_KINDS.find((known) => known === kind) ?? 'output', what, where, remedy);
}
