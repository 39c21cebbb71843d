import { readFile } from 'node:fs/promises';
import type { Chip } from '../../solver/chip/chip.ts';
import { readChip } from '../../solver/chip/schema-chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { fold } from '../journal/fold.ts';
import type { Step } from '../journal/journal.ts';
import { trialChip, trialWithoutResult } from '../kept/trials.ts';
import { makeLayout } from '../layout/layout.ts';
import { fillFile } from '../make.ts';
import { removeFile } from '../place/copy-out.ts';
import { syncFile } from '../place/replace.ts';
import { openInMemory } from '../read.ts';
import { NO_HASH } from '../store/hash.ts';
import { sealOfRows, writeSeal } from '../store/seals.ts';
import { type Row, Store } from '../store/store.ts';
import { salvageChip, unbroken } from './chip.ts';
import { attempt, type WholeRows, wholeRows } from './rows.ts';

/** What could be read of a damaged file, checked row by row. */
interface Found {
  readonly chip: Chip;
  readonly report: string[];
  /** Steps to take over as they are; empty where undo cannot go on. */
  readonly steps: readonly Step[];
  readonly base: { readonly seq: number; readonly hash: Uint8Array };
  readonly results: readonly Row[];
  readonly trials: readonly Row[];
  readonly cells: readonly Row[];
}

/**
 * Reads what can be read of the project at `path`, which is not touched, and writes it as a new
 * project to `to`, where nothing is yet. Returns what was kept and lost, in sentences.
 */
export async function salvage(path: string, to: string, program: string): Promise<string[]> {
  const found = await read(path);
  if (!found)
    throw new Problem(
      'project',
      'The file is damaged so far that no part of the chip can be read. It is left as it is.',
      path,
      'Go back to a backup.',
    );
  try {
    write(to, found, program);
    await syncFile(to);
  } catch (error) {
    await removeFile(to);
    throw error;
  }
  return [...found.report, counted(found)];
}

function counted(found: Found): string {
  const undo = found.steps.length > 0 ? 'undo goes on where it was' : 'what was done before cannot be undone';
  return `Kept: the chip, ${found.trials.length} trials, ${found.results.length} results, ${found.cells.length} solved junctions; ${undo}.`;
}

async function read(path: string): Promise<Found | null> {
  const store = await openInMemory(path).catch(() => null);
  try {
    const bytes = store ? attempt(() => store.bytes()) : null;
    return find(wholeRows(store, bytes ?? (await readFile(path))));
  } finally {
    store?.close();
  }
}

function find(rows: WholeRows): Found | null {
  const { seals } = rows;
  const base = seals.base ? { seq: seals.base.seq, hash: seals.base.digest } : { seq: 0, hash: NO_HASH };
  const found = salvageChip(rows.chip, rows.steps, { base, chip: seals.chip, journal: seals.journal });
  if (!found) return null;

  const report = [...found.report];
  const count = (what: string, kept: number, sealed: number | undefined): void => {
    const lost = (sealed ?? kept) - kept;
    if (lost > 0) report.push(`${lost} ${what} could not be read and are lost.`);
  };
  const results = [...rows.results.values()];
  const trials = [...rows.trials.values()].filter((row) => attempt(() => readChip(trialChip(row))) !== null);
  count('results', results.length, seals.result?.rows);
  count('trials', trials.length, seals.trial?.rows);
  if (!found.exact && rows.steps.size > 1)
    report.push('The record of steps is broken: what was done before cannot be undone.');
  return {
    chip: found.chip,
    report,
    steps: found.exact ? unbroken(rows.steps, base.seq + 1, base.hash) : [],
    base,
    results,
    trials,
    cells: [...rows.cells.values()],
  };
}

function write(to: string, found: Found, program: string): void {
  const store = Store.open(to, 'make');
  try {
    makeLayout(store);
    fillFile(store, found.chip, { program });
    store.transaction(() => {
      const kept = new Set(found.results.map((row) => row.id));
      for (const row of found.results) insert(store, 'result', row);
      for (const row of found.trials)
        insert(store, 'trial', row.result === null || kept.has(row.result) ? row : trialWithoutResult(row));
      for (const row of found.cells) insert(store, 'cell', row);
      for (const table of ['result', 'trial'] as const) writeSeal(store, table, sealOfRows(store, table));
    });
    if (found.steps.length > 0) takeOver(store, found);
    store.pragma('wal_checkpoint(TRUNCATE)');
  } finally {
    store.close();
  }
}

/** Puts the steps in place of the one that a new file begins with. */
function takeOver(store: Store, found: Found): void {
  const last = found.steps.at(-1)!;
  const { base } = found;
  store.transaction(() => {
    store.run('DELETE FROM journal');
    for (const step of found.steps) insert(store, 'journal', { ...step });
    writeSeal(store, 'base', { seq: base.seq, rows: 0, digest: base.hash });
    writeSeal(store, 'journal', { seq: last.seq, rows: 0, digest: last.hash });
  });
  fold(
    store,
    { chip: found.chip, seq: last.seq, base },
    { chip: found.chip, seq: last.seq, hash: last.hash },
  );
}

const COLUMNS = {
  result: ['id', 'chip', 'settings', 'made', 'body', 'hash'],
  trial: ['id', 'name', 'made', 'chip', 'result', 'hash'],
  cell: ['key', 'used', 'body', 'hash'],
  journal: ['seq', 'kind', 'of', 'made', 'label', 'body', 'hash'],
} as const;

function insert(store: Store, table: keyof typeof COLUMNS, row: Row): void {
  const columns = COLUMNS[table];
  store.run(
    `INSERT INTO ${table} (${columns.join(', ')}) VALUES (${columns.map(() => '?').join(', ')})`,
    ...columns.map((column) => row[column] as string | number | Uint8Array | null),
  );
}
