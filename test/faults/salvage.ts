import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { canonical } from '../../db/chip/canonical.ts';
import { salvage } from '../../db/salvage/salvage.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { opening } from './damage.ts';

const PAGE = 4096;

/** Rows of a file by table and what tells them apart, each with the bytes of its hash. */
function rowsOf(bytes: Uint8Array): Map<string, { hash: Buffer; text: string; body: Buffer }> {
  const { store } = opening(bytes);
  if (!store) throw new Error('the file is not whole');
  const rows = new Map<string, { hash: Buffer; text: string; body: Buffer }>();
  for (const [table, sql] of [
    [
      'chip',
      "SELECT kind || ' ' || json_extract(body, '$.id') AS name, body, hash FROM chip WHERE kind = 'channel'",
    ],
    ['result', 'SELECT id AS name, body, hash FROM result'],
    ['trial', 'SELECT name, chip AS body, hash FROM trial'],
    ['cell', 'SELECT key AS name, body, hash FROM cell'],
  ] as const) {
    for (const row of store.all(sql)) {
      const body = Buffer.from(row.body as string);
      rows.set(`${table} ${String(row.name)}`, {
        hash: row.hash as Buffer,
        text: body.toString('base64'),
        body,
      });
    }
  }
  store.close();
  return rows;
}

/** Pages that a row may lie on: that of its hash and every one that holds a piece of its body. */
function pagesOf(bytes: Buffer, row: { hash: Buffer; body: Buffer }): Set<number> {
  const pages = new Set<number>();
  const look = (piece: Buffer): void => {
    for (let at = bytes.indexOf(piece); at >= 0; at = bytes.indexOf(piece, at + 1)) {
      pages.add(Math.floor(at / PAGE));
      pages.add(Math.floor((at + piece.length - 1) / PAGE));
    }
  };
  look(row.hash);
  for (let at = 0; at < row.body.length; at += 200) look(row.body.subarray(at, at + 32));
  return pages;
}

export interface SalvageCount {
  recovered: number;
  refused: number;
  /** Rows that lay on no broken page and are not in what was recovered. */
  rowsLost: string[];
  /** Chips that are neither as they were nor said to have lost something. */
  silent: number;
}

/** Breaks every page of a file in turn, recovers what can be read, and looks for rows that need not be lost. */
export async function salvageEveryPage(bytes: Buffer, folder: string): Promise<SalvageCount> {
  const before = rowsOf(bytes);
  const whole = opening(bytes);
  const chip = canonical(whole.content!.chip);
  whole.store!.close();
  const lying = new Map([...before].map(([name, row]) => [name, pagesOf(bytes, row)]));
  const count: SalvageCount = { recovered: 0, refused: 0, rowsLost: [], silent: 0 };
  for (let page = 0; page < bytes.length / PAGE; page += 1) {
    const broken = Buffer.from(bytes);
    // The file still says whose it is: where it does not, it is no project of ours and not opened.
    broken.fill(0xa5, page * PAGE + (page === 0 ? 100 : 0), (page + 1) * PAGE);
    const from = join(folder, `broken-${page}.chw`);
    const to = join(folder, `recovered-${page}.chw`);
    writeFileSync(from, broken);
    let report: string[];
    try {
      report = await salvage(from, to, 'test');
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
      count.refused += 1;
      count.rowsLost.push(`everything with page ${page}`);
      continue;
    }
    count.recovered += 1;
    if (!readFileSync(from).equals(broken)) throw new Error('the damaged file was written to');
    const recovered = readFileSync(to);
    const after = rowsOf(recovered);
    for (const [name, row] of before) {
      if (!lying.get(name)!.has(page) && after.get(name)?.text !== row.text)
        count.rowsLost.push(`${name} with page ${page}`);
    }
    const got = opening(recovered);
    if (canonical(got.content!.chip) !== chip && report.length < 2) count.silent += 1;
    got.store!.close();
  }
  return count;
}
