import { mkdirSync, writeFileSync } from 'node:fs';
import { request } from 'node:http';
import { connect } from 'node:net';
import { join, resolve } from 'node:path';
import { type Client, createClient } from '../../main/contract/client.ts';
import { BODY_TYPE, loopbackTransport, WINDOW_HEADER } from '../../main/contract/loopback.ts';
import { encode } from '../../main/contract/wire.ts';
import { type LoopbackHost, type LoopbackSettings, startLoopbackHost } from '../../main/loopback/host.ts';
import { createSessions, type Sessions } from '../../main/session/sessions.ts';
import { inFolder } from '../faults/sample.ts';

export const SECRET = 'what nobody else may read';

/** A running browser host with a page of its own, and the ways in which a browser and others talk to it. */
export interface Started {
  readonly folder: string;
  readonly host: LoopbackHost;
  readonly sessions: Sessions;
  /** The cookie of the one who started it. */
  readonly cookie: string;
  /** A page's client in a window of this name. */
  client(window: string): Client;
}

export async function withHost(
  work: (started: Started) => Promise<void>,
  more: Partial<LoopbackSettings> = {},
): Promise<void> {
  await inFolder(async (folder) => {
    const page = join(folder, 'page');
    mkdirSync(join(page, 'assets'), { recursive: true });
    writeFileSync(join(page, 'index.html'), '<!doctype html><title>page</title>');
    writeFileSync(join(page, 'assets', 'a-1234.js'), 'export {};');
    writeFileSync(join(folder, 'secret.txt'), SECRET);
    const sessions = createSessions({
      host: 'browser',
      dialogs: false,
      userData: join(folder, 'data'),
      assets: resolve(import.meta.dirname, '../../assets'),
      version: '0.0.0',
    });
    const host = await startLoopbackHost({ sessions, page, ...more });
    const clients: Client[] = [];
    try {
      const first = await raw(host, { path: host.address.slice(host.origin.length) });
      const cookie = String(first.headers['set-cookie']).split(';')[0]!;
      await work({
        folder,
        host,
        sessions,
        cookie,
        client: (window) => {
          const headers = { cookie, origin: host.origin };
          const client = createClient(loopbackTransport({ origin: host.origin, window, headers }));
          clients.push(client);
          return client;
        },
      });
    } finally {
      for (const client of clients) client.close();
      await sessions.close();
      await host.close();
    }
  });
}

export interface Answer {
  readonly status: number;
  readonly headers: Readonly<Record<string, string | string[] | undefined>>;
  readonly body: string;
}

/** One HTTP request with exactly these headers. Status 0 where the connection was dropped. */
export function raw(
  host: LoopbackHost,
  options: { path: string; method?: string; headers?: Record<string, string>; body?: Uint8Array | string },
): Promise<Answer> {
  return new Promise((done) => {
    const asked = request(
      {
        host: '127.0.0.1',
        port: host.port,
        method: options.method ?? 'GET',
        path: options.path,
        headers: { host: `127.0.0.1:${host.port}`, ...options.headers },
        agent: false,
      },
      (response) => {
        let body = '';
        response.setEncoding('utf8');
        response.on('data', (chunk: string) => {
          body += chunk;
        });
        response.on('end', () => done({ status: response.statusCode ?? 0, headers: response.headers, body }));
        response.on('error', () =>
          done({ status: response.statusCode ?? 0, headers: response.headers, body }),
        );
      },
    );
    asked.on('error', () => done({ status: 0, headers: {}, body: '' }));
    asked.end(options.body);
  });
}

/** What comes back for bytes that need not be HTTP, until the host ends it or `ms` are over. */
export function bytesTo(
  port: number,
  bytes: string | Uint8Array,
  ms = 3_000,
): Promise<{ text: string; ended: boolean }> {
  return new Promise((done) => {
    let text = '';
    const socket = connect(port, '127.0.0.1', () => socket.write(bytes));
    const late = setTimeout(() => {
      done({ text, ended: false });
      socket.destroy();
    }, ms);
    socket.on('data', (chunk) => {
      text += chunk.toString('latin1');
    });
    socket.on('error', () => undefined);
    socket.on('close', () => {
      clearTimeout(late);
      done({ text, ended: true });
    });
  });
}

/** The headers and body of a good request, to be spoiled one by one. */
export function goodRequest(started: Started, window = 'window-000001') {
  return {
    path: '/api/about',
    method: 'POST',
    headers: {
      cookie: started.cookie,
      origin: started.host.origin,
      'content-type': BODY_TYPE,
      [WINDOW_HEADER]: window,
    } as Record<string, string>,
    body: encode({}),
  };
}
