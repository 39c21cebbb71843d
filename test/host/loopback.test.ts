import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { connect, type Socket } from 'node:net';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { expect, test, vi } from 'vitest';
import { makeFile } from '../../db/make.ts';
import { WINDOW_HEADER } from '../../main/contract/loopback.ts';
import { encode } from '../../main/contract/wire.ts';
import { LIMITS } from '../../main/loopback/limits.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { madeUpChip, random, randomEdit } from '../faults/random.ts';
import { bytesTo, goodRequest, raw, SECRET, withHost } from './started.ts';

/** For what comes soon, on a busy machine too. */
const WAIT = { timeout: 30_000, interval: 50 };

// A hostile page and a hostile process against the host of someone who is working.

test('nothing is served without the cookie, whatever is asked and how', async () => {
  await withHost(async (started) => {
    const { host } = started;
    const good = goodRequest(started);
    for (const path of [
      '/',
      '/index.html',
      '/assets/a-1234.js',
      '/events',
      '/api/about',
      '/?token=',
      '/?token=guess',
    ]) {
      for (const method of ['GET', 'POST', 'HEAD', 'PUT', 'DELETE', 'OPTIONS', 'PATCH']) {
        const { cookie: _, ...headers } = good.headers;
        const answer = await raw(host, { path, method, headers });
        expect(answer.status, `${method} ${path}`).toBe(403);
        expect(answer.body).not.toContain('<title>page');
        expect(answer.headers['set-cookie']).toBeUndefined();
        expect(answer.headers['access-control-allow-origin']).toBeUndefined();
      }
    }
    const wrong = { ...good, headers: { ...good.headers, cookie: started.cookie.replace(/.$/, '!') } };
    expect((await raw(host, wrong)).status).toBe(403);
    expect((await raw(host, good)).status).toBe(200);
  });
});

test('the token works once, gives a cookie no script or other site can use, and is told nowhere else', async () => {
  await withHost(async ({ host, cookie }) => {
    const path = host.address.slice(host.origin.length);
    expect((await raw(host, { path })).status).toBe(403);
    const page = await raw(host, { path: '/', headers: { cookie } });
    expect(page.status).toBe(200);
    expect(page.body).not.toContain(path.slice('/?token='.length));
    expect(JSON.stringify(page.headers)).not.toContain(path.slice('/?token='.length));
  });
  await withHost(async (started) => {
    const fresh = await raw(started.host, { path: '/', headers: { cookie: started.cookie } });
    expect(fresh.headers['content-security-policy']).toContain("default-src 'none'");
    expect(fresh.headers['content-security-policy']).not.toContain('unsafe');
    expect(fresh.headers['x-content-type-options']).toBe('nosniff');
    expect(fresh.headers['cross-origin-resource-policy']).toBe('same-origin');
    expect(fresh.headers['referrer-policy']).toBe('no-referrer');
  });
});

test('the cookie is HttpOnly, SameSite=Strict and of this run alone', async () => {
  const names = new Set<string>();
  for (let run = 0; run < 2; run += 1) {
    await withHost(async ({ cookie, host }) => {
      names.add(cookie.split('=')[0]!);
      expect(cookie.split('=')[0]).toBe(`channelwright-${host.port}`);
      expect(cookie.split('=')[1]!.length).toBeGreaterThan(40);
    });
  }
});

