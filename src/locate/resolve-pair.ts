/**
 * Two discontinuities closer than the sweep resolves.
 *
 * One lump in their place explains most of both, at a distance and of a kind that belong to neither. So what stands
 * there is put back, every two places and kinds are fitted together by linear least squares, the best few are refined on
 * the whole cascade, and two are believed only when they are worth their parameters (Bayesian information criterion).
 */
import { complexCopy } from '../numerics/complex.ts';
import { evaluateCost, type FitContext, linearise, refine, residualVariance } from './fit-cascade.ts';
import {
  ALL_FREE,
  addFreeLump,
  around,
  cloneModel,
  type LineModel,
  lumpDistanceM,
  NOTHING_FREE,
  removeLump,
  restoreModel,
} from './line-model.ts';
import {
  lumpedTypeOf,
  lumpReturnLossDb,
  type Probe,
  type PureType,
  probeStage,
  pureTypeOf,
  putBack,
} from './probe.ts';
import type { SearchSettings } from './residual-floor.ts';

/** How far apart two that merge may stand, and how near at least, in 6 dB widths of an echo. */
const FARTHEST = 1.1;
const NEAREST = 0.12;

/** Pairs that are refined on the whole cascade. */
const MOST_REFINED = 5;

/** Nats, times two, that a second discontinuity must bring beyond the information criterion. */
const MARGIN = 25;

/**
 * Tries two lumps in place of what stands around a distance.
 *
 * @returns True when two explain it better; the model then holds them.
 */
export function resolvePair(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  distanceM: number,
): boolean {
  const reachM = FARTHEST * settings.resolutionM;
  const members = model.lumps.filter(
    (lump) => lump.boundary === null && Math.abs(lumpDistanceM(model, lump) - distanceM) < reachM,
  );
  if (members.length === 0) return false;
  const places = members.map((lump) => lumpDistanceM(model, lump));
  const centreM = (Math.min(...places) + Math.max(...places)) / 2;
  const bare = cloneModel(model);
  for (const member of members) removeLump(bare, member.id);
  const pairs = bestPairs(context, model, bare, {
    members: members.map((lump) => lump.id),
    fromM: centreM - reachM,
    toM: centreM + reachM,
    nearestM: NEAREST * settings.resolutionM,
    farthestM: FARTHEST * settings.resolutionM,
  });
  evaluateCost(context, model, ALL_FREE, 1);
  const variance = residualVariance(context);
  const points = context.weight.reduce((sum, w) => sum + w, 0);
  const single = cloneModel(model);
  const local = (trial: LineModel): number => {
    refine(context, trial, around(trial, centreM - 1.5 * reachM, centreM + 1.5 * reachM), {
      variance,
      maxIterations: 12,
    });
    return evaluateCost(context, trial, ALL_FREE, variance);
  };
  const perLump = 2 * Math.log(2 * points);
  const singleCost = local(single) + members.length * perLump;
  let best: { readonly model: LineModel; readonly cost: number } | null = null;
  for (const pair of pairs.slice(0, MOST_REFINED)) {
    const trial = cloneModel(bare);
    for (const { strength, type, distanceM: at } of pair.lumps)
      addFreeLump(trial, { type: lumpedTypeOf(type), strength, distanceM: at });
    const cost = local(trial) + 2 * perLump;
    if (tooUnequal(context, trial)) continue;
    if (best === null || cost < best.cost) best = { model: trial, cost };
  }
  if (best === null || best.cost > singleCost - MARGIN) {
    evaluateCost(context, model, ALL_FREE, 1);
    return false;
  }
  restoreModel(model, best.model);
  evaluateCost(context, model, ALL_FREE, 1);
  return true;
}

/** A neighbour this much weaker, dB, is what a strong echo's own imperfection looks like. */
export const MOST_UNEQUAL_DB = 17;

function tooUnequal(context: FitContext, trial: LineModel): boolean {
  const [a, b] = trial.lumps.slice(-2).map((lump) => lumpReturnLossDb(context.frequencyHz, lump));
  return Math.abs(a! - b!) > MOST_UNEQUAL_DB;
}

type Placed = { readonly type: PureType; readonly strength: number; readonly distanceM: number };
type Pair = { readonly lumps: readonly [Placed, Placed]; readonly gain: number };

type PairSearch = {
  readonly members: readonly number[];
  readonly fromM: number;
  readonly toM: number;
  readonly nearestM: number;
  readonly farthestM: number;
};

