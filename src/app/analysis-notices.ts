/** All doubts that go with an analysis, the gravest first. */
import { cableNotices } from '../assess/cable-notices.ts';
import { fitDoubt } from '../assess/fit-doubt.ts';
import type { Notice } from '../outcome.ts';
import type { Analysis } from './analysis.ts';

/** The notices of an analysis, led by the one that touches all of it; cables used beyond their figures come last. */
export function analysisNotices({ sweep, line, solution, notices }: Analysis): readonly Notice[] {
  const doubt = fitDoubt(solution);
  return [...(doubt ? [doubt] : []), ...notices, ...cableNotices(line, sweep.frequencyHz.at(-1) ?? 0)];
}
