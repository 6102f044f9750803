/** Distances from which the fit of an end starts: where the phase of its kind fits, and for an antenna before its tip. */
import type { EndKind } from '../line/line.ts';
import { findPeaks } from '../numerics/peaks.ts';
import { END_SIGMAS, type EndSearch, expectedEnd } from './end-search.ts';
import type { FitContext } from './fit-context.ts';
import type { LineModel } from './line-model.ts';
import { residualTrace } from './residual-trace.ts';

/**
 * Starting distances of an antenna: the echo's tip lies behind the antenna by the delay of its resonances, which in a
 * narrow sweep is a resolution or more.
 */
export function antennaStarts(base: LineModel, search: EndSearch, startsM: readonly number[]): number[] {
  const { meanM, sigmaM } = expectedEnd(base);
  const tipM = startsM[0]!;
  const back = [0, 0.25, 0.5, 0.75, 1].map((share) => tipM - share * search.resolutionM);
  const starts = [...startsM, ...back].filter((m) => m > 0.05 && Math.abs(m - meanM) < END_SIGMAS * sigmaM);
  if (starts.length === 0) return [meanM];
  // Starts nearer to each other than a tenth of a resolution settle at the same place.
  return starts
    .sort((a, b) => a - b)
    .filter((m, i, all) => i === 0 || m - all[i - 1]! > 0.1 * search.resolutionM);
}

/** Tips tried, and the least of them as a share of the highest: in a narrow sweep neighbours are nearly alike. */
const MOST_TIPS = 4;
const LEAST_TIP = 0.8;

/** Starting distances whose phase fits the kind: the tips of the real part of the trace near each start. */
export function phaseStarts(
  context: FitContext,
  base: LineModel,
  search: EndSearch,
  kind: EndKind,
  startsM: readonly number[],
): { distanceM: number; value: number }[] {
  const top = context.frequencyHz[context.frequencyHz.length - 1]!;
  const beta = base.media.at(-1)!.gamma.im[context.frequencyHz.length - 1]!;
  const stepM = Math.PI / beta / 24;
  const starts: { distanceM: number; value: number }[] = [];
  const { meanM, sigmaM } = expectedEnd(base);
  for (const startM of kind === 'load' || kind === 'antenna' ? startsM : startsM.slice(0, 1)) {
    const fromM = Math.max(0.02, startM - search.resolutionM, meanM - END_SIGMAS * sigmaM);
    const toM = Math.min(startM + search.resolutionM, meanM + END_SIGMAS * sigmaM);
    if (toM < fromM) continue;
    const points = Math.max(3, Math.ceil((toM - fromM) / stepM) + 1);
    const trace = residualTrace(base, context.measured, context.weight, { fromM, stepM, points });
    const sign = kind === 'short' ? -1 : 1;
    const real = trace.value.re.map((v) => (kind === 'load' || kind === 'antenna' ? Math.abs(v) : sign * v));
    const highest = Math.max(...real.map(Math.abs), 1e-9);
    const tips = findPeaks(real)
      .filter((peak) => Math.abs(real[peak.index]!) > LEAST_TIP * highest)
      .map((peak) => ({ distanceM: fromM + peak.index * stepM, value: trace.value.re[peak.index]! }))
      .filter((tip) => !isFaint(kind, tip.value) || Math.abs(tip.distanceM - meanM) < FAINT_SIGMAS * sigmaM)
      .sort((a, b) => Math.abs(b.value) - Math.abs(a.value));
    starts.push(...tips.slice(0, MOST_TIPS));
  }
  if (starts.length === 0) {
    const described = Math.abs(startsM[0]! - meanM) < END_SIGMAS * sigmaM ? meanM : startsM[0]!;
    starts.push({ distanceM: kind === 'load' ? described : startsM[0]!, value: top > 0 ? 0.01 : 0 });
  }
  return starts;
}

/** A load reflects little and can't be told from a flaw before it, so it is looked for where it is described. */
function isFaint(kind: EndKind, value: number): boolean {
  return kind === 'load' && Math.abs(value) < FAINT_LOAD;
}

/** −10 dB, and how far from its described place such a load may be taken to stand. */
const FAINT_LOAD = 0.3;
const FAINT_SIGMAS = 1.2;