test('a name that was pointed here later, or another port, is not this host', async () => {
  await withHost(async (started) => {
    const good = goodRequest(started);
    const { port } = started.host;
    const names = [
      'evil.example',
      `evil.example:${port}`,
      `localhost:${port}`,
      `127.0.0.1`,
      `127.0.0.1:${port + 1}`,
    ];
    names.push(
      `127.0.0.1.evil.example:${port}`,
      `0.0.0.0:${port}`,
      `[::1]:${port}.evil.example`,
      '',
      `127.1:${port}`,
    );
    for (const name of names) {
      const answer = await raw(started.host, {
        ...good,
        headers: { ...good.headers, host: name, origin: `http://${name}` },
      });
      expect(answer.status, name).not.toBe(200);
    }
    const twice = `POST /api/about HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nHost: evil.example\r\nCookie: ${started.cookie}\r\nConnection: close\r\n\r\n`;
    expect((await bytesTo(port, twice)).text).not.toContain('200 OK');
    const absolute = `GET http://evil.example/ HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nCookie: ${started.cookie}\r\nConnection: close\r\n\r\n`;
    expect((await bytesTo(port, absolute)).text).not.toContain('<title>page');
    const none = `GET / HTTP/1.0\r\nCookie: ${started.cookie}\r\n\r\n`;
    expect((await bytesTo(port, none)).text).not.toContain('<title>page');
  });
});

test('a page of another origin can neither ask nor listen, even where the cookie is sent along', async () => {
  await withHost(async (started) => {
    const good = goodRequest(started);
    const { port, origin } = started.host;
    const others = [
      'http://evil.example',
      'null',
      `https://127.0.0.1:${port}`,
      `http://127.0.0.1:${port + 1}`,
      `${origin}.evil.example`,
    ];
    for (const other of others) {
      const spoiled = { ...good, headers: { ...good.headers, origin: other } };
      expect((await raw(started.host, spoiled)).status, other).toBe(403);
      expect(
        (await raw(started.host, { ...spoiled, method: 'OPTIONS' })).headers['access-control-allow-origin'],
      ).toBeUndefined();
      const { body: _, ...listening } = { ...spoiled, method: 'GET', path: '/events' };
      expect((await raw(started.host, listening)).status).toBe(403);
    }
    const { origin: _, ...without } = good.headers;
    expect((await raw(started.host, { ...good, headers: without })).status).toBe(403);
    for (const site of ['cross-site', 'same-site', 'none']) {
      const spoiled = { ...good, headers: { ...good.headers, 'sec-fetch-site': site } };
      expect((await raw(started.host, spoiled)).status, site).toBe(403);
    }
    const image = await raw(started.host, {
      path: '/',
      headers: { cookie: started.cookie, 'sec-fetch-site': 'cross-site' },
    });
    expect(image.status).toBe(403);
    // What a form or an image of another site can send: no header of ours, no type of ours.
    for (const type of [
      'text/plain',
      'application/x-www-form-urlencoded',
      'multipart/form-data; boundary=x',
    ]) {
      const form = { ...good, headers: { ...good.headers, 'content-type': type } };
      expect((await raw(started.host, form)).status, type).toBe(415);
    }
    const { [WINDOW_HEADER]: _w, ...plain } = good.headers;
    expect((await raw(started.host, { ...good, headers: plain })).status).toBe(403);
  });
});

test('no spelling of a path leads out of the page', async () => {
  await withHost(async ({ host, cookie, folder }) => {
    const ups = [
      '..',
      '%2e%2e',
      '%2E.',
      '.%2e',
      '..%c0%af',
      '%252e%252e',
      '..;',
      '....//',
      '%uff0e%uff0e',
      '\\..',
      '..%00',
      '%c0%ae%c0%ae',
    ];
    const seps = ['/', '%2f', '%5c', '\\', '//', '%252f', '/./'];
    for (const up of ups) {
      for (const sep of seps) {
        for (const path of [
          `/${up}${sep}secret.txt`,
          `/assets/${up}${sep}${up}${sep}secret.txt`,
          `//${up}${sep}secret.txt`,
        ]) {
          const request = `GET ${path} HTTP/1.1\r\nHost: 127.0.0.1:${host.port}\r\nCookie: ${cookie}\r\nConnection: close\r\n\r\n`;
          const { text } = await bytesTo(host.port, request);
          expect(text, path).not.toContain(SECRET);
          expect(text, path).not.toContain('200 OK');
        }
      }
    }
    for (const path of [
      join(folder, 'secret.txt'),
      `/${folder}/secret.txt`,
      '/etc/passwd',
      'file:///etc/passwd',
      '/assets',
      '/assets/',
    ]) {
      const request = `GET ${path} HTTP/1.1\r\nHost: 127.0.0.1:${host.port}\r\nCookie: ${cookie}\r\nConnection: close\r\n\r\n`;
      expect((await bytesTo(host.port, request)).text, path).not.toContain('200 OK');
    }
    expect((await raw(host, { path: '/assets/a-1234.js', headers: { cookie } })).status).toBe(200);
  });
});

