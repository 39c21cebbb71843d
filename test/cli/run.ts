import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { main } from '../../main/cli/solve-command.ts';

export interface Ran {
  readonly code: number;
  readonly out: string;
  readonly err: string;
}

/** The command, called in this process. */
export async function run(...argv: readonly string[]): Promise<Ran> {
  const said = { out: '', err: '' };
  const code = await main(argv, {
    out: (text) => {
      said.out += text;
    },
    err: (text) => {
      said.err += text;
    },
  });
  return { code, ...said };
}

const ROOT = join(import.meta.dirname, '../..');

/** The command as a person calls it, in a process of its own. */
export async function spawnSolve(argv: readonly string[], folder: string): Promise<Ran> {
  const child = spawn(process.execPath, [join(ROOT, 'main/cli/solve.ts'), ...argv], { cwd: folder });
  const said = { out: '', err: '' };
  child.stdout.setEncoding('utf8').on('data', (text: string) => {
    said.out += text;
  });
  child.stderr.setEncoding('utf8').on('data', (text: string) => {
    said.err += text;
  });
  const code = await new Promise<number>((done) => {
    child.on('close', (status) => done(status ?? -1));
  });
  return { code, ...said };
}
