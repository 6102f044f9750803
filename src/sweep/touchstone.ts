/**
 * Touchstone 1.1, 2.0 and 2.1 text into the sweep of one port.
 *
 * The rules are those of references.md section 7; each has its test. Where a file breaks one, the reader says so and
 * gives nothing: a guessed unit or format would put every distance and level wrong without a word.
 */
import { fail, type Notice, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from './clean-text.ts';
import { CONVERSION_PORT_LIMIT } from './parameter-conversion.ts';
import { createProblemList, type ProblemList } from './problem-list.ts';
import type { Sweep } from './sweep.ts';
import { createSweepPoints } from './sweep-points.ts';
import { guessPorts, type NetworkLayout, readNetworkData } from './touchstone-data.ts';
import { readVersion2Header, type Version2Header } from './touchstone-keywords.ts';
import { createTouchstoneLines, type TouchstoneLines } from './touchstone-lines.ts';
import { readOptionLine } from './touchstone-option-line.ts';
import { readVersion2Tail } from './touchstone-tail.ts';

/** What a Touchstone reader must know beside the text. */
export type TouchstoneRequest = {
  /** Name as given; its extension tells the ports of a version 1 file. */
  readonly file: string;
  /** Port to read, counted from 1. */
  readonly port: number;
};

/** A layout with what is to be said about it. */
type Prepared = {
  readonly layout: NetworkLayout;
  /** Number of frequencies that the header promises; null in version 1. */
  readonly frequencies: number | null;
  /** True when `lines` already stands on the first data line. */
  readonly standing: boolean;
  readonly notices: readonly Notice[];
};

/**
 * Reads the reflection at one port, and of a two-port also the transmission from it to the other.
 *
 * @param text With LF as its line end.
 * @returns A sweep relative to the port's own reference, or every problem found (up to a limit).
 * @source Touchstone File Format Specification 1.1 (2002), 2.0 (2009), 2.1 (2024), as in references.md section 7.
 */
export function readTouchstone(text: string, request: TouchstoneRequest): Outcome<Sweep> {
  const problems = createProblemList(request.file);
  const lines = createTouchstoneLines(text);
  const prepared = prepare(lines, request, problems);
  if (prepared === null) return fail(...problems.problems);

  const { layout } = prepared;
  const points = createSweepPoints(problems, {
    transmission: layout.ports === 2,
    scaleHint: 'check the frequency unit of the option line (without one it is GHz)',
  });
  const end = readNetworkData(lines, prepared.standing, layout, points, problems);
  const tail = layout.version === 2 ? readVersion2Tail(lines, end.atKeyword, problems) : [];
  if (prepared.frequencies !== null && prepared.frequencies !== end.rows && problems.problems.length === 0) {
    problems.add({
      code: 'touchstone-frequency-count',
      what: `says [Number of Frequencies] ${prepared.frequencies}, but holds ${end.rows}`,
      mend: 'if the file was cut short, copy it again; else mend the number',
    });
  }
  const sweep = points.finish();
  if (sweep === null) return fail(...problems.problems);
  return succeed(
    {
      frequencyHz: sweep.frequencyHz,
      gamma: sweep.gamma,
      portOhm: layout.referenceOhm[layout.port - 1]!,
      port: layout.port,
      ports: layout.ports,
      file: cleanForDisplay(request.file),
      ...(sweep.transmission ? { transmission: sweep.transmission } : {}),
      comments: lines.comments,
    },
    [...prepared.notices, ...end.notices, ...sweep.notices, ...tail],
  );
}

/** Ports that a name like `north.s2p` tells; null where it tells none. */
export function portsFromName(file: string): number | null {
  const digits = /\.s(\d{1,6})p$/i.exec(file)?.[1];
  return digits !== undefined && Number(digits) > 0 ? Number(digits) : null;
}

function prepare(lines: TouchstoneLines, request: TouchstoneRequest, problems: ProblemList): Prepared | null {
  if (!lines.next()) {
    problems.add({
      code: 'sweep-empty',
      what: 'holds nothing but comments and blank lines',
      mend: 'save the sweep again',
    });
    return null;
  }
  const prepared =
    lines.firstCode === BRACKET
      ? prepareVersion2(lines, request, problems)
      : prepareVersion1(lines, request, problems);
  return prepared !== null && layoutIsReadable(prepared.layout, lines.line, problems) ? prepared : null;
}

function prepareVersion1(
  lines: TouchstoneLines,
  request: TouchstoneRequest,
  problems: ProblemList,
): Prepared | null {
  if (lines.firstCode !== HASH) {
    problems.add({
      code: 'touchstone-no-option-line',
      line: lines.line,
      what: 'has data before any option line, so their unit, format and reference are not known',
      found: lines.content(200),
      mend: 'put the option line above the data, as the instrument meant it, for example "# MHz S RI R 50"',
    });
    return null;
  }
  const options = readOptionLine(lines.content(), lines.line);
  if ('code' in options) {
    problems.add(options);
    return null;
  }
  const named = portsFromName(request.file);
  const guessed = guessPorts(createTouchstoneLines(lines.text), lines.line + 1);
  const ports = named ?? guessed;
  if (ports === null) {
    problems.add({
      code: 'touchstone-ports',
      what: 'does not tell how many ports it has, neither by its name nor by its rows',
      mend: 'name the file .s1p for one port, .s2p for two, and so on',
    });
    return null;
  }
  if (guessed !== null && guessed !== ports) {
    problems.add({
      code: 'touchstone-ports',
      line: lines.line,
      what: `is followed by rows of ${portsText(guessed)}, but the name says ${portsText(ports)}`,
      mend: `name the file .s${guessed}p if its rows are right`,
    });
    return null;
  }
  const referenceOhm = spreadReferences(options.referenceOhm, ports, lines.line, problems);
  if (referenceOhm === null) return null;
  return {
    layout: {
      ...options,
      version: 1,
      ports,
      port: request.port,
      referenceOhm,
      matrixFormat: 'full',
      twoPortOrder: '21_12',
    },
    frequencies: null,
    standing: false,
    notices: [],
  };
}

function prepareVersion2(
  lines: TouchstoneLines,
  request: TouchstoneRequest,
  problems: ProblemList,
): Prepared | null {
  const header = readVersion2Header(lines, problems);
  if (header === null) return null;
  const referenceOhm = spreadReferences(header.referenceOhm, header.ports, lines.line, problems);
  if (referenceOhm === null) return null;
  return {
    layout: {
      ...header.options,
      version: 2,
      ports: header.ports,
      port: request.port,
      referenceOhm,
      matrixFormat: header.matrixFormat,
      twoPortOrder: header.twoPortOrder,
    },
    frequencies: header.frequencies,
    standing: false,
    notices: nameNotices(request.file, header),
  };
}

/** One reference for each port; null after a problem. */
function spreadReferences(
  values: readonly number[],
  ports: number,
  line: number,
  problems: ProblemList,
): readonly number[] | null {
  if (values.length === ports) return values;
  if (values.length === 1)
    return ports <= MOST_LISTED_PORTS ? Array<number>(ports).fill(values[0]!) : tooMany();
  problems.add({
    code: 'touchstone-reference',
    line,
    what: `comes with ${values.length} references for ${portsText(ports)}`,
    mend: 'give one reference for all ports, or one for each',
  });
  return null;

  function tooMany(): null {
    problems.add({
      code: 'touchstone-ports',
      line,
      what: `belongs to a file of ${ports} ports, more than are read (${MOST_LISTED_PORTS})`,
      mend: 'check the number of ports in the name or header',
    });
    return null;
  }
}

/** What must hold before the data are worth reading; adds a problem and gives false where it does not. */
function layoutIsReadable(layout: NetworkLayout, line: number, problems: ProblemList): boolean {
  const { ports, port, parameter } = layout;
  const refuse = (code: string, what: string, mend: string): false => {
    problems.add({ code, line, what, mend });
    return false;
  };
  if (!Number.isInteger(port) || port < 1 || port > ports) {
    problems.add({
      code: 'sweep-port',
      what: `has ${portsText(ports)}, so there is no port ${port}`,
      mend: ports === 1 ? 'leave --port away' : `choose a port from 1 to ${ports}`,
    });
    return false;
  }
  if (parameter === 's') return true;
  const letter = parameter.toUpperCase();
  if ((parameter === 'g' || parameter === 'h') && ports !== 2) {
    return refuse(
      'touchstone-parameter',
      `says ${letter} parameters, which only two-ports have`,
      'save S parameters',
    );
  }
  if ((parameter === 'g' || parameter === 'h') && layout.matrixFormat !== 'full') {
    const what = `says ${letter} parameters in a triangle, but their matrix is not symmetric`;
    return refuse('touchstone-parameter', what, 'save the full matrix, or S parameters');
  }
  if (layout.version === 1 && layout.referenceOhm.some((ohm) => ohm !== layout.referenceOhm[0])) {
    const what = `says ${letter} parameters, normalised to references that differ from port to port`;
    return refuse('touchstone-parameter', what, 'save S parameters, or use one reference for all ports');
  }
  if (ports > CONVERSION_PORT_LIMIT) {
    const what = `says ${letter} parameters of ${ports} ports; they are converted up to ${CONVERSION_PORT_LIMIT}`;
    return refuse('touchstone-parameter', what, 'save S parameters, or fewer ports');
  }
  return true;
}

function nameNotices(file: string, header: Version2Header): readonly Notice[] {
  const named = portsFromName(file);
  if (named === null || named === header.ports) return [];
  const what = `the name says ${portsText(named)}, the file ${portsText(header.ports)}; the file was believed`;
  return [{ code: 'touchstone-ports-name', what }];
}

function portsText(ports: number): string {
  return ports === 1 ? 'one port' : `${ports} ports`;
}

/** Ports beyond which a file is taken for broken: one frequency of so many would fill the size limit. */
const MOST_LISTED_PORTS = 10_000;

const BRACKET = 91;
const HASH = 35;