test('a request larger than is taken is dropped, said or not', async () => {
  await withHost(async (started) => {
    const good = goodRequest(started);
    const said = {
      ...good,
      headers: { ...good.headers, 'content-length': String(LIMITS.body + 1) },
      body: '',
    };
    expect([0, 413]).toContain((await raw(started.host, said)).status);
    const headers = { ...good.headers, 'transfer-encoding': 'chunked' };
    const unsaid = { ...good, headers, body: new Uint8Array(LIMITS.body + 100_000) };
    expect([0, 413]).toContain((await raw(started.host, unsaid)).status);
    const long = { ...good, headers: { ...good.headers, 'x-long': 'x'.repeat(LIMITS.headerBytes + 1) } };
    expect([0, 431]).toContain((await raw(started.host, long)).status);
    expect((await raw(started.host, good)).status).toBe(200);
  });
});

test('what is no message of ours is refused, and the window goes on', async () => {
  await withHost(async (started) => {
    const good = goodRequest(started);
    const client = started.client('window-000001');
    await client.call('project.new', { chip: madeUpChip(3) });
    const bodies = [
      '',
      'nonsense',
      '{}',
      new Uint8Array(4),
      new Uint8Array([255, 255, 255, 255, 1]),
      encode(null),
      encode([1]),
      encode('x'),
    ];
    bodies.push(encode({ edit: 7, seq: 'x' }), encode({ edit: { label: 'x', changes: [{}] }, seq: 1 }));
    for (const name of [
      'project.edit',
      'project.open',
      'cells.put',
      'constructor',
      '__proto__',
      'toString',
      'no.such',
    ]) {
      for (const body of bodies) {
        const answer = await raw(started.host, { ...good, path: `/api/${name}`, body });
        expect(answer.body, name).not.toMatch(/\bat .*\.(ts|js):\d+/);
        expect(answer.body).not.toContain('"ok":true');
      }
    }
    for (const path of ['/api/', '/api/../about', '/api/about/x', '/api/%61bout', `/api/${'a'.repeat(100)}`])
      expect((await raw(started.host, { ...good, path })).body, path).not.toContain('"ok":true');
    expect((await client.call('project.state', {})).state?.chip).toEqual(madeUpChip(3));
  });
});

test('malformed, half and endless requests end, and tell nothing', async () => {
  await withHost(async (started) => {
    const { port } = started.host;
    const odd = [
      '\0\0\0\0\r\n\r\n',
      'GET\r\n\r\n',
      'GET / HTTP/9.9\r\n\r\n',
      '\x16\x03\x01\x02\x00\x01\x00',
      'PRI * HTTP/2.0\r\n\r\nSM\r\n\r\n',
    ];
    odd.push('GET / HTTP/1.1\r\nHost\r\n\r\n', 'POST / HTTP/1.1\r\nContent-Length: -1\r\n\r\n');
    odd.push('POST / HTTP/1.1\r\nContent-Length: 5\r\nTransfer-Encoding: chunked\r\n\r\n0\r\n\r\n');
    odd.push(`CONNECT evil.example:80 HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\n\r\n`);
    odd.push(
      `GET /events HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nUpgrade: websocket\r\nConnection: Upgrade\r\n\r\n`,
    );
    for (const bytes of odd) {
      const { text, ended } = await bytesTo(port, bytes);
      expect(ended, JSON.stringify(bytes)).toBe(true);
      expect(text).not.toMatch(/200 OK|101 Switching|page|node_modules/);
    }
    // One that never ends its head is ended for it.
    const slow = bytesTo(port, 'GET / HTTP/1.1\r\nHost: x\r\nX: ', LIMITS.headerMs + 5_000);
    expect((await slow).ended).toBe(true);
    expect((await raw(started.host, goodRequest(started))).status).toBe(200);
  });
});

