/**
 * What has changed on a line between two sweeps: the earlier one is turned into what the later day would have shown of
 * it, the two are subtracted, so that ripple and joints cancel, and what is left over is placed and named.
 */
import { jointName, type Line } from '../line/line.ts';
import { groupDelaySPerM, pathTo } from '../line/medium-run.ts';
import { medianStepHz } from '../locate/grid-weights.ts';
import type { Solution } from '../locate/solution.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { createWindow } from '../numerics/window.ts';
import { type Notice, type Outcome, succeed } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { type Alignment, alignSweeps } from './compare-align.ts';
import { type CommonSweeps, commonSweeps, type SolvedSweep } from './compare-common.ts';
import { type FoundChange, findChanges } from './compare-find.ts';
import { changedRun, lossPerGrowthDb, type SolvedRun, solvedRun } from './compare-run.ts';
import { coarseStretch } from './compare-stretch.ts';
import { COMPARE_WINDOW, planSeenTrace, sizesOf } from './compare-trace.ts';
import { NO_LINE_CHANGE, planWarp } from './compare-warp.ts';
import type { BandChange, Change, Comparison } from './comparison.ts';
import { inMetres, type LengthWords, placeText } from './place-text.ts';

export type CompareRequest = {
  /** As described for the earlier sweep. */
  readonly line: Line;
  readonly before: SolvedSweep;
  readonly after: SolvedSweep;
};

/** Compares two sweeps of one line. Notices travel in the comparison. */
export function compareSweeps(
  request: CompareRequest,
  lengthWords: LengthWords = inMetres,
): Outcome<Comparison> {
  const { line, before, after } = request;
  const common = commonSweeps(before, after);
  if (!common.ok) return common;
  const { frequencyHz } = common.value;
  const solved = solvedRun(line, before.solution, frequencyHz, before.sweep.portOhm);
  const resolutionM = resolutionOf(frequencyHz, solved);
  // Behind a cut nothing can be compared.
  const seenToM = Math.min(solved.jointM.at(-1)!, after.solution.lengthM / after.solution.distanceScale);
  const { alignment, notices } = align(common.value, solved, seenToM + 2 * resolutionM, resolutionM);
  const run = changedRun(solved, alignment.change);
  const tracer = planSeenTrace(frequencyHz, run, seenToM + 2 * resolutionM, resolutionM);
  const found = findChanges({
    difference: { frequencyHz, gamma: alignment.difference, weight: common.value.weight, run },
    tracer,
    resolutionM,
    jointM: [...solved.jointM.filter((m) => m < seenToM), seenToM],
    ownSizes: sizesOf(tracer.trace(common.value.after)),
    reachM: [reachM(common.value.beforeStepHz, solved), reachM(medianStepHz(frequencyHz), solved)],
  });
  const placed = found.map((change) => placeChange(line, before.solution, change, resolutionM, lengthWords));
  const ended = endChange(request, common.value, solved, alignment, lengthWords);
  const changes =
    ended === null ? placed : [...placed.filter((c) => c.distanceM < ended.distanceM - resolutionM), ended];
  const perGrowthDb = lossPerGrowthDb(solved, frequencyHz);
  return succeed({
    verdict: changes.length > 0 ? 'changed' : 'unchanged',
    changes,
    stretchPpm: 1e6 * alignment.change.stretch,
    stretchSigmaPpm: 1e6 * Math.hypot(alignment.stretchSigma, LEAST_STRETCH_SIGMA),
    lossChangeDb: perGrowthDb * alignment.change.loss,
    lossChangeSigmaDb: Math.hypot(perGrowthDb * alignment.lossSigma, LEAST_LOSS_SIGMA_DB),
    bands: line.limits.bands.map(
      (band): BandChange => ({
        name: band.name,
        fromHz: band.fromHz,
        toHz: band.toHz,
        beforeDb: worstReturnLossDb(before.sweep, band),
        afterDb: worstReturnLossDb(after.sweep, band),
      }),
    ),
    end: {
      before: before.solution.end,
      after: after.solution.end,
      lengthBeforeM: before.solution.lengthM,
      lengthAfterM: after.solution.lengthM,
    },
    common: { startHz: frequencyHz[0]!, stopHz: frequencyHz.at(-1)!, points: frequencyHz.length },
    notices: [...common.notices, ...notices, ...strangers(changes, alignment)],
  });
}

