import { partHash } from '../chip/parts.ts';
import { type Step, stepOf } from '../journal/journal.ts';
import { cellIsWhole } from '../kept/cells.ts';
import { resultIsWhole } from '../kept/results.ts';
import { trialIsWhole } from '../kept/trials.ts';
import { sameBytes } from '../store/hash.ts';
import { SEALED, type Seal, type Sealed } from '../store/seals.ts';
import type { Row, Store } from '../store/store.ts';
import { rawRecords } from './pages.ts';

/** Rows of a damaged file that are as they were written, by key. */
export interface WholeRows {
  readonly chip: Map<string, Row>;
  /** Still to be checked against one another: a step's hash is over the one before it. */
  readonly steps: Map<number, Step>;
  readonly results: Map<number, Row>;
  readonly trials: Map<number, Row>;
  readonly cells: Map<string, Row>;
  readonly seals: Partial<Record<Sealed, Seal>>;
}

/** The columns of each table that is read, in the order of its records. */
const TABLES = {
  chip: ['kind', 'place', 'body', 'hash'],
  journal: ['seq', 'kind', 'of', 'made', 'label', 'body', 'hash'],
  result: ['id', 'chip', 'settings', 'made', 'body', 'hash'],
  trial: ['id', 'name', 'made', 'chip', 'result', 'hash'],
  cell: ['key', 'used', 'body', 'hash'],
  seal: ['what', 'seq', 'rows', 'digest'],
} as const;
type Table = keyof typeof TABLES;

function partIsWhole(row: Row): boolean {
  const { kind, place, body, hash } = row;
  return (
    typeof kind === 'string' &&
    typeof place === 'number' &&
    typeof body === 'string' &&
    sameBytes(hash, partHash(kind, body))
  );
}

/**
 * Gathers every whole row: first off the pages one by one, then by the tables where they can still be
 * read, which know best what is current.
 */
export function wholeRows(store: Store | null, bytes: Uint8Array): WholeRows {
  const rows: WholeRows = {
    chip: new Map(),
    steps: new Map(),
    results: new Map(),
    trials: new Map(),
    cells: new Map(),
    seals: {},
  };
  for (const { rowid, values } of rawRecords(bytes)) {
    for (const table of Object.keys(TABLES) as Table[]) {
      const columns = TABLES[table];
      if (columns.length !== values.length) continue;
      const row: Record<string, unknown> = {};
      for (const [index, column] of columns.entries()) row[column] = values[index];
      // The engine keeps a whole-number key as the number of the row.
      if (rowid !== null && values[0] === null) row[columns[0]] = rowid;
      take(rows, table, row);
    }
  }
  if (store) for (const table of Object.keys(TABLES) as Table[]) takeTable(rows, store, table);
  return rows;
}

function take(rows: WholeRows, table: Table, row: Row): void {
  if (table === 'chip' && partIsWhole(row)) rows.chip.set(partKey(String(row.kind), Number(row.place)), row);
  else if (table === 'result' && typeof row.id === 'number' && resultIsWhole(row))
    rows.results.set(row.id, row);
  else if (table === 'trial' && trialIsWhole(row)) rows.trials.set(Number(row.id), row);
  else if (table === 'cell' && cellIsWhole(row)) rows.cells.set(String(row.key), row);
  else if (table === 'journal') {
    const step = stepOf(row);
    if (step && step.hash.length === 32) rows.steps.set(step.seq, step);
  } else if (table === 'seal') takeSeal(rows, row);
}

function takeSeal(rows: WholeRows, row: Row): void {
  const what = SEALED.find((name) => name === row.what);
  const { seq, rows: count, digest } = row;
  if (!what || typeof seq !== 'number' || typeof count !== 'number') return;
  if (digest instanceof Uint8Array && digest.length === 32) rows.seals[what] = { seq, rows: count, digest };
}

export function partKey(kind: string, place: number): string {
  return `${kind} ${place}`;
}

/** Rows from both ends of a table up to where reading fails. */
function takeTable(rows: WholeRows, store: Store, table: Table): void {
  const key = table === 'chip' ? ['kind', 'place'] : [TABLES[table][0]];
  for (const order of ['', ' DESC']) {
    const by = key.map((column) => column + order).join(', ');
    const complete = attempt(() => {
      for (const row of store.iterate(`SELECT * FROM ${table} ORDER BY ${by}`)) take(rows, table, row);
      return true;
    });
    if (complete) return;
  }
}

export function attempt<T>(work: () => T): T | null {
  try {
    return work();
  } catch {
    return null;
  }
}
