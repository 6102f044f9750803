/**
 * The form of an exported logbook: `logbook.json`, and for every entry a JSON file with its sweep beside it under the
 * same name, byte for byte as it was saved by the instrument.
 */
import * as v from 'valibot';
import { visibleText } from '../line/checked-json.ts';
import { type Entry, type StoredLine, shortKey } from '../logbook/entry.ts';
import { figuresForm, readStored } from '../logbook/figures.ts';
import { fullName, nameKey } from '../logbook/stored-lines.ts';

/** Version of the form; rises when a reader of the old form would misread the new one. */
export const EXPORT_SCHEMA = 1;

/** The file that makes a folder an export. */
export const MARK_FILE = 'logbook.json';

const MARK_KIND = 'feedsonde logbook export';
const ENTRY_KIND = 'feedsonde log entry';

const sha256 = v.pipe(v.string(), v.regex(/^[0-9a-f]{64}$/u));
const object = v.record(v.string(), v.unknown());
const remark = v.pipe(v.string(), v.maxLength(2000));
const count = v.pipe(v.number(), v.integer(), v.minValue(0));
/** A name within the folder: nothing that leads out of it. */
const plainName = v.pipe(v.string(), v.regex(/^[\p{L}\p{N}][\p{L}\p{N}._-]{0,199}$/u));
const keptFile = v.object({ file: plainName, sha256 });

/** `logbook.json`. */
export const markForm = v.object({
  schema: v.literal(EXPORT_SCHEMA),
  kind: v.literal(MARK_KIND),
  /** False while the export is being written. */
  complete: v.boolean(),
  entries: count,
  lines: v.array(
    v.object({
      site: v.union([v.literal(''), visibleText()]),
      name: visibleText(),
      described: v.nullable(object),
      baseline: v.nullable(v.string()),
    }),
  ),
});

/** An entry's JSON file. */
export const entryForm = v.object({
  schema: v.literal(EXPORT_SCHEMA),
  kind: v.literal(ENTRY_KIND),
  sweep: v.object({
    file: plainName,
    sha256,
    name: visibleText(200),
    port: v.pipe(v.number(), v.integer(), v.minValue(1), v.maxValue(9999)),
  }),
  standards: v.nullable(v.object({ open: keptFile, short: keptFile, load: keptFile })),
  line: v.object({ site: v.union([v.literal(''), visibleText()]), name: visibleText(), described: object }),
  takenAt: v.pipe(v.string(), v.regex(/^\d{4}-\d{2}-\d{2}(T\d{2}:\d{2})?$/u)),
  addedAt: v.pipe(v.string(), v.isoTimestamp()),
  who: remark,
  instrument: remark,
  weather: remark,
  note: remark,
  tool: remark,
  setup: v.object({
    port: v.nullable(count),
    offsetM: v.number(),
    windowSpec: v.pipe(v.string(), v.maxLength(100)),
    lineDescribed: v.boolean(),
  }),
  faults: count,
  watches: count,
  figures: figuresForm,
  results: object,
});

export type ExportedEntry = v.InferOutput<typeof entryForm>;

/** `logbook.json` of an export. */
export function markDocument(lines: readonly StoredLine[], entries: number, complete: boolean) {
  return {
    schema: EXPORT_SCHEMA,
    kind: MARK_KIND,
    complete,
    entries,
    lines: lines.map(({ site, name, described, baseline }) => ({
      site,
      name,
      described: readStored(described, object),
      baseline,
    })),
  };
}

/** An entry's JSON file. */
export function entryDocument(
  entry: Entry,
  files: { readonly sweep: string; readonly standards: Readonly<Record<'open' | 'short' | 'load', string>> },
) {
  const { standards, ...setup } = entry.setup;
  const kept = (which: 'open' | 'short' | 'load') => ({
    file: files.standards[which],
    sha256: standards?.[which] ?? '',
  });
  return {
    schema: EXPORT_SCHEMA,
    kind: ENTRY_KIND,
    sweep: { file: files.sweep, sha256: entry.hash, name: entry.file, port: entry.port },
    standards: standards && { open: kept('open'), short: kept('short'), load: kept('load') },
    line: { ...entry.line, described: JSON.parse(entry.described) as unknown },
    takenAt: entry.takenAt,
    addedAt: entry.addedAt,
    who: entry.who,
    instrument: entry.instrument,
    weather: entry.weather,
    note: entry.note,
    tool: entry.tool,
    setup,
    faults: entry.faults,
    watches: entry.watches,
    figures: entry.figures,
    results: JSON.parse(entry.document) as unknown,
  };
}

/** Longest part of a file's name that comes from a line's name, characters. */
const LONGEST_NAME = 60;

/** "2026-05-03-ansel-ridge-north-1-3fa9c1d2": what the files of an entry are called, endings left out. */
export function stemOf(entry: Entry): string {
  const line = Array.from(nameKey(fullName(entry.line)))
    .slice(0, LONGEST_NAME)
    .join('');
  return [entry.takenAt.slice(0, 10), line, shortKey(entry.key)].filter((part) => part !== '').join('-');
}

/** Ending of a sweep's file: its own where it is a plain one, else what its text looks like. */
export function endingOf(file: string, bytes: Uint8Array): string {
  const own = /\.[a-z0-9]{1,5}$/iu.exec(file)?.[0].toLowerCase();
  return (
    own ?? (/^\s*#/mu.test(new TextDecoder('latin1').decode(bytes.subarray(0, 20_000))) ? '.s1p' : '.csv')
  );
}
