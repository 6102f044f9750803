/**
 * Where the line ends and how: the start of every solve.
 *
 * The end is not simply the strongest echo near the described length: a cut line ends early, a well matched load hardly
 * shows, an antenna reflects in its own way. Candidates come from the corrected trace of the raw sweep; each is fitted
 * on the cascade with its own kind, and the best by likelihood wins.
 */
import type { Line } from '../line/line.ts';
import { findPeaks } from '../numerics/peaks.ts';
import { likelyKinds } from './end-kinds.ts';
import {
  END_SIGMAS,
  type EndFound,
  type EndSearch,
  expectedEnd,
  type FoundEnd,
  FULL_REFLECTION_LEVEL,
} from './end-search.ts';
import type { FitContext } from './fit-context.ts';
import { bestEnd } from './fit-end.ts';
import { medianStepHz } from './grid-weights.ts';
import { createLineModel, type LineModel } from './line-model.ts';
import { type ResidualTrace, residualTrace } from './residual-trace.ts';

/**
 * Finds the end.
 *
 * @param context Fit context on the sweep; its residual is overwritten.
 */
export function findEnd(context: FitContext, search: EndSearch): EndFound {
  const { line } = search;
  const unknownLength = line.sections.at(-1)!.lengthM === null;
  return unknownLength ? findUnknownEnd(context, search) : findDescribedEnd(context, search);
}

function findDescribedEnd(context: FitContext, search: EndSearch): EndFound {
  const { line } = search;
  const lengths = line.sections.map((section) => section.lengthM!);
  const total = lengths.reduce((a, b) => a + b, 0);
  const base = createLineModel(line, context.frequencyHz, search.portOhm, lengths, {
    lossSigma: search.lossSigma,
  });
  const { sigmaM } = expectedEnd(base);
  const slack = END_SIGMAS * sigmaM;
  const trace = measuredTrace(context, base, search, total + slack);
  const cutAt = fullReflectionBefore(trace, total - slack, search.resolutionM);
  const nearEnd = strongestBetween(trace, total - slack, total + slack);
  if (cutAt !== null && !(nearEnd.level > 0.5)) {
    const cutLine = truncateLine(line, cutAt);
    const cutLengths = cutLine.sections.map((section) => section.lengthM!);
    const model = createLineModel(cutLine, context.frequencyHz, search.portOhm, cutLengths, {
      lossSigma: search.lossSigma,
      lengthSigmaM: total,
    });
    const best = bestEnd(context, model, search, ['open', 'short'], [cutAt]);
    return { ...best, line: cutLine, cut: true };
  }
  const best = bestEnd(context, base, search, likelyKinds(line, context.frequencyHz, nearEnd.level), [
    nearEnd.distanceM,
    total,
  ]);
  return { ...best, line, cut: false };
}

/** Middle step over the widest; 1 for an even sweep. */
function evennessOf(frequencyHz: Float64Array): number {
  let widest = 0;
  for (let i = 1; i < frequencyHz.length; i++)
    widest = Math.max(widest, frequencyHz[i]! - frequencyHz[i - 1]!);
  return Math.min(1, medianStepHz(frequencyHz) / widest);
}

/** Share of the unambiguous distance before the fold that is not searched. */
const FOLD_SHARE = 0.03;

function findUnknownEnd(context: FitContext, search: EndSearch): EndFound {
  const { line } = search;
  const known = line.sections.slice(0, -1).map((section) => section.lengthM!);
  const knownM = known.reduce((a, b) => a + b, 0);
  const guess = createLineModel(line, context.frequencyHz, search.portOhm, [...known, 1], {
    lossSigma: search.lossSigma,
  });
  // Just before the fold stands the foot of what is at the port; an uneven sweep folds first where its steps are wide.
  const unambiguousM = search.unambiguousM * evennessOf(context.frequencyHz);
  const foldM = unambiguousM - Math.max(4 * search.resolutionM, FOLD_SHARE * unambiguousM);
  const trace = measuredTrace(context, guess, search, Math.max(foldM, 4 * search.resolutionM));
  const start = Math.max(knownM, search.resolutionM * 0.75, PORT_REACH_M);
  const at = lastOwnEcho(trace, start, search.resolutionM);
  const lengthM = Math.max(0.05, at.distanceM - knownM);
  const model = createLineModel(line, context.frequencyHz, search.portOhm, [...known, lengthM], {
    lossSigma: search.lossSigma,
    lengthSigmaM: Math.max(1, lengthM),
  });
  const kinds: FoundEnd[] =
    line.end !== 'unknown'
      ? [line.end]
      : at.level > 0.5
        ? ['open', 'short', 'antenna']
        : ['open', 'short', 'load', 'antenna'];
  const best = bestEnd(context, model, search, kinds, [at.distanceM]);
  const found: Line = {
    ...line,
    sections: line.sections.map((section, i) =>
      i === line.sections.length - 1 ? { ...section, lengthM } : section,
    ) as Line['sections'],
  };
  return { ...best, line: found, cut: false };
}

