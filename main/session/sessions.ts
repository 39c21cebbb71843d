import { Worker } from 'node:worker_threads';
import type { Refusal } from '../contract/contract.ts';
import { encode } from '../contract/wire.ts';
import type { FromWorker, SessionSettings, ToWorker } from './messages.ts';

/** Bounds that keep one runaway page from filling the machine. */
const MOST_WINDOWS = 32;
const MOST_WAITING = 256;
const MOST_WAITING_BYTES = 256 * 1024 * 1024;
/** Closing writes back what is due and folds the journal; quitting never waits longer. */
const CLOSE_MS = 1000;

export type EventListener = (name: string, data: string) => void;

/** The windows of the program: each has a thread of its own that holds its project, so the host never waits. */
export interface Sessions {
  /** One request of a window; input and reply as `wire.ts` writes them. Never rejects. */
  call(window: string, name: string, body: Uint8Array): Promise<Uint8Array>;
  /** Events for a window; returns how to stop. */
  listen(window: string, listener: EventListener): () => void;
  /** Sends an event to a window from the host itself. */
  emit(window: string, name: string, data: unknown): void;
  /** Opens a file in a window; it hears of it by the event `opened` or `problem`. */
  open(window: string, path: string): void;
  /**
   * Starts a thread before any window is there, and opens `path` in it: the first window that comes takes
   * it, and hears what happened meanwhile.
   */
  ready(path?: string): void;
  /** Closes the window's project and ends its thread. */
  end(window: string): Promise<void>;
  close(): Promise<void>;
  windows(): string[];
}

interface Window {
  readonly worker: Worker;
  /** Null until a window takes it. */
  name: string | null;
  readonly waiting: Map<number, { done: (reply: Uint8Array) => void; size: number }>;
  size: number;
  ending: boolean;
  /** Events of before the window listened for the first time; null where none are held. */
  held: [name: string, data: string][] | null;
}

function refuse(kind: Refusal['kind'], what: string, remedy: string): Uint8Array {
  return encode({ ok: false, problem: { kind, what, where: '', remedy } });
}

export function createSessions(settings: SessionSettings): Sessions {
  const windows = new Map<string, Window>();
  const listeners = new Map<string, Set<EventListener>>();
  let next = 1;

  /** A thread that no window has taken yet. */
  let spare: Window | null = null;

  const send = (window: string, name: string, data: string): void => {
    for (const listener of [...(listeners.get(window) ?? [])]) listener(name, data);
  };

  const start = (name: string | null): Window => {
    // The bundle puts the thread's code beside the host's.
    const entry = import.meta.url.endsWith('.ts') ? './worker.ts' : './session-worker.js';
    const worker = new Worker(new URL(entry, import.meta.url), { workerData: settings });
    const window: Window = { worker, name, waiting: new Map(), size: 0, ending: false, held: null };
    worker.on('message', (message: FromWorker) => {
      if (message.kind === 'event') {
        if (window.held) window.held.push([message.name, message.data]);
        else if (window.name !== null) send(window.name, message.name, message.data);
        return;
      }
      const waiting = window.waiting.get(message.id);
      if (!waiting) return;
      window.waiting.delete(message.id);
      window.size -= waiting.size;
      waiting.done(message.body);
    });
    const gone = (): void => {
      if (spare === window) spare = null;
      if (window.name !== null && windows.get(window.name) === window) windows.delete(window.name);
      for (const waiting of window.waiting.values()) {
        waiting.done(
          refuse(
            'project',
            'The part of the program that holds this project stopped; what was acknowledged is kept.',
            'Open the project again.',
          ),
        );
      }
      window.waiting.clear();
    };
    worker.on('error', gone);
    worker.on('exit', gone);
    return window;
  };

  /** The thread that waits for a window becomes this one's; null where there is none. */
  const takeSpare = (name: string): Window | null => {
    const window = spare;
    spare = null;
    if (window) {
      window.name = name;
      windows.set(name, window);
    }
    return window;
  };

  const windowOf = (name: string): Window => {
    const there = windows.get(name) ?? takeSpare(name);
    if (there) return there;
    const window = start(name);
    windows.set(name, window);
    return window;
  };

  const post = (window: Window, message: ToWorker, transfer: ArrayBuffer[]): void => {
    window.worker.postMessage(message, transfer);
  };

  /** Closes what a thread holds, and ends it. */
  const finish = async (window: Window): Promise<void> => {
    if (window.ending) return;
    window.ending = true;
    const exited = new Promise<void>((done) => window.worker.once('exit', () => done()));
    post(window, { kind: 'end' }, []);
    const late = setTimeout(() => void window.worker.terminate(), CLOSE_MS);
    await exited;
    clearTimeout(late);
  };

  const sessions: Sessions = {
    async call(name, request, body) {
      if (!windows.has(name) && windows.size >= MOST_WINDOWS)
        return refuse('too-many', `${MOST_WINDOWS} windows are open.`, 'Close one and try again.');
      const window = windowOf(name);
      const { waiting } = window;
      if (waiting.size >= MOST_WAITING || window.size + body.length > MOST_WAITING_BYTES)
        return refuse('too-many', 'Too many requests wait in this window.', 'Wait a moment and try again.');
      const id = next;
      next += 1;
      // A copy that owns its memory: what came in may be a view of a shared buffer.
      const own = new Uint8Array(body);
      const reply = new Promise<Uint8Array>((done) => {
        waiting.set(id, { done, size: own.length });
      });
      window.size += own.length;
      post(window, { kind: 'request', id, name: request, body: own }, [own.buffer]);
      return await reply;
    },
    listen(window, listener) {
      const those = listeners.get(window) ?? new Set();
      those.add(listener);
      listeners.set(window, those);
      const mine = windows.get(window) ?? takeSpare(window);
      if (mine?.held) {
        const { held } = mine;
        mine.held = null;
        for (const [name, data] of held) listener(name, data);
      }
      return () => {
        those.delete(listener);
        if (those.size === 0 && listeners.get(window) === those) listeners.delete(window);
      };
    },
    emit(window, name, data) {
      send(window, name, JSON.stringify(data));
    },
    open(name, path) {
      post(windowOf(name), { kind: 'open', path }, []);
    },
    ready(path) {
      if (!spare) {
        spare = start(null);
        spare.held = [];
      }
      if (path !== undefined) post(spare, { kind: 'open', path }, []);
    },
    async end(name) {
      const window = windows.get(name);
      windows.delete(name);
      if (window) await finish(window);
    },
    async close() {
      const waiting = spare;
      spare = null;
      await Promise.all([
        ...[...windows.keys()].map((name) => sessions.end(name)),
        ...(waiting ? [finish(waiting)] : []),
      ]);
      listeners.clear();
    },
    windows: () => [...windows.keys()],
  };
  return sessions;
}
