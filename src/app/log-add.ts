/** From an analysed sweep to an entry of the logbook. */
import type { CableTable } from '../line/cable-table.ts';
import { createCableTable } from '../line/cable-table.ts';
import { cleanName } from '../line/clean-name.ts';
import type { Line } from '../line/line.ts';
import { writeLine } from '../line/write-line.ts';
import type { LineName, NewEntry, Remarks, StoredLine } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import type { Analysis } from './analysis.ts';
import { locateDocument } from './json.ts';
import { figuresOf } from './log-figures.ts';
import type { AnalyseRequest } from './solver.ts';

/** What was said on the command line, or is known, about one sweep. */
export type AboutSweep = Remarks & {
  /** Wall time on site, `2026-05-03` or `2026-05-03T14:30`. */
  readonly takenAt: string;
  /** Time in UTC, ISO 8601. */
  readonly addedAt: string;
  /** Name and site of the line where its description gives none; null where nothing was said. */
  readonly name: string | null;
  readonly site: string | null;
  /** Name and version of the program. */
  readonly tool: string;
};

/** Longest remark that is kept, characters. */
const LONGEST_REMARK = 400;

/** A table without cables: lines are written with every figure. */
const NO_CABLES = createCableTable([]);

/**
 * Makes the entry.
 *
 * @param cables Table by whose ids the line is known from now on.
 * @param known What the logbook knows under the line's name; null for nothing.
 */
export function newEntry(
  request: AnalyseRequest,
  analysis: Analysis,
  about: AboutSweep,
  cables: CableTable,
  known: StoredLine | null,
): Outcome<NewEntry> {
  const line = namedLine(analysis.line, about);
  if (!line.ok) return line;
  const severities = analysis.findings.map(({ severity }) => severity);
  const { name, site } = line.value;
  return succeed({
    line: { name, site },
    described: writeLine(line.value, NO_CABLES),
    knownAs: analysis.lineDescribed ? knownAs(line.value, cables, known) : null,
    file: cleanForDisplay(baseName(request.sweepFile), 200),
    bytes: request.sweepBytes,
    standards: request.standards,
    port: analysis.sweep.port,
    takenAt: about.takenAt,
    addedAt: about.addedAt,
    who: remark(about.who),
    instrument: remark(about.instrument),
    weather: remark(about.weather),
    note: remark(about.note),
    tool: about.tool,
    setup: {
      port: request.port,
      offsetM: request.offsetM,
      windowSpec: request.windowSpec,
      lineDescribed: analysis.lineDescribed,
    },
    faults: severities.filter((severity) => severity === 'fault').length,
    watches: severities.filter((severity) => severity === 'watch').length,
    figures: figuresOf(analysis),
    document: JSON.stringify(locateDocument(analysis, about.tool)),
  });
}

/** Stores a line under its name without a sweep. */
export function keepLine(
  logbook: Logbook,
  line: Line,
  cables: CableTable,
  changedAt: string,
): Outcome<{ readonly line: LineName; readonly changed: boolean }> {
  const named = namedLine(line, { name: null, site: null });
  if (!named.ok) return named;
  const { name, site } = named.value;
  const kept = logbook.keepLine({ name, site }, lineText(named.value, cables), changedAt);
  return kept.ok ? succeed({ line: { name, site }, changed: kept.value.changed }) : kept;
}

/** What the logbook already knows of the line of an analysis; null for nothing. */
export function knownLine(
  logbook: Logbook,
  line: LineName,
  about: Pick<AboutSweep, 'name' | 'site'>,
): Outcome<StoredLine | null> {
  const lines = logbook.lines();
  if (!lines.ok) return lines;
  const name = about.name ?? line.name;
  const site = about.site ?? line.site;
  return succeed(lines.value.find((one) => one.name === name && one.site === site) ?? null);
}

function namedLine(line: Line, about: Pick<AboutSweep, 'name' | 'site'>): Outcome<Line> {
  const name = about.name === null ? line.name : cleanName(about.name);
  const site = about.site === null ? line.site : cleanName(about.site);
  if (name !== '') return succeed({ ...line, name, site });
  return fail({
    code: 'line-unnamed',
    what: 'the line has no name to log this sweep under',
    mend: 'write "name" (and "site") into the line file, or give --name NAME',
  });
}

/**
 * The line file under which the line is known from now on; null where what is known says the same, leaving out what
 * belongs to the day and not to the line: the temperature, and what stood at the far end during the sweep.
 */
function knownAs(line: Line, cables: CableTable, known: StoredLine | null): string | null {
  const text = lineText(line, cables);
  if (known === null || known.described === '') return text;
  return lasting(known.described) === lasting(text) ? null : text;
}

/** A temperature is that of one day, so a stored line has none. */
function lineText(line: Line, cables: CableTable): string {
  return writeLine({ ...line, temperatureKnown: false }, cables);
}

function lasting(described: string): string {
  return described.replace(/^ {2}"end": .*\n/mu, '');
}

function remark(text: string): string {
  return cleanForDisplay(text, LONGEST_REMARK);
}

function baseName(path: string): string {
  return path.replace(/^.*[/\\]/su, '') || path;
}
