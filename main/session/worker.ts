import { flushCompileCache } from 'node:module';
import { parentPort, workerData } from 'node:worker_threads';
import { handle } from '../requests/handle.ts';
import type { FromWorker, SessionSettings, ToWorker } from './messages.ts';
import { Session } from './session.ts';

/** The thread of one window: requests in, one after another; replies and events out. */
const port = parentPort!;
const send = (message: FromWorker, transfer: ArrayBuffer[] = []): void => port.postMessage(message, transfer);

const session = new Session(workerData as SessionSettings, (name, data) =>
  send({ kind: 'event', name, data: JSON.stringify(data) }),
);

let last: Promise<void> = Promise.resolve();

async function take(message: ToWorker): Promise<void> {
  if (message.kind === 'end') {
    // What cannot be closed properly stays in its log, which the next opening reads.
    await session.close().catch(() => undefined);
    port.close();
    return;
  }
  if (message.kind === 'open') {
    await session.openUnasked(message.path);
    return;
  }
  const body = await handle(session, message.name, message.body);
  send({ kind: 'reply', id: message.id, body }, [body.buffer]);
}

port.on('message', (message: ToWorker) => {
  last = last.then(() => take(message));
});

/** ms after which the start is over. */
const STARTED_MS = 4000;
// Also a thread that is ended hard leaves what it has compiled to the next start.
setTimeout(flushCompileCache, STARTED_MS).unref();
