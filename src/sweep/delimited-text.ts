/**
 * A table with a header (CSV and its relatives) into a sweep.
 *
 * The header is found by the names of its columns, wherever it stands among what an instrument writes above its data.
 * Plain rows are split here, because a general CSV parser takes most of a second for a long sweep; rows with quotes
 * go through `csv-parse`.
 */
import { parse } from 'csv-parse/sync';
import { fail, type Notice, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from './clean-text.ts';
import { type Column, type ColumnChoice, chooseColumns, recogniseColumns } from './delimited-columns.ts';
import { readFrequencyColumn, readPair } from './delimited-values.ts';
import { createFloatColumn, type FloatColumn } from './float-column.ts';
import { readNumber } from './number-scan.ts';
import { createProblemList, type ProblemList } from './problem-list.ts';
import type { Sweep } from './sweep.ts';
import { createSweepPoints } from './sweep-points.ts';

/** Reference of a table, which names none, Ω. Common practice: analyzers for coax measure against 50 Ω. */
const TABLE_PORT_OHM = 50;

/** Lines looked at to find the header. */
const HEADER_SEARCH_LINES = 100;

/** Longest line of a table, characters; longer ones are no rows of a sweep. */
const LONGEST_LINE = 20_000;

const COMMENT_LIMIT = 200;

type Delimiter = '\t' | ';' | ',' | ' ';
const DELIMITERS: readonly Delimiter[] = ['\t', ';', ',', ' '];

type Header = {
  readonly line: number;
  readonly text: string;
  readonly delimiter: Delimiter;
  readonly names: readonly string[];
  readonly columns: readonly Column[];
};

/**
 * Reads a table: comma, semicolon, tab or blanks between columns; decimal points, or decimal commas where the
 * delimiter is no comma; lines that begin with `#` or `!` are comments (the header may stand in one).
 *
 * @param text With LF as its line end.
 * @param request.port Port whose S columns are read, counted from 1.
 * @returns The sweep relative to 50 Ω (said in a notice), or every problem found (up to a limit).
 */
export function readDelimitedText(
  text: string,
  request: { readonly file: string; readonly port: number },
): Outcome<Sweep> {
  const problems = createProblemList(request.file);
  const header = findHeader(text);
  if (header === null) {
    problems.add({
      code: 'delimited-no-header',
      what: 'has no line that names its columns, so their meaning and units are not known',
      mend: 'put a header above the data, for example "frequency_hz,real,imaginary", or save the sweep as Touchstone',
    });
    return fail(...problems.problems);
  }
  const choice = chooseColumns(header.columns, request.port);
  if ('code' in choice) {
    problems.add({ ...choice, line: header.line, found: header.text });
    return fail(...problems.problems);
  }
  const table = readRows(text, header, choice, problems);
  const sweep = makePoints(table, header, choice, problems);
  if (sweep === null) return fail(...problems.problems);
  return succeed(
    {
      frequencyHz: sweep.frequencyHz,
      gamma: sweep.gamma,
      portOhm: TABLE_PORT_OHM,
      port: request.port,
      ports: choice.ports,
      file: cleanForDisplay(request.file),
      ...(sweep.transmission ? { transmission: sweep.transmission } : {}),
      comments: table.comments,
    },
    sweep.notices,
  );
}

/** True when some line near the top names columns that make a sweep: what tells a table from a list of numbers. */
export function hasHeader(text: string): boolean {
  return findHeader(text) !== null;
}

/** The line, plain or comment, whose columns mean most; plain lines come first. Null when none means two things. */
function findHeader(text: string): Header | null {
  let best: Header | null = null;
  let bestScore = 1;
  let line = 0;
  for (const raw of linesOf(text)) {
    if (++line > HEADER_SEARCH_LINES) break;
    const content = raw.slice(0, LONGEST_LINE).trim();
    const comment = isComment(content);
    const shown = comment ? content.replace(/^[#!\s]+/, '') : content;
    let parted = false;
    for (const delimiter of DELIMITERS) {
      // Names hold blanks too ("Freq [MHz];S11 dB"): these part columns only where nothing else does.
      if (delimiter === ' ' && parted) break;
      const names = splitRow(shown, delimiter);
      if (names === null || names.length < 2) continue;
      const columns = recogniseColumns(names.map((name) => cleanForDisplay(name, 60)));
      const roles = new Set(columns.map((column) => `${column.role} ${column.parameter}`)).size;
      parted ||= roles >= 2;
      const score = roles < 2 ? 0 : roles + (comment ? 0 : 0.5);
      if (score <= bestScore) continue;
      bestScore = score;
      best = { line, text: shown, delimiter, names, columns };
    }
  }
  return best;
}

type Table = {
  readonly line: FloatColumn;
  /** Frequency, then the reflection's two, then the transmission's two. */
  readonly values: readonly FloatColumn[];
  readonly comments: readonly string[];
};

function readRows(text: string, header: Header, choice: ColumnChoice, problems: ProblemList): Table {
  const { frequency, reflection, transmission } = choice;
  const wanted = [frequency, reflection.first, reflection.second];
  if (transmission) wanted.push(transmission.first, transmission.second);
  const table = {
    line: createFloatColumn(),
    values: wanted.map(() => createFloatColumn()),
    comments: [] as string[],
  };
  const decimals = { commaLine: 0, pointLine: 0 };
  let line = 0;
  for (const raw of linesOf(text)) {
    line++;
    if (problems.full) break;
    const content = raw.trim();
    if (isComment(content)) {
      if (line !== header.line && table.comments.length < COMMENT_LIMIT) {
        const comment = cleanForDisplay(content.slice(1), 500);
        if (comment !== '') table.comments.push(comment);
      }
      continue;
    }
    if (content === '' || line <= header.line) continue;
    const fields = readFields(raw, line, header, problems);
    if (fields === null) continue;
    const numbers = wanted.map((column) =>
      readField(fields[column.index] ?? '', column, line, decimals, problems),
    );
    if (numbers.some(Number.isNaN)) continue;
    table.line.push(line);
    table.values.forEach((column, index) => {
      column.push(numbers[index]!);
    });
  }
  if (decimals.commaLine > 0 && decimals.pointLine > 0) {
    problems.add({
      code: 'delimited-decimals',
      line: Math.max(decimals.commaLine, decimals.pointLine),
      what: `has decimal ${decimals.commaLine > decimals.pointLine ? 'commas' : 'points'} after the other kind above`,
      mend: 'write all numbers with decimal points',
    });
  }
  return table;
}

/** Fields of one row, as many as the header has; null after adding a problem. */
function readFields(
  raw: string,
  line: number,
  header: Header,
  problems: ProblemList,
): readonly string[] | null {
  const fields = raw.length > LONGEST_LINE ? null : splitRow(raw, header.delimiter);
  const wanted = header.names.length;
  if (fields !== null && fields.length === wanted + 1 && fields[wanted]?.trim() === '') return fields;
  if (fields !== null && fields.length === wanted) return fields;
  const commas = header.delimiter === ',' && fields !== null && fields.length > wanted;
  const count = fields === null ? 'cannot be split into fields' : `has ${fields.length} of ${wanted} columns`;
  problems.add({
    code: 'delimited-row',
    line,
    what: commas ? `has ${fields.length} fields, the header ${wanted}` : count,
    found: raw.slice(0, 200),
    mend: commas
      ? 'decimal commas cannot be told from separating ones: write decimal points, or separate by semicolons'
      : 'complete or remove this row',
  });
  return null;
}

function readField(
  field: string,
  column: Column,
  line: number,
  decimals: { commaLine: number; pointLine: number },
  problems: ProblemList,
): number {
  const text = field.trim();
  const value = readNumber(text);
  if (!Number.isNaN(value)) {
    if (decimals.pointLine === 0 && text.includes('.')) decimals.pointLine = line;
    return value;
  }
  if (/^[-+]?\d*,\d+(e[-+]?\d+)?$/i.test(text)) {
    const swapped = readNumber(text.replace(',', '.'));
    if (!Number.isNaN(swapped)) {
      if (decimals.commaLine === 0) decimals.commaLine = line;
      return swapped;
    }
  }
  problems.add({
    code: 'delimited-number',
    line,
    what: `has no number in column "${column.name}"`,
    found: text === '' ? '(empty)' : text,
    mend: 'write a plain number here, or remove this row',
  });
  return Number.NaN;
}

function makePoints(table: Table, header: Header, choice: ColumnChoice, problems: ProblemList) {
  const [frequency, first, second, throughFirst, throughSecond] = table.values.map((column) =>
    column.values(),
  );
  const notices: Notice[] = [
    {
      code: 'delimited-port',
      what: `the table names no reference; Γ was taken relative to ${TABLE_PORT_OHM} Ω`,
    },
  ];
  const points = createSweepPoints(problems, {
    transmission: choice.transmission !== null,
    scaleHint: 'check the frequency unit in the header',
  });
  if (table.line.length > 0) {
    const scale = readFrequencyColumn(choice.frequency, frequency!);
    const gamma = readPair(choice.reflection, first!, second!);
    const through = choice.transmission ? readPair(choice.transmission, throughFirst!, throughSecond!) : null;
    for (const reading of [scale, gamma, through]) {
      if (reading === null) continue;
      if ('code' in reading) problems.add({ ...reading, line: header.line, found: header.text });
      else notices.push(...reading.notices);
    }
    if ('code' in scale || 'code' in gamma || (through !== null && 'code' in through)) return null;
    for (let row = 0; row < table.line.length; row++) {
      const [re, im] = gamma.toComplex(first![row]!, second![row]!);
      const [throughRe, throughIm] = through?.toComplex(throughFirst![row]!, throughSecond![row]!) ?? [0, 0];
      points.add(table.line.get(row), frequency![row]! * scale.scaleHz, re, im, throughRe, throughIm);
    }
  }
  const sweep = points.finish();
  return sweep && { ...sweep, notices: [...notices, ...sweep.notices] };
}

/** Fields of one line; null when its quotes do not pair. */
function splitRow(line: string, delimiter: Delimiter): string[] | null {
  if (!line.includes('"')) {
    return delimiter === ' ' ? line.trim().split(/\s+/) : line.split(delimiter);
  }
  try {
    const separator = delimiter === ' ' ? [' ', '\t'] : delimiter;
    const [fields = []] = parse(line, {
      delimiter: separator,
      relax_column_count: true,
      relax_quotes: true,
      trim: true,
    });
    return delimiter === ' ' ? fields.filter((field) => field !== '') : fields;
  } catch {
    return null;
  }
}

function isComment(content: string): boolean {
  return content.startsWith('#') || content.startsWith('!');
}

/** The lines one by one, without a copy of them all. */
function* linesOf(text: string): Generator<string> {
  for (let start = 0; start < text.length; ) {
    const newline = text.indexOf('\n', start);
    const end = newline === -1 ? text.length : newline;
    yield text.slice(start, end);
    start = end + 1;
  }
}
