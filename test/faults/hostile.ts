import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { deflateRawSync } from 'node:zlib';
import Database from 'better-sqlite3';
import { canonical } from '../../db/chip/canonical.ts';
import { chipDigest, partHash } from '../../db/chip/parts.ts';
import { stepHash } from '../../db/journal/journal.ts';
import { sha256Of } from '../../db/store/hash.ts';
import { opening, type Verdict } from './damage.ts';
import { random, whole } from './random.ts';

const PAGE = 4096;

/** Harms a file as a mind would that wants something to break: sizes, counts, pointers, text of declarations. */
export function mutated(bytes: Uint8Array, next: () => number): Buffer {
  const copy = Buffer.from(bytes);
  const rounds = 1 + whole(next, 4);
  for (let round = 0; round < rounds; round += 1) {
    const at = whole(next, copy.length - 8);
    switch (whole(next, 8)) {
      case 0: // a size or a count as large as it can be
        copy.writeUInt32BE(next() < 0.5 ? 0xffffffff : 0x7fffffff, at);
        break;
      case 1: // the head of the file
        copy[16 + whole(next, 84)] = whole(next, 256);
        break;
      case 2: // the head of a page: kind, counts, where cells begin
        copy[whole(next, copy.length / PAGE) * PAGE + whole(next, 12)] = whole(next, 256);
        break;
      case 3: // where a cell lies
        copy.writeUInt16BE(
          whole(next, 65_536),
          whole(next, copy.length / PAGE) * PAGE + 8 + 2 * whole(next, 20),
        );
        break;
      case 4: // a page of nothing
        copy.fill(0, Math.floor(at / PAGE) * PAGE, Math.floor(at / PAGE) * PAGE + PAGE);
        break;
      case 5: // a stretch copied elsewhere
        copy.copy(copy, whole(next, copy.length - 600), at, Math.min(copy.length, at + whole(next, 500)));
        break;
      case 6: // noise
        for (let byte = 0; byte < 8; byte += 1) copy[at + byte] = whole(next, 256);
        break;
      default: // the declarations
        copy[100 + whole(next, 2000)] = whole(next, 256);
    }
  }
  return copy;
}

export interface HostileCount {
  opened: number;
  refused: number;
  /** Processor time of the slowest, ms: other work on the machine does not count. */
  slowest: number;
}

/** Opens `times` mutated files, each of which must come to a verdict. */
export function openMutated(bytes: Uint8Array, times: number, seed: number): HostileCount {
  const next = random(seed);
  const count: HostileCount = { opened: 0, refused: 0, slowest: 0 };
  for (let time = 0; time < times; time += 1) {
    const start = process.cpuUsage();
    const { verdict, store } = opening(mutated(bytes, next));
    store?.close();
    if (verdict === 'whole') count.opened += 1;
    else count.refused += 1;
    const { user, system } = process.cpuUsage(start);
    count.slowest = Math.max(count.slowest, (user + system) / 1000);
  }
  return count;
}

/** A file changed by means of the engine itself, with all hashes made right again where `seal` says so. */
export interface HandMade {
  readonly name: string;
  readonly change: (db: Database.Database) => void;
  readonly expect: readonly Verdict[];
}

/** Makes the chip's rows and the seal agree with whatever was put into them. */
function reseal(db: Database.Database): void {
  const rows = db.prepare('SELECT kind, place, body FROM chip').all() as {
    kind: string;
    place: number;
    body: string;
  }[];
  for (const row of rows)
    db.prepare('UPDATE chip SET hash = ? WHERE kind = ? AND place = ?').run(
      partHash(row.kind, row.body),
      row.kind,
      row.place,
    );
  const order = ['head', 'layer', 'channel', 'chamber', 'via', 'port', 'target', 'limit'];
  rows.sort((a, b) => order.indexOf(a.kind) - order.indexOf(b.kind) || a.place - b.place);
  const digest = chipDigest(rows.map((row) => partHash(row.kind, row.body)));
  db.prepare("UPDATE seal SET rows = ?, digest = ? WHERE what = 'chip'").run(rows.length, digest);
}

