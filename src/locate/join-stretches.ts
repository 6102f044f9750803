/**
 * Two opposite real reflections a little apart may be the edges of one stretch of another impedance: a piece of the wrong
 * cable, or water standing in the dielectric. A stretch lets through what two lumps would take, so the echoes behind it
 * decide.
 */
import type { DistanceScale } from './distance-scale.ts';
import type { Stretch } from './echo.ts';
import { refine } from './fit-cascade.ts';
import { type FitContext, residualVariance } from './fit-context.ts';
import {
  ALL_FREE,
  around,
  cloneModel,
  type LineModel,
  type Lump,
  lumpDistanceM,
  restoreModel,
  type StretchModel,
} from './line-model.ts';
import { evaluateCost, fitCovariance, linearise } from './linearise.ts';
import type { SearchSettings } from './residual-floor.ts';
import { stretchParameter } from './stretch-parameters.ts';

/** Shortest and longest stretch, m, and in 6 dB widths of an echo how near its edges may stand. */
const SHORTEST_M = 0.3;
const LONGEST_M = 60;
const LEAST_CELLS = 1.2;

/** How much larger one edge may look than the other, loss between them undone. */
const MOST_UNEQUAL = 2.2;

/** A stretch has one number more than two lumps, and must not cost more than that is worth, in −2 ln likelihood. */
const WORTH_A_PARAMETER = 8;

/** Impedance, ln, from which a stretch is another cable; a smaller one with more loss is wet. */
const OTHER_CABLE = 0.08;

const DB_PER_NEPER = 20 / Math.LN10;

/** Puts a stretch in place of every two free lumps that are better explained as its edges. */
export function joinStretches(context: FitContext, model: LineModel, settings: SearchSettings): void {
  const tried = new Set<string>();
  for (;;) {
    const pair = edgePair(model, settings, tried);
    if (pair === null) return;
    tried.add(`${pair[0].id} ${pair[1].id}`);
    tryStretch(context, model, settings, pair);
  }
}

/** Two neighbouring free resistive lumps of opposite sign and like size. */
function edgePair(
  model: LineModel,
  settings: SearchSettings,
  tried: ReadonlySet<string>,
): readonly [Lump, Lump] | null {
  const free = model.lumps
    .filter((lump) => lump.boundary === null && lump.type === 'resistive')
    .sort((a, b) => a.offsetM - b.offsetM);
  for (let i = 0; i + 1 < free.length; i++) {
    const [first, second] = [free[i]!, free[i + 1]!];
    const apartM = lumpDistanceM(model, second) - lumpDistanceM(model, first);
    const [a, b] = [Math.log1p(Math.abs(first.strength)), Math.log1p(Math.abs(second.strength))];
    const alike = Math.max(a, b) < MOST_UNEQUAL * Math.min(a, b);
    const opposite = first.strength * second.strength < 0 && first.section === second.section;
    const fits = apartM > Math.max(SHORTEST_M, LEAST_CELLS * settings.resolutionM) && apartM < LONGEST_M;
    if (alike && opposite && fits && !tried.has(`${first.id} ${second.id}`)) return [first, second];
  }
  return null;
}

function tryStretch(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  [first, second]: readonly [Lump, Lump],
): void {
  const fromM = lumpDistanceM(model, first);
  const toM = lumpDistanceM(model, second);
  const inside = model.lumps.some(
    (lump) =>
      lump !== first &&
      lump !== second &&
      lumpDistanceM(model, lump) > fromM &&
      lumpDistanceM(model, lump) < toM,
  );
  if (inside) return;
  evaluateCost(context, model, ALL_FREE, 1);
  const variance = residualVariance(context);
  const freedom = around(model, fromM - settings.resolutionM, toM + settings.resolutionM);
  const pair = cloneModel(model);
  const pairCost = refine(context, pair, freedom, { variance, maxIterations: 8 }).cost;
  const trial = cloneModel(model);
  trial.lumps.splice(
    0,
    trial.lumps.length,
    ...trial.lumps.filter(({ id }) => id !== first.id && id !== second.id),
  );
  trial.stretches.push({
    id: first.id,
    section: first.section,
    fromM,
    toM,
    ratio: (Math.sign(first.strength) * (lnOf(first) + lnOf(second))) / 2,
    slowness: 0,
    dielectric: 0,
  });
  const cost = refine(context, trial, freedom, { variance, maxIterations: 20 }).cost;
  if (cost < pairCost + WORTH_A_PARAMETER) restoreModel(model, trial);
  evaluateCost(context, model, ALL_FREE, 1);
}

/** Step of impedance, ln, that reflects as a lump does. */
function lnOf(lump: Lump): number {
  return Math.log1p(Math.abs(lump.strength));
}

/** The stretches of a solved model as results. */
export function stretchesOf(
  context: FitContext,
  model: LineModel,
  scale: DistanceScale,
  variance: number,
): Stretch[] {
  if (model.stretches.length === 0) return [];
  const linear = linearise(context, model, ALL_FREE, variance);
  const covariance = fitCovariance(linear);
  const { parameters } = linear.translation;
  return model.stretches.map((stretch): Stretch => {
    const perUnitDb = dielectricDb(model, stretch);
    const k = parameters.findIndex((p) => p.name === stretchParameter(stretch.id, 'dielectric'));
    const relativeVariance = covariance && k >= 0 ? covariance[k * parameters.length + k]! : Number.NaN;
    const excessLossSigmaDb = perUnitDb * Math.sqrt(Math.max(0, relativeVariance));
    return {
      fromM: scale.place(Math.min(stretch.fromM, stretch.toM), null).distanceM,
      toM: scale.place(Math.max(stretch.fromM, stretch.toM), null).distanceM,
      excessLossDb: stretch.dielectric * perUnitDb,
      excessLossSigmaDb: Number.isFinite(excessLossSigmaDb)
        ? excessLossSigmaDb
        : Math.abs(stretch.dielectric * perUnitDb),
      kind: Math.abs(stretch.ratio) > OTHER_CABLE || stretch.ratio > 0 ? 'wrong-cable' : 'wet',
    };
  });
}

/** Dielectric loss of the described cable over a stretch, one way at band centre, dB. */
function dielectricDb(model: LineModel, stretch: StretchModel): number {
  const centre = model.frequencyHz.length >> 1;
  const rate = model.media[stretch.section]!.gammaPerDielectricLoss.re[centre]!;
  return rate * (stretch.toM - stretch.fromM) * (1 + stretch.slowness) * DB_PER_NEPER;
}
