/**
 * Is the last joint bad, where a load closes the line?
 *
 * The joint and the load stand too close to be parted by distance, so size decides: a load is sold to a figure, and what
 * reflects more than any sound load does has a bad joint before it. What kind of fault that is follows from the
 * frequency law, as at any joint.
 */

import { type FitContext, residualVariance } from './fit-context.ts';
import type { JointState } from './judge-joints.ts';
import { ALL_FREE, boundaryAt, type LineModel } from './line-model.ts';
import { evaluateCost } from './linearise.ts';
import {
  fitLocal,
  type LocalEcho,
  type LocalPart,
  localEcho,
  matchTables,
  reflectionDb,
} from './local-echo.ts';
import { expectBoundary } from './place-joints.ts';
import { lumpedTypeOf, PURE_TYPES, type PureType, pureTypeOf } from './probe.ts';
import { localVariance, type SearchSettings, traceResidual } from './residual-floor.ts';

export type EndJointVerdict = {
  readonly state: Exclude<JointState, 'sound'>;
  readonly strength: number;
  /** Nats by which it beats a sound joint, and the next kind of fault. */
  readonly odds: number;
  readonly lead: number;
};

/** Nats that a fault must have over a load by itself. */
const FAULT_ODDS = 9;

/**
 * Spread of a load's resistance, ln, and of its reactance at the top of the band, relative. Common practice: field loads
 * return −15 dB at the worst and mostly less than −20 dB.
 */
const LOAD_SIGMA = 0.11;

/** What reflects less than this is a load and nothing else, dB. */
const WORST_LOAD_DB = 15;

/** Where the fault sits before the load, m: in either half of the connector. */
const OFFSET_SIGMA_M = 0.02;

/** The verdict on the last joint; null when it is sound, or nothing can be said. */
export function judgeEndJoint(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
): EndJointVerdict | null {
  if (model.end.type !== 'load') return null;
  evaluateCost(context, model, ALL_FREE, 1);
  const endM = boundaryAt(model, model.boundaryM.length);
  const mean = residualVariance(context);
  const variance = localVariance(traceResidual(context, settings), endM, settings.resolutionM, mean);
  const echo = localEcho(context, model, endM, { lumps: [], boundary: null, end: true });
  const known = new Set(model.boundaryM.keys());
  const expected = expectBoundary(model, known, model.boundaryM.length - 1);
  const place = { expectedM: expected.meanM - endM, sigmaM: Math.max(expected.sigmaM, LEAST_SIGMA_M) };
  const alone = fitEnd(echo, null, variance, place);
  const faults = PURE_TYPES.map((type) => fitEnd(echo, type, variance, place))
    .filter(({ type, strength }) => type !== null && pureTypeOf(lumpedTypeOf(type), strength) === type)
    .sort((a, b) => a.cost - b.cost);
  const [best, rival] = faults;
  evaluateCost(context, model, ALL_FREE, 1);
  if (!best || best.type === null) return null;
  const odds = (alone.cost - best.cost) / 2;
  if (odds < FAULT_ODDS || alone.ownDb > WORST_LOAD_DB) return null;
  const lead = rival ? (rival.cost - best.cost) / 2 : Number.POSITIVE_INFINITY;
  return { state: best.type, strength: best.strength, odds, lead };
}

type EndFit = {
  readonly type: PureType | null;
  readonly strength: number;
  readonly cost: number;
  /** Return loss of load and fault together, dB. */
  readonly ownDb: number;
};

/** Where the end is expected from the echo's plane. */
type EndPlace = { readonly expectedM: number; readonly sigmaM: number };

/** A place is not known better than this, m. */
const LEAST_SIGMA_M = 0.01;

/** Starts on each side of the plane, as eighths of a wave at the top of the band. */
const STARTS = 3;

/** Fits the load, one kind of fault before it, and where both stand. */
function fitEnd(echo: LocalEcho, type: PureType | null, variance: number, place: EndPlace): EndFit {
  const stepM = Math.PI / echo.beta[echo.beta.length - 1]! / 4;
  let best: EndFit | null = null;
  for (let k = -STARTS; k <= STARTS; k++) {
    if (Math.abs(k * stepM - place.expectedM) > 3 * place.sigmaM && k !== 0) continue;
    const fit = fitEndFrom(echo, type, variance, place, k * stepM);
    const turned = type !== null && pureTypeOf(lumpedTypeOf(type), fit.strength) !== type;
    if (!turned && (best === null || fit.cost < best.cost)) best = fit;
  }
  return best ?? fitEndFrom(echo, type, variance, place, 0);
}

function fitEndFrom(
  echo: LocalEcho,
  type: PureType | null,
  variance: number,
  place: EndPlace,
  startM: number,
): EndFit {
  const top = echo.omega[echo.omega.length - 1]!;
  const gridM = Math.max(Math.abs(startM), 1e-3);
  const tables = matchTables(echo, 0, gridM, 1, 0);
  const at = tables.centre + Math.round(startM / gridM);
  const kind = type === null ? null : lumpedTypeOf(type);
  const match = (kind === 'reactive' ? tables.reactive : tables.resistive)[at]!;
  const energy = (kind === 'reactive' ? tables.reactiveReactive : tables.resistiveResistive)[0]!;
  const partsOf = (p: Float64Array): LocalPart[] => {
    const load: LocalPart[] = [
      { type: 'step', strength: p[0]!, offsetM: p[2]! },
      { type: 'reactive', strength: p[1]!, offsetM: p[2]! },
    ];
    if (kind === null) return load;
    return [{ type: kind, strength: p[3]!, offsetM: p[2]! + Math.min(0, p[4]!) }, ...load];
  };
  const fit = fitLocal(
    echo,
    {
      start: kind === null ? [0, 0, startM] : [0, 0, startM, match / energy, 0],
      steps: [
        1e-6,
        1e-6 / top,
        1e-6,
        ...(kind === null ? [] : [kind === 'reactive' ? 1e-5 / top : 1e-5, 1e-6]),
      ],
      parts: partsOf,
      priors: (p) => [
        stiffLoad(p[0]!),
        stiffLoad(p[1]! * top),
        (p[2]! - place.expectedM) / place.sigmaM,
        ...(kind === null ? [] : [p[4]! / OFFSET_SIGMA_M]),
      ],
    },
    variance,
  );
  const ownDb = reflectionDb(echo, partsOf(fit.parameters));
  return { type, strength: fit.parameters[3] ?? 0, cost: fit.cost, ownDb };
}

function stiffLoad(value: number): number {
  const u = value / LOAD_SIGMA;
  return u * Math.sqrt(1 + (u * u) / 16);
}