test('a thousand connections of a stranger do not shut out the one who works', async () => {
  await withHost(async (started) => {
    const client = started.client('window-000001');
    const { seq } = await client.call('project.new', { chip: madeUpChip(3) });
    const sockets: Socket[] = [];
    for (let index = 0; index < 1_000; index += 1) {
      const socket = connect(started.host.port, '127.0.0.1');
      socket.on('error', () => undefined);
      socket.write('GET / HTTP/1.1\r\n');
      sockets.push(socket);
    }
    await wait(300);
    const edit = randomEdit(madeUpChip(3), random(1));
    expect((await client.call('project.edit', { edit, seq })).seq).toBe(seq + 1);
    for (const socket of sockets) socket.destroy();
    expect((await client.call('project.undo', {})).seq).toBe(seq + 2);
  });
});

test('guessing is slowed down, working is not', async () => {
  await withHost(async (started) => {
    const answers = await Promise.all(
      Array.from({ length: LIMITS.strangerBurst + 60 }, (_, guess) =>
        raw(started.host, { path: `/?token=guess${guess}` }),
      ),
    );
    expect(answers.some((answer) => answer.status === 429)).toBe(true);
    expect(answers.every((answer) => [403, 429, 0].includes(answer.status))).toBe(true);
    const own = await Promise.all(Array.from({ length: 150 }, () => raw(started.host, goodRequest(started))));
    expect(own.every((answer) => answer.status === 200)).toBe(true);
  });
});

test('only this machine reaches it', async () => {
  await withHost(async ({ host }) => {
    const sockets = readFileSync('/proc/net/tcp', 'utf8').split('\n');
    const port = host.port.toString(16).toUpperCase().padStart(4, '0');
    const listening = sockets.filter((line) => line.includes(`:${port} 00000000:0000 0A`));
    expect(listening.map((line) => line.trim().split(/\s+/)[1])).toEqual([`0100007F:${port}`]);
  });
});

test('a window that closes lets its project go, whole; a host without windows stops', async () => {
  let idle = 0;
  await withHost(
    async (started) => {
      const client = started.client('window-000009');
      client.on('project', () => undefined);
      await client.call('project.new', { chip: madeUpChip(3) });
      const path = join(started.folder, 'mine.chw');
      const { edited } = await client.call('project.saveAs', { path });
      expect(edited).toBe(false);
      const seq = 1;
      await client.call('project.edit', { edit: randomEdit(madeUpChip(3), random(2)), seq });
      expect(existsSync(join(started.folder, '.mine.chw.open'))).toBe(true);
      expect(idle).toBe(0);
      client.close();
      for (let round = 0; round < 300 && idle === 0; round += 1) await wait(100);
      expect(idle).toBe(1);
      expect(started.sessions.windows()).toEqual([]);
      expect(readdirSync(started.folder).filter((name) => name.includes('mine'))).toEqual(['mine.chw']);
    },
    { graceMs: 300, idleMs: 700, onIdle: () => (idle += 1) },
  );
});

test('a file named at the start is read before there is a window; the first one has it and hears what was said', async () => {
  await withHost(async (started) => {
    started.sessions.ready('/nowhere/a.chw');
    expect(started.sessions.windows()).toEqual([]);
    const client = started.client('window-000001');
    const heard = new Promise<string>((done) => client.on('problem', (problem) => done(problem.what)));
    expect(await heard).toContain('no such file');
    expect(started.sessions.windows()).toEqual(['window-000001']);
  });
  await withHost(async (started) => {
    const path = join(started.folder, 'first.json');
    writeFileSync(path, writeDescription(madeUpChip(3)));
    started.sessions.ready(path);
    // it asks before it listens, and is told of the opening all the same, once
    const client = started.client('window-000001');
    const { state } = await client.call('project.state', {});
    expect(state?.chip.channels).toEqual(madeUpChip(3).channels);
    let told = 0;
    client.on('opened', () => {
      told += 1;
    });
    await vi.waitFor(() => expect(told).toBe(1), WAIT);
    // a second window begins empty
    const second = started.client('window-000002');
    expect((await second.call('project.state', {})).state).toBeNull();
    expect(told).toBe(1);
  });
});

