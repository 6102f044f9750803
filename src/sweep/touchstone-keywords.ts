/** The header of Touchstone 2.0 and 2.1: its keywords, from the version up to the network data. */
import { readNumber } from './number-scan.ts';
import type { ProblemList } from './problem-list.ts';
import { BRACKET, readKeyword, skipInformation } from './touchstone-keyword-line.ts';
import { badArgument, type Keyword, looseLine, unknownKeyword } from './touchstone-keyword-problems.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';
import { readOptionLine, type TouchstoneOptions } from './touchstone-option-line.ts';

/** Most ports that a header may claim; the data must then hold as many numbers. */
const MOST_PORTS = 100_000;

export type MatrixFormat = 'full' | 'lower' | 'upper';

/** Order of the off-diagonal terms of a two-port: `21_12` has N21 before N12, as in version 1. */
export type TwoPortOrder = '21_12' | '12_21';

/** What a version 2 header says. */
export type Version2Header = {
  readonly options: TouchstoneOptions;
  readonly ports: number;
  readonly twoPortOrder: TwoPortOrder;
  readonly matrixFormat: MatrixFormat;
  /** One for each port. */
  readonly referenceOhm: readonly number[];
  readonly frequencies: number;
};

type Draft = {
  options: TouchstoneOptions | null;
  readonly seen: Map<string, number>;
  ports: number | null;
  frequencies: number | null;
  twoPortOrder: TwoPortOrder | null;
  matrixFormat: MatrixFormat;
  reference: number[] | null;
  referenceLine: number;
};

/**
 * Reads from the `[Version]` line, on which `lines` stands, through `[Network Data]`. The order between is not
 * insisted on.
 *
 * @returns The header, or null after adding every problem found.
 * @source references.md section 7, rows on 2.x.
 */
export function readVersion2Header(lines: TouchstoneLines, problems: ProblemList): Version2Header | null {
  const before = problems.problems.length;
  const draft: Draft = {
    options: null,
    seen: new Map(),
    ports: null,
    frequencies: null,
    twoPortOrder: null,
    matrixFormat: 'full',
    reference: null,
    referenceLine: 0,
  };
  readVersion(lines, problems);
  if (problems.problems.length > before) return null;
  while (lines.next() && !problems.full) {
    if (lines.firstCode === HASH) {
      if (draft.options === null) takeOptionLine(lines, draft, problems);
      continue;
    }
    if (lines.firstCode !== BRACKET) {
      takeLooseLine(lines, draft, problems);
      continue;
    }
    const keyword = readKeyword(lines, problems);
    if (keyword === null) continue;
    if (keyword.name === 'network data') {
      if (keyword.argument !== '') problems.add(badArgument(lines, keyword, 'nothing on its own line'));
      return finish(draft, lines.line, problems, before);
    }
    takeKeyword(keyword, lines, draft, problems);
  }
  problems.add({
    code: 'touchstone-no-data',
    line: lines.line,
    what: 'ends before [Network Data]',
    mend: 'save the sweep again; if the file was cut short, copy it again',
  });
  return null;
}

function readVersion(lines: TouchstoneLines, problems: ProblemList): void {
  const keyword = readKeyword(lines, problems);
  if (keyword === null) return;
  if (keyword.name !== 'version') {
    problems.add({
      code: 'touchstone-version',
      line: lines.line,
      what: 'has a keyword before [Version]',
      found: lines.content(),
      mend: 'begin the file with [Version] 2.0 (or 2.1), or leave all keywords away for version 1',
    });
  } else if (keyword.argument !== '2.0' && keyword.argument !== '2.1') {
    problems.add({
      code: 'touchstone-version',
      line: lines.line,
      what: 'has a version other than 2.0 and 2.1 (a file of version 1 has no [Version] line)',
      found: keyword.argument,
      mend: 'save the sweep as Touchstone 1.1, 2.0 or 2.1',
    });
  }
}

function takeOptionLine(lines: TouchstoneLines, draft: Draft, problems: ProblemList): void {
  const options = readOptionLine(lines.content(), lines.line);
  if ('code' in options) problems.add(options);
  else draft.options = options;
}

function takeLooseLine(lines: TouchstoneLines, draft: Draft, problems: ProblemList): void {
  const wanted = draft.ports ?? Number.POSITIVE_INFINITY;
  if (draft.reference !== null && draft.reference.length < wanted) {
    takeReferences(lines.content(), lines, draft, problems);
  } else problems.add(looseLine(lines));
}

