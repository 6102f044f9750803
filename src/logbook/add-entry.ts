/** Sweeps into the tables. Adding the same sweep twice is one entry. */
import type { Database, SqlValue } from './driver.ts';
import { type EntryKey, entryKey, type NewEntry, type Setup } from './entry.ts';
import { hashOf, pack } from './packing.ts';
import { keepLine } from './stored-lines.ts';

export type Added = {
  readonly key: EntryKey;
  readonly how: 'new' | 'already' | 'replaced';
  /** True when the line is from now on known by another description than before. */
  readonly lineChanged: boolean;
};

/**
 * Adds a sweep; to be run within a transaction.
 *
 * @param replace With it an entry that is already there gets the new line, results and remarks; its original stays.
 */
export function addEntry(db: Database, entry: NewEntry, replace: boolean): Added {
  const hash = hashOf(entry.bytes);
  const key = entryKey(hash, entry.port);
  const there = db.get('SELECT line FROM entry WHERE key = ?', key);
  if (there && !replace) return { key, how: 'already', lineChanged: false };
  const line = keepLine(db, entry.line, entry.knownAs, entry.addedAt);
  keepOriginal(db, entry.bytes, replace);
  const standards = entry.standards && {
    open: keepOriginal(db, entry.standards.open, replace),
    short: keepOriginal(db, entry.standards.short, replace),
    load: keepOriginal(db, entry.standards.load, replace),
  };
  const setup: Setup = { ...entry.setup, standards };
  const row: EntryRow = {
    key,
    original: hash,
    file: entry.file,
    port: entry.port,
    takenAt: entry.takenAt,
    addedAt: entry.addedAt,
    who: entry.who,
    instrument: entry.instrument,
    weather: entry.weather,
    note: entry.note,
    tool: entry.tool,
    faults: entry.faults,
    watches: entry.watches,
    setup: JSON.stringify(setup),
    described: entry.described,
    figures: JSON.stringify(entry.figures),
    document: entry.document,
  };
  const conclusion: SqlValue[] = [row.setup, row.described, row.figures, pack(row.document)];
  const columns: SqlValue[] = [
    line.id,
    hash,
    row.file,
    row.port,
    row.takenAt,
    row.addedAt,
    row.who,
    row.instrument,
    row.weather,
    row.note,
    row.tool,
    row.faults,
    row.watches,
    digestOf(row, entry.line.site, entry.line.name),
  ];
  if (there) {
    db.run(
      `UPDATE entry SET line = ?, original = ?, file = ?, port = ?, taken_at = ?, added_at = ?, who = ?,
        instrument = ?, weather = ?, note = ?, tool = ?, faults = ?, watches = ?, digest = ? WHERE key = ?`,
      ...columns,
      key,
    );
    db.run(
      'UPDATE conclusion SET setup = ?, described = ?, figures = ?, document = ? WHERE entry = ?',
      ...conclusion,
      key,
    );
    // It may have been the baseline of the line that it was logged under by mistake.
    db.run('UPDATE line SET baseline = NULL WHERE baseline = ? AND id <> ?', key, line.id);
  } else {
    db.run(`INSERT INTO entry VALUES (?${', ?'.repeat(columns.length)})`, key, ...columns);
    db.run('INSERT INTO conclusion VALUES (?, ?, ?, ?, ?)', key, ...conclusion);
  }
  return { key, how: there ? 'replaced' : 'new', lineChanged: line.changed };
}

/** Stores bytes once, whoever needs them; `mend` writes them again over what may be damaged. */
function keepOriginal(db: Database, bytes: Uint8Array, mend: boolean): string {
  const hash = hashOf(bytes);
  const there = db.get('SELECT 1 FROM original WHERE hash = ?', hash);
  if (there && !mend) return hash;
  db.run(
    `INSERT INTO original (hash, size, bytes) VALUES (?, ?, ?)
     ON CONFLICT (hash) DO UPDATE SET size = excluded.size, bytes = excluded.bytes`,
    hash,
    bytes.length,
    pack(bytes),
  );
  return hash;
}

/** What the digest of an entry covers: everything that was saved with it. */
export type EntryRow = Pick<
  NewEntry,
  | 'file'
  | 'port'
  | 'takenAt'
  | 'addedAt'
  | 'who'
  | 'instrument'
  | 'weather'
  | 'note'
  | 'tool'
  | 'faults'
  | 'watches'
  | 'described'
  | 'document'
> & { readonly key: EntryKey; readonly original: string; readonly setup: string; readonly figures: string };

/** SHA-256 over an entry, by which `check` knows that nothing of it was touched. */
export function digestOf(row: EntryRow, site: string, name: string): string {
  return hashOf(
    JSON.stringify([
      site,
      name,
      row.key,
      row.original,
      row.file,
      row.port,
      row.takenAt,
      row.addedAt,
      row.who,
      row.instrument,
      row.weather,
      row.note,
      row.tool,
      row.faults,
      row.watches,
      row.setup,
      row.described,
      row.figures,
      row.document,
    ]),
  );
}
