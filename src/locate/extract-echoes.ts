/**
 * The search: take the strongest thing that the cascade does not explain yet, insert it, refine everything, repeat.
 *
 * Working on the whole cascade instead of a sum of echoes means that ghosts are explained, never found.
 */

import type { LumpedType } from '../line/discontinuity.ts';
import { quantileOfSorted } from '../numerics/statistics.ts';
import { evaluateCost, type FitContext, linearise, refine, residualEnergy } from './fit-cascade.ts';
import type { LineModel, Lump } from './line-model.ts';
import {
  ALL_FREE,
  addLump,
  boundaryAt,
  cloneModel,
  lumpDistanceM,
  onlyLumps,
  removeLump,
  restoreModel,
  sectionAt,
  translate,
} from './line-model.ts';
import { type Candidate, lumpedTypeOf, type PureType, probeStage } from './probe.ts';
import { type ResidualTrace, residualTrace } from './residual-trace.ts';

export type SearchSettings = {
  /** Taper for traces, length n. */
  readonly taper: Float64Array;
  /** 6 dB width of an echo, m. */
  readonly resolutionM: number;
  /** Called before each round. */
  readonly onRound?: (round: number, limit: number) => void;
};

/** Most lumps that the search inserts beside the described joints. */
export const MOST_FREE_LUMPS = 12;

/** An echo must stand this far above the upper quantile of the trace around it. Chosen on seeded scenes. */
const THRESHOLD_OVER_FLOOR = 2.2;
const THRESHOLD_AT_JOINT = 1.8;

/** Quantile of the local trace level that counts as the floor: structural ripple is sparse and heavy-tailed. */
const FLOOR_QUANTILE = 0.85;

/**
 * Flaws inside a cable that return less than this over the band are what cable as sold may show here and there, dB.
 * Common practice: structural return loss of 35 to 45 dB over a whole run, single spots well below that.
 */
export const WEAKEST_FLAW_DB = 46;

/** The trace may show a flaw this much lower than it is, by taper and noise, dB. */
const TRACE_SLACK_DB = 3;

/** How far from a boundary, in resolutions, an echo still belongs to the joint there. */
const JOINT_CELL = 0.75;

/**
 * Adds free lumps to the model until nothing stands above the floor, refining as it goes.
 *
 * @returns Boundaries at which something beyond a sound joint was seen.
 */
export function extractEchoes(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
): { readonly suspectBoundaries: ReadonlySet<number>; readonly floor: ResidualTrace } {
  const suspects = new Set<number>();
  const refused: number[] = [];
  let trace = refineAndTrace(context, model, settings);
  for (let round = 0; round < MOST_FREE_LUMPS + 8; round++) {
    settings.onRound?.(round, MOST_FREE_LUMPS + 8);
    const free = model.lumps.filter((lump) => lump.boundary === null);
    if (free.length >= MOST_FREE_LUMPS) break;
    const peak = strongestAboveFloor(model, trace, settings, refused, suspects);
    if (peak === null) break;
    if (peak.boundary !== null) {
      suspects.add(peak.boundary);
      loosenJoint(model, peak.boundary);
    } else if (!insertLump(context, model, settings, peak.distanceM)) {
      refused.push(peak.distanceM);
      continue;
    }
    trace = refineAndTrace(context, model, settings);
  }
  retestTypes(context, model, settings);
  pruneLumps(context, model, settings);
  trace = refineAndTrace(context, model, settings);
  return { suspectBoundaries: suspects, floor: trace };
}

/** Variance of the residual per real component, as the last evaluation left it. */
export function residualVariance(context: FitContext): number {
  let points = 0;
  for (const w of context.weight) points += w;
  return Math.max(residualEnergy(context) / (2 * points), 1e-12);
}

/** Refines with the variance renewed, and gives the trace of what is left. */
function refineAndTrace(context: FitContext, model: LineModel, settings: SearchSettings): ResidualTrace {
  evaluateCost(context, model, ALL_FREE, 1);
  for (let pass = 0; pass < 2; pass++) {
    refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 8 });
  }
  return traceResidual(context, model, settings);
}

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
  return Math.max(meanVariance, complexVariance / 2);
}

