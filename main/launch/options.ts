import { parseArgs } from 'node:util';
import { Problem } from '../../solver/problem/problem.ts';

/** What `npm start -- …` takes. */
export interface StartOptions {
  /** Use the browser even where the desktop's runtime is there. */
  readonly browser: boolean;
  /** Open the address, or only print it. */
  readonly open: boolean;
  readonly port: number;
  /** How long the browser host stays without a window, ms; 0 is for ever. */
  readonly idleMs: number;
  /** Projects or descriptions to open. */
  readonly files: readonly string[];
}

export const USAGE = `npm start -- [FILE] [--browser] [--no-open] [--port N] [--idle MINUTES]
  FILE          a project (.chw) or a chip description (.json) to open
  --browser     use the browser even where the desktop runtime is installed
  --no-open     print the address instead of opening a browser (implies --browser)
  --port N      the port to serve at; a free one by default
  --idle M      stop after M minutes without a window (5 by default; 0 never stops)`;

function number(text: string | undefined, absent: number, most: number, flag: string): number {
  if (text === undefined) return absent;
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value) || value < 0 || value > most)
    throw new Problem('range', `${flag} takes a number from 0 to ${most}.`, text, 'Give one.');
  return value;
}

export function startOptions(
  args: readonly string[],
  environment: NodeJS.ProcessEnv = process.env,
): StartOptions {
  let parsed: ReturnType<typeof parse>;
  try {
    parsed = parse(args);
  } catch (error) {
    throw new Problem('unknown-key', (error as Error).message, '', `Usage: ${USAGE}`);
  }
  const { values, positionals } = parsed;
  const port = number(values.port, 0, 65_535, '--port');
  if (!Number.isInteger(port))
    throw new Problem('range', '--port takes a whole number.', String(port), 'Give one.');
  const quiet = values['no-open'] === true || Boolean(environment.CHANNELWRIGHT_NO_OPEN);
  return {
    browser: values.browser === true || quiet || environment.CHANNELWRIGHT_HOST === 'browser',
    open: !quiet,
    port,
    idleMs: number(values.idle ?? environment.CHANNELWRIGHT_IDLE_MINUTES, 5, 10_000, '--idle') * 60_000,
    files: positionals,
  };
}

function parse(args: readonly string[]) {
  return parseArgs({
    args: [...args],
    allowPositionals: true,
    options: {
      browser: { type: 'boolean' },
      'no-open': { type: 'boolean' },
      port: { type: 'string' },
      idle: { type: 'string' },
    },
  });
}
