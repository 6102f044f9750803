/** Each kind of end fitted on the cascade from each of its starts; the best by likelihood wins. */
import { type EndModel, writeEnd } from '../line/end.ts';
import type { EndKind } from '../line/line.ts';
import { complexZeros } from '../numerics/complex.ts';
import { type EndFound, type EndSearch, expectedEnd, type FoundEnd } from './end-search.ts';
import { antennaStarts, phaseStarts } from './end-starts.ts';
import { fitAntenna } from './fit-antenna.ts';
import { refine } from './fit-cascade.ts';
import { type FitContext, residualEnergy, residualVariance } from './fit-context.ts';
import { ALL_FREE, cloneModel, type Freedom, type LineModel, restoreModel } from './line-model.ts';
import { evaluateCost } from './linearise.ts';

/** Fits each kind of end from each starting distance and leaves the best in the returned model. */
export function bestEnd(
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