/** Doubt that no noise tells of: sections that weather differently, corrections. Chosen by `test/bench/change.ts`. */
const LEAST_STRETCH_SIGMA = 12e-6;
const LEAST_LOSS_SIGMA_DB = 0.06;

/** Changes, and growth of delay, from which two sweeps are hardly of one line. */
const MANY_CHANGES = 5;
const FAR_STRETCH = 1200e-6;

function strangers(changes: readonly Change[], { change }: Alignment): Notice[] {
  if (changes.length < MANY_CHANGES && Math.abs(change.stretch) < FAR_STRETCH) return [];
  return [
    {
      code: 'not-alike',
      what:
        'the two sweeps differ nearly everywhere: either much was changed on this line, or they are not of the same ' +
        'line, or not taken at the same reference plane',
    },
  ];
}

/** 6 dB width of an echo with the comparison's taper, m, mean over the run. */
function resolutionOf(frequencyHz: Float64Array, { run, jointM, endS }: SolvedRun): number {
  const bandHz = frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
  const width = createWindow(COMPARE_WINDOW, frequencyHz.length).width6DbBins;
  const lengthM = jointM[jointM.length - 1]!;
  const delaySPerM = lengthM > 0 ? endS / (2 * lengthM) : groupDelaySPerM(run, frequencyHz)[0]!;
  return width / (2 * bandHz * delaySPerM);
}

/** Distance at which a sweep folds, m, by the mean delay of the run. */
function reachM(stepHz: number, { jointM, endS }: SolvedRun): number {
  return jointM[jointM.length - 1]! / (stepHz * endS);
}

/** Shares of the earlier sweep's reach in delay that echoes may use, and of its end's delay that they do at least. */
const REACH_SHARE = 0.92;
const END_SHARE = 1.02;
const SECOND_TRIP = 2.05;
/** Ringing of an end, s. */
const RINGING_S = 4e-9;

function align(
  common: CommonSweeps,
  solved: SolvedRun,
  toM: number,
  resolutionM: number,
): { readonly alignment: Alignment; readonly notices: readonly Notice[] } {
  const { frequencyHz, beforeHz, beforeStepHz } = common;
  const reachS = 1 / beforeStepHz;
  const leastS = END_SHARE * solved.endS + RINGING_S;
  const longestS = Math.max(leastS, Math.min(SECOND_TRIP * solved.endS + RINGING_S, REACH_SHARE * reachS));
  const tracer = planSeenTrace(frequencyHz, solved.run, toM, resolutionM);
  const plan = { sourceHz: beforeHz, targetHz: frequencyHz, pieces: solved.pieces, longestS };
  const masked = maskedBy(common.after, common.weight);
  const middle = frequencyHz.length >> 1;
  const carrier = pathTo(solved.run, toM).phase[middle]! / toM;
  const stretch = coarseStretch(
    tracer,
    tracer.trace(maskedBy(planWarp(plan)(common.before)(NO_LINE_CHANGE), common.weight)),
    tracer.trace(masked),
    carrier,
  );
  const alignment = alignSweeps({
    after: common.after,
    before: common.before,
    plan,
    tracer,
    weight: common.weight,
    stretch,
  });
  const folded: Notice[] =
    leastS <= reachS
      ? []
      : [
          {
            code: 'line-folds',
            what:
              'the line is longer than the earlier sweep can see without folding: what the weather did to it can only ' +
              'partly be taken out; take the baseline again with more points',
          },
        ];
  return { alignment, notices: folded };
}

function placeChange(
  line: Line,
  solution: Solution,
  found: FoundChange,
  resolutionM: number,
  lengthWords: LengthWords,
): Change {
  const distanceM = found.distanceM * solution.distanceScale;
  const section = sectionAtM(line, solution, distanceM);
  return {
    distanceM,
    distanceSigmaM: Math.hypot(
      scaleSigmaM(solution, distanceM),
      Math.max(found.sigmaM, LEAST_SIGMA_SHARE * resolutionM),
    ),
    levelDb: found.levelDb,
    kind: found.kind,
    joint: found.joint === null ? null : { index: found.joint, name: jointName(line, found.joint) },
    place: placeText(line, { distanceM, jointIndex: found.joint, section }, lengthWords),
  };
}