function takeKeyword(keyword: Keyword, lines: TouchstoneLines, draft: Draft, problems: ProblemList): void {
  const { name, argument } = keyword;
  const earlier = draft.seen.get(name);
  if (earlier !== undefined && name !== 'begin information') {
    problems.add({
      code: 'touchstone-keyword',
      line: lines.line,
      what: `has a keyword that line ${earlier} gave already`,
      found: lines.content(),
      mend: 'keep one of the two',
    });
    return;
  }
  draft.seen.set(name, lines.line);
  switch (name) {
    case 'number of ports':
      draft.ports = wholeNumber(keyword, MOST_PORTS, lines, problems);
      return;
    case 'number of frequencies':
      draft.frequencies = wholeNumber(keyword, Number.MAX_SAFE_INTEGER, lines, problems);
      return;
    case 'number of noise frequencies':
      return;
    case 'two-port data order':
      if (argument === '21_12' || argument === '12_21') draft.twoPortOrder = argument;
      else problems.add(badArgument(lines, keyword, '21_12 or 12_21'));
      return;
    case 'matrix format': {
      const format = argument.toLowerCase();
      if (format === 'full' || format === 'lower' || format === 'upper') draft.matrixFormat = format;
      else problems.add(badArgument(lines, keyword, 'Full, Lower or Upper'));
      return;
    }
    case 'reference':
      draft.reference = [];
      draft.referenceLine = lines.line;
      takeReferences(argument, lines, draft, problems);
      return;
    case 'begin information':
      skipInformation(lines, problems);
      return;
    case 'mixed-mode order':
      problems.add({
        code: 'touchstone-mixed-mode',
        line: lines.line,
        what: 'says that the file holds mixed-mode parameters, from which one port cannot be read',
        found: lines.content(),
        mend: 'save the sweep with single-ended ports',
      });
      return;
    default:
      problems.add(unknownKeyword(lines, keyword));
  }
}

function takeReferences(text: string, lines: TouchstoneLines, draft: Draft, problems: ProblemList): void {
  for (const field of text.split(/\s+/).filter(Boolean)) {
    const value = readNumber(field);
    draft.reference?.push(value);
    if (value > 0) continue;
    problems.add({
      code: 'touchstone-reference',
      line: lines.line,
      what: 'has a reference that is no positive number of ohms',
      found: field,
      mend: 'write one positive real number for each port',
    });
    return;
  }
}

function finish(draft: Draft, line: number, problems: ProblemList, before: number): Version2Header | null {
  const require = (keyword: string, mend: string) =>
    problems.add({
      code: 'touchstone-keyword-missing',
      line,
      what: `reaches its data without ${keyword}`,
      mend,
    });
  if (draft.options === null && !problems.problems.some((p) => p.code === 'touchstone-option-line')) {
    require('an option line', 'write the option line after [Version], like "# Hz S RI R 50"');
  }
  const { ports, frequencies } = draft;
  if (!draft.seen.has('number of ports'))
    require('[Number of Ports]', 'add [Number of Ports] and the number');
  if (!draft.seen.has('number of frequencies')) {
    require('[Number of Frequencies]', 'add [Number of Frequencies] and the number');
  }
  const orderLine = draft.seen.get('two-port data order');
  if (ports === 2 && orderLine === undefined) {
    require('[Two-Port Data Order]', 'add [Two-Port Data Order] 21_12 or 12_21, as the writer of the file meant it');
  } else if (ports !== null && ports !== 2 && orderLine !== undefined) {
    problems.add({
      code: 'touchstone-keyword',
      line: orderLine,
      what: `has [Two-Port Data Order], but the file has ${ports} ports`,
      mend: 'remove this line, or mend [Number of Ports]',
    });
  }
  if (draft.reference !== null && ports !== null && draft.reference.length !== ports) {
    problems.add({
      code: 'touchstone-reference',
      line: draft.referenceLine,
      what: `has ${draft.reference.length} references for ${ports} ports`,
      mend: 'write one positive real number for each port',
    });
  }
  if (problems.problems.length > before || draft.options === null || ports === null || frequencies === null) {
    return null;
  }
  return {
    options: draft.options,
    ports,
    twoPortOrder: draft.twoPortOrder ?? '21_12',
    matrixFormat: draft.matrixFormat,
    referenceOhm: draft.reference ?? draft.options.referenceOhm,
    frequencies,
  };
}

function wholeNumber(
  keyword: Keyword,
  most: number,
  lines: TouchstoneLines,
  problems: ProblemList,
): number | null {
  const value = readNumber(keyword.argument);
  if (Number.isInteger(value) && value > 0 && value <= most) return value;
  problems.add(
    badArgument(lines, keyword, `a whole number above 0${most < 1e9 ? ` and up to ${most}` : ''}`),
  );
  return null;
}

const HASH = 35;
