/**
 * The solver: the smallest set of physical discontinuities along the described run whose complete cascade explains the
 * sweep. In reading order: find the end, let the joints be ordinary, search what is left over, name every echo, decide
 * what the distances are scaled to, and say how sure all of it is.
 */
import { describedLengthM, type Line } from '../line/line.ts';
import { type ComplexArray, complexCopy, complexEnergy } from '../numerics/complex.ts';
import { createWindow, parseWindow } from '../numerics/window.ts';
import type { Notice } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { buildEchoes, type LumpVerdict } from './build-echoes.ts';
import { decimateSweep } from './decimate-sweep.ts';
import { createDistanceScale, lengthNotice } from './distance-scale.ts';
import type { Echo } from './echo.ts';
import type { EndSearch } from './end-search.ts';
import { dropNothings, extractEchoes, modelSize, rankTypes } from './extract-echoes.ts';
import { findEnd } from './find-end.ts';
import { findGhosts } from './find-ghosts.ts';
import { findWater } from './find-water.ts';
import { refine } from './fit-cascade.ts';
import { createFitContext, type FitContext, residualVariance } from './fit-context.ts';
import { leaveOutInterference } from './interference.ts';
import { stretchesOf } from './join-stretches.ts';
import { judgeEndJoint } from './judge-end-joint.ts';
import { addSoundJoints, confirmJoints, type JointVerdict, judgeJoints, residualDb } from './judge-joints.ts';
import {
  ALL_FREE,
  boundaryAt,
  createLineModel,
  type LineModel,
  lumpDistanceM,
  restoreModel,
} from './line-model.ts';
import { evaluateCost, fitCovariance, linearise } from './linearise.ts';
import { placeJoints } from './place-joints.ts';
import { localVariance, planTracer, type SearchSettings, traceResidual } from './residual-floor.ts';
import type { ResidualTrace } from './residual-trace.ts';
import { leaveUnseenEnd, reviseEnd } from './revise-end.ts';
import type { FittedLoss, Solution } from './solution.ts';
import { LOSS_PARAMETERS } from './translate-model.ts';

export type SolveRequest = {
  /** Frequencies all above 0. */
  readonly sweep: Sweep;
  readonly line: Line;
  /** False when only a cable type was given. */
  readonly lineDescribed: boolean;
  /** 6 dB width of an echo with the search taper, m. */
  readonly resolutionM: number;
  readonly unambiguousM: number;
  /** Group delay of the slowest section, one way, s/m; without it no sweep is thinned. */
  readonly delaySPerM?: number;
};

/** Taper of the search: side lobes under those of the weakest echoes looked for. */
const SEARCH_WINDOW = 'kaiser:5';

/** Prior of the loss factor for a described line, and where only a cable type was given. */
const DESCRIBED_LOSS_SIGMA = 0.03;
const TYPE_ONLY_LOSS_SIGMA = 0.5;

/** The last fits go on until nothing moves by more than a hundredth of its standard deviation or so. */
const FULLY_SETTLED = 1e-3;

/** Lead in nats that counts as certain. */
const KIND_LEAD = 2;

/** Solves for the line; a sweep of far more points than it needs is thinned first. */
export function solveLine(
  request: SolveRequest,
  onProgress: (stage: string, fraction: number) => void = () => {},
): Solution {
  const { sweep, line } = request;
  const describedM = describedLengthM(line);
  // Light there and back in the slowest cable.
  const { delaySPerM } = request;
  const roundTripS = describedM === null || delaySPerM === undefined ? null : 2 * describedM * delaySPerM;
  const thinned = roundTripS === null ? sweep : decimateSweep(sweep, roundTripS);
  const asDescribed = solveThinned({ ...request, sweep: thinned }, onProgress);
  const { solution, model, foundLine } = betterWithoutLength(request, thinned, asDescribed) ?? asDescribed;
  if (thinned === sweep) return solution;
  return { ...solution, modelGamma: modelOn(sweep, foundLine, model) };
}

