/**
 * What is worked out of a solved sweep only when somebody asks for it: the handover's figures, and what has changed
 * since an earlier sweep. Plain data in and out, so that it can be done on a worker.
 */
import { compareSweeps } from '../assess/compare-sweeps.ts';
import type { Comparison } from '../assess/comparison.ts';
import { checkLimits, type Verdict } from '../assess/limits-check.ts';
import { checkLoss, type LossCheck } from '../assess/loss-check.ts';
import { type MatchCurves, matchCurves } from '../assess/match-curves.ts';
import type { LengthWords } from '../assess/place-text.ts';
import { assertNever, type Outcome, succeed } from '../outcome.ts';
import { fixedText, lengthPerMetre, type Units } from '../plot/quantity-text.ts';
import { analyse } from './analyse.ts';
import type { Analysis } from './analysis.ts';
import type { AnalyseRequest, SolveProgress } from './solver.ts';

export type StudyRequest =
  | { readonly type: 'handover'; readonly analysis: Analysis; readonly units: Units }
  | {
      readonly type: 'change';
      readonly before: AnalyseRequest;
      readonly after: Analysis;
      readonly units: Units;
    };

/** What a handover asks: loss, match, and every limit. */
export type Handover = {
  readonly loss: LossCheck;
  readonly match: MatchCurves;
  readonly verdict: Verdict;
};

/** What has changed, with the two sweeps that it is read from. */
export type ChangeStudy = {
  readonly before: Analysis;
  readonly comparison: Comparison;
  /** The difference of the two, as if it were a sweep of the earlier line: a trace of it can be drawn anew. */
  readonly difference: Analysis;
};

export type StudyResult =
  | { readonly type: 'handover'; readonly handover: Handover }
  | { readonly type: 'change'; readonly change: ChangeStudy };

/** Does a study. */
export function doStudy(
  request: StudyRequest,
  onProgress: (progress: SolveProgress) => void = () => {},
): Outcome<StudyResult> {
  switch (request.type) {
    case 'handover':
      return succeed({ type: 'handover', handover: handoverOf(request.analysis, request.units) });
    case 'change': {
      const change = changeOf(request, onProgress);
      return change.ok ? succeed({ type: 'change', change: change.value }, change.notices) : change;
    }
    default:
      return assertNever(request);
  }
}

function handoverOf(analysis: Analysis, units: Units): Handover {
  const question = { ...analysis, lengthWords: wordsIn(units) };
  const loss = checkLoss(question);
  const verdict = checkLimits(question);
  return { loss, verdict, match: matchCurves({ ...analysis, limits: verdict.limits }) };
}

/** Solves the earlier sweep and compares the later one with it. */
function changeOf(
  { before: request, after, units }: Extract<StudyRequest, { type: 'change' }>,
  onProgress: (progress: SolveProgress) => void,
): Outcome<ChangeStudy> {
  const before = analyse({ ...request, skipImpedance: true }, (progress) =>
    onProgress({ stage: `the baseline: ${progress.stage}`, fraction: 0.9 * progress.fraction }),
  );
  if (!before.ok) return before;
  onProgress({ stage: 'comparing', fraction: 0.9 });
  const comparison = compareSweeps({ line: before.value.line, before: before.value, after }, wordsIn(units));
  if (!comparison.ok) return comparison;
  const { difference } = comparison.value;
  return succeed(
    {
      before: before.value,
      comparison: comparison.value,
      difference: { ...before.value, sweep: { ...before.value.sweep, ...difference } },
    },
    comparison.notices,
  );
}

function wordsIn(units: Units): LengthWords {
  return (lengthM) => `${fixedText(lengthM * lengthPerMetre(units), 1)} ${units}`;
}
