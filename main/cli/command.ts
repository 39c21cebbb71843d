import { realpath } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { Problem } from '../../solver/problem/problem.ts';
import { type Io, problemOf, problemText } from './say.ts';

/** What one command of the program is made of. */
export interface Command<Options extends { readonly file: string }> {
  readonly usage: string;
  /** null where help is asked for. Throws `Problem`. */
  options(argv: readonly string[]): Options | null;
  /** Returns the exit code; nothing is written unless all of it can be. Throws `Problem`. */
  run(options: Options, io: Io): Promise<number>;
  /** The file that a problem is about, where it is not the one that the command reads first. */
  about?(options: Options, problem: Problem): string;
}

/** Runs a command and says what stopped it. Returns the exit code: 2 where it was stopped. */
export async function runCommand<Options extends { readonly file: string }>(
  command: Command<Options>,
  argv: readonly string[],
  io: Io,
): Promise<number> {
  let options: Options | null = null;
  try {
    options = command.options(argv);
    if (options === null) {
      io.out(command.usage);
      return 0;
    }
    return await command.run(options, io);
  } catch (error) {
    const problem = problemOf(error);
    const file = options === null ? '' : (command.about?.(options, problem) ?? options.file);
    io.err(problemText(problem, file));
    return 2;
  }
}

/** The command as the process that it is. */
export async function speak(main: (argv: readonly string[], io: Io) => Promise<number>): Promise<void> {
  // A reader that has seen enough (`| head`) is no failure of the program.
  process.stdout.on('error', (error: NodeJS.ErrnoException) => {
    if (error.code !== 'EPIPE') throw error;
  });
  process.exitCode = await main(process.argv.slice(2), {
    out: (text) => process.stdout.write(text),
    err: (text) => process.stderr.write(text),
  });
}

/** The path that a file has, or will have, whatever links lead to it. */
async function placeOf(path: string): Promise<string> {
  const whole = resolve(path);
  return await realpath(whole).catch(async () => {
    const folder = await realpath(dirname(whole)).catch(() => dirname(whole));
    return join(folder, basename(whole));
  });
}

/**
 * Throws where two files of the call are one, which would lose one of them; what is not given, or goes to standard
 * output, does not count.
 */
export async function checkPlaces(
  read: readonly string[],
  outputs: readonly (string | undefined)[],
): Promise<void> {
  const named = [...read, ...outputs].filter((path) => path !== undefined && path !== '-') as string[];
  const places = await Promise.all(named.map(placeOf));
  const twice = places.findIndex((place, i) => places.indexOf(place) < i);
  if (twice < 0) return;
  const lost = twice >= read.length && places.indexOf(places[twice]) < read.length;
  throw new Problem(
    'output',
    `One file is named twice in the call${lost ? ', and what is read would be overwritten' : ''}.`,
    named[twice],
    'Give each output a file of its own.',
  );
}

/** Throws where two outputs of a call are standard output. */
export function checkStandard(outputs: Readonly<Record<string, string | undefined>>): void {
  const [one, other] = Object.keys(outputs).filter((option) => outputs[option] === '-');
  if (other === undefined) return;
  throw new Problem(
    'output',
    `Both ${one} and ${other} are standard output.`,
    'the command',
    'Give one of them a file.',
  );
}
