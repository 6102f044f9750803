/** What SQLite says, in words said on site; and one transaction, whole or not at all. */
import { fail, type Outcome, type Problem } from '../outcome.ts';
import { type Database, type SqlFault, sqlFault } from './driver.ts';

const WORDS: Readonly<Record<SqlFault, readonly [code: string, what: string, mend: string]>> = {
  busy: [
    'logbook-locked',
    'another program is writing to the logbook and does not let go',
    'wait for it or close it, then try again; nothing was written',
  ],
  'read-only': [
    'logbook-read-only',
    'the logbook cannot be written here',
    'check who owns the file and its folder, or copy it to a disk that can be written',
  ],
  disk: [
    'logbook-disk',
    'the disk did not do what was asked; nothing was written',
    'check the disk and the room on it, then "feedsonde log check"',
  ],
  corrupt: [
    'logbook-damaged',
    'the logbook is damaged: part of it is missing or was overwritten',
    'keep the file as it is; bring back a copy, or start another logbook and import your last export',
  ],
  full: [
    'disk-full',
    'the disk is full; nothing was written',
    'make room and try again; what was logged before is safe',
  ],
  'cannot-open': [
    'logbook-not-openable',
    'the logbook cannot be opened here',
    'its folder must be one that can be written; check who owns it, or copy the logbook elsewhere',
  ],
  'no-database': [
    'logbook-not-one',
    'this file is not a logbook, or was overwritten',
    'check the name; the file was left as it is',
  ],
};

/** The problem that a fault of SQLite is. */
export function faultProblem(fault: SqlFault, file: string): Problem {
  const [code, what, mend] = WORDS[fault];
  return { code, file, what, mend };
}

/** Runs an act on the database; what SQLite says becomes a problem, a bug goes on. */
export function guarded<T>(file: string, act: () => Outcome<T>): Outcome<T> {
  try {
    return act();
  } catch (error) {
    const fault = sqlFault(error);
    if (fault === null) throw error;
    return fail(faultProblem(fault, file));
  }
}

/** Runs an act that writes: everything it did stays, or, where it fails or throws, nothing. */
export function inTransaction<T>(db: Database, act: () => Outcome<T>): Outcome<T> {
  db.exec('BEGIN IMMEDIATE');
  let done: Outcome<T>;
  try {
    done = act();
    db.exec(done.ok ? 'COMMIT' : 'ROLLBACK');
  } catch (error) {
    rollBack(db);
    throw error;
  }
  return done;
}

/** After some faults SQLite has rolled back already, and says so. */
function rollBack(db: Database): void {
  try {
    db.exec('ROLLBACK');
  } catch {
    // The first error is the one to tell.
  }
}