type FloorPeak = { readonly distanceM: number; readonly boundary: number | null };

function strongestAboveFloor(
  model: LineModel,
  trace: ResidualTrace,
  settings: SearchSettings,
  refused: readonly number[],
  suspects: ReadonlySet<number>,
): FloorPeak | null {
  const { resolutionM } = settings;
  const n = model.boundaryM.length;
  const endM = boundaryAt(model, n);
  const fullEnd = model.end.type === 'open' || model.end.type === 'short';
  let best: FloorPeak | null = null;
  let bestRatio = 0;
  for (let k = 1; k < trace.level.length - 1; k++) {
    const level = trace.level[k]!;
    if (level < trace.level[k - 1]! || level < trace.level[k + 1]!) continue;
    const distanceM = trace.fromM + k * trace.stepM;
    if (refused.some((d) => Math.abs(d - distanceM) < resolutionM)) continue;
    const boundary = nearestBoundary(model, distanceM, resolutionM);
    // What the end leaves over is not an echo before it; the search stops a cell short.
    if (distanceM > endM - resolutionM * (fullEnd ? 1 : 0.5)) continue;
    if (boundary !== null && (suspects.has(boundary) || boundary === n)) continue;
    if (boundary === null && level < 10 ** (-(WEAKEST_FLAW_DB + TRACE_SLACK_DB) / 20)) continue;
    const ratio = level / floorAt(trace, k, resolutionM);
    const threshold = boundary === null ? THRESHOLD_OVER_FLOOR : THRESHOLD_AT_JOINT;
    if (ratio / threshold > Math.max(1, bestRatio)) {
      bestRatio = ratio / threshold;
      best = { distanceM, boundary };
    }
  }
  return best;
}

/** The joint whose cell a distance lies in, or null. */
export function nearestBoundary(model: LineModel, distanceM: number, resolutionM: number): number | null {
  let best: number | null = null;
  let nearest = JOINT_CELL * resolutionM + 0.03;
  for (let b = 0; b <= model.boundaryM.length; b++) {
    const off = Math.abs(distanceM - boundaryAt(model, b));
    if (off < nearest) {
      nearest = off;
      best = b;
    }
  }
  return best;
}

/** Lets a joint be more than sound: a resistive part of any size and a reactive part of any size. */
function loosenJoint(model: LineModel, boundary: number): void {
  for (const lump of model.lumps) {
    if (lump.boundary === boundary) lump.strengthSigma = null;
  }
}

/** Inserts the pure type that explains most around a distance; false when none helps. */
function insertLump(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  distanceM: number,
): boolean {
  const found = probeAround(context, model, settings, distanceM);
  const best = found[0];
  if (!best || best.gain < 12 * residualVariance(context)) return false;
  if (lumpReturnLossDb(context.frequencyHz, best) > WEAKEST_FLAW_DB) return false;
  addCandidate(model, best);
  return true;
}

/** RMS return loss over the band of a lump by itself, dB. */
export function lumpReturnLossDb(
  frequencyHz: Float64Array,
  lump: { readonly type: LumpedType | PureType; readonly strength: number },
): number {
  const reactive =
    lump.type === 'resistive' ? false : lump.type === 'reactive' || lumpedTypeOf(lump.type) === 'reactive';
  let power = 0;
  for (const f of frequencyHz) {
    const u = Math.abs(lump.strength) * (reactive ? 2 * Math.PI * f : 1);
    power += (u * u) / (reactive ? 4 + u * u : (2 + u) ** 2);
  }
  return -10 * Math.log10(power / frequencyHz.length + 1e-30);
}

function addCandidate(model: LineModel, candidate: Candidate): Lump {
  return addLump(model, {
    type: lumpedTypeOf(candidate.type),
    strength: candidate.strength,
    strengthSigma: null,
    section: sectionAt(model, candidate.distanceM),
    boundary: null,
    offsetM: candidate.distanceM,
    offsetSigmaM: null,
    offsetMeanM: candidate.distanceM,
  });
}

