import { basename } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';
import type { Refusal } from '../contract/contract.ts';
import { readBytes } from '../files/read.ts';
import { type Ended, type ImportThread, problemFrom, startImport } from '../import/thread.ts';
import type { Session } from '../session/session.ts';
import { wholePath } from './files.ts';
import type { Handlers } from './handlers.ts';

/** Jobs that one window may have at once, kept outcomes included. */
const MOST_JOBS = 4;

interface Job {
  readonly thread: ImportThread;
  ended: Ended | null;
}

const JOBS = new WeakMap<Session, Map<number, Job>>();
let last = 0;

const jobsOf = (session: Session): Map<number, Job> => {
  const jobs = JOBS.get(session) ?? new Map<number, Job>();
  JOBS.set(session, jobs);
  return jobs;
};

function jobOf(session: Session, job: number): Job {
  const mine = jobsOf(session).get(job);
  if (mine) return mine;
  throw new Problem(
    'reference',
    'There is no such drawing being brought in; its outcome is handed over once.',
    `job ${job}`,
    'Bring the drawing in again.',
  );
}

/** Drawings as jobs: each in a thread of its own, so that edits go on meanwhile and a job can be ended. */
export const bringInRequests: Handlers<'bringIn.start' | 'bringIn.take' | 'bringIn.cancel'> = {
  'bringIn.start': async (session, { file, settings }) => {
    const jobs = jobsOf(session);
    if (jobs.size >= MOST_JOBS) {
      // outcomes that nobody fetched make room, oldest first
      const stale = [...jobs].find(([, { ended }]) => ended !== null)?.[0];
      if (stale === undefined) {
        throw new Problem(
          'too-many',
          'Several drawings are being read already.',
          '',
          'Wait for one, or cancel it.',
        );
      }
      jobs.delete(stale);
    }
    const bytes = 'path' in file ? await readBytes(wholePath(file.path)) : file.bytes;
    const name = 'path' in file ? basename(file.path) : file.name;
    last += 1;
    const job = last;
    const thread = startImport({ bytes, file: name, settings }, (part, says) => {
      if (jobs.get(job)?.ended === null) session.emit('bringIn', { job, state: 'running', part, says });
    });
    const mine: Job = { thread, ended: null };
    jobs.set(job, mine);
    void thread.ended.then((ended) => {
      if (jobs.get(job) !== mine) return;
      mine.ended = ended;
      const failed: Refusal | null = ended.kind === 'failed' ? ended.problem : null;
      session.emit('bringIn', {
        job,
        state: failed ? 'failed' : 'done',
        part: 1,
        says: failed ? failed.what : 'The drawing is read.',
      });
    });
    return { job };
  },
  'bringIn.take': (session, { job }) => {
    const { ended } = jobOf(session, job);
    if (!ended)
      throw new Problem('output', 'The drawing is not read yet.', `job ${job}`, 'Wait until it is.');
    jobsOf(session).delete(job);
    if (ended.kind === 'failed') throw problemFrom(ended.problem);
    return {
      summary: ended.kind === 'looked' ? ended.summary : null,
      outcome: ended.kind === 'made' ? { ...ended.outcome } : null,
    };
  },
  'bringIn.cancel': async (session, { job }) => {
    const mine = jobOf(session, job);
    jobsOf(session).delete(job);
    if (!mine.ended) session.emit('bringIn', { job, state: 'cancelled', part: 0, says: 'Cancelled.' });
    await mine.thread.cancel();
    return {};
  },
};
