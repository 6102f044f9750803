/** Lines by name, so that later sweeps need only the name. */
import { nearestWords, orList } from '../line/nearest-word.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import type { Database, Row } from './driver.ts';
import type { EntryKey, LineName, StoredLine } from './entry.ts';

const SELECT_LINES = `
  SELECT id, site, name, described, changed_at, baseline,
    (SELECT count(*) FROM entry WHERE entry.line = line.id) AS entries
  FROM line`;

/** All lines, by site and name. */
export function storedLines(db: Database): readonly StoredLine[] {
  return db.all(`${SELECT_LINES} ORDER BY site, name`).map(lineOf);
}

/**
 * Stores a line, or its new description.
 *
 * @param described Text of a line file; null leaves what is stored, or stores the text '' for a line that is new.
 * @returns Its id, and whether a description that was there is now another.
 */
export function keepLine(
  db: Database,
  { site, name }: LineName,
  described: string | null,
  changedAt: string,
): { readonly id: number; readonly changed: boolean } {
  const there = db.get('SELECT id, described FROM line WHERE site = ? AND name = ?', site, name);
  if (!there) {
    db.run(
      'INSERT INTO line (site, name, described, changed_at) VALUES (?, ?, ?, ?)',
      site,
      name,
      described ?? '',
      changedAt,
    );
    const id = db.get('SELECT id FROM line WHERE site = ? AND name = ?', site, name)?.['id'];
    return { id: Number(id), changed: false };
  }
  const id = Number(there['id']);
  if (described === null || there['described'] === described) return { id, changed: false };
  db.run('UPDATE line SET described = ?, changed_at = ? WHERE id = ?', described, changedAt, id);
  return { id, changed: there['described'] !== '' };
}

/**
 * Finds a line by its name, by site and name, or by either as one word: `Ansel Ridge north 1`,
 * `ansel-ridge-north-1`. Case does not matter.
 *
 * @returns The line; or a problem that names the nearest, or those among which the name does not choose.
 */
export function findStoredLine(db: Database, wanted: string, file: string): Outcome<StoredLine> {
  const lines = storedLines(db);
  const key = nameKey(wanted);
  const shown = cleanForDisplay(wanted, 80);
  const byName = lines.filter(({ name }) => nameKey(name) === key);
  const found = byName.length > 0 ? byName : lines.filter((line) => nameKey(fullName(line)) === key);
  const [only] = found;
  if (found.length === 1 && only) return succeed(only);
  if (found.length > 1)
    return fail({
      code: 'line-ambiguous',
      file,
      what: 'several sites have a line of this name',
      found: shown,
      mend: `name the site too: ${orList(found.map(fullName))}`,
    });
  const near = nearestWords(shown, [...new Set(lines.flatMap((line) => [line.name, fullName(line)]))], 2);
  return fail({
    code: 'line-not-logged',
    file,
    what: 'the logbook has no line of this name',
    found: shown,
    mend: near.length > 0 ? `did you mean ${orList(near)}?` : '"feedsonde log list" shows the lines it has',
  });
}

/** Makes an entry of a line the one that later sweeps are compared with; null for none. */
export function chooseBaseline(db: Database, lineId: number, key: EntryKey | null): void {
  db.run('UPDATE line SET baseline = ? WHERE id = ?', key, lineId);
}

/** "Ansel Ridge north 1"; the site goes before a name that does not begin with it. */
export function fullName({ site, name }: LineName): string {
  return site === '' || nameKey(name).startsWith(nameKey(site)) ? name : `${site} ${name}`;
}

/** Letters and digits of a name, in one case: how names are compared. */
export function nameKey(name: string): string {
  return name
    .normalize('NFC')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, '-')
    .replace(/^-|-$/gu, '');
}

function lineOf(row: Row): StoredLine {
  return {
    id: Number(row['id']),
    site: String(row['site']),
    name: String(row['name']),
    described: String(row['described']),
    changedAt: String(row['changed_at']),
    baseline: row['baseline'] === null ? null : String(row['baseline']),
    entries: Number(row['entries']),
  };
}
