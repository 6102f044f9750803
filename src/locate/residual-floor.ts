/**
 * The floor of what the model leaves over, along the line: what an echo must rise above, and what evidence at a place is
 * weighed with. Structural ripple is sparse and heavy-tailed, so a median would flood healthy lines with false echoes.
 */
import { quantile, quantileOfSorted } from '../numerics/statistics.ts';
import type { WindowSpec } from '../numerics/window.ts';
import type { FitContext } from './fit-context.ts';
import { boundaryAt, type LineModel, sectionAt } from './line-model.ts';
import { planResidualTrace, type ResidualTrace, type ResidualTracer } from './residual-trace.ts';

export type SearchSettings = {
  /** Trace of what a fit leaves over. */
  readonly tracer: ResidualTracer;
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
export function traceResidual(context: FitContext, settings: SearchSettings): ResidualTrace {
  return settings.tracer(context.residual);
}

/** Distances of the trace per 6 dB width of an echo. */
const POINTS_PER_RESOLUTION = 4;
const MOST_POINTS = 40_000;

/** Plans the trace of a model's residual from the port to just beyond its end. */
export function planTracer(
  model: LineModel,
  search: { readonly window: WindowSpec; readonly taper: Float64Array; readonly resolutionM: number },
): ResidualTracer {
  const stepM = search.resolutionM / POINTS_PER_RESOLUTION;
  const endM = boundaryAt(model, model.boundaryM.length);
  const points = Math.max(8, Math.min(MOST_POINTS, Math.ceil((endM + search.resolutionM) / stepM)));
  return planResidualTrace(model, search.window, search.taper, { stepM, points });
}

/** Cells that a section must have to speak for itself. */
const LEAST_SECTION_CELLS = 8;

/**
 * Level that an echo at index `k` must exceed: an upper quantile of the trace around it, candidates' own cells left out,
 * or of its own section where that is higher: a jumper may well be rougher than the run beside it.
 */
export function floorAt(trace: ResidualTrace, model: LineModel, k: number, resolutionM: number): number {
  const guard = Math.ceil((1.5 * resolutionM) / trace.stepM);
  const reach = Math.max(Math.ceil((15 * resolutionM) / trace.stepM), Math.ceil(trace.level.length * 0.12));
  const last = trace.level.length - 1;
  const window = levelsBetween(trace, k, guard, Math.max(0, k - reach), Math.min(last, k + reach));
  const around = window.length < 8 ? quantile(trace.level, FLOOR_QUANTILE) : quantile(window, FLOOR_QUANTILE);
  const section = sectionAt(model, trace.fromM + k * trace.stepM);
  // Joints stand at both ends of a section, and are no part of its floor.
  const indexOf = (m: number): number => Math.round((m - trace.fromM) / trace.stepM);
  const from = Math.max(0, indexOf(boundaryAt(model, section) + resolutionM));
  const to = Math.min(last, indexOf(boundaryAt(model, section + 1) - resolutionM));
  const own = levelsBetween(trace, k, guard, from, to);
  const cells = (own.length * trace.stepM) / resolutionM;
  return cells < LEAST_SECTION_CELLS ? around : Math.max(around, quantile(own, FLOOR_QUANTILE));
}

function levelsBetween(trace: ResidualTrace, k: number, guard: number, from: number, to: number): number[] {
  const levels: number[] = [];
  for (let i = from; i <= to; i++) if (Math.abs(i - k) > guard) levels.push(trace.level[i]!);
  return levels;
}

/** The floor of a place is taken no lower than this share of the whole residual's, whose side lobes reach everywhere. */
const LEAST_SHARE = 0.03;

/**
 * Nothing measured repeats better than −70 dB (common practice), whatever a simulated sweep may do: below that, evidence
 * would come from rounding and from what the model leaves out on purpose.
 */
const LEAST_VARIANCE = 0.5e-7;

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
  if (around.length === 0) return meanVariance;
  around.sort((a, b) => a - b);
  // For Gaussian noise the density is exponential, whose 85 % quantile is 1.9 times its mean.
  const complexVariance = quantileOfSorted(around, FLOOR_QUANTILE) / 1.9;
  return Math.max(LEAST_SHARE * meanVariance, complexVariance / 2, LEAST_VARIANCE);
}
