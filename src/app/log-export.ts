/** A logbook, or part of it, as a folder of sweeps and JSON that any other logbook can take in. */
import { mkdir, readdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { ListFilter } from '../logbook/entries.ts';
import type { Entry } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { diskProblem, shownName, writeBytes, writeText } from './files.ts';
import { endingOf, entryDocument, MARK_FILE, markDocument, stemOf } from './log-export-form.ts';
import { standardsOf } from './log-lines.ts';

export type Exported = { readonly entries: number; readonly lines: number };

/**
 * Writes the export. A folder that already is one is brought up to date; any other must be empty or new.
 *
 * The mark that makes it an export says `complete: false` until everything is written.
 */
export async function exportLogbook(
  logbook: Logbook,
  folder: string,
  filter: ListFilter,
): Promise<Outcome<Exported>> {
  const listed = logbook.list(filter);
  const lines = logbook.lines();
  if (!listed.ok) return listed;
  if (!lines.ok) return lines;
  const ready = await readyFolder(folder);
  if (!ready.ok) return ready;
  const ids = new Set(listed.value.map(({ lineId }) => lineId));
  const all = filter.lineId == null && filter.site == null && filter.since == null && filter.until == null;
  const kept = lines.value.filter(({ id }) => all || ids.has(id));
  const mark = (complete: boolean): Promise<Outcome<null>> =>
    writeJson(join(folder, MARK_FILE), markDocument(kept, listed.value.length, complete));
  const begun = await mark(false);
  if (!begun.ok) return begun;
  for (const { key } of listed.value) {
    const entry = logbook.entry(key);
    if (!entry.ok) return entry;
    const written = await writeEntry(logbook, entry.value, folder);
    if (!written.ok) return written;
  }
  const done = await mark(true);
  return done.ok ? succeed({ entries: listed.value.length, lines: kept.length }) : done;
}

async function readyFolder(folder: string): Promise<Outcome<null>> {
  const file = shownName(folder);
  try {
    await mkdir(folder, { recursive: true });
    const there = await readdir(folder);
    if (there.length === 0 || there.includes(MARK_FILE)) return succeed(null);
    return fail({
      code: 'folder-in-use',
      file,
      what: 'this folder holds other things',
      mend: 'name a new or empty folder, or one that an earlier export was written to',
    });
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'EEXIST')
      return fail({ code: 'file-exists', file, what: 'this is a file, not a folder', mend: 'name a folder' });
    return fail(diskProblem(error, file, 'write'));
  }
}

/** The sweeps first: a JSON file never speaks of bytes that are not there. */
async function writeEntry(logbook: Logbook, entry: Entry, folder: string): Promise<Outcome<null>> {
  const stem = stemOf(entry);
  const sweep = logbook.original(entry.hash);
  const standards = standardsOf(logbook, entry);
  if (!sweep.ok) return sweep;
  if (!standards.ok) return standards;
  const names = {
    sweep: stem + endingOf(entry.file, sweep.value),
    standards: { open: '', short: '', load: '' },
  };
  const bytes: (readonly [string, Uint8Array])[] = [[names.sweep, sweep.value]];
  // The names of the standards' files are not kept.
  for (const which of ['open', 'short', 'load'] as const) {
    const standard = standards.value?.[which];
    if (!standard) continue;
    names.standards[which] = `${stem}-standard-${which}${endingOf('', standard)}`;
    bytes.push([names.standards[which], standard]);
  }
  for (const [name, content] of bytes) {
    const written = await writeBytes(join(folder, name), content, { overwrite: true });
    if (!written.ok) return written;
  }
  return writeJson(join(folder, `${stem}.json`), entryDocument(entry, names));
}

function writeJson(path: string, document: unknown): Promise<Outcome<null>> {
  return writeText(path, `${JSON.stringify(document, null, 2)}\n`, { overwrite: true });
}
