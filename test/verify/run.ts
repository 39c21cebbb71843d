import { spawnSync } from 'node:child_process';
import {
  existsSync,
  globSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { html, margin, markdown, number } from './render.ts';
import { parseRows, tableOf } from './table.ts';

/**
 * Makes the verification table: runs the tests that hold checks, into a fresh folder, and writes what
 * they recorded to `.verify/verification.{md,html,json}`. Exits with 1 if any check failed.
 *
 * `verification.json` (form 'channelwright-verification', see `Table`) is what the app can show; it is
 * made by the run and never kept with the source.
 */
const root = resolve(import.meta.dirname, '../..');
const out = join(root, '.verify');
const fresh = mkdtempSync(join(tmpdir(), 'channelwright-verify-'));

// Only files that use `verify` can record rows; the others would cost time and say nothing.
const files = globSync(['{solver,db,main,renderer}/**/*.test.{ts,tsx}', 'test/**/*.test.ts'], { cwd: root })
  .filter((file) => /^import .*\bverify\b.*\/row\.ts';$/m.test(readFileSync(join(root, file), 'utf8')))
  .sort();

const run = spawnSync(
  process.execPath,
  [
    join(root, 'node_modules/vitest/vitest.mjs'),
    'run',
    '--config',
    'test/vitest.config.ts',
    '--reporter=dot',
    ...files,
  ],
  { cwd: root, stdio: 'inherit', env: { ...process.env, CHANNELWRIGHT_VERIFY: fresh } },
);

const recorded = readdirSync(fresh)
  .filter((name) => name.startsWith('rows-'))
  .flatMap((name) => parseRows(readFileSync(join(fresh, name), 'utf8')));
rmSync(fresh, { recursive: true });

const { version } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { version: string };
const table = tableOf(recorded, {
  program: version,
  date: new Date().toISOString(),
  runtime: `Node ${process.version}`,
});
if (!existsSync(out)) mkdirSync(out);
writeFileSync(join(out, 'verification.json'), `${JSON.stringify(table, null, 1)}\n`);
writeFileSync(join(out, 'verification.md'), markdown(table));
writeFileSync(join(out, 'verification.html'), html(table));

console.log(
  `\n${table.rows.length} checks from ${files.length} files, ${table.failed} failed. Thinnest margins:`,
);
for (const place of table.thinnest) {
  const row = table.rows[place];
  console.log(
    `  ${margin(row)}  ${row.quantity}, ${row.at}: ${number(row.error)} of ${number(row.tolerance)}`,
  );
}
console.log(
  `Not checked: ${table.notChecked.length} things, named in the table.\nWritten to .verify/verification.md, .html and .json`,
);
if (table.rows.length === 0) console.error('No check recorded a row.');
if (run.status !== 0) console.error('Some tests failed; see above.');
process.exitCode = run.status === 0 && table.failed === 0 && table.rows.length > 0 ? 0 : 1;
