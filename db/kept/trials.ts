import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { chipHash } from '../chip/parts.ts';
import { sameBytes, sha256Of } from '../store/hash.ts';
import { pack, unpack } from '../store/pack.ts';
import { sealOfRows, writeSeal } from '../store/seals.ts';
import type { Row, Store } from '../store/store.ts';
import { insertResult, resultIsWhole, resultOf } from './results.ts';

const MOST = 1000;

export interface Trial {
  readonly id: number;
  readonly name: string;
  /** Milliseconds since 1970. */
  readonly made: number;
  readonly hasResult: boolean;
}

function trialHash(
  id: number,
  name: string,
  made: number,
  chip: Uint8Array,
  result: number | null,
): Uint8Array {
  return sha256Of(id, name, made, chip, result);
}

/** Whether a row is whole. */
export function trialIsWhole(row: Row): boolean {
  const { id, name, made, chip, result, hash } = row;
  return (
    typeof id === 'number' &&
    typeof name === 'string' &&
    typeof made === 'number' &&
    chip instanceof Uint8Array &&
    (result === null || typeof result === 'number') &&
    sameBytes(hash, trialHash(id, name, made, chip, result))
  );
}

/** A whole row as it is without its result, where that was lost. */
export function trialWithoutResult(row: Row): Row {
  const chip = row.chip as Uint8Array;
  const hash = trialHash(Number(row.id), String(row.name), Number(row.made), chip, null);
  return { ...row, result: null, hash };
}

/** The chip of a row as it was packed, to be checked before it is used. */
export function trialChip(row: Row): unknown {
  return unpack(row.chip as Uint8Array);
}

function trialOf(row: Row): Trial {
  return {
    id: Number(row.id),
    name: String(row.name),
    made: Number(row.made),
    hasResult: row.result !== null,
  };
}

export function listTrials(store: Store): Trial[] {
  return store.all('SELECT id, name, made, result FROM trial ORDER BY id').map(trialOf);
}

function find(store: Store, id: number): Row {
  const row = store.get('SELECT * FROM trial WHERE id = ?', id);
  if (!row)
    throw new Problem('reference', 'There is no such trial any more.', String(id), 'Choose another one.');
  return row;
}

/** Freezes a chip with its result under a name. */
export function freezeTrial(
  store: Store,
  name: string,
  chip: Chip,
  result: Result | null,
  made: number,
): Trial {
  return store.transaction(() => {
    const count = Number(store.get('SELECT count(*) AS count FROM trial')?.count);
    if (count >= MOST)
      throw new Problem('too-many', `A project holds at most ${MOST} trials.`, name, 'Delete some first.');
    const resultId = result ? insertResult(store, chipHash(chip), `trial ${name}`, result, made) : null;
    const id = Number(store.get('SELECT coalesce(max(id), 0) + 1 AS id FROM trial')?.id);
    const body = pack(chip);
    store.run(
      'INSERT INTO trial (id, name, made, chip, result, hash) VALUES (?, ?, ?, ?, ?, ?)',
      id,
      name,
      made,
      body,
      resultId,
      trialHash(id, name, made, body, resultId),
    );
    if (resultId !== null) writeSeal(store, 'result', sealOfRows(store, 'result'));
    writeSeal(store, 'trial', sealOfRows(store, 'trial'));
    return { id, name, made, hasResult: resultId !== null };
  });
}

export function renameTrial(store: Store, id: number, name: string): Trial {
  return store.transaction(() => {
    const row = find(store, id);
    const hash = trialHash(id, name, Number(row.made), row.chip as Uint8Array, row.result as number | null);
    store.run('UPDATE trial SET name = ?, hash = ? WHERE id = ?', name, hash, id);
    writeSeal(store, 'trial', sealOfRows(store, 'trial'));
    return { ...trialOf(row), name };
  });
}

export function deleteTrial(store: Store, id: number): void {
  store.transaction(() => {
    const row = find(store, id);
    store.run('DELETE FROM trial WHERE id = ?', id);
    if (row.result !== null) {
      store.run('DELETE FROM result WHERE id = ?', Number(row.result));
      writeSeal(store, 'result', sealOfRows(store, 'result'));
    }
    writeSeal(store, 'trial', sealOfRows(store, 'trial'));
  });
}

/** A trial with its chip (still to be checked) and its result. */
export function getTrial(store: Store, id: number): { trial: Trial; chip: unknown; result: Result | null } {
  const row = find(store, id);
  if (!trialIsWhole(row)) throw damaged(String(row.name));
  let result: Result | null = null;
  if (row.result !== null) {
    const found = store.get('SELECT * FROM result WHERE id = ?', Number(row.result));
    if (!found || !resultIsWhole(found)) throw damaged(String(row.name));
    result = resultOf(found);
  }
  return { trial: trialOf(row), chip: trialChip(row), result };
}

function damaged(name: string): Problem {
  return new Problem(
    'project',
    'This trial is damaged on the disk.',
    name,
    'Close the project and open it again to recover the rest.',
  );
}