function setPart(db: Database.Database, kind: string, place: number, body: string): void {
  db.prepare('INSERT OR REPLACE INTO chip (kind, place, body, hash) VALUES (?, ?, ?, ?)').run(
    kind,
    place,
    body,
    Buffer.alloc(32),
  );
  reseal(db);
}

/** Puts a step with a right hash after the last one. */
function addStep(db: Database.Database, kind: string, of: number | null, body: Buffer): void {
  const last = db.prepare('SELECT seq, hash FROM journal ORDER BY seq DESC LIMIT 1').get() as {
    seq: number;
    hash: Buffer;
  };
  const step = { seq: last.seq + 1, kind: kind as 'edit', of, made: 1, label: 'odd', body };
  db.prepare('INSERT INTO journal VALUES (?, ?, ?, ?, ?, ?, ?)').run(
    step.seq,
    kind,
    of,
    1,
    'odd',
    body,
    stepHash(last.hash, step),
  );
}

const deep = (levels: number): string => `${'['.repeat(levels)}${']'.repeat(levels)}`;
const plain = (text: string): Buffer => Buffer.concat([Buffer.from([0]), Buffer.from(text)]);
const HEAD = {
  name: 'x',
  note: '',
  lengthUnit: 'um',
  outline: { width: 1e6, height: 1e6 },
  fluid: { name: 'water', temperature: 298 },
};

