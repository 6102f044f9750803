/** The tables of a logbook, as a list of migrations: the number of those done is the version of the file. */
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import type { Database } from './driver.ts';
import { inTransaction } from './trouble.ts';

/** Marks a SQLite file as a logbook: "FSLB". */
export const APPLICATION_ID = 0x4653_4c42;

/**
 * Each takes the file from the version before it to its own; what has shipped is never changed.
 *
 * `line`: what is known by a name, with the text of its line file. `original`: bytes as they came (gzip), by SHA-256.
 * `entry`: one sweep; the columns that lists ask for. `conclusion`: what is larger and read one at a time, or by line.
 */
const MIGRATIONS: readonly string[] = [
  `
  CREATE TABLE line (
    id INTEGER PRIMARY KEY,
    site TEXT NOT NULL,
    name TEXT NOT NULL,
    described TEXT NOT NULL,
    changed_at TEXT NOT NULL,
    baseline TEXT REFERENCES entry (key),
    UNIQUE (site, name)
  ) STRICT;
  CREATE TABLE original (
    hash TEXT PRIMARY KEY,
    size INTEGER NOT NULL,
    bytes BLOB NOT NULL
  ) STRICT;
  CREATE TABLE entry (
    key TEXT PRIMARY KEY,
    line INTEGER NOT NULL REFERENCES line (id),
    original TEXT NOT NULL REFERENCES original (hash),
    file TEXT NOT NULL,
    port INTEGER NOT NULL,
    taken_at TEXT NOT NULL,
    added_at TEXT NOT NULL,
    who TEXT NOT NULL,
    instrument TEXT NOT NULL,
    weather TEXT NOT NULL,
    note TEXT NOT NULL,
    tool TEXT NOT NULL,
    faults INTEGER NOT NULL,
    watches INTEGER NOT NULL,
    digest TEXT NOT NULL
  ) STRICT;
  CREATE INDEX entry_by_line ON entry (line, taken_at, key);
  CREATE INDEX entry_by_date ON entry (taken_at, key);
  CREATE TABLE conclusion (
    entry TEXT PRIMARY KEY REFERENCES entry (key),
    setup TEXT NOT NULL,
    described TEXT NOT NULL,
    figures TEXT NOT NULL,
    document BLOB NOT NULL
  ) STRICT;
  `,
];

/** Version of the files that this program writes. */
export const SCHEMA_VERSION = MIGRATIONS.length;

/**
 * Brings a database up to this program's version, or refuses one that is ahead of it or is something else.
 *
 * @param file Name for the problems.
 * @param fresh True for a file that was made for this a moment ago; any other without the mark is not ours.
 */
export function migrate(db: Database, file: string, fresh: boolean): Outcome<null> {
  const wrong = fresh ? null : markProblem(applicationId(db), version(db), file);
  if (wrong) return fail(wrong);
  if (version(db) === SCHEMA_VERSION) return succeed(null);
  return inTransaction(db, () => {
    // Another program may have been faster.
    const from = version(db);
    const late = fresh ? null : markProblem(applicationId(db), from, file);
    if (late) return fail(late);
    for (const migration of MIGRATIONS.slice(from)) db.exec(migration);
    db.exec(`PRAGMA application_id = ${APPLICATION_ID}`);
    db.exec(`PRAGMA user_version = ${SCHEMA_VERSION}`);
    return succeed(null);
  });
}

/** The problem with a SQLite file of this mark and version; null when there is none. */
export function markProblem(id: number, fileVersion: number, file: string): Problem | null {
  if (id !== APPLICATION_ID)
    return {
      code: 'logbook-not-one',
      file,
      what: 'this is the database of another program, not a logbook',
      mend: 'check the name; the file was left as it is',
    };
  if (fileVersion > SCHEMA_VERSION)
    return {
      code: 'logbook-newer',
      file,
      what: `the logbook was written by a newer feedsonde (its version ${fileVersion}, known here ${SCHEMA_VERSION})`,
      mend: 'update feedsonde on this machine; the logbook was left as it is',
    };
  return null;
}

function applicationId(db: Database): number {
  return Number(db.get('PRAGMA application_id')?.['application_id'] ?? 0);
}

function version(db: Database): number {
  return Number(db.get('PRAGMA user_version')?.['user_version'] ?? 0);
}
