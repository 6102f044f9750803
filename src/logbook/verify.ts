/** Whether everything in a logbook is still what was saved. */

import { digestOf } from './add-entry.ts';
import { type Database, type Row, sqlFault } from './driver.ts';
import type { EntryKey, LineName } from './entry.ts';
import { figuresForm, readStored, setupForm } from './figures.ts';
import { hashOf, unpack, unpackText } from './packing.ts';

export type Verification = {
  readonly entries: number;
  readonly originals: number;
  /** Entries that are not what was saved, with what is wrong of each. */
  readonly damaged: readonly { readonly key: EntryKey; readonly line: LineName; readonly what: string }[];
  /** What the database says of its own structure; empty when it is whole. */
  readonly structure: readonly string[];
};

/** Reads every byte of the logbook and compares it with the hashes taken when it was saved. */
export function verifyAll(db: Database): Verification {
  const structure = db
    .all('PRAGMA integrity_check')
    .map((row) => String(row['integrity_check']))
    .filter((line) => line !== 'ok')
    .concat(
      db.all('PRAGMA foreign_key_check').map((row) => `${row['table']} row ${row['rowid']} hangs loose`),
    );
  const hashes = db.all('SELECT hash FROM original').map((row) => String(row['hash']));
  const whole = new Set(hashes.filter((hash) => originalIsWhole(db, hash)));
  const damaged: Verification['damaged'][number][] = [];
  const keys = db.all('SELECT key FROM entry ORDER BY key').map((row) => String(row['key']));
  for (const key of keys) {
    const row = orDamage(() => db.get(SELECT_ALL, key));
    const line = { site: String(row?.['site'] ?? ''), name: String(row?.['name'] ?? '') };
    for (const what of row ? complaintsOf(row, line, whole) : ['it cannot be read'])
      damaged.push({ key, line, what });
  }
  return { entries: keys.length, originals: hashes.length, damaged, structure };
}

const SELECT_ALL = `
  SELECT entry.*, site, name, setup, conclusion.described, figures, document FROM entry
  JOIN line ON line.id = entry.line LEFT JOIN conclusion ON conclusion.entry = entry.key
  WHERE entry.key = ?`;

function originalIsWhole(db: Database, hash: string): boolean {
  const bytes = unpack(orDamage(() => db.get('SELECT bytes FROM original WHERE hash = ?', hash))?.['bytes']);
  return bytes !== null && hashOf(bytes) === hash;
}

/** One row, or nothing where its pages are damaged: the others are still worth reading. */
function orDamage(read: () => Row | undefined): Row | undefined {
  try {
    return read();
  } catch (error) {
    if (sqlFault(error) === null) throw error;
    return undefined;
  }
}

function complaintsOf(row: Row, line: LineName, whole: ReadonlySet<string>): string[] {
  const setup = readStored(String(row['setup']), setupForm);
  const document = unpackText(row['document']);
  const standards = setup?.standards ? Object.values(setup.standards) : [];
  if (!setup || !readStored(String(row['figures']), figuresForm) || document === null)
    return ['its results cannot be read'];
  const complaints: string[] = [];
  if ([String(row['original']), ...standards].some((hash) => !whole.has(hash)))
    complaints.push('the bytes of its sweep or standards are not those that were saved');
  const digest = digestOf(
    {
      key: String(row['key']),
      original: String(row['original']),
      file: String(row['file']),
      port: Number(row['port']),
      takenAt: String(row['taken_at']),
      addedAt: String(row['added_at']),
      who: String(row['who']),
      instrument: String(row['instrument']),
      weather: String(row['weather']),
      note: String(row['note']),
      tool: String(row['tool']),
      faults: Number(row['faults']),
      watches: Number(row['watches']),
      setup: String(row['setup']),
      described: String(row['described']),
      figures: String(row['figures']),
      document,
    },
    line.site,
    line.name,
  );
  if (digest !== row['digest']) complaints.push('what it says is not what was saved');
  return complaints;
}
