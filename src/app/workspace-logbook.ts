/**
 * The logbook as the workspace uses it: opened for each wish and closed again, so that it is never held while somebody
 * looks at a screen.
 */
import { stat } from 'node:fs/promises';
import type { CableTable } from '../line/cable-table.ts';
import type { Line } from '../line/line.ts';
import type { EntryKey, EntrySummary } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { type Outcome, succeed } from '../outcome.ts';
import type { Analysis } from './analysis.ts';
import { programVersion } from './bundled.ts';
import { knownLine, newEntry } from './log-add.ts';
import { openLogbookFile } from './log-file.ts';
import { loggedSweep } from './log-lines.ts';
import type { AnalyseRequest } from './solver.ts';
import { STANDARD_INPUT } from './standard-input.ts';
import { wallTimeOf } from './wall-time.ts';

/** A writer that another program keeps waiting gives up after this, ms: somebody waits at the screen. */
const PATIENCE_MS = 2000;

/** Everything that the list of a logbook shows. */
export type LogListing = {
  /** Name of the file for people. */
  readonly file: string;
  /** Latest first. */
  readonly entries: readonly EntrySummary[];
};

/** What saving a sweep has come to. */
export type SavedSweep = {
  readonly key: EntryKey;
  readonly how: 'new' | 'already' | 'replaced';
  readonly file: string;
};

export interface WorkspaceLogbook {
  /** All entries; none where there is no logbook yet. */
  list(): Promise<Outcome<LogListing>>;
  /** Everything needed to analyse an entry's sweep again. */
  open(key: EntryKey): Promise<Outcome<AnalyseRequest>>;
  /** Key of the sweep that later ones of this line are compared with; null for none. */
  baselineOf(line: Pick<Line, 'name' | 'site'>): Promise<Outcome<EntryKey | null>>;
  /** Saves a sweep with its results; one that is there already stays as it is. */
  save(request: AnalyseRequest, analysis: Analysis, note: string): Promise<Outcome<SavedSweep>>;
  /** Chooses an entry as the baseline of its line. */
  setBaseline(key: EntryKey): Promise<Outcome<null>>;
}

/**
 * Creates the access.
 *
 * @param path As typed; null for the logbook in the platform's data folder.
 */
export function createWorkspaceLogbook(path: string | null, cables: CableTable): WorkspaceLogbook {
  const withLogbook = async <T>(
    create: boolean,
    act: (logbook: Logbook) => Outcome<T> | Promise<Outcome<T>>,
  ): Promise<Outcome<T>> => {
    const logbook = await openLogbookFile(path, { create, patienceMs: PATIENCE_MS });
    if (!logbook.ok) return logbook;
    try {
      return await act(logbook.value);
    } finally {
      logbook.value.close();
    }
  };
  return {
    async list() {
      const listed = await withLogbook(false, (logbook) => {
        const entries = logbook.list({});
        return entries.ok ? succeed({ file: logbook.file, entries: entries.value.toReversed() }) : entries;
      });
      return isMissing(listed) ? succeed({ file: '', entries: [] }) : listed;
    },
    open: (key) =>
      withLogbook(false, (logbook) => {
        const logged = loggedSweep(logbook, key, cables);
        if (!logged.ok) return logged;
        const { entry, bytes, line, standards } = logged.value;
        const { setup } = entry;
        return succeed({
          sweepFile: entry.file,
          sweepBytes: bytes,
          line,
          lineDescribed: setup.lineDescribed,
          windowSpec: setup.windowSpec,
          port: setup.port,
          offsetM: setup.offsetM,
          standards,
        });
      }),
    async baselineOf({ name, site }) {
      const found = await withLogbook(false, (logbook) => {
        const lines = logbook.lines();
        if (!lines.ok) return lines;
        const line = lines.value.find((one) => one.name === name && one.site === site);
        return succeed(line?.baseline ?? null);
      });
      return isMissing(found) ? succeed(null) : found;
    },
    save: (request, analysis, note) =>
      withLogbook(true, async (logbook) => {
        const about = {
          who: '',
          instrument: '',
          weather: '',
          note,
          takenAt: await takenAt(request.sweepFile),
          addedAt: new Date().toISOString(),
          name: null,
          site: null,
          tool: `feedsonde ${programVersion()}`,
        };
        const known = knownLine(logbook, analysis.line, about);
        if (!known.ok) return known;
        const entry = newEntry(request, analysis, about, cables, known.value);
        if (!entry.ok) return entry;
        const added = logbook.add(entry.value, { replace: false, baseline: false });
        return added.ok ? succeed({ key: added.value.key, how: added.value.how, file: logbook.file }) : added;
      }),
    setBaseline: (key) =>
      withLogbook(false, (logbook) => {
        const entry = logbook.find(key);
        return entry.ok ? logbook.setBaseline(entry.value.lineId, entry.value.key) : entry;
      }),
  };
}

function isMissing(outcome: Outcome<unknown>): boolean {
  return !outcome.ok && outcome.problems.every(({ code }) => code === 'logbook-missing');
}

/** When the file was last written; now where it is no file. */
async function takenAt(file: string): Promise<string> {
  const written = file === STANDARD_INPUT ? null : await stat(file).catch(() => null);
  return wallTimeOf(written?.mtime ?? new Date());
}
