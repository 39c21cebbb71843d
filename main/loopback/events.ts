import type { ServerResponse } from 'node:http';
import type { Sessions } from '../session/sessions.ts';

const BEAT_MS = 15_000;
/** A reload closes the stream and opens another; a closed tab does not come back. */
const GRACE_MS = 20_000;
const MOST_UNSENT = 32 * 1024 * 1024;

/** The event streams of the windows; a window whose stream stays away has its project closed. */
export class Streams {
  readonly #sessions: Sessions;
  readonly #open = new Map<string, Set<ServerResponse>>();
  readonly #leaving = new Map<string, NodeJS.Timeout>();
  readonly #graceMs: number;
  readonly #changed: () => void;

  constructor(sessions: Sessions, changed: () => void, graceMs = GRACE_MS) {
    this.#sessions = sessions;
    this.#changed = changed;
    this.#graceMs = graceMs;
  }

  /** Windows that are there, those given time to come back included. */
  get count(): number {
    return this.#open.size + this.#leaving.size;
  }

  start(window: string, response: ServerResponse, headers: Readonly<Record<string, string>>): void {
    response.writeHead(200, {
      ...headers,
      'content-type': 'text/event-stream',
      'cache-control': 'no-store',
      'x-accel-buffering': 'no',
    });
    response.write(': open\n\n');
    const those = this.#open.get(window) ?? new Set();
    those.add(response);
    this.#open.set(window, those);
    clearTimeout(this.#leaving.get(window));
    this.#leaving.delete(window);
    const stop = this.#sessions.listen(window, (name, data) => {
      // A reader that takes nothing must not fill the memory.
      if (response.writableLength > MOST_UNSENT) response.destroy();
      else response.write(`event: ${name}\ndata: ${data}\n\n`);
    });
    const beat = setInterval(() => response.write(': \n\n'), BEAT_MS);
    response.on('close', () => {
      clearInterval(beat);
      stop();
      those.delete(response);
      if (those.size === 0 && this.#open.get(window) === those) {
        this.#open.delete(window);
        this.#leave(window);
      }
      this.#changed();
    });
    this.#changed();
  }

  #leave(window: string): void {
    const timer = setTimeout(() => {
      this.#leaving.delete(window);
      void this.#sessions.end(window);
      this.#changed();
    }, this.#graceMs);
    this.#leaving.set(window, timer);
  }

  close(): void {
    for (const timer of this.#leaving.values()) clearTimeout(timer);
    this.#leaving.clear();
    for (const those of [...this.#open.values()]) for (const response of [...those]) response.end();
  }
}
