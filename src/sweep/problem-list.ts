/** Collects what is wrong with a file, up to a number that a person will still read. */
import type { Problem } from '../outcome.ts';
import { cleanForDisplay } from './clean-text.ts';

/** Most problems that are listed for one file. */
const PROBLEM_LIMIT = 20;

/** Longest piece of a file quoted in a problem, characters. */
const FOUND_LENGTH = 60;

/** What a reader says of one problem; `found` is raw text of the file and is cleaned here. */
export type FileProblem = {
  readonly code: string;
  readonly line?: number;
  readonly what: string;
  readonly found?: string;
  readonly mend: string;
};

/** Problems of one file in the order they were met. */
export type ProblemList = {
  /** Adds a problem; past the limit only a last word is added that says so. */
  add(problem: FileProblem): void;
  /** True once the limit is reached: reading on is no use. */
  readonly full: boolean;
  readonly problems: readonly Problem[];
};

/** An empty list for the named file (the name is cleaned for display). */
export function createProblemList(file: string): ProblemList {
  const shownFile = cleanForDisplay(file);
  const problems: Problem[] = [];
  let full = false;
  return {
    add(problem) {
      if (full) return;
      if (problems.length === PROBLEM_LIMIT) {
        full = true;
        problems.push({
          code: 'more-problems',
          file: shownFile,
          ...(problem.line === undefined ? {} : { line: problem.line }),
          what: `has more problems than the ${PROBLEM_LIMIT} listed; reading stopped here`,
          mend: 'mend those listed first, then read the file again',
        });
        return;
      }
      const { found, ...rest } = problem;
      problems.push({
        ...rest,
        file: shownFile,
        ...(found === undefined ? {} : { found: cleanForDisplay(found, FOUND_LENGTH) }),
      });
    },
    get full() {
      return full;
    },
    get problems() {
      return problems;
    },
  };
}