/** What structure and templates leave in a place, as a share of a resolution. */
const LEAST_SIGMA_SHARE = 0.04;

function sectionAtM(line: Line, solution: Solution, distanceM: number): number {
  let section = 0;
  for (const { joint, distanceM: jointM } of solution.echoes)
    if (joint !== null && joint.index <= line.sections.length && jointM <= distanceM)
      section = Math.max(section, joint.index - 1);
  return section;
}

/** How well distances are known there: that of the echoes around it, and 0.2 % of the way to the nearer. */
function scaleSigmaM(solution: Solution, distanceM: number): number {
  let nearest = Number.POSITIVE_INFINITY;
  let sigma = solution.lengthSigmaM;
  for (const echo of [{ distanceM: 0, distanceSigmaM: 0 }, ...solution.echoes]) {
    const apartM = Math.abs(echo.distanceM - distanceM);
    if (apartM >= nearest) continue;
    nearest = apartM;
    sigma = echo.distanceSigmaM;
  }
  return Math.hypot(Math.min(sigma, solution.lengthSigmaM), VELOCITY_STRAY * nearest);
}

/** How far a section's velocity strays from that of the whole line. Common practice: 1 % from type to type. */
const VELOCITY_STRAY = 0.002;

/** Share of the end's own echo from which its change is one of the end. */
const END_SHARE_CHANGED = 0.5;

/** The end as a change: another kind, or at another place. */
function endChange(
  { line, before, after }: CompareRequest,
  common: CommonSweeps,
  solved: SolvedRun,
  alignment: Alignment,
  lengthWords: LengthWords,
): Change | null {
  const [was, is] = [before.solution, after.solution];
  const cut = is.endsEarly && !was.endsEarly && is.lengthM < was.lengthM;
  const quiet = (kind: string): string => (kind === 'open' || kind === 'short' ? kind : 'termination');
  const other = quiet(was.end) !== quiet(is.end) && was.end !== 'unknown' && is.end !== 'unknown';
  if (!cut && !other) return null;
  const run = changedRun(solved, alignment.change);
  const endM = cut ? is.lengthM / is.distanceScale : solved.jointM.at(-1)!;
  const tracer = planSeenTrace(common.frequencyHz, run, endM * 1.02 + 0.1, endM / 50 + 0.05);
  const near = (trace: ComplexArray): number => {
    const sizes = sizesOf(trace);
    let most = 0;
    for (let k = 0; k < sizes.length; k++)
      if (Math.abs(k * tracer.stepM - endM) < Math.max(0.1, 2 * tracer.stepM))
        most = Math.max(most, sizes[k]!);
    return most;
  };
  const changed = near(tracer.trace(alignment.difference));
  const own = near(tracer.trace(common.after));
  if (!cut && changed < END_SHARE_CHANGED * own) return null;
  const distanceM = cut ? is.lengthM : was.lengthM;
  const atEnd = !cut;
  const index = line.sections.length + 1;
  return {
    distanceM,
    distanceSigmaM: Math.max(is.lengthSigmaM, was.lengthSigmaM),
    levelDb: 20 * Math.log10(changed + 1e-12),
    kind: is.end === 'open' || is.end === 'short' ? is.end : 'termination',
    joint: atEnd ? { index, name: jointName(line, index) } : null,
    place: placeText(
      line,
      { distanceM, jointIndex: atEnd ? index : null, section: sectionAtM(line, was, distanceM) },
      lengthWords,
    ),
  };
}

function worstReturnLossDb(
  sweep: Sweep,
  band: { readonly fromHz: number; readonly toHz: number },
): number | null {
  const { frequencyHz, gamma } = sweep;
  if (frequencyHz[0]! > band.fromHz || frequencyHz.at(-1)! < band.toHz) return null;
  let worst = 0;
  frequencyHz.forEach((f, i) => {
    if (f >= band.fromHz && f <= band.toHz) worst = Math.max(worst, Math.hypot(gamma.re[i]!, gamma.im[i]!));
  });
  return worst > 0 ? -20 * Math.log10(worst) : null;
}

function maskedBy(values: ComplexArray, weight: Float64Array): ComplexArray {
  return { re: values.re.map((v, i) => v * weight[i]!), im: values.im.map((v, i) => v * weight[i]!) };
}
