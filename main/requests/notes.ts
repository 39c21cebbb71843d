import { Worker } from 'node:worker_threads';
import { Problem } from '../../solver/problem/problem.ts';
import type { EventData } from '../contract/contract.ts';
import { checkFree } from '../export/mask/places.ts';
import { writeFiles } from '../export/write-files.ts';
import { refusal } from '../session/refusal.ts';
import type { Session } from '../session/session.ts';
import { wholePath } from './files.ts';
import type { Handlers } from './handlers.ts';
import type { FromNoteJob, NoteJob } from './note-worker.ts';

/** Notes that one window may have in the making at once. */
const MOST_JOBS = 4;

const JOBS = new WeakMap<Session, Map<number, Worker>>();
let last = 0;

function jobsOf(session: Session): Map<number, Worker> {
  const jobs = JOBS.get(session) ?? new Map<number, Worker>();
  JOBS.set(session, jobs);
  return jobs;
}

/** A note tells of the chip as it stands; an answer to another one would be a lie on paper. */
function checkStands(session: Session, seq: number): void {
  if (session.workplace.project.position.seq === seq) return;
  throw new Problem(
    'output',
    'The chip has changed since it was answered.',
    '',
    'Wait until the answers stand for it, and try again.',
  );
}

async function written(
  { files }: FromNoteJob & { readonly kind: 'made' },
  replace: boolean,
): Promise<string[]> {
  const paths = files.map(({ path }) => path);
  if (!replace) await checkFree(paths);
  await writeFiles(files);
  return paths;
}

const doneWords = (paths: readonly string[]): string =>
  paths.length === 1
    ? `Written to ${paths[0]}.`
    : `${paths.length} tables written, the first to ${paths[0]}.`;

export const noteRequests: Handlers<'note.start' | 'note.cancel' | 'note.split'> = {
  'note.start': (session, { document, format, paper, seq, result, path, replace }) => {
    checkStands(session, seq);
    const jobs = jobsOf(session);
    if (jobs.size >= MOST_JOBS)
      throw new Problem('too-many', 'Several notes are being written already.', '', 'Wait for one of them.');
    last += 1;
    const job = last;
    const data: NoteJob = {
      chip: session.workplace.project.chip,
      result,
      document,
      format,
      paper,
      path: wholePath(path),
      program: `Channelwright ${session.settings.version}`,
    };
    const entry = import.meta.url.endsWith('.ts') ? './note-worker.ts' : './note-worker.js';
    const worker = new Worker(new URL(entry, import.meta.url), { workerData: data });
    worker.unref();
    jobs.set(job, worker);
    const end = (state: Omit<EventData<'note'>, 'job'>): void => {
      if (!jobs.delete(job)) return;
      session.emit('note', { job, ...state });
    };
    const failed = (error: unknown): void => {
      const { what, remedy } = refusal(error);
      end({ state: 'failed', says: `${what} ${remedy}`, paths: [] });
    };
    worker.on('message', (message: FromNoteJob) => {
      if (!jobs.has(job)) return;
      if (message.kind === 'failed') {
        const { what, remedy } = message.problem;
        end({ state: 'failed', says: `${what} ${remedy}`, paths: [] });
      } else
        written(message, replace === true).then(
          (paths) => end({ state: 'done', says: doneWords(paths), paths }),
          failed,
        );
    });
    worker.on('error', failed);
    worker.on('exit', (code) => {
      if (code !== 0) failed(new Error('ended'));
    });
    return { job };
  },
  'note.cancel': async (session, { job }) => {
    const jobs = jobsOf(session);
    const worker = jobs.get(job);
    if (!worker) return {};
    jobs.delete(job);
    session.emit('note', { job, state: 'cancelled', says: 'Nothing was written.', paths: [] });
    await worker.terminate();
    return {};
  },
  'note.split': async (session, { seq, result }) => {
    checkStands(session, seq);
    const { chip } = session.workplace.project;
    const { splitTable } = await import('../export/note/split.ts');
    const { tableTabbed } = await import('../export/note/tables.ts');
    const table = splitTable(chip, result);
    return { tabbed: tableTabbed(table), rows: table.rows };
  },
};
