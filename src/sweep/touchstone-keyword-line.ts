/** Lines of Touchstone 2.0 and 2.1 that begin with a keyword in brackets, wherever they stand. */
import type { ProblemList } from './problem-list.ts';
import type { Keyword } from './touchstone-keyword-problems.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';

/** Code of the character that a keyword begins with. */
export const BRACKET = 91;

/** Keyword of the current line, name in small letters; null after adding a problem. */
export function readKeyword(lines: TouchstoneLines, problems: ProblemList): Keyword | null {
  const text = lines.content();
  const close = text.indexOf(']');
  if (close === -1) {
    problems.add({
      code: 'touchstone-keyword',
      line: lines.line,
      what: 'has a keyword without its closing bracket',
      found: text,
      mend: 'write the keyword in square brackets',
    });
    return null;
  }
  const name = text.slice(1, close).trim().toLowerCase().replace(/\s+/g, ' ');
  return { name, argument: text.slice(close + 1).trim() };
}

/** Goes to the line that ends an information block, or to the end of the file after adding a problem. */
export function skipInformation(lines: TouchstoneLines, problems: ProblemList): void {
  const begin = lines.line;
  while (lines.next()) {
    if (lines.firstCode === BRACKET && /^\[\s*end\s+information\s*\]/i.test(lines.content(200))) return;
  }
  problems.add({
    code: 'touchstone-information',
    line: begin,
    what: 'begins an information block that never ends',
    mend: 'add [End Information]',
  });
}
