/**
 * From two sweeps and the run between them to the changes: align, subtract, find; and once more with what was found put
 * aside, for a large change weighs on the alignment.
 */
import { type MediumRun, pathTo } from '../line/medium-run.ts';
import { medianStepHz } from '../locate/grid-weights.ts';
import { type ComplexArray, complexCopy, complexSubtract } from '../numerics/complex.ts';
import type { Notice } from '../outcome.ts';
import { type Alignment, alignSweeps } from './compare-align.ts';
import type { CommonSweeps } from './compare-common.ts';
import { type FoundChange, findChanges } from './compare-find.ts';
import { seenReflection } from './compare-place.ts';
import { changedRun, type SolvedRun } from './compare-run.ts';
import { coarseStretch } from './compare-stretch.ts';
import { planSeenTrace, sizesOf } from './compare-trace.ts';
import { NO_LINE_CHANGE, planWarp, type WarpPlan } from './compare-warp.ts';

export type Subtraction = {
  readonly alignment: Alignment;
  /** The line on the later day. */
  readonly run: MediumRun;
  readonly found: readonly FoundChange[];
  readonly notices: readonly Notice[];
};

/** A change this large, dB, is put aside for a second alignment. */
const WEIGHS_DB = -46;

/**
 * Subtracts the sweeps and finds what has changed.
 *
 * @param seenToM Model distance up to which both sweeps see the line, m.
 */
export function subtractSweeps(
  common: CommonSweeps,
  solved: SolvedRun,
  seenToM: number,
  resolutionM: number,
): Subtraction {
  const { frequencyHz, after, weight, beforeHz, beforeStepHz } = common;
  const toM = seenToM + 2 * resolutionM;
  const tracer = planSeenTrace(frequencyHz, solved.run, toM, resolutionM);
  const leastS = END_SHARE * solved.endS + RINGING_S;
  const plan: WarpPlan = {
    sourceHz: beforeHz,
    targetHz: frequencyHz,
    pieces: solved.pieces,
    longestS: Math.max(leastS, Math.min(SECOND_TRIP * solved.endS + RINGING_S, REACH_SHARE / beforeStepHz)),
  };
  const unaligned = planWarp(plan)(common.before)(NO_LINE_CHANGE);
  const carrier = pathTo(solved.run, toM).phase[frequencyHz.length >> 1]! / toM;
  let stretch = coarseStretch(
    tracer,
    tracer.trace(maskedBy(unaligned, weight)),
    tracer.trace(maskedBy(after, weight)),
    carrier,
  );
  const folds = leastS > 1 / beforeStepHz;
  const notices: readonly Notice[] = folds ? [FOLDED] : [];
  let aside: readonly FoundChange[] = [];
  for (let round = 0; ; round++) {
    const lumps = aside.map(({ lump }) => lump);
    const runBefore = changedRun(solved, { stretch, loss: 0, offsetS: 0 });
    const put = sumOf(
      frequencyHz.length,
      lumps.map((lump) => seenReflection({ frequencyHz, run: runBefore }, lump)),
    );
    const alignment = alignSweeps({
      after: complexSubtract(after, put),
      before: common.before,
      plan,
      tracer,
      weight,
      stretch,
    });
    const run = changedRun(solved, alignment.change);
    const gamma = complexSubtract(alignment.difference, maskedBy(negative(put), weight));
    const later = planSeenTrace(frequencyHz, run, toM, resolutionM);
    const found = findChanges({
      difference: { frequencyHz, gamma: complexCopy(gamma), weight, run },
      tracer: later,
      resolutionM,
      jointM: [...solved.jointM.filter((m) => m < seenToM), seenToM],
      ownSizes: sizesOf(later.trace(maskedBy(complexSubtract(after, gamma), weight))),
      reachM: [reachM(beforeStepHz, solved), reachM(medianStepHz(frequencyHz), solved)],
    });
    aside = found.filter(({ levelDb }) => levelDb > WEIGHS_DB);
    if (round > 0 || aside.length === 0)
      return { alignment: { ...alignment, difference: gamma }, run, found, notices };
    stretch = alignment.change.stretch;
  }
}

/** Shares of the earlier sweep's reach in delay that echoes may use, and of its end's delay that they do at least. */
const REACH_SHARE = 0.92;
const END_SHARE = 1.02;
const SECOND_TRIP = 2.05;
/** Ringing of an end, s. */
const RINGING_S = 4e-9;

const FOLDED: Notice = {
  code: 'line-folds',
  what:
    'the line is longer than the earlier sweep can see without folding: what the weather did to it can only partly be ' +
    'taken out; take the baseline again with more points',
};

/** Distance at which a sweep folds, m, by the mean delay of the run. */
function reachM(stepHz: number, { jointM, endS }: SolvedRun): number {
  return jointM[jointM.length - 1]! / (stepHz * endS);
}

function sumOf(length: number, parts: readonly ComplexArray[]): ComplexArray {
  const sum = { re: new Float64Array(length), im: new Float64Array(length) };
  for (const part of parts)
    for (let i = 0; i < length; i++) {
      sum.re[i] = sum.re[i]! + part.re[i]!;
      sum.im[i] = sum.im[i]! + part.im[i]!;
    }
  return sum;
}

function negative(a: ComplexArray): ComplexArray {
  return { re: a.re.map((v) => -v), im: a.im.map((v) => -v) };
}

function maskedBy(values: ComplexArray, weight: Float64Array): ComplexArray {
  return { re: values.re.map((v, i) => v * weight[i]!), im: values.im.map((v, i) => v * weight[i]!) };
}