test('a thread that no window came for ends with the host, and lets its project go', async () => {
  await withHost(async (started) => {
    const path = join(started.folder, 'mine.chw');
    makeFile(path, madeUpChip(3), { program: '0' });
    started.sessions.ready(path);
    await vi.waitFor(() => expect(existsSync(join(started.folder, '.mine.chw.open'))).toBe(true), WAIT);
    await started.sessions.close();
    expect(readdirSync(started.folder).filter((name) => name.includes('mine'))).toEqual(['mine.chw']);
  });
});

test('files are listed, read and written whole; nothing is replaced unasked', async () => {
  await withHost(async (started) => {
    const client = started.client('window-000001');
    const path = join(started.folder, 'table.csv');
    await client.call('files.write', { path, content: 'a,b\r\n' });
    await expect(client.call('files.write', { path, content: 'other' })).rejects.toThrow(
      'of this name already',
    );
    expect(readFileSync(path, 'utf8')).toBe('a,b\r\n');
    await client.call('files.write', { path, content: new Uint8Array([1, 2, 3]), replace: true });
    expect((await client.call('files.read', { path })).bytes).toEqual(new Uint8Array([1, 2, 3]));
    const { entries, parent } = await client.call('files.list', { folder: started.folder });
    expect(entries.map((entry) => [entry.name, entry.kind])).toContainEqual(['table.csv', 'other']);
    expect(parent).not.toBeNull();
    await expect(client.call('files.read', { path: 'table.csv' })).rejects.toThrow('whole path');
    await expect(client.call('files.read', { path: '/dev/zero' })).rejects.toThrow('cannot be read');
    await expect(client.call('files.write', { path: `${path}\0x`, content: '' })).rejects.toThrow(
      'no file name',
    );
    writeFileSync(join(started.folder, 'up.chw'), 'nonsense');
    await expect(client.call('project.open', { path: join(started.folder, 'up.chw') })).rejects.toThrow(
      'no Channelwright project',
    );
  });
});

test('cells, results and events pass between page and host as they are', async () => {
  await withHost(async (started) => {
    const client = started.client('window-000001');
    const standings: string[] = [];
    client.on('project', (standing) => standings.push(standing.mode));
    let listening = false;
    client.on('command', () => (listening = true));
    await vi.waitFor(() => {
      started.sessions.emit('window-000001', 'command', { name: 'hear' });
      expect(listening).toBe(true);
    }, WAIT);
    await client.call('project.new', { chip: madeUpChip(3) });
    const bytes = Uint8Array.from({ length: 100_000 }, (_, index) => index % 253);
    await client.call('cells.put', { entries: [{ key: 'µ', bytes }] });
    expect((await client.call('cells.get', { keys: ['µ', 'none'] })).found).toEqual([{ key: 'µ', bytes }]);
    const other = started.client('window-000002');
    await expect(other.call('project.undo', {})).rejects.toThrow('No project is open in this window.');
    expect((await other.call('project.state', {})).state).toBeNull();
    await vi.waitFor(() => expect(standings).toEqual(['draft']), WAIT);
    const { preferences } = await client.call('preferences.set', { patch: { theme: 'dark', gone: 1 } });
    expect(preferences).toEqual({ theme: 'dark', gone: 1 });
    expect((await other.call('preferences.set', { patch: { gone: null } })).preferences).toEqual({
      theme: 'dark',
    });
  });
});
