import type { Result } from '../../solver/chip/result.ts';
import { sameBytes, sha256Of } from '../store/hash.ts';
import { pack, unpack } from '../store/pack.ts';
import { sealOfRows, writeSeal } from '../store/seals.ts';
import type { Row, Store } from '../store/store.ts';

/** Results kept beside those that trials hold; the oldest go first. */
const MOST = 64;
const MOST_BYTES = 64 * 1024 * 1024;

function resultHash(chip: Uint8Array, settings: string, made: number, body: Uint8Array): Uint8Array {
  return sha256Of(chip, settings, made, body);
}

/** Whether a row is whole. */
export function resultIsWhole(row: Row): boolean {
  const { chip, settings, made, body, hash } = row;
  return (
    chip instanceof Uint8Array &&
    typeof settings === 'string' &&
    typeof made === 'number' &&
    body instanceof Uint8Array &&
    sameBytes(hash, resultHash(chip, settings, made, body))
  );
}

export function resultOf(row: Row): Result {
  return unpack(row.body as Uint8Array) as Result;
}

/** Adds a result without sealing; returns its id. */
export function insertResult(
  store: Store,
  chip: Uint8Array,
  settings: string,
  result: Result,
  made: number,
): number {
  const body = pack(result);
  store.run(
    'INSERT INTO result (chip, settings, made, body, hash) VALUES (?, ?, ?, ?, ?)',
    chip,
    settings,
    made,
    body,
    resultHash(chip, settings, made, body),
  );
  return Number(store.get('SELECT max(id) AS id FROM result')?.id);
}

/** Keeps the result of a chip (by its hash) solved with `settings`, in place of one before. */
export function keepResult(
  store: Store,
  chip: Uint8Array,
  settings: string,
  result: Result,
  made: number,
): void {
  store.transaction(() => {
    store.run(
      'DELETE FROM result WHERE chip = ? AND settings = ? AND id NOT IN (SELECT result FROM trial WHERE result IS NOT NULL)',
      chip,
      settings,
    );
    insertResult(store, chip, settings, result, made);
    const loose = store.all(
      'SELECT id, octet_length(body) AS size FROM result WHERE id NOT IN (SELECT result FROM trial WHERE result IS NOT NULL) ORDER BY id DESC',
    );
    let bytes = 0;
    for (const [index, row] of loose.entries()) {
      bytes += Number(row.size);
      if (index > 0 && (index >= MOST || bytes > MOST_BYTES))
        store.run('DELETE FROM result WHERE id = ?', Number(row.id));
    }
    writeSeal(store, 'result', sealOfRows(store, 'result'));
  });
}

/** The newest kept result of this chip and these settings, null where there is none that is whole. */
export function findResult(store: Store, chip: Uint8Array, settings: string): Result | null {
  const row = store.get(
    'SELECT * FROM result WHERE chip = ? AND settings = ? ORDER BY id DESC LIMIT 1',
    chip,
    settings,
  );
  return row && resultIsWhole(row) ? resultOf(row) : null;
}