export const HAND_MADE: readonly HandMade[] = [
  {
    name: 'a trigger',
    change: (db) => db.exec('CREATE TRIGGER t AFTER INSERT ON journal BEGIN DELETE FROM chip; END'),
    expect: ['damaged'],
  },
  { name: 'a view', change: (db) => db.exec('CREATE VIEW v AS SELECT * FROM chip'), expect: ['damaged'] },
  {
    name: 'a view in the place of a table',
    change: (db) =>
      db.exec('DROP TABLE cell; CREATE VIEW cell AS SELECT 1 AS key, 2 AS used, 3 AS body, 4 AS hash'),
    expect: ['damaged'],
  },
  { name: 'another table', change: (db) => db.exec('CREATE TABLE more (a)'), expect: ['damaged'] },
  {
    name: 'another column',
    change: (db) => db.exec('ALTER TABLE cell ADD COLUMN more TEXT'),
    expect: ['damaged'],
  },
  { name: 'an index', change: (db) => db.exec('CREATE INDEX i ON result (settings)'), expect: ['damaged'] },
  { name: 'a table less', change: (db) => db.exec('DROP TABLE trial'), expect: ['damaged'] },
  {
    name: 'a table without its types',
    change: (db) => db.exec('DROP TABLE about; CREATE TABLE about (key, value)'),
    expect: ['damaged'],
  },
  { name: 'no parts', change: (db) => db.exec('DELETE FROM chip'), expect: ['damaged'] },
  { name: 'no steps', change: (db) => db.exec('DELETE FROM journal'), expect: ['damaged'] },
  { name: 'no seals', change: (db) => db.exec('DELETE FROM seal'), expect: ['damaged'] },
  { name: 'a foreign mark', change: (db) => db.pragma('application_id = 1'), expect: ['refused'] },
  { name: 'a newer form', change: (db) => db.pragma('user_version = 99'), expect: ['refused'] },
  { name: 'a form below the first', change: (db) => db.pragma('user_version = 0'), expect: ['refused'] },
  {
    name: 'a part that is no JSON',
    change: (db) => setPart(db, 'channel', 0, 'nonsense'),
    expect: ['damaged'],
  },
  {
    name: 'a part nested without end',
    change: (db) => setPart(db, 'channel', 0, deep(200_000)),
    expect: ['refused', 'damaged'],
  },
  {
    name: 'a head nested without end',
    change: (db) => setPart(db, 'head', 0, `{"name":${deep(100_000)}}`),
    expect: ['refused', 'damaged'],
  },
  {
    name: 'a part of the wrong type',
    change: (db) =>
      setPart(db, 'channel', 0, '{"id":7,"layer":[],"path":{},"width":"wide","bendRadius":null}'),
    expect: ['refused'],
  },
  {
    name: 'keys that are none',
    change: (db) => setPart(db, 'channel', 0, '{"__proto__":{"id":"a"},"constructor":1}'),
    expect: ['refused'],
  },
  {
    name: 'coordinates beyond measure',
    change: (db) =>
      setPart(
        db,
        'port',
        0,
        '{"id":"in","layer":"flow","at":[1e300,-1e300],"diameter":0,"drive":{"kind":"flow","flow":1},"tubing":[]}',
      ),
    expect: ['refused'],
  },
  {
    name: 'an id that is a path',
    change: (db) =>
      setPart(
        db,
        'port',
        0,
        '{"id":"../../../etc/passwd","layer":"flow","at":[1,1],"diameter":0,"drive":{"kind":"closed"},"tubing":[]}',
      ),
    expect: ['refused', 'whole'],
  },
  {
    name: 'a huge part',
    change: (db) => setPart(db, 'head', 0, JSON.stringify({ ...HEAD, note: 'x'.repeat(40_000_000) })),
    expect: ['damaged'],
  },
  {
    name: 'a long note',
    change: (db) => setPart(db, 'head', 0, canonical({ ...HEAD, note: 'x'.repeat(1_000_000) })),
    expect: ['refused'],
  },
  {
    name: 'more layers than there may be',
    change: (db) => {
      for (let place = 1; place < 300; place += 1)
        db.prepare('INSERT INTO chip VALUES (?, ?, ?, ?)').run(
          'layer',
          place,
          `{"id":"l${place}","depth":1000,"profile":{"kind":"rectangle"},"fillet":0}`,
          Buffer.alloc(32),
        );
      reseal(db);
    },
    expect: ['refused'],
  },
  {
    name: 'a step that unfolds without end',
    change: (db) =>
      addStep(db, 'edit', null, Buffer.concat([Buffer.from([1]), deflateRawSync(Buffer.alloc(400_000_000))])),
    expect: ['damaged'],
  },
  {
    name: 'a step that is no changes',
    change: (db) => addStep(db, 'edit', null, plain('{"forward":1}')),
    expect: ['damaged'],
  },
  {
    name: 'a step with strange changes',
    change: (db) =>
      addStep(
        db,
        'edit',
        null,
        plain('{"forward":[{"kind":"put","list":"__proto__","id":"x","part":{}}],"backward":[]}'),
      ),
    expect: ['refused'],
  },
  {
    name: 'a step nested without end',
    change: (db) => addStep(db, 'edit', null, plain(`{"forward":${deep(100_000)},"backward":[]}`)),
    expect: ['refused', 'damaged'],
  },
  {
    name: 'an undo of what is not there',
    change: (db) => addStep(db, 'undo', 4_000_000, plain('')),
    expect: ['damaged'],
  },
  {
    name: 'a redo of what was not undone',
    change: (db) => addStep(db, 'redo', 2, plain('')),
    expect: ['damaged'],
  },
  {
    name: 'a second beginning',
    change: (db) => addStep(db, 'start', null, plain('{}')),
    expect: ['damaged'],
  },
  {
    name: 'a result of a trial that is not there',
    change: (db) => {
      db.pragma('foreign_keys = OFF');
      db.exec('DELETE FROM result');
    },
    expect: ['damaged'],
  },
  {
    name: 'twenty thousand cells of nothing',
    change: (db) => {
      const put = db.prepare('INSERT INTO cell VALUES (?, 1, ?, ?)');
      db.transaction(() => {
        for (let index = 0; index < 20_000; index += 1)
          put.run(`x${index}`, Buffer.alloc(0), sha256Of(`x${index}`, Buffer.alloc(0)));
      })();
    },
    expect: ['whole'],
  },
];

/** The bytes of a sample changed by hand. */
export function handMade(bytes: Uint8Array, made: HandMade, folder: string): Buffer {
  const path = join(folder, 'hand-made.chw');
  writeFileSync(path, bytes);
  const db = new Database(path);
  try {
    made.change(db);
    db.pragma('wal_checkpoint(TRUNCATE)');
  } finally {
    db.close();
  }
  return readFileSync(path);
}
