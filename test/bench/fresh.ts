import { execFile } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';

export interface Times {
  /** Processor time of all threads, ms. */
  readonly work: number;
  readonly wall: number;
}

const ROOT = join(import.meta.dirname, '../..');

/** What the package's script for a command gives the runtime before the command itself. */
function flagsOf(command: string): string[] {
  const { scripts } = JSON.parse(readFileSync(join(ROOT, 'package.json'), 'utf8')) as {
    scripts: Record<string, string>;
  };
  const words = scripts[command]!.split(' ').slice(1);
  return words.slice(
    0,
    words.findIndex((word) => word.endsWith('.ts')),
  );
}

/** Runs a script in a process of its own, as `npm run COMMAND` runs the command; returns what it prints. */
export async function fresh(command: string, script: string, args: readonly string[]): Promise<string> {
  const { stdout } = await promisify(execFile)(process.execPath, [...flagsOf(command), script, ...args], {
    cwd: ROOT,
    maxBuffer: 2 ** 26,
  });
  return stdout;
}

export const median = (times: readonly number[]): number =>
  times.toSorted((a, b) => a - b)[times.length >> 1]!;

export const medians = (times: readonly Times[]): Times => ({
  work: median(times.map(({ work }) => work)),
  wall: median(times.map(({ wall }) => wall)),
});
