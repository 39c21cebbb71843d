import { spawn } from 'node:child_process';
import { mkdirSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { expect, test } from 'vitest';
import { inFolder } from '../faults/sample.ts';

const MAIN = resolve(import.meta.dirname, '../../main');

test('the start serves the page, prints one address where no browser is to be opened, and stops when told', async () => {
  await inFolder(async (folder) => {
    // As `main/start.ts` does, with a page that need not be built.
    mkdirSync(join(folder, 'dist', 'renderer'), { recursive: true });
    writeFileSync(join(folder, 'dist', 'renderer', 'index.html'), '<title>page</title>');
    const program = join(folder, 'serve.ts');
    writeFileSync(
      program,
      `import { serve } from ${JSON.stringify(pathToFileURL(join(MAIN, 'launch/serve.ts')).href)};
       import { startOptions } from ${JSON.stringify(pathToFileURL(join(MAIN, 'launch/options.ts')).href)};
       await serve(${JSON.stringify(folder)}, '0', startOptions(['--no-open']), (line) => console.log(line));`,
    );
    const child = spawn(process.execPath, [program], {
      env: { ...process.env, CHANNELWRIGHT_DATA: join(folder, 'data') },
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    let text = '';
    const address = await new Promise<string>((done) => {
      child.stdout.on('data', (chunk: Buffer) => {
        text += chunk.toString();
        const found = /Open (http:\/\/127\.0\.0\.1:\d+\/\?token=[\w-]+)\n/.exec(text)?.[1];
        if (found) done(found);
      });
    });
    const first = await fetch(address, { redirect: 'manual' });
    expect(first.status).toBe(303);
    const cookie = first.headers.get('set-cookie')!;
    expect(cookie).toMatch(/; HttpOnly; SameSite=Strict; Path=\/$/);
    const page = await fetch(new URL('/', address), { headers: { cookie: cookie.split(';')[0]! } });
    expect(await page.text()).toContain('<title>page');
    const ended = new Promise<number | null>((done) => child.on('exit', (code) => done(code)));
    child.kill('SIGTERM');
    expect(await ended).toBe(0);
    expect(text.match(/token=/g)).toHaveLength(1);
  });
});
