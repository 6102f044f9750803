/** Lines of the logbook by name, for every verb that needs a line, and what later sweeps are compared with. */
import type { CableTable } from '../line/cable-table.ts';
import type { Line } from '../line/line.ts';
import { readLine } from '../line/read-line.ts';
import type { Entry } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { openLogbookFile } from './log-file.ts';

/**
 * The line of this name.
 *
 * @param logbookPath As typed; null for the one in the platform's data folder.
 */
export async function findLine(
  name: string,
  logbookPath: string | null,
  cables: CableTable,
): Promise<Outcome<Line>> {
  const logbook = await openLogbookFile(logbookPath, { create: false });
  if (!logbook.ok) return logbook;
  try {
    const stored = logbook.value.findLine(name);
    if (!stored.ok) return stored;
    const { described, name: lineName } = stored.value;
    if (described !== '') return readLine(described, `line "${lineName}" of the logbook`, cables);
    return fail({
      code: 'line-not-described',
      file: logbook.value.file,
      what: 'sweeps of this line were logged, but never with a description of it',
      found: lineName,
      mend: 'give --line FILE once with "feedsonde log add", or describe the line here',
    });
  } finally {
    logbook.value.close();
  }
}

/** A sweep of the logbook with all that is needed to analyse it again. */
export type LoggedSweep = {
  readonly entry: Entry;
  readonly bytes: Uint8Array;
  readonly standards: {
    readonly open: Uint8Array;
    readonly short: Uint8Array;
    readonly load: Uint8Array;
  } | null;
  /** The line as described then. */
  readonly line: Line;
};

/** Takes a sweep out of the logbook. */
export function loggedSweep(logbook: Logbook, key: string, cables: CableTable): Outcome<LoggedSweep> {
  const entry = logbook.entry(key);
  if (!entry.ok) return entry;
  const bytes = logbook.original(entry.value.hash);
  if (!bytes.ok) return bytes;
  const standards = standardsOf(logbook, entry.value);
  if (!standards.ok) return standards;
  const line = readLine(entry.value.described, `the line of entry ${key.slice(0, 8)}`, cables);
  if (!line.ok) return line;
  return succeed({ entry: entry.value, bytes: bytes.value, standards: standards.value, line: line.value });
}

/** The sweep that later ones of a line are compared with. */
export function baselineSweep(logbook: Logbook, lineName: string, cables: CableTable): Outcome<LoggedSweep> {
  const line = logbook.findLine(lineName);
  if (!line.ok) return line;
  if (line.value.baseline === null)
    return fail({
      code: 'baseline-missing',
      file: logbook.file,
      what: 'no baseline was chosen for this line',
      found: line.value.name,
      mend: '"feedsonde log baseline LINE ENTRY" chooses one; "feedsonde log list LINE" shows its entries',
    });
  return loggedSweep(logbook, line.value.baseline, cables);
}

/** The sweeps of the standards that corrected an entry; null where there were none. */
export function standardsOf(logbook: Logbook, { setup }: Entry): Outcome<LoggedSweep['standards']> {
  if (setup.standards === null) return succeed(null);
  const open = logbook.original(setup.standards.open);
  const short = logbook.original(setup.standards.short);
  const load = logbook.original(setup.standards.load);
  if (open.ok && short.ok && load.ok)
    return succeed({ open: open.value, short: short.value, load: load.value });
  return fail(...[open, short, load].flatMap((one) => (one.ok ? [] : one.problems)));
}
