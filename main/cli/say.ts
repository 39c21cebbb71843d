import { Problem } from '../../solver/problem/problem.ts';
import { COMMAND } from './options.ts';

/** Where a command speaks. */
export interface Io {
  out(text: string): void;
  err(text: string): void;
}

/** A problem as three lines: what, where, what to do. `file` is what the command reads, '' where not known yet. */
export function problemText(problem: Problem, file: string): string {
  const { what, where, remedy } = problem;
  const elsewhere = problem.kind === 'output' || where === COMMAND || file === '' || where.startsWith(file);
  const inFile = elsewhere ? where : `${file}${where && `, ${where}`}`;
  return `${what}\n  where: ${inFile || COMMAND}\n  do:    ${remedy}\n`;
}

/** Any error as a problem: what no one foresaw is a fault of the program and says so. */
export function problemOf(error: unknown): Problem {
  if (error instanceof Problem) return error;
  return new Problem(
    'not-converged',
    `The program failed: ${error instanceof Error ? error.message.split('\n')[0] : 'unknown'}.`,
    '',
    'This is a fault of the program; keep the file so that it can be found.',
  );
}
