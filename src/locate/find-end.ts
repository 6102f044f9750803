/**
 * Where the line ends and how: the start of every solve.
 *
 * The end is not simply the strongest echo near the described length: a cut line ends early, a well matched load hardly
 * shows, an antenna reflects in its own way. Candidates come from the corrected trace of the raw sweep; each is fitted
 * on the cascade with its own kind, and the best by likelihood wins.
 */
import { type EndModel, writeEnd } from '../line/end.ts';
import type { EndKind, Line } from '../line/line.ts';
import { complexEnergy, complexZeros } from '../numerics/complex.ts';
import { findPeaks } from '../numerics/peaks.ts';
import { assertNever } from '../outcome.ts';
import { fitAntenna } from './fit-antenna.ts';
import {
  evaluateCost,
  type FitContext,
  linearise,
  refine,
  residualEnergy,
  residualVariance,
} from './fit-cascade.ts';
import { medianStepHz } from './grid-weights.ts';
import {
  ALL_FREE,
  cloneModel,
  createLineModel,
  type Freedom,
  type LineModel,
  NOTHING_FREE,
  restoreModel,
} from './line-model.ts';
import { expectBoundary } from './place-joints.ts';
import { type ResidualTrace, residualTrace } from './residual-trace.ts';

export type EndFound = {
  readonly model: LineModel;
  /** The line up to the end that was found; shorter than described when the line is cut. */
  readonly line: Line;
  readonly kind: Exclude<EndKind, 'unknown'>;
  /** True when the line ends well before its description does. */
  readonly cut: boolean;
  /** Cost distance to the best other kind of end, in nats. */
  readonly lead: number;
};

export type EndSearch = {
  readonly line: Line;
  readonly portOhm: number;
  /** Taper for traces, length n. */
  readonly taper: Float64Array;
  /** 6 dB width of an echo, m. */
  readonly resolutionM: number;
  /** Farthest distance the sweep can tell apart, m. */
  readonly unambiguousM: number;
  readonly lossSigma: number;
  /** True when the joints are known already and only the end may move. */
  readonly jointsKnown?: boolean;
};

/** A corrected level that only an open, a short or a cut can reach. */
const FULL_REFLECTION_LEVEL = 0.75;

/** A described open or short is looked for where the trace shows at least this level. */
const FULL_END_LEVEL = 0.08;

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

/** Kinds that an end may be, given what was described and how large it looks. */
function likelyKinds(line: Line, frequencyHz: Float64Array, level: number): FoundEnd[] {
  const described = line.end;
  const full: FoundEnd[] = level > FULL_END_LEVEL ? ['open', 'short'] : [];
  switch (described) {
    case 'open':
    case 'short':
      // A described end is believed unless hardly anything comes back.
      return level > NOTHING_LEVEL ? ['open', 'short'] : ['open', 'short', 'load', 'antenna'];
    case 'load':
    case 'antenna':
      // A load or antenna that reflects everything in its band is off or broken.
      return level > FULL_REFLECTION_LEVEL && !isOutOfBand(line, frequencyHz)
        ? [described, 'open', 'short']
        : [described];
    case 'unknown':
      return [...full, 'load', 'antenna'];
    default:
      return assertNever(described);
  }
}

/** Whether a sweep keeps clear of every band that the line's antenna is described for. */
function isOutOfBand(line: Line, frequencyHz: Float64Array): boolean {
  const low = frequencyHz[0]!;
  const high = frequencyHz[frequencyHz.length - 1]!;
  const { bands } = line.limits;
  return line.end === 'antenna' && bands.length > 0 && bands.every((b) => b.toHz < low || b.fromHz > high);
}

/** An open or a short that is described, however much stands before it, shows more than this. */
const NOTHING_LEVEL = 0.03;

/**
 * Looks at the end again once strong things before it are explained: only then does it show how large it is.
 *
 * @param model Changed in place when another kind explains the sweep better.
 */
export function reviseEnd(
  context: FitContext,
  model: LineModel,
  search: EndSearch,
  found: Pick<EndFound, 'kind' | 'lead'>,
): Pick<EndFound, 'kind' | 'lead'> {
  const level = endLevel(context, model);
  const kinds = new Set<FoundEnd>([found.kind, ...likelyKinds(search.line, context.frequencyHz, level)]);
  if (kinds.size === 1 && found.kind !== 'antenna') return found;
  const atM = model.boundaryM[model.boundaryM.length - 1]!;
  const before = cloneModel(model);
  const best = bestEnd(context, model, { ...search, jointsKnown: true }, [...kinds], [atM]);
  if (best.kind === found.kind && found.kind !== 'antenna') restoreModel(model, before);
  return { kind: best.kind, lead: best.lead };
}

/** Evidence for the end's own echo, in −2 ln likelihood, under which it is noise. */
const UNSEEN = 40;

/** A load that returns less than this, −46 dB, can't be told from what cable as sold shows here and there. */
const FAINTEST_LOAD = 0.005;

/**
 * A load that reflects too little to be seen is taken as matched and left where the description puts it, instead of
 * drawing every distance to where noise would have it.
 *
 * @param variance Of the residual per real component. @returns True when the end is not seen.
 */
