/**
 * The floor of what the model leaves over, along the line: what an echo must rise above, and what evidence at a place is
 * weighed with. Structural ripple is sparse and heavy-tailed, so a median would flood healthy lines with false echoes.
 */
import { quantileOfSorted } from '../numerics/statistics.ts';
import type { FitContext } from './fit-cascade.ts';
import { boundaryAt, type LineModel } from './line-model.ts';
import { type ResidualTrace, residualTrace } from './residual-trace.ts';

export type SearchSettings = {
  /** Taper for traces, length n. */
  readonly taper: Float64Array;
  /** 6 dB width of an echo, m. */
  readonly resolutionM: number;
  /** Called once when nothing strong is left to explain; `found` tells whether something strong was there. */
  readonly onCalm?: (found: boolean) => void;
  /** Called before each round. */
  readonly onRound?: (round: number, limit: number) => void;
};

/** Quantile of the local trace level that counts as the floor. */
const FLOOR_QUANTILE = 0.85;

/** Trace of the residual as the last evaluation left it. */
export function traceResidual(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
): ResidualTrace {
  const stepM = settings.resolutionM / 4;
  const endM = boundaryAt(model, model.boundaryM.length);
  const points = Math.max(8, Math.min(40_000, Math.ceil((endM + settings.resolutionM) / stepM)));
  return residualTrace(model, context.residual, settings.taper, { fromM: 0, stepM, points });
}

/**
 * Level that an echo at index `k` must exceed: an upper quantile of the trace around it, candidates' own cells left out.
 */
export function floorAt(trace: ResidualTrace, k: number, resolutionM: number): number {
  const guard = Math.ceil((1.5 * resolutionM) / trace.stepM);
  const reach = Math.max(Math.ceil((15 * resolutionM) / trace.stepM), Math.ceil(trace.level.length * 0.12));
  const around: number[] = [];
  for (let i = Math.max(0, k - reach); i <= Math.min(trace.level.length - 1, k + reach); i++) {
    if (Math.abs(i - k) > guard) around.push(trace.level[i]!);
  }
  if (around.length < 8) for (const level of trace.level) around.push(level);
  around.sort((a, b) => a - b);
  return quantileOfSorted(around, FLOOR_QUANTILE);
}

/** The floor of a place is taken no lower than this share of the whole residual's, whose side lobes reach everywhere. */
const LEAST_SHARE = 0.03;

/** Noise variance (per real component) that evidence at a distance is weighed with. */
export function localVariance(
  trace: ResidualTrace,
  distanceM: number,
  resolutionM: number,
  meanVariance: number,
): number {
  const k = Math.round((distanceM - trace.fromM) / trace.stepM);
  const reach = Math.max(Math.ceil((15 * resolutionM) / trace.stepM), Math.ceil(trace.level.length * 0.12));
  const around: number[] = [];
  for (let i = Math.max(0, k - reach); i <= Math.min(trace.density.length - 1, k + reach); i++) {
    around.push(trace.density[i]!);
  }
  around.sort((a, b) => a - b);
  // For Gaussian noise the density is exponential, whose 85 % quantile is 1.9 times its mean.
  const complexVariance = quantileOfSorted(around, FLOOR_QUANTILE) / 1.9;
  return Math.max(LEAST_SHARE * meanVariance, complexVariance / 2);
}
