/** From what was asked for on the command line to the line that is analysed. */
import { type CableTable, cableOf, guideOf, isGuide, type TableEntry } from '../line/cable-table.ts';
import { TABLE_TEMPERATURE_C } from '../line/constants.ts';
import {
  type CoaxSection,
  type EndKind,
  type Line,
  NO_LIMITS,
  PLAIN_JOINT,
  type Section,
} from '../line/line.ts';
import { nearestWords, orList } from '../line/nearest-word.ts';
import { readLine } from '../line/read-line.ts';
import { fail, type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseLengthM, parseTemperatureC } from '../sweep/number-text.ts';
import { fileExists, readText, shownName } from './files.ts';
import { STANDARD_INPUT } from './standard-input.ts';

/** Flags that describe or change the line, as typed; null where not given. */
export type LineFlags = {
  /** A line file, or the name of a line in the logbook. */
  readonly line: string | null;
  /** The logbook that names are looked up in; the one in the platform's data folder when not given. */
  readonly logbook?: string | null;
  readonly cable: string | null;
  readonly length: string | null;
  readonly end: string | null;
  readonly temperature: string | null;
  readonly velocityFactor: string | null;
};

export type RequestedLine = {
  readonly line: Line;
  /** False when only a cable type was given. */
  readonly lineDescribed: boolean;
};

const END_KINDS = ['open', 'short', 'load', 'antenna', 'unknown'] as const satisfies readonly EndKind[];

/** Extension of a line file. */
const LINE_EXTENSION = '.line.json';
/** Largest line file that is read, bytes. */
const MOST_LINE_BYTES = 4 * 1024 * 1024;
/** Velocity factors that any line can have. */
const SLOWEST = 0.1;
const FASTEST = 1;

/**
 * The line that belongs to a sweep: a line file, a named cable, or, when neither is given, the line file of the
 * sweep's own name beside it.
 *
 * @param sweepFile Path of the sweep as typed; `-` has no line file beside it.
 * @returns The line with the flags' changes made; a notice says where it came from when nobody named it.
 */
export async function requestLine(
  flags: LineFlags,
  sweepFile: string,
  cables: CableTable,
): Promise<Outcome<RequestedLine>> {
  const clash = clashOf(flags);
  if (clash.length > 0) return fail(...clash);
  const described = await describedLine(flags, sweepFile, cables);
  if (!described.ok) return described;
  const changed = changeLine(described.value.line, flags);
  return changed.ok
    ? succeed({ ...described.value, line: changed.value }, described.notices)
    : fail(...changed.problems);
}

/** Reads a line file and makes the flags' changes. */
export async function readLineFile(
  path: string,
  flags: LineFlags,
  cables: CableTable,
): Promise<Outcome<Line>> {
  const text = await readText(path, MOST_LINE_BYTES);
  if (!text.ok) return text;
  const line = readLine(text.value, shownName(path), cables);
  return line.ok ? changeLine(line.value, flags) : line;
}

/** Path of the line file that goes with a sweep: `samples/north-1.s1p` has `samples/north-1.line.json`. */
export function lineFileOf(sweepFile: string): string {
  return sweepFile.replace(/\.[^./\\]*$/u, '') + LINE_EXTENSION;
}

function clashOf(flags: LineFlags): Problem[] {
  const problems: Problem[] = [];
  if (flags.line !== null && flags.cable !== null)
    problems.push({
      code: 'flag-clash',
      what: '--line and --cable both describe the line',
      mend: 'give one of the two',
    });
  if (flags.length !== null && flags.cable === null)
    problems.push({
      code: 'flag-clash',
      what: '--length goes with --cable',
      mend: 'name the cable, or write the length into the line file',
    });
  return problems;
}

async function describedLine(
  flags: LineFlags,
  sweepFile: string,
  cables: CableTable,
): Promise<Outcome<RequestedLine>> {
  if (flags.cable !== null) return lineOfCable(flags.cable, flags.length, cables);
  const beside = lineFileOf(sweepFile);
  const path = flags.line ?? (sweepFile !== STANDARD_INPUT && (await fileExists(beside)) ? beside : null);
  if (flags.line !== null && (await isLineName(flags.line))) return lineOfLogbook(flags.line, flags, cables);
  if (path === null)
    return fail({
      code: 'line-missing',
      what: 'nothing says what line this sweep was taken of',
      mend: `give --line FILE, or --cable ID (with --length when it is known); "feedsonde cables" lists the ids`,
    });
  const text = await readText(path, MOST_LINE_BYTES);
  if (!text.ok) return text;
  const line = readLine(text.value, shownName(path), cables);
  if (!line.ok) return line;
  const found: Notice[] =
    flags.line === null
      ? [
          {
            code: 'line-beside',
            what: `the line description is ${shownName(path)}, which lies beside the sweep`,
          },
        ]
      : [];
  return succeed({ line: line.value, lineDescribed: true }, [...found, ...line.notices]);
}

/** A name is what is no file, and does not look like one. */
async function isLineName(text: string): Promise<boolean> {
  return !/[/\\]|\.json$/iu.test(text) && !(await fileExists(text));
}

