import { createHash, randomBytes, timingSafeEqual } from 'node:crypto';
import type { IncomingMessage } from 'node:http';

/**
 * Who may talk to the loopback host. The first address carries a token that works once; it is traded
 * for a cookie that scripts cannot read and other sites cannot send. Every request must name this
 * host itself (a name that was re-pointed here does not) and, where it can change or stream anything,
 * come from the page this host served.
 */
export class Guard {
  readonly #cookie = randomBytes(32).toString('base64url');
  #token: Buffer | null;
  readonly #cookieName: string;
  readonly #hosts: ReadonlySet<string>;
  /** Given once to whoever starts the host; kept only as a digest. */
  readonly firstToken: string;

  constructor(port: number) {
    this.firstToken = randomBytes(32).toString('base64url');
    this.#token = digest(this.firstToken);
    // Cookies are not kept apart by port: another run of the program must not overwrite this one's.
    this.#cookieName = `channelwright-${port}`;
    this.#hosts = new Set([`127.0.0.1:${port}`, `[::1]:${port}`]);
  }

  /** The request names exactly this host, once. */
  hostIsOurs(request: IncomingMessage): boolean {
    const hosts = request.headersDistinct.host;
    return hosts?.length === 1 && this.#hosts.has(hosts[0]!);
  }

  /** The request carries the session's cookie. */
  hasCookie(request: IncomingMessage): boolean {
    const header = request.headers.cookie;
    if (!header) return false;
    for (const part of header.split(';')) {
      const at = part.indexOf('=');
      if (at > 0 && part.slice(0, at).trim() === this.#cookieName) {
        if (same(digest(part.slice(at + 1).trim()), digest(this.#cookie))) return true;
      }
    }
    return false;
  }

  /** Takes the one-time token: true once, for the right one. */
  redeem(token: string): boolean {
    if (!this.#token || !same(digest(token), this.#token)) return false;
    this.#token = null;
    return true;
  }

  setCookie(): string {
    return `${this.#cookieName}=${this.#cookie}; HttpOnly; SameSite=Strict; Path=/`;
  }

  /**
   * The request comes from the page that this host served. `Origin`, where sent, must be the address
   * asked; it must be sent with a POST. A browser's own word on where a request comes from must agree.
   */
  originIsOurs(request: IncomingMessage, needed: boolean): boolean {
    const origin = request.headers.origin;
    if (origin === undefined ? needed : origin !== `http://${request.headers.host}`) return false;
    const site = request.headers['sec-fetch-site'];
    return site === undefined || site === 'same-origin' || (!needed && site === 'none');
  }
}

function digest(text: string): Buffer {
  return createHash('sha256').update(text).digest();
}

function same(a: Buffer, b: Buffer): boolean {
  return timingSafeEqual(a, b);
}