/** Candidates of every pure type within a resolution of a distance, best gain first. */
export function probeAround(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  distanceM: number,
): Candidate[] {
  const linear = linearise(context, model, { ...ALL_FREE, lumps: new Set() }, 1);
  const { stages } = linear.translation;
  const top = context.frequencyHz.length - 1;
  const found: Candidate[] = [];
  let at = 0;
  stages.forEach((stage, stageIndex) => {
    if (stage.type !== 'line') return;
    const stepM = Math.PI / stage.medium.gamma.im[top]! / 12;
    const reach = settings.resolutionM * 0.8;
    if (at + stage.lengthM >= distanceM - reach && at <= distanceM + reach) {
      found.push(
        ...probeStage(
          context,
          stages,
          { stageIndex, stageFromM: at },
          {
            fromM: distanceM - reach,
            toM: distanceM + reach,
            stepM,
          },
        ),
      );
    }
    at += stage.lengthM;
  });
  return found.sort((a, b) => b.gain - a.gain);
}

/** Tries every other pure type in the place of each free lump, with its distance refitted. */
function retestTypes(context: FitContext, model: LineModel, settings: SearchSettings): void {
  for (const { id } of model.lumps.filter((lump) => lump.boundary === null)) {
    const alternatives = rankTypes(context, model, settings, id);
    const best = alternatives[0];
    if (best) restoreModel(model, best.model);
  }
}

export type TypeTrial = { readonly model: LineModel; readonly candidate: Candidate; readonly cost: number };

/** Every pure type in the place of one lump, fitted locally; best first, cost in −2 ln likelihood. */
export function rankTypes(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  id: number,
): TypeTrial[] {
  const lump = model.lumps.find((l) => l.id === id)!;
  const without = cloneModel(model);
  removeLump(without, id);
  evaluateCost(context, model, ALL_FREE, 1);
  const variance = residualVariance(context);
  evaluateCost(context, without, ALL_FREE, 1);
  const candidates = probeAround(context, without, settings, lumpDistanceM(model, lump));
  const trials: TypeTrial[] = [];
  for (const type of [
    'series-resistance',
    'shunt-leakage',
    'series-inductance',
    'shunt-capacitance',
  ] as const) {
    const candidate = candidates.find((c) => c.type === type);
    if (!candidate) continue;
    const trial = cloneModel(without);
    const added = addCandidate(trial, candidate);
    const freedom = onlyLumps([added.id]);
    refine(context, trial, freedom, { variance, maxIterations: 6 });
    trials.push({ model: trial, candidate, cost: evaluateCost(context, trial, ALL_FREE, variance) });
  }
  return trials.sort((a, b) => a.cost - b.cost);
}

/** Evidence below which a free lump is dropped, in −2 ln likelihood against the local floor. */
const PRUNE_COST = 30;

/** Drops lumps without which the sweep is explained as well. */
function pruneLumps(context: FitContext, model: LineModel, settings: SearchSettings): void {
  const trace = refineAndTrace(context, model, settings);
  for (const lump of model.lumps.filter((l) => l.boundary === null)) {
    evaluateCost(context, model, ALL_FREE, 1);
    const mean = residualVariance(context);
    const variance = localVariance(trace, lumpDistanceM(model, lump), settings.resolutionM, mean);
    const kept = residualEnergy(context);
    const trial = cloneModel(model);
    removeLump(trial, lump.id);
    refine(context, trial, ALL_FREE, { variance: mean, maxIterations: 5 });
    const gain = (residualEnergy(context) - kept) / variance;
    if (gain < PRUNE_COST) restoreModel(model, trial);
  }
}

/** Number of stages and parameters, for reports. */
export function modelSize(model: LineModel): { readonly elements: number; readonly parameters: number } {
  const translation = translate(model, ALL_FREE);
  return {
    elements: model.lumps.length + model.boundaryM.length + 1,
    parameters: translation.parameters.length,
  };
}
