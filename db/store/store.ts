import Database from 'better-sqlite3';
import { step, stepAsync } from '../seam.ts';

export type Value = string | number | bigint | Uint8Array | null;
export type Row = Readonly<Record<string, unknown>>;

/** What is asked of the engine and confirmed at every opening; the first of each pair is the pragma. */
const SAFE: readonly (readonly [string, string | number])[] = [
  ['trusted_schema', 0],
  ['cell_size_check', 1],
  ['mmap_size', 0],
  ['foreign_keys', 1],
  ['busy_timeout', 2000],
  ['synchronous', 2],
];

/** Pages that a copy writes before others have their turn: about 10 ms. */
const PAGES_A_TURN = 1000;

/** Older engines can lose the log of a file that two processes use. */
const LEAST_ENGINE = [3, 51, 3] as const;

/** A connection to one project file: statements kept prepared, each a step that a test can make fail. */
export class Store {
  readonly #db: Database.Database;
  readonly #statements = new Map<string, Database.Statement<Value[], Row>>();

  #stopping = false;

  private constructor(db: Database.Database) {
    this.#db = db;
    try {
      engineIsNew(String(this.get('SELECT sqlite_version() AS version')?.version));
      for (const [name, value] of SAFE) {
        this.pragma(`${name} = ${value}`);
        const got = this.pragma(name);
        // A value that is not kept would leave the file less safe than promised.
        if (got !== undefined && got !== value) throw new Error(`${name} stayed ${String(got)}`);
      }
    } catch (error) {
      db.close();
      throw error;
    }
  }

  /** Opens a file that is there (`make`: one that is not). */
  static open(path: string, how: 'read' | 'write' | 'make'): Store {
    return step(
      `open to ${how}`,
      () => new Store(new Database(path, { readonly: how === 'read', fileMustExist: how !== 'make' })),
    );
  }

  /** Opens the bytes of a file in memory: nothing of it can be changed on disk. */
  static ofBytes(bytes: Uint8Array): Store {
    const own = Buffer.from(bytes);
    // The marks of a logged file; in memory there is no log.
    if (own.length > 19) {
      own[18] = 1;
      own[19] = 1;
    }
    return step('open bytes', () => new Store(new Database(own)));
  }

  /** An empty one in memory. */
  static inMemory(): Store {
    return step('open in memory', () => new Store(new Database(':memory:')));
  }

  /** The whole of it, as the bytes of a file. */
  bytes(): Uint8Array {
    return step('bytes', () => this.#db.serialize());
  }

  pragma(text: string): unknown {
    return step(`pragma ${text}`, () => this.#db.pragma(text, { simple: true }));
  }

  exec(sql: string): void {
    step(sql, () => this.#db.exec(sql));
  }

  run(sql: string, ...values: Value[]): void {
    step(sql, () => this.#prepare(sql).run(...values));
  }

  get(sql: string, ...values: Value[]): Row | undefined {
    return step(sql, () => this.#prepare(sql).get(...values));
  }

  all(sql: string, ...values: Value[]): Row[] {
    return step(sql, () => this.#prepare(sql).all(...values));
  }

  /** Rows one by one; the connection can do nothing else meanwhile. */
  *iterate(sql: string, ...values: Value[]): Generator<Row> {
    const statement = step(sql, () => this.#prepare(sql));
    yield* statement.iterate(...values);
  }

  /** All of `work` or nothing of it. */
  transaction<T>(work: () => T): T {
    try {
      this.exec('BEGIN IMMEDIATE');
      const result = work();
      this.exec('COMMIT');
      return result;
    } catch (error) {
      if (this.#db.inTransaction) this.#db.exec('ROLLBACK');
      throw error;
    }
  }

  /** Writes a whole, consistent copy to `path`, a little at a time. */
  async backup(path: string): Promise<void> {
    this.#stopping = false;
    await stepAsync('backup', async () => {
      await this.#db.backup(path, {
        progress: () => {
          if (this.#stopping) throw new Error('stopped');
          return PAGES_A_TURN;
        },
      });
    });
  }

  /** Gives up a copy that is being written. */
  stopBackup(): void {
    this.#stopping = true;
  }

  get isOpen(): boolean {
    return this.#db.open;
  }

  close(): void {
    this.#statements.clear();
    if (this.#db.open) this.#db.close();
  }

  #prepare(sql: string): Database.Statement<Value[], Row> {
    let statement = this.#statements.get(sql);
    if (!statement) {
      statement = this.#db.prepare<Value[], Row>(sql);
      this.#statements.set(sql, statement);
    }
    return statement;
  }
}

function engineIsNew(version: string): void {
  const parts = version.split('.').map(Number);
  for (const [index, least] of LEAST_ENGINE.entries()) {
    const part = parts[index] ?? 0;
    if (part > least) return;
    if (part < least) throw new Error(`engine ${version}`);
  }
}