async function lineOfLogbook(
  name: string,
  flags: LineFlags,
  cables: CableTable,
): Promise<Outcome<RequestedLine>> {
  // Loaded here: most runs need no logbook.
  const { findLine } = await import('./log-lines.ts');
  const line = await findLine(name, flags.logbook ?? null, cables);
  if (line.ok) return succeed({ line: line.value, lineDescribed: true }, line.notices);
  return fail(
    ...line.problems.map((problem) =>
      problem.code === 'logbook-missing'
        ? {
            code: 'line-missing',
            what: 'this is no file, and there is no logbook that could know a line of this name',
            found: cleanForDisplay(name, 80),
            mend: 'check the name of the line file; "feedsonde log add SWEEP" starts a logbook',
          }
        : problem,
    ),
  );
}

/** A line of one section: a cable or guide by name, its length perhaps unknown. */
function lineOfCable(name: string, lengthText: string | null, cables: CableTable): Outcome<RequestedLine> {
  const entry = cables.find(name) ?? cables.findGuide(name);
  const lengthM = lengthText === null ? null : parseLengthM(lengthText);
  const problems: Problem[] = [];
  if (entry === undefined) problems.push(unknownCable(name, cables));
  if (lengthM !== null && !lengthM.ok) problems.push(...lengthM.problems);
  else if (lengthM?.value === 0)
    problems.push(wrongFlag('--length 0', 'a line has a length', '--length 46m'));
  if (entry === undefined || problems.length > 0) return fail(...problems);
  const run = {
    lengthM: lengthM?.ok ? lengthM.value : null,
    label: entry.name,
    jointAfter: PLAIN_JOINT,
  };
  const section: Section = isGuide(entry)
    ? { type: 'guide', guide: guideOf(entry), ...run }
    : { type: 'coax', cable: cableOf(entry), ...run };
  const line: Line = {
    name: '',
    site: '',
    sections: [section],
    end: 'unknown',
    temperatureC: TABLE_TEMPERATURE_C,
    temperatureKnown: false,
    limits: NO_LIMITS,
  };
  return succeed({ line, lineDescribed: section.lengthM !== null });
}

/** Finds a cable or guide by id, alias or name. */
export function findCable(name: string, cables: CableTable): Outcome<TableEntry> {
  const entry = cables.find(name) ?? cables.findGuide(name);
  return entry === undefined ? fail(unknownCable(name, cables)) : succeed(entry);
}

function unknownCable(name: string, cables: CableTable): Problem {
  const near = [...cables.nearest(name), ...cables.nearestGuide(name)].slice(0, 3);
  return {
    code: 'cable-unknown',
    what: 'this cable is not in the table',
    found: cleanForDisplay(name, 60),
    mend: near.length > 0 ? `did you mean ${orList(near)}?` : '"feedsonde cables" lists what there is',
  };
}

/** The line with `--end`, `--temperature` and `--velocity-factor` in place of its own. */
function changeLine(line: Line, flags: LineFlags): Outcome<Line> {
  const problems: Problem[] = [];
  let changed = line;
  if (flags.end !== null) {
    const end = END_KINDS.find((kind) => kind === flags.end);
    if (end) changed = { ...changed, end };
    else problems.push(unknownEnd(flags.end));
  }
  if (flags.temperature !== null) {
    const temperature = parseTemperatureC(flags.temperature);
    if (temperature.ok) changed = { ...changed, temperatureC: temperature.value, temperatureKnown: true };
    else problems.push(...temperature.problems);
  }
  if (flags.velocityFactor !== null) {
    const factor = Number(flags.velocityFactor);
    if (!(factor >= SLOWEST && factor <= FASTEST))
      problems.push(
        wrongFlag(
          `--velocity-factor ${flags.velocityFactor}`,
          `a velocity factor lies between ${SLOWEST} and ${FASTEST}`,
          '--velocity-factor 0.88',
        ),
      );
    else if (!line.sections.some((section) => section.type === 'coax'))
      problems.push({
        code: 'flag-clash',
        what: '--velocity-factor belongs to a cable, and this line has none',
        mend: 'leave it out: the delay of a guide follows from its width',
      });
    else changed = withVelocityFactor(changed, factor);
  }
  return problems.length > 0 ? fail(...problems) : succeed(changed);
}

/** The line with another velocity factor in its longest coax section; one of unknown length counts as longest. */
function withVelocityFactor(line: Line, velocityFactor: number): Line {
  let longest: CoaxSection | null = null;
  for (const section of line.sections)
    if (section.type === 'coax' && (longest === null || reachOf(section) > reachOf(longest)))
      longest = section;
  return {
    ...line,
    sections: line.sections.map((section) =>
      section === longest ? { ...longest, cable: { ...longest.cable, velocityFactor } } : section,
    ),
  };
}

function reachOf(section: CoaxSection): number {
  return section.lengthM ?? Number.POSITIVE_INFINITY;
}

function unknownEnd(found: string): Problem {
  const [near] = nearestWords(found, END_KINDS);
  return wrongFlag(
    `--end ${found}`,
    'this is not an end known here',
    near === undefined ? `--end ${END_KINDS.join('|')}` : `--end ${near}`,
  );
}

function wrongFlag(found: string, what: string, example: string): Problem {
  return { code: 'flag-value', what, found: cleanForDisplay(found, 60), mend: `write ${example}` };
}
