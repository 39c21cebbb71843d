/** "ChWr": marks a file as a project of this program. */
export const APPLICATION_ID = 0x43685772;

/** One step from the layout before it. Numbered from 1 without gaps; never changed once shipped. */
export interface Migration {
  readonly to: number;
  readonly statements: readonly string[];
}

/**
 * The layout of a project file.
 *
 * `chip` holds the chip as it stood at the last folding, one row per thing drawn; `journal` every step
 * since, and those before it that can be undone, each with a hash over the one before it, so that a
 * lost or altered step shows. `seal` holds, per table, how many rows there are and a hash over all,
 * so that a row that vanished shows too. What can be computed again (`cell`) is not sealed.
 */
export const MIGRATIONS: readonly Migration[] = [
  {
    to: 1,
    statements: [
      'CREATE TABLE about (key TEXT NOT NULL PRIMARY KEY, value TEXT NOT NULL) STRICT, WITHOUT ROWID',
      `CREATE TABLE chip (kind TEXT NOT NULL, place INTEGER NOT NULL, body TEXT NOT NULL, hash BLOB NOT NULL, PRIMARY KEY (kind, place)) STRICT, WITHOUT ROWID`,
      `CREATE TABLE journal (seq INTEGER NOT NULL PRIMARY KEY, kind TEXT NOT NULL, of INTEGER, made INTEGER NOT NULL, label TEXT NOT NULL, body BLOB NOT NULL, hash BLOB NOT NULL) STRICT`,
      `CREATE TABLE result (id INTEGER NOT NULL PRIMARY KEY, chip BLOB NOT NULL, settings TEXT NOT NULL, made INTEGER NOT NULL, body BLOB NOT NULL, hash BLOB NOT NULL) STRICT`,
      `CREATE TABLE trial (id INTEGER NOT NULL PRIMARY KEY, name TEXT NOT NULL, made INTEGER NOT NULL, chip BLOB NOT NULL, result INTEGER REFERENCES result (id), hash BLOB NOT NULL) STRICT`,
      `CREATE TABLE cell (key TEXT NOT NULL PRIMARY KEY, used INTEGER NOT NULL, body BLOB NOT NULL, hash BLOB NOT NULL) STRICT`,
      `CREATE TABLE seal (what TEXT NOT NULL PRIMARY KEY, seq INTEGER NOT NULL, rows INTEGER NOT NULL, digest BLOB NOT NULL) STRICT, WITHOUT ROWID`,
    ],
  },
  // Rows of `chip` may be keep-outs from here on: a program that knows none would take them for damage.
  { to: 2, statements: [] },
];

export const VERSION = MIGRATIONS.length;
