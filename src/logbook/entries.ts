/** Sweeps out of the tables: lists, one entry, one line's history. */
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import type { Database, Row, SqlValue } from './driver.ts';
import { type Entry, type EntryFigures, type EntryKey, type EntrySummary, shortKey } from './entry.ts';
import { figuresForm, objectForm, readStored, setupForm } from './figures.ts';
import { hashOf, unpack, unpackText } from './packing.ts';

export type ListFilter = {
  readonly lineId?: number | null;
  /** Site by name, whatever its case. */
  readonly site?: string | null;
  /** First and last date, `2026-05-03`, both included. */
  readonly since?: string | null;
  readonly until?: string | null;
};

const SELECT_SUMMARY = `
  SELECT entry.key, entry.line, line.site, line.name, entry.file, entry.port, entry.taken_at, entry.added_at,
    entry.who, entry.instrument, entry.weather, entry.note, entry.tool, entry.faults, entry.watches,
    line.baseline IS entry.key AS baseline
  FROM entry JOIN line ON line.id = entry.line`;

/** Entries in the order in which the sweeps were taken. */
export function listEntries(db: Database, filter: ListFilter): readonly EntrySummary[] {
  const where: string[] = [];
  const values: SqlValue[] = [];
  const only = (condition: string, value: SqlValue | undefined): void => {
    if (value === undefined || value === null) return;
    where.push(condition);
    values.push(value);
  };
  only('entry.line = ?', filter.lineId);
  only('line.site = ? COLLATE NOCASE', filter.site);
  only('substr(entry.taken_at, 1, 10) >= ?', filter.since);
  only('substr(entry.taken_at, 1, 10) <= ?', filter.until);
  const condition = where.length > 0 ? ` WHERE ${where.join(' AND ')}` : '';
  return db.all(`${SELECT_SUMMARY}${condition} ORDER BY entry.taken_at, entry.key`, ...values).map(summaryOf);
}

/** Finds an entry by the beginning of its key, at least four digits of it. */
export function findEntry(db: Database, word: string, file: string): Outcome<EntrySummary> {
  const typed = /^([0-9a-f]{4,64})(-p\d{1,4})?$/u.exec(word.toLowerCase());
  const rows = typed
    ? db.all(
        `${SELECT_SUMMARY} WHERE entry.key >= ? AND entry.key < ? ORDER BY entry.key`,
        typed[1]!,
        `${typed[1]}g`,
      )
    : [];
  const exact = rows.filter((row) => portOf(row) === (typed?.[2] ?? ''));
  const found = exact.length > 0 || typed?.[2] !== undefined ? exact : rows;
  const [only] = found;
  if (found.length === 1 && only) return succeed(summaryOf(only));
  const shown = cleanForDisplay(word, 80);
  if (found.length > 1)
    return fail({
      code: 'entry-ambiguous',
      file,
      what: 'several entries begin like this',
      found: shown,
      mend: `write more of it: ${found
        .slice(0, 4)
        .map((row) => String(row['key']).slice(0, (typed?.[1]?.length ?? 0) + 8))
        .join(', ')}`,
    });
  return fail({
    code: 'entry-missing',
    file,
    what: 'the logbook has no such entry',
    found: shown,
    mend: '"feedsonde log list" shows what it has',
  });
}

/** Everything of one entry but its originals. */
export function readEntry(db: Database, key: EntryKey, file: string): Outcome<Entry> {
  const row = db.get(
    `${SELECT_SUMMARY.replace('FROM entry', ', entry.original, original.size, setup, described_then, figures, document FROM entry')}
     JOIN (SELECT entry AS of, setup, described AS described_then, figures, document FROM conclusion) ON of = entry.key
     JOIN original ON original.hash = entry.original WHERE entry.key = ?`,
    key,
  );
  const setup = row && readStored(String(row['setup']), setupForm);
  const figures = row && readStored(String(row['figures']), figuresForm);
  const document = row ? unpackText(row['document']) : null;
  const readable = document !== null && [document, String(row?.['described_then'])].every(isObjectText);
  if (!row || !setup || !figures || document === null || !readable) return fail(damagedEntry(key, file));
  return succeed({
    ...summaryOf(row),
    hash: String(row['original']),
    sizeBytes: Number(row['size']),
    setup,
    described: String(row['described_then']),
    figures,
    document,
  });
}

function isObjectText(text: string): boolean {
  return readStored(text, objectForm) !== null;
}

/** The bytes of an original as they came. */
export function readOriginal(db: Database, hash: string, file: string): Outcome<Uint8Array> {
  const bytes = unpack(db.get('SELECT bytes FROM original WHERE hash = ?', hash)?.['bytes']);
  return bytes && hashOf(bytes) === hash ? succeed(bytes) : fail(damagedEntry(hash, file));
}

/** What is followed from sweep to sweep, in the order in which they were taken. */
export function lineHistory(
  db: Database,
  lineId: number,
  file: string,
): Outcome<readonly { readonly key: EntryKey; readonly takenAt: string; readonly figures: EntryFigures }[]> {
  const rows = db.all(
    `SELECT key, taken_at, figures FROM entry JOIN conclusion ON conclusion.entry = entry.key
     WHERE line = ? ORDER BY taken_at, key`,
    lineId,
  );
  const history: { key: EntryKey; takenAt: string; figures: EntryFigures }[] = [];
  const problems: Problem[] = [];
  for (const row of rows) {
    const key = String(row['key']);
    const figures = readStored(String(row['figures']), figuresForm);
    if (figures) history.push({ key, takenAt: String(row['taken_at']), figures });
    else problems.push(damagedEntry(key, file));
  }
  return problems.length > 0 ? fail(...problems) : succeed(history);
}

export function damagedEntry(key: EntryKey, file: string): Problem {
  return {
    code: 'entry-damaged',
    file,
    what: `entry ${shortKey(key)} is damaged`,
    mend: 'the others are read as before; log its sweep again with --replace if you still have the file',
  };
}

function portOf(row: Row): string {
  return /-p\d+$/u.exec(String(row['key']))?.[0] ?? '';
}

function summaryOf(row: Row): EntrySummary {
  return {
    key: String(row['key']),
    lineId: Number(row['line']),
    line: { site: String(row['site']), name: String(row['name']) },
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
    baseline: Number(row['baseline']) === 1,
  };
}
