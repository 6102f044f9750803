/** A logbook that is open: every call gives an outcome, and what SQLite says becomes a problem. */
import { fail, type Outcome, succeed } from '../outcome.ts';
import { type Added, addEntry } from './add-entry.ts';
import { type Database, type DriverName, findDriver } from './driver.ts';
import { findEntry, type ListFilter, lineHistory, listEntries, readEntry, readOriginal } from './entries.ts';
import type { Entry, EntryKey, EntrySummary, LineName, NewEntry, StoredLine } from './entry.ts';
import { migrate } from './schema.ts';
import { chooseBaseline, findStoredLine, keepLine, storedLines } from './stored-lines.ts';
import type { Moment } from './trend.ts';
import { guarded, inTransaction } from './trouble.ts';
import { type Verification, verifyAll } from './verify.ts';

/** What comes from another logbook. */
export type Merge = {
  readonly lines: readonly (LineName & { readonly described: string; readonly baseline: EntryKey | null })[];
  /** Read one at a time, while the transaction is open; the first failure undoes all. */
  readonly entries: Iterable<Outcome<NewEntry>>;
  readonly mergedAt: string;
};

export type Merged = { readonly added: number; readonly already: number };

export type Logbook = {
  /** Name for people. */
  readonly file: string;
  readonly driver: DriverName;
  /** Saves a sweep; once this has succeeded it is on the disk. */
  add(entry: NewEntry, options: { readonly replace: boolean; readonly baseline: boolean }): Outcome<Added>;
  /** Takes in what another logbook has and this one has not; everything or nothing. */
  merge(merge: Merge): Outcome<Merged>;
  list(filter: ListFilter): Outcome<readonly EntrySummary[]>;
  /** Finds an entry by the beginning of its key. */
  find(word: string): Outcome<EntrySummary>;
  entry(key: EntryKey): Outcome<Entry>;
  original(hash: string): Outcome<Uint8Array>;
  history(lineId: number): Outcome<readonly Moment[]>;
  lines(): Outcome<readonly StoredLine[]>;
  findLine(name: string): Outcome<StoredLine>;
  /** Stores a line under its name. */
  keepLine(line: LineName, described: string, changedAt: string): Outcome<{ readonly changed: boolean }>;
  /** Chooses the sweep that later ones of its line are compared with. */
  setBaseline(lineId: number, key: EntryKey): Outcome<null>;
  check(): Outcome<Verification>;
  close(): void;
};

/** How long a writer waits for another before it gives up, ms. */
const PATIENCE_MS = 10_000;

/**
 * Opens a logbook.
 *
 * Write-ahead log with full sync: what was reported saved survives a kill and a power cut. The write-ahead log needs
 * shared memory beside the file, so a logbook belongs on a disk of this machine, not on a network share.
 *
 * @param path Of the file, which exists.
 * @param options.file Name for people.
 * @param options.fresh Makes a logbook of an empty file.
 * @param options.patienceMs How long to wait for another program that writes; default 10 s.
 * @returns The logbook; or why it cannot be opened. The file is then as it was.
 */
export function openLogbook(
  path: string,
  options: { readonly file: string; readonly fresh?: boolean; readonly patienceMs?: number },
): Outcome<Logbook> {
  const { file, fresh = false, patienceMs = PATIENCE_MS } = options;
  const driver = findDriver();
  if (!driver) return fail(noDriverProblem(file));
  return guarded(file, () => {
    const db = driver.open(path);
    try {
      db.exec(`PRAGMA busy_timeout = ${patienceMs}`);
      db.exec('PRAGMA synchronous = FULL');
      db.exec('PRAGMA foreign_keys = ON');
      const migrated = migrate(db, file, fresh);
      if (!migrated.ok) {
        db.close();
        return migrated;
      }
      if (fresh) db.exec('PRAGMA journal_mode = WAL');
    } catch (error) {
      db.close();
      throw error;
    }
    return succeed(logbookOf(db, file));
  });
}

/** What to say where there is no SQLite at all; everything but the logbook works without. */
export function noDriverProblem(file: string) {
  return {
    code: 'logbook-no-sqlite',
    file,
    what: `the logbook needs SQLite, and this installation has none (Node ${process.versions.node})`,
    mend:
      'run feedsonde with Node 22.13 or newer, which brings it, or "npm install better-sqlite3" where a C++ ' +
      'compiler is there; everything but the logbook works as it is',
  };
}

function logbookOf(db: Database, file: string): Logbook {
  const reading = <T>(act: () => Outcome<T>): Outcome<T> => guarded(file, act);
  const writing = <T>(act: () => Outcome<T>): Outcome<T> => guarded(file, () => inTransaction(db, act));
  return {
    file,
    driver: db.driver,
    add: (entry, { replace, baseline }) =>
      writing(() => {
        const added = addEntry(db, entry, replace);
        if (baseline) {
          const line = db.get('SELECT line FROM entry WHERE key = ?', added.key)?.['line'];
          chooseBaseline(db, Number(line), added.key);
        }
        return succeed(added);
      }),
    merge: (merge) => writing(() => mergeInto(db, merge)),
    list: (filter) => reading(() => succeed(listEntries(db, filter))),
    find: (word) => reading(() => findEntry(db, word, file)),
    entry: (key) => reading(() => readEntry(db, key, file)),
    original: (hash) => reading(() => readOriginal(db, hash, file)),
    history: (lineId) => reading(() => lineHistory(db, lineId, file)),
    lines: () => reading(() => succeed(storedLines(db))),
    findLine: (name) => reading(() => findStoredLine(db, name, file)),
    keepLine: (line, described, changedAt) =>
      writing(() => succeed({ changed: keepLine(db, line, described, changedAt).changed })),
    setBaseline: (lineId, key) =>
      writing(() => {
        chooseBaseline(db, lineId, key);
        return succeed(null);
      }),
    check: () => reading(() => succeed(verifyAll(db))),
    close: () => db.close(),
  };
}

/** A line that is known here keeps its description and its baseline. */
function mergeInto(db: Database, { lines, entries, mergedAt }: Merge): Outcome<Merged> {
  let added = 0;
  let already = 0;
  for (const entry of entries) {
    if (!entry.ok) return entry;
    if (addEntry(db, entry.value, false).how === 'new') added++;
    else already++;
  }
  for (const line of lines) {
    const known = db.get(
      'SELECT described, baseline FROM line WHERE site = ? AND name = ?',
      line.site,
      line.name,
    );
    const { id } = keepLine(db, line, known?.['described'] ? null : line.described, mergedAt);
    const there =
      line.baseline && db.get('SELECT 1 FROM entry WHERE key = ? AND line = ?', line.baseline, id);
    if (there && (known?.['baseline'] ?? null) === null) chooseBaseline(db, id, line.baseline);
  }
  return succeed({ added, already });
}
