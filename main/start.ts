import { spawn } from 'node:child_process';
import { readFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { Problem } from '../solver/problem/problem.ts';
import { built, DESKTOP, PAGE } from './launch/built.ts';
import { startOptions, USAGE } from './launch/options.ts';
import { fetchRuntime, runtimePath } from './launch/runtime.ts';
import { serve } from './launch/serve.ts';

/** `npm start`, by way of `start.js`: the desktop program where its runtime is, else the same program in the browser. */
const root = resolve(import.meta.dirname, '..');
const says = (line: string): void => console.log(line);

async function desktop(executable: string, files: readonly string[]): Promise<number> {
  const child = spawn(executable, [root, ...files.map((file) => resolve(file))], { stdio: 'inherit' });
  return await new Promise((done) => {
    child.on('error', () => done(1));
    child.on('exit', (code) => done(code ?? 1));
  });
}

async function main(): Promise<void> {
  const args = process.argv.slice(2);
  if (args.includes('--help')) return says(USAGE);
  const options = startOptions(args);
  const { version } = JSON.parse(await readFile(join(root, 'package.json'), 'utf8')) as { version: string };
  if (!options.browser) {
    let executable = await runtimePath(root);
    if (!executable && (await fetchRuntime(root, says))) executable = await runtimePath(root);
    if (executable) {
      await built(root, PAGE, says);
      await built(root, DESKTOP, says);
      process.exitCode = await desktop(executable, options.files);
      return;
    }
    says(
      'The desktop runtime is not installed and cannot be fetched: Channelwright runs in the browser instead.',
    );
  }
  await serve(root, version, options, says);
}

main().catch((error: unknown) => {
  console.error(error instanceof Problem ? error.message : 'Channelwright could not start.');
  if (!(error instanceof Problem)) console.error(error instanceof Error ? error.message : String(error));
  process.exitCode = 2;
});
