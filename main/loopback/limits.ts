import type { Server, Socket } from 'node:net';

/** What the host takes at most. */
export const LIMITS = {
  /** Bytes of one request's body. */
  body: 80 * 1024 * 1024,
  /** Bytes of all bodies being received at once. */
  bodies: 256 * 1024 * 1024,
  headerBytes: 16 * 1024,
  headerMs: 5_000,
  requestMs: 60_000,
  /** Connections that have not shown the session's cookie. */
  strangers: 256,
  connections: 1_024,
  /** Requests a second, sustained, and in a burst. */
  strangerRate: 50,
  strangerBurst: 200,
  ownRate: 2_000,
  ownBurst: 10_000,
} as const;

/** Lets through `rate` a second on average and `burst` at once. */
export class Bucket {
  readonly #rate: number;
  readonly #burst: number;
  #level: number;
  #at = performance.now();

  constructor(rate: number, burst: number) {
    this.#rate = rate;
    this.#burst = burst;
    this.#level = burst;
  }

  take(): boolean {
    const now = performance.now();
    this.#level = Math.min(this.#burst, this.#level + ((now - this.#at) / 1000) * this.#rate);
    this.#at = now;
    if (this.#level < 1) return false;
    this.#level -= 1;
    return true;
  }
}

/**
 * Keeps a crowd of strange connections from shutting out the user's own: beyond the bound the oldest
 * connection that never showed the session's cookie is dropped, never one that did.
 */
export class Connections {
  readonly #strangers = new Set<Socket>();
  readonly #known = new WeakSet<Socket>();

  watch(server: Server): void {
    server.on('connection', (socket: Socket) => {
      this.#strangers.add(socket);
      socket.on('close', () => this.#strangers.delete(socket));
      socket.on('error', () => socket.destroy());
      if (this.#strangers.size > LIMITS.strangers) {
        const [oldest] = this.#strangers;
        this.#strangers.delete(oldest!);
        oldest!.destroy();
      }
    });
  }

  /** The connection showed the cookie. */
  trust(socket: Socket): void {
    if (this.#known.has(socket)) return;
    this.#known.add(socket);
    this.#strangers.delete(socket);
  }
}
