import { createReadStream } from 'node:fs';
import type { IncomingMessage, Server, ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { BODY_TYPE, EVENTS_PATH, REQUEST_PATH, WINDOW_HEADER } from '../contract/loopback.ts';
import { type PageFile, pageFiles } from '../page/files.ts';
import { PAGE_HEADERS } from '../page/policy.ts';
import type { Sessions } from '../session/sessions.ts';
import { Streams } from './events.ts';
import { Guard } from './guard.ts';
import { Bucket, Connections, LIMITS } from './limits.ts';

export interface LoopbackSettings {
  readonly sessions: Sessions;
  /** Folder of the built page. */
  readonly page: string;
  /** 0 or absent takes a free one. */
  readonly port?: number;
  /** How long to stay with no window, ms; absent or 0 stays for ever. */
  readonly idleMs?: number;
  /** Called once, when the host has stayed without a window for `idleMs`. */
  readonly onIdle?: () => void;
  /** How long a window may be away before its project is closed, ms. */
  readonly graceMs?: number;
}

export interface LoopbackHost {
  readonly port: number;
  readonly origin: string;
  /** The address to open first; its token works once and is written nowhere else. */
  readonly address: string;
  close(): Promise<void>;
}

// Imported as a module it would bring a client for the web with it, which takes longer than all the rest.
const { createServer } = process.getBuiltinModule('node:http');

const REFUSAL = `<!doctype html><html lang="en"><meta charset="utf-8"><title>Channelwright</title>
<p>This window has no access. Start the program again: it opens a window that has.</p></html>`;

const WINDOW = /^[A-Za-z0-9-]{8,64}$/;
const REQUEST = /^[a-zA-Z.]{1,40}$/;

/** Serves the page and its requests on this machine's own addresses, to the one who started it. */
export async function startLoopbackHost(settings: LoopbackSettings): Promise<LoopbackHost> {
  const { sessions } = settings;
  let files: ReadonlyMap<string, PageFile> = await pageFiles(settings.page);
  const connections = new Connections();
  const strangers = new Bucket(LIMITS.strangerRate, LIMITS.strangerBurst);
  const own = new Bucket(LIMITS.ownRate, LIMITS.ownBurst);
  let guard: Guard;
  let receiving = 0;

  let idle: NodeJS.Timeout | undefined;
  const watchIdle = (): void => {
    clearTimeout(idle);
    if (settings.idleMs && streams.count === 0)
      idle = setTimeout(() => settings.onIdle?.(), settings.idleMs).unref();
  };
  const streams = new Streams(sessions, watchIdle, settings.graceMs);

  const answer = (
    response: ServerResponse,
    status: number,
    body = '',
    more: Record<string, string> = {},
  ): void => {
    response.writeHead(status, {
      ...PAGE_HEADERS,
      'content-type': 'text/html; charset=utf-8',
      'cache-control': 'no-store',
      ...more,
    });
    response.end(body);
  };

  const refuse = (request: IncomingMessage, response: ServerResponse, status: number): void => {
    answer(response, status, status === 403 ? REFUSAL : '', { connection: 'close' });
    // What is still being sent is not read; the connection ends once the refusal is out.
    response.on('finish', () => request.socket.destroySoon());
  };

  const serveFile = async (
    path: string,
    request: IncomingMessage,
    response: ServerResponse,
  ): Promise<void> => {
    if (path === '/') files = await pageFiles(settings.page);
    const file = files.get(path);
    if (!file) {
      const says = path === '/' ? 'The page is not built: run "npm run build".' : '';
      answer(response, 404, says);
      return;
    }
    const stream = createReadStream(file.file);
    stream.on('open', () => {
      response.writeHead(200, {
        ...PAGE_HEADERS,
        'content-type': file.type,
        'cache-control': file.forEver ? 'private, max-age=31536000, immutable' : 'no-store',
      });
      if (request.method === 'HEAD') {
        stream.destroy();
        response.end();
      } else stream.pipe(response);
    });
    stream.on('error', () => (response.headersSent ? response.destroy() : answer(response, 404)));
    response.on('close', () => stream.destroy());
  };

  const receive = (request: IncomingMessage): Promise<Uint8Array | null> =>
    new Promise((done) => {
      const chunks: Buffer[] = [];
      let size = 0;
      const settle = (body: Uint8Array | null): void => {
        receiving -= size;
        size = 0;
        done(body);
      };
      request.on('data', (chunk: Buffer) => {
        size += chunk.length;
        receiving += chunk.length;
        chunks.push(chunk);
        if (size > LIMITS.body || receiving > LIMITS.bodies) {
          request.removeAllListeners('data');
          settle(null);
        }
      });
      request.on('end', () => settle(Buffer.concat(chunks)));
      request.on('error', () => settle(null));
      request.on('aborted', () => settle(null));
    });

  const serveRequest = async (
    name: string,
    window: string,
    request: IncomingMessage,
    response: ServerResponse,
  ) => {
    if (request.headers['content-type'] !== BODY_TYPE) return refuse(request, response, 415);
    if (Number(request.headers['content-length'] ?? 0) > LIMITS.body) return refuse(request, response, 413);
    const body = await receive(request);
    if (!body) return refuse(request, response, 413);
    const reply = await sessions.call(window, name, body);
    response.writeHead(200, {
      ...PAGE_HEADERS,
      'content-type': BODY_TYPE,
      'cache-control': 'no-store',
      'content-length': String(reply.length),
    });
    response.end(reply);
  };

  const serve = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    const { method } = request;
    const target = request.url ?? '';
    if (!guard.hostIsOurs(request) || !target.startsWith('/')) return refuse(request, response, 403);
    if (!guard.hasCookie(request)) {
      if (!strangers.take()) return refuse(request, response, 429);
      const token = /^\/\?token=([A-Za-z0-9_-]{1,100})$/.exec(target)?.[1];
      if (method === 'GET' && token && guard.originIsOurs(request, false) && guard.redeem(token)) {
        return answer(response, 303, '', { location: '/', 'set-cookie': guard.setCookie() });
      }
      return refuse(request, response, 403);
    }
    connections.trust(request.socket);
    if (!own.take()) return refuse(request, response, 429);
    watchIdle();
    const query = target.indexOf('?');
    const path = query < 0 ? target : target.slice(0, query);
    if (path === EVENTS_PATH || path.startsWith(REQUEST_PATH)) {
      const window = request.headers[WINDOW_HEADER];
      if (typeof window !== 'string' || !WINDOW.test(window)) return refuse(request, response, 403);
      if (path === EVENTS_PATH) {
        if (method !== 'GET') return refuse(request, response, 405);
        if (!guard.originIsOurs(request, false)) return refuse(request, response, 403);
        streams.start(window, response, PAGE_HEADERS);
        return;
      }
      if (method !== 'POST') return refuse(request, response, 405);
      if (!guard.originIsOurs(request, true)) return refuse(request, response, 403);
      const name = path.slice(REQUEST_PATH.length);
      if (!REQUEST.test(name)) return refuse(request, response, 404);
      return await serveRequest(name, window, request, response);
    }
    if (method !== 'GET' && method !== 'HEAD') return refuse(request, response, 405);
    if (!guard.originIsOurs(request, false)) return refuse(request, response, 403);
    return await serveFile(path, request, response);
  };

  const make = (): Server => {
    const server = createServer(
      { maxHeaderSize: LIMITS.headerBytes, connectionsCheckingInterval: 1_000, requireHostHeader: false },
      (request, response) => {
        request.on('error', () => request.socket.destroy());
        serve(request, response).catch(() => {
          if (response.headersSent) response.destroy();
          else refuse(request, response, 500);
        });
      },
    );
    server.headersTimeout = LIMITS.headerMs;
    server.requestTimeout = LIMITS.requestMs;
    server.keepAliveTimeout = 60_000;
    server.maxConnections = LIMITS.connections;
    server.on('clientError', (_error, socket) => socket.destroy());
    server.on('upgrade', (_request, socket) => socket.destroy());
    server.on('connect', (_request, socket) => socket.destroy());
    connections.watch(server);
    return server;
  };

  const servers = [make()];
  await listen(servers[0]!, '127.0.0.1', settings.port ?? 0);
  const { port } = servers[0]!.address() as AddressInfo;
  guard = new Guard(port);
  const six = make();
  // A machine may have no IPv6, or the port may be taken there: the first address is enough.
  await listen(six, '::1', port).then(
    () => servers.push(six),
    () => undefined,
  );
  watchIdle();

  const origin = `http://127.0.0.1:${port}`;
  return {
    port,
    origin,
    address: `${origin}/?token=${guard.firstToken}`,
    async close() {
      clearTimeout(idle);
      streams.close();
      await Promise.all(
        servers.map(
          (server) =>
            new Promise<void>((done) => {
              server.close(() => done());
              server.closeAllConnections();
            }),
        ),
      );
    },
  };
}

function listen(server: Server, host: string, port: number): Promise<void> {
  return new Promise((done, fail) => {
    server.once('error', fail);
    server.listen({ host, port, exclusive: true }, () => {
      server.off('error', fail);
      done();
    });
  });
}
