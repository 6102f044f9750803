/** An exported logbook taken into this one: everything or nothing, and nothing twice. */
import { readFileSync, statSync } from 'node:fs';
import { readdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { CableTable } from '../line/cable-table.ts';
import { readCheckedJson } from '../line/checked-json.ts';
import { readLine } from '../line/read-line.ts';
import type { NewEntry } from '../logbook/entry.ts';
import type { Logbook, Merged } from '../logbook/logbook.ts';
import { hashOf } from '../logbook/packing.ts';
import { fail, type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { diskProblem, MOST_FILE_BYTES, readText, shownName } from './files.ts';
import { type ExportedEntry, entryForm, MARK_FILE, markForm } from './log-export-form.ts';

/** Problems that one import lists. */
const MOST_PROBLEMS = 20;
/** Longest text in results, characters. */
const LONGEST_TEXT = 2000;

const NO_WORDS = { hints: {}, items: {} };

/**
 * Takes in an export.
 *
 * Every file is read and checked before anything is written, and read again while it is written, so that memory does
 * not grow with the logbook.
 *
 * @param mergedAt Time in UTC, ISO 8601; when lines that are new here became known.
 * @returns How many entries are new; or every problem, and then nothing was taken in.
 */
export async function importLogbook(
  logbook: Logbook,
  folder: string,
  cables: CableTable,
  mergedAt: string,
): Promise<Outcome<Merged>> {
  const mark = await readMark(folder);
  if (!mark.ok) return mark;
  const names = (await readdir(folder)).filter((name) => name.endsWith('.json') && name !== MARK_FILE).sort();
  const problems: Problem[] = [];
  for (const name of names) {
    const entry = readEntryFile(folder, name, cables);
    if (!entry.ok) problems.push(...entry.problems);
    if (problems.length >= MOST_PROBLEMS) break;
  }
  if (problems.length > 0) return fail(...problems);
  const merged = logbook.merge({
    lines: mark.value.lines.map((line) => ({
      ...line,
      described: line.described === null ? '' : jsonText(line.described),
    })),
    entries: entriesOf(folder, names, cables),
    mergedAt,
  });
  if (!merged.ok) return merged;
  const short = mark.value.entries - names.length;
  const notices: Notice[] =
    !mark.value.complete || short > 0
      ? [
          {
            code: 'export-incomplete',
            what: `the export was not finished, or lost files since: ${names.length} of ${mark.value.entries} entries are there`,
          },
        ]
      : [];
  return succeed(merged.value, notices);
}

async function readMark(folder: string) {
  const path = join(folder, MARK_FILE);
  const text = await readText(path);
  if (text.ok) return readCheckedJson(text.value, shownName(path), markForm, NO_WORDS);
  return fail({
    code: 'not-an-export',
    file: shownName(folder),
    what: `there is no ${MARK_FILE} here that could be read`,
    mend: 'name a folder that "feedsonde log export" wrote',
  });
}

function* entriesOf(folder: string, names: readonly string[], cables: CableTable) {
  for (const name of names) yield readEntryFile(folder, name, cables);
}

function readEntryFile(folder: string, name: string, cables: CableTable): Outcome<NewEntry> {
  const file = shownName(join(folder, name));
  const bytes = readKept(folder, name);
  if (!bytes.ok) return bytes;
  const read = readCheckedJson(new TextDecoder().decode(bytes.value), file, entryForm, NO_WORDS);
  if (!read.ok) return read;
  const entry = read.value;
  const described = jsonText(entry.line.described);
  const line = readLine(described, `${file}, its line`, cables);
  const sweep = readHashed(folder, entry.sweep);
  const standards = readStandards(folder, entry.standards);
  if (!line.ok || !sweep.ok || !standards.ok) {
    const outcomes: Outcome<unknown>[] = [line, sweep, standards];
    return fail(...outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems)));
  }
  return succeed({
    line: { site: entry.line.site, name: entry.line.name },
    described,
    knownAs: null,
    file: entry.sweep.name,
    bytes: sweep.value,
    standards: standards.value,
    port: entry.sweep.port,
    takenAt: entry.takenAt,
    addedAt: entry.addedAt,
    who: cleanForDisplay(entry.who, LONGEST_TEXT),
    instrument: cleanForDisplay(entry.instrument, LONGEST_TEXT),
    weather: cleanForDisplay(entry.weather, LONGEST_TEXT),
    note: cleanForDisplay(entry.note, LONGEST_TEXT),
    tool: cleanForDisplay(entry.tool),
    setup: entry.setup,
    faults: entry.faults,
    watches: entry.watches,
    figures: harmless(entry.figures) as ExportedEntry['figures'],
    document: JSON.stringify(harmless(entry.results)),
  });
}

function readStandards(
  folder: string,
  kept: ExportedEntry['standards'],
): Outcome<{ open: Uint8Array; short: Uint8Array; load: Uint8Array } | null> {
  if (kept === null) return succeed(null);
  const open = readHashed(folder, kept.open);
  const short = readHashed(folder, kept.short);
  const load = readHashed(folder, kept.load);
  if (open.ok && short.ok && load.ok)
    return succeed({ open: open.value, short: short.value, load: load.value });
  return fail(...[open, short, load].flatMap((one) => (one.ok ? [] : one.problems)));
}

/** Bytes that are those that were exported. */
function readHashed(folder: string, kept: { readonly file: string; readonly sha256: string }) {
  const bytes = readKept(folder, kept.file);
  if (!bytes.ok || hashOf(bytes.value) === kept.sha256) return bytes;
  return fail({
    code: 'export-changed',
    file: shownName(join(folder, kept.file)),
    what: 'the file is not the one that was exported: its SHA-256 differs',
    mend: 'export again; copies by mail or with changed line ends are no longer the original',
  });
}

/** Read in one go: this runs inside a transaction, which cannot wait. */
function readKept(folder: string, name: string): Outcome<Uint8Array> {
  const path = join(folder, name);
  const file = shownName(path);
  try {
    if (statSync(path).size > MOST_FILE_BYTES)
      return fail({ code: 'file-too-large', file, what: 'the file is too large', mend: 'export again' });
    return succeed(readFileSync(path));
  } catch (error) {
    return fail(diskProblem(error, file, 'read'));
  }
}

/** Text as `writeLine` writes it, so that what is exported again is the same. */
function jsonText(value: unknown): string {
  return `${JSON.stringify(value, null, 2)}\n`;
}

/** The same data with every text cleaned: it comes from a file that anyone may have written. */
function harmless(value: unknown): unknown {
  if (typeof value === 'string') return cleanForDisplay(value, LONGEST_TEXT);
  if (Array.isArray(value)) return value.map(harmless);
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(
    Object.entries(value).map(([key, inner]) => [cleanForDisplay(key), harmless(inner)]),
  );
}