/** The best pair of every combination of kinds, best gain first. */
function bestPairs(context: FitContext, model: LineModel, bare: LineModel, search: PairSearch): Pair[] {
  const withMembers = linearise(context, model, NOTHING_FREE, 1).translation;
  for (const id of search.members) putBack(context, withMembers.stageOfLump.get(id)!);
  const putBackResidual = complexCopy(context.residual);
  const { stages } = linearise(context, bare, NOTHING_FREE, 1).translation;
  context.residual.re.set(putBackResidual.re);
  context.residual.im.set(putBackResidual.im);
  const best = new Map<string, Pair>();
  let atM = 0;
  stages.forEach((stage, stageIndex) => {
    if (stage.type !== 'line') return;
    const startM = atM;
    atM += stage.lengthM;
    if (atM < search.fromM || startM > search.toM) return;
    const top = context.frequencyHz.length - 1;
    const stepM = Math.PI / stage.medium.gamma.im[top]! / POINTS_PER_HALF_WAVE;
    const range = { fromM: search.fromM, toM: search.toM, stepM };
    const probe = probeStage(context, stages, { stageIndex, stageFromM: startM }, range);
    if (!probe) return;
    const steps = Math.min(probe.points - 1, Math.ceil(search.farthestM / stepM));
    const products = templateProducts(context, stage.medium.gamma.im, stageIndex, stepM, steps);
    collectPairs(probe, products, Math.max(1, Math.floor(search.nearestM / stepM)), steps, best);
  });
  return [...best.values()].sort((a, b) => b.gain - a.gain);
}

const POINTS_PER_HALF_WAVE = 10;

/**
 * Re Σ conj(template at x)·(template at x + Δ) for Δ of 0…steps grid steps, by kind: resistive with resistive, reactive
 * with reactive, and resistive before reactive, relative to the energies of one template.
 */
type Products = {
  readonly resistive: Float64Array;
  readonly reactive: Float64Array;
  /** Resistive at x, reactive at x + Δ; the other way round it is the negative. */
  readonly mixed: Float64Array;
};

function templateProducts(
  context: FitContext,
  beta: Float64Array,
  stageIndex: number,
  stepM: number,
  steps: number,
): Products {
  const through = context.cascade.sensitivity(stageIndex);
  const resistive = new Float64Array(steps + 1);
  const reactive = new Float64Array(steps + 1);
  const mixed = new Float64Array(steps + 1);
  let energy = 0;
  let reactiveEnergy = 0;
  for (let i = 0; i < context.frequencyHz.length; i++) {
    const power = context.weight[i]! * (through.re[i]! ** 2 + through.im[i]! ** 2);
    const omega = 2 * Math.PI * context.frequencyHz[i]!;
    energy += power;
    reactiveEnergy += omega * omega * power;
    const turnRe = Math.cos(2 * beta[i]! * stepM);
    const turnIm = Math.sin(2 * beta[i]! * stepM);
    let re = power;
    let im = 0;
    for (let k = 0; k <= steps; k++) {
      resistive[k] = resistive[k]! + re;
      reactive[k] = reactive[k]! + omega * omega * re;
      mixed[k] = mixed[k]! + omega * im;
      const next = re * turnRe - im * turnIm;
      im = re * turnIm + im * turnRe;
      re = next;
    }
  }
  const cross = Math.sqrt(energy * reactiveEnergy);
  for (let k = 0; k <= steps; k++) {
    resistive[k] = resistive[k]! / energy;
    reactive[k] = reactive[k]! / reactiveEnergy;
    mixed[k] = mixed[k]! / cross;
  }
  return { resistive, reactive, mixed };
}

/** Best pair of every combination of kinds within one stretch. */
function collectPairs(
  probe: Probe,
  products: Products,
  nearest: number,
  farthest: number,
  best: Map<string, Pair>,
): void {
  const { sums, points } = probe;
  for (let i = 0; i < points; i++) {
    for (let j = i + nearest; j <= Math.min(points - 1, i + farthest); j++) {
      const apart = j - i;
      for (let combination = 0; combination < 4; combination++) {
        const first = combination & 1;
        const second = combination >> 1;
        const normA = Math.sqrt(sums[i * 4 + 2 * first + 1]!);
        const normB = Math.sqrt(sums[j * 4 + 2 * second + 1]!);
        const a = sums[i * 4 + 2 * first]! / normA;
        const b = sums[j * 4 + 2 * second]! / normB;
        const rho =
          first === second
            ? (first === 0 ? products.resistive : products.reactive)[apart]!
            : first === 0
              ? products.mixed[apart]!
              : -products.mixed[apart]!;
        const rest = 1 - rho * rho;
        if (rest < LEAST_INDEPENDENCE) continue;
        const x = (a - rho * b) / rest;
        const y = (b - rho * a) / rest;
        const gain = a * x + b * y;
        const typeA = pureTypeOf(first === 0 ? 'resistive' : 'reactive', x);
        const typeB = pureTypeOf(second === 0 ? 'resistive' : 'reactive', y);
        const key = `${typeA} ${typeB}`;
        if (gain <= (best.get(key)?.gain ?? 0)) continue;
        best.set(key, {
          gain,
          lumps: [
            { type: typeA, strength: x / normA, distanceM: probe.fromM + i * probe.stepM },
            { type: typeB, strength: y / normB, distanceM: probe.fromM + j * probe.stepM },
          ],
        });
      }
    }
  }
}

/** Templates more alike than this can't be told apart. */
const LEAST_INDEPENDENCE = 0.02;
