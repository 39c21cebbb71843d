import type { Chip } from '../../solver/chip/chip.ts';
import { readChip } from '../../solver/chip/schema-chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { LIST_KINDS, LISTS } from '../chip/parts.ts';
import { fold } from '../journal/fold.ts';
import { type Step, stepOf } from '../journal/journal.ts';
import { cellIsWhole } from '../kept/cells.ts';
import { resultIsWhole } from '../kept/results.ts';
import { trialChip, trialIsWhole, trialWithoutResult } from '../kept/trials.ts';
import { makeLayout } from '../layout/layout.ts';
import { fillFile } from '../make.ts';
import { removeFile } from '../place/copy-out.ts';
import { syncFile } from '../place/replace.ts';
import { readSeals, type Seal, sealOfRows, writeSeal } from '../store/seals.ts';
import { type Row, Store } from '../store/store.ts';
import { salvageChip } from './chip.ts';
import { readings } from './readings.ts';
import { attempt, readableByNumber, readableByText, readableParts } from './rows.ts';

/** What could be read of a damaged file, checked row by row. */
interface Found {
  readonly chip: Chip;
  readonly report: string[];
  /** Steps to take over as they are; empty where undo cannot go on. */
  readonly steps: readonly Step[];
  readonly base: Seal | null;
  readonly results: readonly Row[];
  readonly trials: readonly Row[];
  readonly cells: readonly Row[];
}

/**
 * Reads what can be read of the project at `path`, which is not touched, and writes it as a new
 * project to `to`, where nothing is yet. Returns what was kept and lost, in sentences.
 */
export async function salvage(path: string, to: string, program: string): Promise<string[]> {
  let best: Found | null = null;
  for await (const store of readings(path)) {
    const found = attempt(() => find(store));
    store.close();
    if (found && (!best || amount(found) > amount(best))) best = found;
    if (best && best.report.length === 0) break;
  }
  if (!best)
    throw new Problem(
      'project',
      'The file is damaged so far that no part of the chip can be read. It is left as it is.',
      path,
      'Go back to a backup.',
    );
  try {
    write(to, best, program);
    await syncFile(to);
  } catch (error) {
    await removeFile(to);
    throw error;
  }
  return [...best.report, counted(best)];
}

/** How much was found, to choose between two readings. */
function amount(found: Found): number {
  const parts = LIST_KINDS.reduce((sum, kind) => sum + found.chip[LISTS[kind]].length, 0);
  return parts + found.steps.length + found.results.length + found.trials.length + found.cells.length;
}

function counted(found: Found): string {
  const undo = found.steps.length > 0 ? 'undo goes on where it was' : 'what was done before cannot be undone';
  return `Kept: the chip, ${found.trials.length} trials, ${found.results.length} results, ${found.cells.length} solved junctions; ${undo}.`;
}

function find(store: Store): Found | null {
  const seals = attempt(() => readSeals(store));
  const journal = readableByNumber(store, 'journal', 'seq', seals?.journal.seq ?? 0);
  const steps = new Map<number, Step>();
  for (const row of journal.values()) {
    const step = stepOf(row);
    if (step) steps.set(step.seq, step);
  }
  const parts = readableParts(store, ['head', ...LIST_KINDS], seals?.chip.rows ?? 1000);
  const base = seals
    ? { seq: seals.base.seq, hash: seals.base.digest }
    : { seq: 0, hash: new Uint8Array(32) };
  const found = salvageChip(parts, seals?.chip ?? null, steps, base);
  if (!found) return null;

  const report = [...found.report];
  const wholeOf = (
    what: string,
    rows: Iterable<Row>,
    isWhole: (row: Row) => boolean,
    sealed?: number,
  ): Row[] => {
    const all = [...rows];
    const whole = all.filter(isWhole);
    const lost = Math.max(all.length, sealed ?? 0) - whole.length;
    if (lost > 0) report.push(`${lost} ${what} could not be read and are lost.`);
    return whole;
  };
  const results = wholeOf(
    'results',
    readableByNumber(store, 'result', 'id', 0).values(),
    resultIsWhole,
    seals?.result.rows,
  );
  const trials = wholeOf(
    'trials',
    readableByNumber(store, 'trial', 'id', 0).values(),
    (row) => trialIsWhole(row) && attempt(() => readChip(trialChip(row))) !== null,
    seals?.trial.rows,
  );
  const cells = wholeOf('solved junctions', readableByText(store, 'cell', 'key'), cellIsWhole);
  const chain = found.exact ? [...steps.values()].sort((a, b) => a.seq - b.seq) : [];
  if (!found.exact && steps.size > 1)
    report.push('The record of steps is broken: what was done before cannot be undone.');
  return {
    chip: found.chip,
    report,
    steps: chain,
    base: found.exact ? (seals?.base ?? null) : null,
    results,
    trials,
    cells,
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
  const base = { seq: found.base?.seq ?? 0, hash: found.base?.digest ?? new Uint8Array(32) };
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