/** A described length is given up when without it this share of what was left unexplained remains. */
const GIVEN_UP_SHARE = 0.3;

/** An end nearer than this many 6 dB widths of an echo is no length that a sweep could tell. */
const LEAST_CELLS_TO_END = 4;

/**
 * A line of one section that explains its sweep badly is solved once more with its length unknown: lengths on site are
 * often guessed.
 *
 * @returns Null where that is not tried or not much better.
 */
function betterWithoutLength(request: SolveRequest, sweep: Sweep, described: Solved): Solved | null {
  const [only, another] = request.line.sections;
  const unexplained = 1 - described.solution.explained;
  // A load may reflect nothing, and the strongest flaw would pass for the end.
  if (another || only?.type !== 'coax' || only.lengthM === null || request.line.end === 'load') return null;
  if (unexplained < 1 - WELL_EXPLAINED || described.solution.endsEarly) return null;
  const line: Line = { ...request.line, sections: [{ ...only, lengthM: null }] };
  const free = solveThinned({ ...request, sweep, line, lineDescribed: false }, () => {});
  const { lengthM } = free.solution;
  const seen = lengthM > LEAST_CELLS_TO_END * request.resolutionM;
  if (!seen || 1 - free.solution.explained > GIVEN_UP_SHARE * unexplained) return null;
  const off = lengthM / only.lengthM - 1;
  const notices = [lengthNotice(lengthM, only.lengthM, off), ...free.solution.notices];
  return { ...free, solution: { ...free.solution, notices } };
}

/** The reading of a solved model at the frequencies of a sweep. */
function modelOn(sweep: Sweep, line: Line, solved: LineModel): ComplexArray {
  const lengths = solved.boundaryM.map((m, i) => m - (solved.boundaryM[i - 1] ?? 0));
  const trust = { lossSigma: solved.priors.lossSigma };
  const model = createLineModel(line, sweep.frequencyHz, sweep.portOhm, lengths, trust);
  restoreModel(model, solved);
  const weight = new Float64Array(sweep.frequencyHz.length).fill(1);
  const context = createFitContext(sweep.frequencyHz, sweep.gamma, weight);
  evaluateCost(context, model, ALL_FREE, 1);
  return context.modelled;
}

type Solved = { readonly solution: Solution; readonly model: LineModel; readonly foundLine: Line };

