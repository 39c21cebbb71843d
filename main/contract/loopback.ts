import { overBytes, type Transport } from './client.ts';

/** Names of the loopback protocol that host and page share. */
export const REQUEST_PATH = '/api/';
export const EVENTS_PATH = '/events';
/** Tells the windows of one browser apart; its presence also keeps other sites' forms from ever fitting. */
export const WINDOW_HEADER = 'x-channelwright-window';
export const BODY_TYPE = 'application/x-channelwright';
/** Bytes of a request that browsers still carry after the page is gone: by the Fetch standard 64 KiB in all. */
const MOST_LEFT_BEHIND = 60_000;

export interface LoopbackOptions {
  /** '' (the page's own origin) or "http://127.0.0.1:port". */
  readonly origin: string;
  /** Any short text that is this window's own, for instance a random UUID kept in sessionStorage. */
  readonly window: string;
  /** Further headers, for clients that are no browser. */
  readonly headers?: Readonly<Record<string, string>>;
  readonly fetch?: typeof fetch;
}

/** Requests by POST, events by one long answer that is read as it grows and asked for anew when it breaks. */
export function loopbackTransport(options: LoopbackOptions): Transport {
  const get = options.fetch ?? fetch;
  const headers = { ...options.headers, [WINDOW_HEADER]: options.window };
  let leaving = false;
  // in a page; other clients have no such events
  const { addEventListener: on } = globalThis as {
    readonly addEventListener?: (name: string, listener: () => void) => void;
  };
  on?.('pagehide', () => {
    leaving = true;
  });
  on?.('pageshow', () => {
    leaving = false;
  });
  return {
    call: overBytes(async (name, body) => {
      const response = await get(`${options.origin}${REQUEST_PATH}${name}`, {
        method: 'POST',
        headers: { ...headers, 'content-type': BODY_TYPE },
        body,
        keepalive: leaving && body.byteLength <= MOST_LEFT_BEHIND,
      });
      if (response.headers.get('content-type') !== BODY_TYPE) throw new Error(`answered ${response.status}`);
      return new Uint8Array(await response.arrayBuffer());
    }),
    listen(listener) {
      const stop = new AbortController();
      const follow = async (): Promise<void> => {
        let wait = 250;
        while (!stop.signal.aborted) {
          try {
            const response = await get(`${options.origin}${EVENTS_PATH}`, { headers, signal: stop.signal });
            if (response.ok && response.body) {
              wait = 250;
              await readEvents(response.body, listener);
            }
          } catch {
            // Asked for again below; a request in between tells the person if the host is gone.
          }
          if (!stop.signal.aborted) await new Promise((resolve) => setTimeout(resolve, wait));
          wait = Math.min(wait * 2, 5000);
        }
      };
      void follow();
      return () => stop.abort();
    },
  };
}

/** Reads a server-sent event stream until it ends. */
async function readEvents(
  body: ReadableStream<Uint8Array>,
  listener: (name: string, data: unknown) => void,
): Promise<void> {
  const decoder = new TextDecoder();
  let text = '';
  let name = '';
  let data = '';
  const reader = body.getReader();
  for (;;) {
    const { value, done } = await reader.read();
    if (done) return;
    text += decoder.decode(value, { stream: true });
    let end = text.indexOf('\n');
    while (end >= 0) {
      const line = text.slice(0, end);
      text = text.slice(end + 1);
      if (line.startsWith('event: ')) name = line.slice(7);
      else if (line.startsWith('data: ')) data = line.slice(6);
      else if (line === '') {
        if (name) listener(name, JSON.parse(data));
        name = '';
        data = '';
      }
      end = text.indexOf('\n');
    }
  }
}
