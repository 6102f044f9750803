/** The verdict on a line, as every front door gives it. */

import type { Severity } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import type { Finding } from './finding.ts';
import { fitDoubt } from './fit-doubt.ts';

/** What was found, counted; a logged entry has the same counts. */
export type Verdict = {
  readonly faults: number;
  readonly watches: number;
  /** True when the described line explains the sweep badly, so that all the rest means little. */
  readonly doubtful?: boolean;
};

/** The verdict on what was found and on how well the line explains it. */
export function verdictOf({
  findings,
  solution,
}: {
  readonly findings: readonly Finding[];
  readonly solution: Solution;
}): Verdict {
  const count = (severity: Severity) => findings.filter((finding) => finding.severity === severity).length;
  return { faults: count('fault'), watches: count('watch'), doubtful: fitDoubt(solution) !== null };
}

/** Severity of the worst of it; a doubtful verdict is never sound. */
export function worstOf({ faults, watches, doubtful = false }: Verdict): Severity {
  return faults > 0 ? 'fault' : watches > 0 || doubtful ? 'watch' : 'sound';
}

/** "1 fault, 2 to watch"; "no fault found". */
export function verdictWords({ faults, watches, doubtful = false }: Verdict): string {
  const words = [
    ...(faults > 0 ? [`${faults} fault${faults === 1 ? '' : 's'}`] : []),
    ...(watches > 0 ? [`${watches} to watch`] : []),
    ...(doubtful ? ['this line explains the sweep badly'] : []),
  ];
  return words.length > 0 ? words.join(', ') : 'no fault found';
}
