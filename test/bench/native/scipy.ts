import { type ChildProcessWithoutNullStreams, spawn, spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { createInterface } from 'node:readline';

/** A Python with scipy, running one of the scripts of this folder and answering a line per line. */
export class Python {
  readonly version: string;
  private readonly child: ChildProcessWithoutNullStreams;
  private readonly lines: AsyncIterator<string>;

  private constructor(child: ChildProcessWithoutNullStreams, lines: AsyncIterator<string>, version: string) {
    this.child = child;
    this.lines = lines;
    this.version = version;
  }

  /** @returns null where no Python on this machine has scipy (Debian: python3-scipy) */
  static async start(script: string): Promise<Python | null> {
    const name = ['python3', '/usr/bin/python3'].find(
      (candidate) => spawnSync(candidate, ['-c', 'import scipy']).status === 0,
    );
    if (name === undefined) return null;
    const child = spawn(name, [join(import.meta.dirname, script)]);
    child.stderr.pipe(process.stderr);
    const lines = createInterface(child.stdout)[Symbol.asyncIterator]();
    return new Python(child, lines, (await lines.next()).value as string);
  }

  async ask(request: string): Promise<number> {
    this.child.stdin.write(`${request}\n`);
    const { value, done } = await this.lines.next();
    if (done) throw new Error(`The script ended on "${request}".`);
    return Number(value);
  }

  stop(): void {
    this.child.stdin.end();
  }
}