function solveThinned(request: SolveRequest, onProgress: (stage: string, fraction: number) => void): Solved {
  const { sweep, line } = request;
  const n = sweep.frequencyHz.length;
  const spec = parseWindow(SEARCH_WINDOW);
  if (!spec.ok) throw new TypeError(`unknown window ${SEARCH_WINDOW}`);
  const taper = Float64Array.from(createWindow(spec.value, n).values);
  const context = createFitContext(sweep.frequencyHz, sweep.gamma, new Float64Array(n).fill(1));
  onProgress('finding the end', 0.05);
  const search: EndSearch = {
    line,
    portOhm: sweep.portOhm,
    taper,
    resolutionM: request.resolutionM,
    unambiguousM: request.unambiguousM,
    lossSigma: request.lineDescribed ? DESCRIBED_LOSS_SIGMA : TYPE_ONLY_LOSS_SIGMA,
  };
  let end = findEnd(context, search);
  const interfered = leaveOutInterference(context);
  if (interfered.length > 0) end = findEnd(context, search);
  const { model } = end;
  const settings: SearchSettings = {
    tracer: planTracer(model, { window: spec.value, taper, resolutionM: request.resolutionM }),
    resolutionM: request.resolutionM,
    onRound: (round, limit) => onProgress('searching echoes', 0.2 + (0.6 * round) / limit),
  };
  placeJoints(context, model);
  addSoundJoints(model);
  evaluateCost(context, model, ALL_FREE, 1);
  let endKind: Pick<typeof end, 'kind' | 'lead'> = end;
  const { verdicts } = extractEchoes(context, model, {
    ...settings,
    onCalm(found) {
      if (found && !end.cut) endKind = reviseEnd(context, model, search, endKind);
    },
  });
  // Carriers that stronger things on the line had hidden.
  interfered.push(...leaveOutInterference(context));
  onProgress('judging joints', 0.8);
  const judged = judgeJoints(context, model, settings, verdicts);
  const fitAll = (maxIterations: number): void => {
    evaluateCost(context, model, ALL_FREE, 1);
    const variance = residualVariance(context);
    const freedom = leaveUnseenEnd(context, model, variance) ? { ...ALL_FREE, end: false } : ALL_FREE;
    refine(context, model, freedom, { variance, maxIterations, tolerance: FULLY_SETTLED });
  };
  fitAll(10);
  const joints = confirmJoints(model, judged);
  const dropped = dropNothings(context, model, settings);
  if (dropped || joints.some((joint, i) => joint !== judged[i])) fitAll(6);
  onProgress('weighing what is known', 0.95);
  const endJoint = judgeEndJoint(context, model, settings);
  const floor = traceResidual(context, settings);
  const lumps = nameLumps(context, model, settings, floor);
  evaluateCost(context, model, ALL_FREE, 1);
  const variance = residualVariance(context);
  const scale = createDistanceScale(line, model, end.cut);
  const echoes = buildEchoes(context, model, {
    line: end.line,
    joints,
    endJoint,
    lumps,
    endKind: endKind.kind,
    endConfidence: 1 / (1 + Math.exp(-Math.min(30, endKind.lead / 2))),
    endsEarly: end.cut,
    scale,
    varianceAt: (distanceM) => localVariance(floor, distanceM, request.resolutionM, variance),
  });
  const endEcho = echoes[echoes.length - 1]!;
  const foundStretches = stretchesOf(context, model, scale, variance);
  const water = findWater(line, model, scale, isFaulty(joints, lumps));
  evaluateCost(context, model, ALL_FREE, 1);
  const modelGamma = complexCopy(context.modelled);
  const share = complexEnergy(context.residual) / Math.max(complexEnergy(sweep.gamma), 1e-300);
  const explained = Math.max(0, 1 - share);
  const poor = explained < WELL_EXPLAINED;
  const leftDb = residualDb(context);
  const loss = fittedLoss(context, model, variance);
  const solution: Solution = {
    echoes: poor ? echoes.map(doubted) : echoes,
    ghosts: findGhosts(context, model, settings, echoes, scale.factor),
    stretches: foundStretches.length > 0 || !request.lineDescribed || end.cut ? foundStretches : water,
    lengthM: endEcho.distanceM,
    lengthSigmaM: endEcho.distanceSigmaM,
    distanceScale: scale.factor,
    delayNs: groupDelayNs(model),
    end: endKind.kind,
    endsEarly: end.cut,
    scaledTo: scale.to,
    lossFactor: 1 + model.conductor,
    loss,
    impedanceRatios: model.impedanceRatio.slice(),
    modelGamma,
    residualDb: leftDb,
    explained,
    elements: modelSize(model).elements,
    notices: [
      ...scale.notices,
      ...interferenceNotices(model.frequencyHz, interfered),
      ...(poor ? [poorFit(explained)] : []),
    ],
  };
  return { solution, model, foundLine: end.line };
}

/** Share of the sweep's energy that a line well understood leaves little over of. */
const WELL_EXPLAINED = 0.97;

/** An echo of a model that leaves much of the sweep unexplained. */
function doubted(echo: Echo): Echo {
  return { ...echo, confidence: echo.confidence / 2, distanceSigmaM: 2 * echo.distanceSigmaM };
}

function poorFit(explained: number): Notice {
  return {
    code: 'fit-poor',
    what:
      `the line as described explains only ${(100 * Math.max(0, explained)).toFixed(0)} % of the sweep: something on it ` +
      'is not as described, or the sweep is of another line; every result is in doubt',
  };
}

