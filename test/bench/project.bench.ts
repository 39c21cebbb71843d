import { mkdirSync, mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import Database from 'better-sqlite3';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import { createClient } from '../../main/contract/client.ts';
import { loopbackTransport } from '../../main/contract/loopback.ts';
import { startLoopbackHost } from '../../main/loopback/host.ts';
import { createSessions } from '../../main/session/sessions.ts';
import { madeUpChip, random, randomEdit } from '../faults/random.ts';
import { madeUpResult } from '../faults/sample.ts';
import type { BenchRow } from './row.ts';

const at = (times: readonly number[], share: number): number =>
  [...times].sort((a, b) => a - b)[Math.min(times.length - 1, Math.floor(share * times.length))]!;

/** Acknowledged edits on the disk, each beside a bare commit of one row of the same length. */
async function edits(folder: string): Promise<BenchRow[]> {
  const path = join(folder, 'edits.chw');
  makeFile(path, madeUpChip(100), { program: 'bench' });
  const { project } = await openForWork(path, folder);
  const bare = new Database(join(folder, 'bare.db'));
  bare.pragma('journal_mode = WAL');
  bare.pragma('synchronous = FULL');
  bare.exec('CREATE TABLE row (id INTEGER PRIMARY KEY, body BLOB) STRICT');
  const insert = bare.prepare('INSERT INTO row (body) VALUES (?)');
  const body = Buffer.alloc(571, 7);
  const next = random(1);
  const own: number[] = [];
  const plain: number[] = [];
  const runs = 2_000;
  for (let run = 0; run < runs; run += 1) {
    const edit = randomEdit(project.chip, next);
    const start = performance.now();
    project.edit(edit, project.position.seq);
    const middle = performance.now();
    insert.run(body);
    own.push(middle - start);
    plain.push(performance.now() - middle);
  }
  project.close();
  bare.close();
  const against = 'a bare commit of one row';
  return [
    { what: 'acknowledged edit, median', median: at(own, 0.5), unit: 'ms', runs, target: 1 },
    { what: 'acknowledged edit, 99 in 100 within', median: at(own, 0.99), unit: 'ms', runs, target: 10 },
    {
      what: 'acknowledged edit',
      median: at(own, 0.5),
      unit: 'ms',
      runs,
      against,
      ratio: at(own, 0.5) / at(plain, 0.5),
      target: 2,
    },
  ];
}

/** Opening a project with ten thousand steps to undo, and one of 50 MB, with everything checked. */
async function openings(folder: string): Promise<BenchRow[]> {
  const open = async (path: string): Promise<number> => {
    const times: number[] = [];
    for (let run = 0; run < 7; run += 1) {
      const start = performance.now();
      const { project } = await openForWork(path, folder);
      times.push(performance.now() - start);
      project.close();
    }
    return at(times, 0.5);
  };
  const many = join(folder, 'steps.chw');
  makeFile(many, madeUpChip(100), { program: 'bench' });
  const first = await openForWork(many, folder);
  const next = random(2);
  for (let step = 0; step < 10_000; step += 1)
    first.project.edit(randomEdit(first.project.chip, next), first.project.position.seq);
  first.project.close();

  const large = join(folder, 'large.chw');
  makeFile(large, madeUpChip(2_000), { program: 'bench' });
  const second = await openForWork(large, folder);
  for (let cell = 0; cell < 480; cell += 1)
    second.project.putCells([{ key: `cell ${cell}`, bytes: new Uint8Array(104_000).fill(cell) }]);
  second.project.close();
  const size = (statSync(large).size / 1e6).toFixed(0);
  return [
    {
      what: 'reopening with 10,000 steps to undo',
      median: await open(many),
      unit: 'ms',
      runs: 7,
      target: 300,
    },
    {
      what: `opening ${size} MB with every row checked`,
      median: await open(large),
      unit: 'ms',
      runs: 7,
      target: 300,
    },
  ];
}

/** A solved cell out of ten thousand. */
async function lookUps(folder: string): Promise<BenchRow[]> {
  const path = join(folder, 'cells.chw');
  makeFile(path, madeUpChip(10), { program: 'bench' });
  const { project } = await openForWork(path, folder);
  for (let block = 0; block < 20; block += 1) {
    const entry = (index: number) => ({ key: `cell ${block * 500 + index}`, bytes: new Uint8Array(2_000) });
    project.putCells(Array.from({ length: 500 }, (_, index) => entry(index)));
  }
  const next = random(3);
  const times: number[] = [];
  const runs = 5_000;
  for (let run = 0; run < runs; run += 1) {
    const key = `cell ${Math.floor(next() * 10_000)}`;
    const start = performance.now();
    if (project.getCells([key]).length !== 1) throw new Error(`${key} is not there`);
    times.push(performance.now() - start);
  }
  project.close();
  return [
    { what: 'look-up among 10,000 solved cells', median: at(times, 0.5), unit: 'ms', runs, target: 0.2 },
  ];
}

/** The result of a chip of 100 channels, asked for by a page and answered by the browser host. */
async function roundTrip(folder: string): Promise<BenchRow[]> {
  const page = join(folder, 'page');
  mkdirSync(page);
  writeFileSync(join(page, 'index.html'), '');
  const userData = join(folder, 'data');
  const assets = resolve(import.meta.dirname, '../../assets');
  const sessions = createSessions({ host: 'browser', dialogs: false, userData, assets, version: '0' });
  const host = await startLoopbackHost({ sessions, page });
  try {
    const first = await fetch(host.address, { redirect: 'manual' });
    const cookie = first.headers.get('set-cookie')!.split(';')[0]!;
    const headers = { cookie, origin: host.origin };
    const client = createClient(loopbackTransport({ origin: host.origin, window: 'window-bench', headers }));
    const { seq } = await client.call('project.new', { chip: madeUpChip(100) });
    await client.call('results.keep', { seq, settings: 'bench', result: madeUpResult(100) });
    const times: number[] = [];
    const runs = 300;
    for (let run = 0; run < runs; run += 1) {
      const start = performance.now();
      const { result } = await client.call('results.get', { settings: 'bench' });
      if (result?.channels.length !== 100) throw new Error('not the result');
      times.push(performance.now() - start);
    }
    client.close();
    return [
      {
        what: 'loopback round trip of a 100-channel result',
        median: at(times, 0.5),
        unit: 'ms',
        runs,
        target: 3,
      },
    ];
  } finally {
    await sessions.close();
    await host.close();
  }
}

export default async function projectBench(): Promise<BenchRow[]> {
  // On the disk itself: a folder in memory would flatter.
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-bench-'));
  try {
    return [
      ...(await edits(folder)),
      ...(await openings(folder)),
      ...(await lookUps(folder)),
      ...(await roundTrip(folder)),
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
