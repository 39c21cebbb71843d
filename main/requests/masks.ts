import { Worker } from 'node:worker_threads';
import { PROBLEM_KINDS, Problem } from '../../solver/problem/problem.ts';
import type { Refusal } from '../contract/contract.ts';
import type { MaskReport } from '../contract/mask.ts';
import { checkFree, placesFor } from '../export/mask/places.ts';
import { writeFiles } from '../export/write-files.ts';
import { refusal } from '../session/refusal.ts';
import type { Session } from '../session/session.ts';
import { wholePath } from './files.ts';
import type { Handlers } from './handlers.ts';
import type { FromMaskJob, MaskJob } from './mask-worker.ts';

/** Jobs that one window may have at once, kept outcomes included. */
const MOST_JOBS = 4;

interface Outcome {
  readonly report: MaskReport;
  readonly files: readonly { name: string; path: string | null; bytes: Uint8Array | null }[];
}

interface Job {
  readonly worker: Worker;
  outcome: Outcome | Refusal | null;
}

const JOBS = new WeakMap<Session, Map<number, Job>>();
let last = 0;

const jobsOf = (session: Session): Map<number, Job> => {
  const jobs = JOBS.get(session) ?? new Map<number, Job>();
  JOBS.set(session, jobs);
  return jobs;
};

function unknownJob(job: number): Problem {
  return new Problem(
    'reference',
    'There is no such mask job; its outcome is handed over once.',
    `job ${job}`,
    'Make the masks again.',
  );
}

function problemOf({ kind, what, where, remedy }: Refusal): Problem {
  return new Problem(PROBLEM_KINDS.find((known) => known === kind) ?? 'output', what, where, remedy);
}

async function settle(
  made: FromMaskJob & { readonly kind: 'made' },
  path: string | undefined,
  replace: boolean,
): Promise<Outcome> {
  if (path === undefined) {
    return {
      report: made.report,
      files: made.files.map(({ name, content }) => ({ name, path: null, bytes: content })),
    };
  }
  const places = await placesFor(
    path,
    made.files.map(({ name }) => name),
  );
  if (!replace) await checkFree(places);
  await writeFiles(made.files.map(({ content }, i) => ({ path: places[i]!, content })));
  return {
    report: { ...made.report, files: made.report.files.map((file, i) => ({ ...file, path: places[i]! })) },
    files: made.files.map(({ name }, i) => ({ name, path: places[i]!, bytes: null })),
  };
}

/** Masks as jobs: each in a thread of its own, so that edits go on meanwhile and a job can be ended. */
export const maskRequests: Handlers<'mask.start' | 'mask.take' | 'mask.cancel'> = {
  'mask.start': (session, { formats, options, path, replace }) => {
    const { chip } = session.workplace.project;
    const jobs = jobsOf(session);
    if (jobs.size >= MOST_JOBS) {
      // outcomes that nobody fetched make room, oldest first
      const [stale] = [...jobs].filter(([, entry]) => entry.outcome !== null).map(([id]) => id);
      if (stale === undefined) {
        throw new Problem(
          'too-many',
          'Several masks are being made already.',
          '',
          'Wait for one, or cancel it.',
        );
      }
      jobs.delete(stale);
    }
    const target = path === undefined ? undefined : wholePath(path);
    last += 1;
    const job = last;
    const data: MaskJob = { chip, formats, options, version: session.settings.version };
    const entry = import.meta.url.endsWith('.ts') ? './mask-worker.ts' : './mask-worker.js';
    const worker = new Worker(new URL(entry, import.meta.url), { workerData: data });
    worker.unref();
    const mine: Job = { worker, outcome: null };
    jobs.set(job, mine);
    const end = (outcome: Outcome | Refusal): void => {
      if (jobs.get(job) !== mine || mine.outcome) return;
      mine.outcome = outcome;
      if ('what' in outcome) session.emit('mask', { job, state: 'failed', part: 1, says: outcome.what });
      else session.emit('mask', { job, state: 'done', part: 1, says: 'The masks are made.' });
    };
    worker.on('message', (message: FromMaskJob) => {
      if (jobs.get(job) !== mine) return;
      if (message.kind === 'step')
        session.emit('mask', { job, state: 'running', part: message.part, says: message.says });
      else if (message.kind === 'failed') end(message.problem);
      else settle(message, target, replace === true).then(end, (error) => end(refusal(error)));
    });
    worker.on('error', (error) => end(refusal(error)));
    worker.on('exit', (code) => {
      if (code !== 0) end(refusal(new Error('ended')));
    });
    return { job };
  },
  'mask.take': (session, { job }) => {
    const jobs = jobsOf(session);
    const mine = jobs.get(job);
    if (!mine) throw unknownJob(job);
    const { outcome } = mine;
    if (!outcome)
      throw new Problem('output', 'The masks are not made yet.', `job ${job}`, 'Wait until they are.');
    jobs.delete(job);
    if ('what' in outcome) throw problemOf(outcome);
    return { report: outcome.report, files: [...outcome.files] };
  },
  'mask.cancel': async (session, { job }) => {
    const jobs = jobsOf(session);
    const mine = jobs.get(job);
    if (!mine) throw unknownJob(job);
    jobs.delete(job);
    if (!mine.outcome) session.emit('mask', { job, state: 'cancelled', part: 0, says: 'Cancelled.' });
    await mine.worker.terminate();
    return {};
  },
};