function measuredTrace(context: FitContext, model: LineModel, search: EndSearch, toM: number): ResidualTrace {
  const stepM = search.resolutionM / 6;
  const points = Math.max(8, Math.min(60_000, Math.ceil(toM / stepM)));
  const weight = search.taper.map((w, i) => w * context.weight[i]!);
  return residualTrace(model, context.measured, weight, { fromM: 0, stepM, points });
}

function strongestBetween(
  trace: ResidualTrace,
  fromM: number,
  toM: number,
): { distanceM: number; level: number } {
  let best = { distanceM: (fromM + toM) / 2, level: 0 };
  trace.level.forEach((level, k) => {
    const distanceM = trace.fromM + k * trace.stepM;
    if (distanceM >= fromM && distanceM <= toM && level > best.level) best = { distanceM, level };
  });
  return best;
}

/** Distance of the last full reflection before `beforeM`, or null. */
function fullReflectionBefore(trace: ResidualTrace, beforeM: number, resolutionM: number): number | null {
  const peaks = findPeaks(trace.level).filter((peak) => {
    const distanceM = trace.fromM + peak.index * trace.stepM;
    return (
      distanceM > resolutionM * 0.5 &&
      distanceM < beforeM &&
      trace.level[peak.index]! > FULL_REFLECTION_LEVEL &&
      trace.level[peak.index]! < 1.6
    );
  });
  // Loss undone past a full reflection blows up its re-reflections, so the first one is the cut.
  const first = peaks[0];
  return first ? trace.fromM + first.index * trace.stepM : null;
}

/** Evidence of a later echo, as a share of the strongest one's, from which it may be the end; bounces follow large ones. */
const LATER_SHARE = { behindLarge: 0.06, behindSmall: 0.018 };
const LARGE_LEVEL = 0.3;

/** What stands nearer than this is the port's own, m. */
const PORT_REACH_M = 0.3;

/** The last echo that stands by itself: not a re-reflection between stronger ones before it. */
function lastOwnEcho(
  trace: ResidualTrace,
  fromM: number,
  resolutionM: number,
): { distanceM: number; level: number } {
  const first = Math.max(0, Math.ceil((fromM - trace.fromM) / trace.stepM));
  // Loss undone raises noise with distance: the strongest by evidence, not by level, starts the search.
  let strongest = first;
  for (let k = first; k < trace.density.length; k++) {
    if (trace.density[k]! > trace.density[strongest]!) strongest = k;
  }
  const at = (k: number): { distanceM: number; level: number } => ({
    distanceM: trace.fromM + k * trace.stepM,
    level: trace.level[k]!,
  });
  let chosen = at(strongest);
  if (chosen.level > FULL_REFLECTION_LEVEL) return chosen;
  const share = chosen.level > LARGE_LEVEL ? LATER_SHARE.behindLarge : LATER_SHARE.behindSmall;
  const peaks = findPeaks(trace.density)
    .filter(
      (peak) => peak.index > strongest && trace.density[peak.index]! > share * trace.density[strongest]!,
    )
    .map((peak) => at(peak.index));
  for (const peak of peaks) {
    const bounce = Math.abs(peak.distanceM - 2 * chosen.distanceM) < resolutionM;
    if (peak.distanceM - chosen.distanceM > resolutionM && !bounce) chosen = peak;
  }
  return chosen;
}

/** The described line up to a cut, its last section shortened. */
export function truncateLine(line: Line, atM: number): Line {
  const sections: Line['sections'][number][] = [];
  let start = 0;
  for (const section of line.sections) {
    const length = section.lengthM ?? Number.POSITIVE_INFINITY;
    if (start + length >= atM) {
      sections.push({ ...section, lengthM: Math.max(0.01, atM - start) } as typeof section);
      break;
    }
    sections.push(section);
    start += length;
  }
  return { ...line, sections };
}
