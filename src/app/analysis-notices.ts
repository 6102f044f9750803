/** All doubts that go with an analysis, the gravest first. */
import { fitDoubt } from '../assess/fit-doubt.ts';
import type { Notice } from '../outcome.ts';
import type { Analysis } from './analysis.ts';

/** The notices of an analysis, led by the one that touches all of it. */
export function analysisNotices({ solution, notices }: Analysis): readonly Notice[] {
  const doubt = fitDoubt(solution);
  return doubt ? [doubt, ...notices] : notices;
}