function interferenceNotices(frequencyHz: Float64Array, hit: readonly number[]): Notice[] {
  if (hit.length === 0) return [];
  const shown = [...hit]
    .sort((a, b) => a - b)
    .slice(0, 4)
    .map((i) => `${(frequencyHz[i]! / 1e6).toFixed(1)} MHz`)
    .join(', ');
  const more = hit.length > 4 ? ' and others' : '';
  return [
    {
      code: 'interference',
      what:
        `${hit.length} point${hit.length === 1 ? '' : 's'} of the sweep ${hit.length === 1 ? 'is' : 'are'} hit by ` +
        `interference (${shown}${more}); the model stands in for ${hit.length === 1 ? 'it' : 'them'}`,
    },
  ];
}

function isFaulty(joints: readonly JointVerdict[], lumps: readonly LumpVerdict[]): boolean {
  return lumps.length > 0 || joints.some((joint) => joint.state !== 'sound');
}

/** Loss parameters and their covariance; the fit's own are the common change and what the dielectric has beyond it. */
function fittedLoss(context: FitContext, model: LineModel, variance: number): FittedLoss {
  const linear = linearise(context, model, ALL_FREE, variance);
  const covariance = fitCovariance(linear);
  const p = linear.translation.parameters.length;
  const at = (name: string): number => linear.translation.parameters.findIndex((q) => q.name === name);
  const [c, d] = [at(LOSS_PARAMETERS.common), at(LOSS_PARAMETERS.dielectric)];
  const cc = covariance?.[c * p + c] ?? 0;
  const cd = covariance?.[c * p + d] ?? 0;
  const dd = covariance?.[d * p + d] ?? 0;
  // dielectric = common + beyond
  return {
    conductor: model.conductor,
    dielectric: model.dielectric,
    covariance: [cc, cc + cd, cc + 2 * cd + dd],
  };
}

/** Confidence of each free lump's type from the competition of types. */
function nameLumps(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  floor: ResidualTrace,
): LumpVerdict[] {
  return model.lumps
    .filter((lump) => lump.boundary === null)
    .map((lump) => {
      evaluateCost(context, model, ALL_FREE, 1);
      const distanceM = lumpDistanceM(model, lump);
      const variance = localVariance(floor, distanceM, settings.resolutionM, residualVariance(context));
      const ranked = rankTypes(context, model, settings, lump, variance);
      const costs = ranked.map((trial) => trial.cost);
      const best = costs[0] ?? 0;
      const total = costs.reduce((sum, cost) => sum + Math.exp(-Math.min(700, (cost - best) / 2)), 0);
      const lead = costs.length > 1 ? (costs[1]! - best) / 2 : Number.POSITIVE_INFINITY;
      return { id: lump.id, confidence: total > 0 ? 1 / total : 0.5, resolved: lead >= KIND_LEAD };
    });
}

/** Round-trip group delay to the end at band centre, ns. */
function groupDelayNs(model: LineModel): number {
  const f = model.frequencyHz;
  const last = f.length - 1;
  const centre = (f[0]! + f[last]!) / 2;
  let high = f.findIndex((value) => value >= centre);
  high = Math.max(1, Math.min(last, high));
  // A few points each side, so that rounding of single frequencies does not matter.
  const reach = Math.max(1, Math.floor(f.length / 50));
  const a = Math.max(0, high - reach);
  const b = Math.min(last, high + reach);
  let phase = 0;
  model.media.forEach((medium, section) => {
    const length = boundaryAt(model, section + 1) - boundaryAt(model, section);
    const beta = (i: number): number =>
      medium.gamma.im[i]! +
      model.conductor * medium.gammaPerConductorLoss.im[i]! +
      model.dielectric * medium.gammaPerDielectricLoss.im[i]!;
    phase += 2 * length * (beta(b) - beta(a));
  });
  return (phase / (2 * Math.PI * (f[b]! - f[a]!))) * 1e9;
}
