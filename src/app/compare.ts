/** Two sweeps of one line and what has changed between them: both are analysed, then compared. */
import { compareSweeps } from '../assess/compare-sweeps.ts';
import type { Comparison } from '../assess/comparison.ts';
import { inMetres, type LengthWords } from '../assess/place-text.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { analyse } from './analyse.ts';
import type { Analysis } from './analysis.ts';
import type { AnalyseRequest, SolveProgress } from './solver.ts';

export type CompareSweepsRequest = {
  /** The earlier sweep; its line is what both are read by. */
  readonly before: AnalyseRequest;
  readonly after: AnalyseRequest;
  /** How lengths are written in places. Default: metres. */
  readonly lengthWords?: LengthWords;
};

export type ComparedSweeps = {
  readonly before: Analysis;
  readonly after: Analysis;
  readonly comparison: Comparison;
};

/** Compares two sweeps. Problems name the sweep that they are about; notices travel in the analyses and the comparison. */
export function compare(
  request: CompareSweepsRequest,
  onProgress: (progress: SolveProgress) => void = () => {},
): Outcome<ComparedSweeps> {
  const { lengthWords = inMetres } = request;
  const before = analyse({ ...request.before, skipImpedance: true }, (progress) =>
    onProgress({ ...progress, fraction: 0.45 * progress.fraction }),
  );
  const after = analyse({ ...request.after, skipImpedance: true }, (progress) =>
    onProgress({ ...progress, fraction: 0.45 + 0.45 * progress.fraction }),
  );
  if (!before.ok || !after.ok)
    return fail(...[before, after].flatMap((outcome) => (outcome.ok ? [] : outcome.problems)));
  onProgress({ stage: 'comparing', fraction: 0.9 });
  const comparison = compareSweeps(
    { line: before.value.line, before: before.value, after: after.value },
    lengthWords,
  );
  if (!comparison.ok) return comparison;
  return succeed({ before: before.value, after: after.value, comparison: comparison.value }, [
    ...before.notices,
    ...after.notices,
  ]);
}
