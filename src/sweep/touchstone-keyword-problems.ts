/** What can be wrong with the keywords of a Touchstone file, in words. */
import type { Notice } from '../outcome.ts';
import type { FileProblem } from './problem-list.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';

/** A keyword in brackets, its name in small letters, and what follows it. */
export type Keyword = { readonly name: string; readonly argument: string };

/** A keyword with a value that it cannot have. */
export function badArgument(lines: TouchstoneLines, keyword: Keyword, wanted: string): FileProblem {
  return {
    code: 'touchstone-keyword',
    line: lines.line,
    what: `has a value after [${keyword.name}] that should be ${wanted}`,
    found: lines.content(),
    mend: `write ${wanted}`,
  };
}

/** A keyword that no version knows. */
export function unknownKeyword(lines: TouchstoneLines, keyword: Keyword): FileProblem {
  return {
    code: 'touchstone-keyword-unknown',
    line: lines.line,
    what: `has a keyword that Touchstone 2.0 and 2.1 do not know${keyword.name === 'end' ? ' here' : ''}`,
    found: lines.content(),
    mend: 'remove the line if the data mean the same without it, or save the sweep as Touchstone 1.1',
  };
}

/** Text between keywords. */
export function looseLine(lines: TouchstoneLines): FileProblem {
  return {
    code: 'touchstone-loose-line',
    line: lines.line,
    what: 'has text that belongs to no keyword',
    found: lines.content(),
    mend: 'put data after [Network Data], remarks after "!"',
  };
}

/** Text after [End]. */
export function afterEndNotice(line: number): Notice {
  return { code: 'touchstone-after-end', what: `what follows [End], from line ${line} on, was left out` };
}