export function leaveUnseenEnd(context: FitContext, model: LineModel, variance: number): boolean {
  if (model.end.type !== 'load') return false;
  const { stages } = linearise(context, model, NOTHING_FREE, 1).translation;
  const through = context.cascade.sensitivity(stages.length);
  const own = context.cascade.behind(stages.length);
  let energy = 0;
  for (let i = 0; i < context.weight.length; i++)
    energy +=
      context.weight[i]! * (through.re[i]! ** 2 + through.im[i]! ** 2) * (own.re[i]! ** 2 + own.im[i]! ** 2);
  const level = Math.sqrt(complexEnergy(own) / own.re.length);
  if (energy > UNSEEN * variance && level > FAINTEST_LOAD) return false;
  model.end = { type: 'load', parameters: [1, 0] };
  const last = model.boundaryM.length - 1;
  const others = new Set([...model.boundaryM.keys()].filter((i) => i !== last));
  model.boundaryM[last] = Math.max(
    expectBoundary(model, others, last).meanM,
    (model.boundaryM[last - 1] ?? 0) + 0.01,
  );
  return true;
}

/** RMS size of the end's own reflection as modelled, weighed by what comes back from it. */
function endLevel(context: FitContext, model: LineModel): number {
  const { stages } = linearise(context, model, NOTHING_FREE, 1).translation;
  const through = context.cascade.sensitivity(stages.length);
  const own = context.cascade.behind(stages.length);
  const { residual } = context;
  let power = 0;
  let weight = 0;
  for (let i = 0; i < residual.re.length; i++) {
    const s2 = through.re[i]! ** 2 + through.im[i]! ** 2;
    power += s2 * (own.re[i]! ** 2 + own.im[i]! ** 2);
    weight += s2;
  }
  return Math.sqrt(power / Math.max(weight, 1e-30));
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

/** Fits each kind of end from each starting distance and leaves the best in the returned model. */
function bestEnd(
  context: FitContext,
  base: LineModel,
  search: EndSearch,
  kinds: readonly FoundEnd[],
  startsM: readonly number[],
): Pick<EndFound, 'model' | 'kind' | 'lead'> {
  const all = kinds.flatMap((kind) => tryKind(context, base, search, kind, startsM));
  const plausible = all.filter(({ model }) => model.end.type !== 'antenna' || takesPower(model));
  const trials = plausible.length > 0 ? plausible : all;
  const points = context.weight.reduce((a, b) => a + b, 0);
  const least = Math.max(Math.min(...trials.map((trial) => trial.energy)), 1e-12);
  const variance = least / (2 * points);
  const cost = (trial: Trial): number =>
    evaluateCost(context, trial.model, ALL_FREE, variance) +
    trial.model.end.parameters.length * Math.log(2 * points);
  const ranked = trials.map((trial) => ({ trial, cost: cost(trial) })).sort((a, b) => a.cost - b.cost);
  const best = ranked[0]!;
  const rival = ranked.find((other) => other.trial.kind !== best.trial.kind);
  restoreModel(base, best.trial.model);
  return {
    model: base,
    kind: best.trial.kind,
    lead: rival ? (rival.cost - best.cost) / 2 : Number.POSITIVE_INFINITY,
  };
}

/** An antenna that nowhere in the band takes power is an open or a short; one that is alike all over it is a load. */
function takesPower(model: LineModel): boolean {
  const gamma = complexZeros(model.frequencyHz.length);
  writeEnd(model.end, model.frequencyHz, gamma, null);
  const sizes = gamma.re.map((re, i) => Math.hypot(re, gamma.im[i]!));
  const least = Math.min(...sizes);
  return least < LEAST_ANTENNA_DIP && Math.max(...sizes) - least > LEAST_ANTENNA_SWING;
}

/** Common practice: an antenna in its band returns a fifth or less; one that is off frequency still dips below this. */
const LEAST_ANTENNA_DIP = 0.6;

/** Change of |Γ| over the band that an antenna shows at least. Choice of this program. */
const LEAST_ANTENNA_SWING = 0.12;

type FoundEnd = Exclude<EndKind, 'unknown'>;
type Trial = { readonly model: LineModel; readonly kind: FoundEnd; readonly energy: number };

/** One kind of end, fitted from every start that its phase allows. */
function tryKind(
  context: FitContext,
  base: LineModel,
  search: EndSearch,
  kind: FoundEnd,
  startsM: readonly number[],
): Trial[] {
  const last = base.boundaryM.length - 1;
  const freedom: Freedom = {
    ...ALL_FREE,
    impedances: new Set(),
    boundaries: new Set([last]),
    residue: false,
    lumps: new Set(),
  };
  const starts =
    kind === 'antenna'
      ? antennaStarts(base, search, startsM).map((distanceM) => ({ distanceM, value: 0 }))
      : phaseStarts(context, base, search, kind, startsM);
  if (kind === 'antenna') return [bestAntenna(context, base, search, freedom, starts)];
  return starts.map((start): Trial => {
    const model = cloneModel(base);
    placeEnd(model, start.distanceM, search);
    model.end = startingEnd(kind, start.value);
    evaluateCost(context, model, freedom, 1);
    refine(context, model, freedom, { variance: residualVariance(context), maxIterations: 10 });
    return { model, kind, energy: residualEnergy(context) };
  });
}

/** Where the description puts the end, and how sure that is. */
function expectedEnd(base: LineModel): { readonly meanM: number; readonly sigmaM: number } {
  const n = base.boundaryM.length;
  return {
    meanM: base.priors.boundaryMeanM[n - 1]!,
    sigmaM: Math.sqrt(base.priors.boundaryCovariance[n * n - 1]!),
  };
}

/** Standard deviations of the description within which the end is looked for. */
const END_SIGMAS = 3.5;

function placeEnd(model: LineModel, distanceM: number, search: EndSearch): void {
  if (search.jointsKnown) model.boundaryM[model.boundaryM.length - 1] = distanceM;
  else moveEnd(model, distanceM);
}

/** What another place must be better by than the described one, while what stands before the end is not explained yet. */
const DESCRIBED_LEAD = 40;

/** Spread of the loss, relative, above which only the cable's type is known. */
const DESCRIBED_LOSS = 0.1;

/** Resonances that a first look at a starting distance fits. */
const FIRST_RESONANCES = 2;

/** An antenna fitted roughly from every start, and in full from the best. */
function bestAntenna(
  context: FitContext,
  base: LineModel,
  search: EndSearch,
  freedom: Freedom,
  starts: readonly { readonly distanceM: number }[],
): Trial {
  const { meanM } = expectedEnd(base);
  let best: { readonly model: LineModel; readonly score: number } | null = null;
  const points = context.weight.reduce((sum, w) => sum + w, 0);
  for (const { distanceM } of starts) {
    const model = cloneModel(base);
    placeEnd(model, distanceM, search);
    model.end = startingEnd('antenna', 0);
    // A loss that is described is left as it is for a first look: an antenna takes up its little error.
    const loss = search.lossSigma > DESCRIBED_LOSS;
    fitAntenna(context, model, { ...freedom, loss }, FIRST_RESONANCES);
    // What is left over, in −2 ln likelihood of its own variance, and what the priors think of it.
    const energy = Math.max(residualEnergy(context), 1e-14);
    const priors = evaluateCost(context, model, ALL_FREE, energy) - 1;
    const score = 2 * points * Math.log(energy) + priors + model.end.parameters.length * Math.log(2 * points);
    const described = Math.abs(distanceM - meanM) < 1e-6;
    const lead = described && !search.jointsKnown ? DESCRIBED_LEAD : 0;
    if (best === null || score - lead < best.score) best = { model, score: score - lead };
  }
  const { model } = best!;
  fitAntenna(context, model, freedom);
  return { model, kind: 'antenna', energy: residualEnergy(context) };
}

/**
 * Starting distances of an antenna: the echo's tip lies behind the antenna by the delay of its resonances, which in a
 * narrow sweep is a resolution or more.
 */
function antennaStarts(base: LineModel, search: EndSearch, startsM: readonly number[]): number[] {
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

/**
 * Moves the end, and with it the joints before it as far as their errors go together.
 *
 * @param distanceM As the trace shows it, with every joint where it was: moving joints between fast and slow cable must
 *   not change the delay to the end.
 */
export function moveEnd(model: LineModel, distanceM: number): void {
  const n = model.boundaryM.length;
  const { boundaryMeanM: mean, boundaryCovariance: c } = model.priors;
  const centre = model.frequencyHz.length >> 1;
  const beta = model.media.map((medium) => medium.gamma.im[centre]!);
  const share = (i: number): number => (i < 0 ? 0 : c[i * n + n - 1]! / c[n * n - 1]!);
  let perMove = 0;
  for (let i = 0; i < n; i++) perMove += (share(i) - share(i - 1)) * beta[i]!;
  const off = ((distanceM - mean[n - 1]!) * beta[n - 1]!) / perMove;
  for (let i = 0; i < n; i++) model.boundaryM[i] = mean[i]! + share(i) * off;
  // A line cut short moves its end alone when the rest would run backward.
  for (let i = n - 2; i >= 0; i--)
    model.boundaryM[i] = Math.min(model.boundaryM[i]!, model.boundaryM[i + 1]!);
}

/** Tips tried, and the least of them as a share of the highest: in a narrow sweep neighbours are nearly alike. */
const MOST_TIPS = 4;
const LEAST_TIP = 0.8;

/** Starting distances whose phase fits the kind: the tips of the real part of the trace near each start. */
function phaseStarts(
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

function startingEnd(kind: Exclude<EndKind, 'unknown'>, value: number): EndModel {
  switch (kind) {
    case 'open':
    case 'short':
      return { type: kind, parameters: [0] };
    case 'load': {
      const gamma = Math.max(-0.9, Math.min(0.9, value));
      return { type: 'load', parameters: [(1 + gamma) / (1 - gamma), 0] };
    }
    case 'antenna':
      return { type: 'antenna', parameters: [Math.max(-0.9, Math.min(0.9, value)), 0] };
  }
}
