/** What can be wrong with the network data of a Touchstone file, in words. */
import type { Notice } from '../outcome.ts';
import type { FileProblem } from './problem-list.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';

/** Text where a number belongs. */
export function numberProblem(line: number, token: string): FileProblem {
  return {
    code: 'touchstone-number',
    line,
    what: 'has text where a number belongs',
    found: token,
    mend: mendFor(token),
  };
}

function mendFor(token: string): string {
  if (/^[-+]?\d*,\d/.test(token)) return 'write decimal points, not commas, and blanks between numbers';
  if (/^[-+]?[\d.]+d[-+]?\d+$/i.test(token)) return 'write exponents with E, not D';
  if (/^[-+]?(nan|inf)/i.test(token))
    return 'the instrument stored no value here: sweep again, or remove this row';
  return 'write a plain number here, or put remarks after "!"';
}

/** A row with another count of numbers than its kind has. */
export function rowProblem(lines: TouchstoneLines, found: number, wanted: number, kind: string): FileProblem {
  return {
    code: 'touchstone-row',
    line: lines.line,
    what: `has ${found === 1 ? 'one number' : `${found} numbers`}, a ${kind} has ${wanted}`,
    found: lines.content(200),
    mend: 'complete or remove this row; the name must tell the number of ports (.s1p, .s2p, …)',
  };
}

/** A matrix whose numbers do not end with a line. */
export function matrixProblem(firstLine: number, line: number, length: number): FileProblem {
  return {
    code: 'touchstone-row',
    line: firstLine,
    what: `begins a matrix of ${length} numbers that ends in the middle of line ${line}`,
    mend: 'look for a missing or extra number in these lines; the name must tell the number of ports',
  };
}

/** Fewer numbers than a matrix needs. */
export function incomplete(line: number, what: string): FileProblem {
  return {
    code: 'touchstone-incomplete',
    line,
    what: `has ${what}`,
    mend: 'the file was cut short or the number of ports is wrong: copy it again, or mend its name',
  };
}

/** A magnitude below zero. */
export function negativeMagnitude(line: number, magnitude: number): FileProblem {
  return {
    code: 'touchstone-magnitude',
    line,
    what: 'has a magnitude below zero',
    found: String(magnitude),
    mend: 'if the values are in dB, write DB in place of MA in the option line',
  };
}

/** A keyword in a file that has no [Version]. */
export function keywordInVersion1(lines: TouchstoneLines): FileProblem {
  return {
    code: 'touchstone-keyword',
    line: lines.line,
    what: 'has a keyword, but the file does not begin with [Version]',
    found: lines.content(200),
    mend: 'begin the file with [Version] 2.0, or remove the keyword lines',
  };
}

/** An option line after the first, which does not count. */
export function secondOptionLine(lines: TouchstoneLines): Notice {
  return {
    code: 'touchstone-second-option-line',
    what: `line ${lines.line} is a second option line; only the first one counts`,
  };
}
