import { type ChildProcess, spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';

const ROOT = resolve(import.meta.dirname, '../..');

export interface Host {
  /** With its one-time token. */
  readonly address: string;
  readonly origin: string;
  /** A folder of its own for drafts and preferences. */
  readonly data: string;
  readonly pid: number;
  /** ms from the start of the process until the address was told. */
  readonly startedIn: number;
  stop(): Promise<void>;
}

/** `npm start` as a person has it, in a fresh data folder, on a free port; the page is built where it must be. */
export async function startHost(files: readonly string[] = []): Promise<Host> {
  const data = mkdtempSync(join(tmpdir(), 'channelwright-page-'));
  const began = performance.now();
  const child: ChildProcess = spawn(
    process.execPath,
    [join(ROOT, 'main/start.js'), '--no-open', '--idle', '10', ...files],
    {
      cwd: ROOT,
      // files are written into the same folder, so that nothing of the person's is touched
      env: {
        ...process.env,
        CHANNELWRIGHT_DATA: data,
        CHANNELWRIGHT_NO_OPEN: '1',
        HOME: data,
        NODE_ENV: 'production',
      },
      stdio: ['ignore', 'pipe', 'pipe'],
    },
  );
  let said = '';
  const address = await new Promise<string>((done, fail) => {
    const timer = setTimeout(() => fail(new Error(`The host did not start: ${said}`)), 120_000);
    const read = (chunk: Buffer): void => {
      said += chunk.toString();
      const found = /Open (http:\/\/\S+)/.exec(said);
      if (!found) return;
      clearTimeout(timer);
      done(found[1]!);
    };
    child.stdout!.on('data', read);
    child.stderr!.on('data', read);
    child.on('exit', (code) => {
      clearTimeout(timer);
      fail(new Error(`The host ended with ${code}: ${said}`));
    });
  });
  const startedIn = performance.now() - began;
  return {
    address,
    pid: child.pid!,
    startedIn,
    origin: new URL(address).origin,
    data,
    stop: async () => {
      const ended = new Promise((done) => child.once('exit', done));
      child.kill('SIGTERM');
      await Promise.race([ended, new Promise((done) => setTimeout(done, 3000))]);
      child.kill('SIGKILL');
      rmSync(data, { recursive: true, force: true });
    },
  };
}
