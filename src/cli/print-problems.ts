/** Problems as lines on standard error: where, what is wrong, how to mend it. */
import { spokenFile } from '../app/standard-input.ts';
import type { Problem } from '../outcome.ts';
import type { ExitStatus, Io } from './io.ts';
import { write } from './io.ts';

/** One problem: `FILE, line 4: what is wrong: what was found`, and under it how to mend it. */
function problemText({ file, line, what, found, mend }: Problem): string {
  const where = [
    file === undefined ? undefined : spokenFile(file),
    line === undefined ? undefined : `line ${line}`,
  ].filter((part) => part !== undefined);
  const head = where.length > 0 ? `${where.join(', ')}: ` : '';
  return `${head}${what}${found === undefined ? '' : `: ${found}`}\n  ${mend}\n`;
}

/** Prints them all and gives the status that goes with them. */
export async function printProblems(io: Io, problems: readonly Problem[]): Promise<ExitStatus> {
  await write(io.stderr, problems.map((problem) => `feedsonde: ${problemText(problem)}`).join(''));
  return 2;
}
