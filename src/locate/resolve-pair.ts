/**
 * Two discontinuities closer than the sweep resolves.
 *
 * One lump in their place explains most of both, at a distance and of a kind that belong to neither. So what stands
 * there is put back, two are fitted in its place, and believed only when they are worth their parameters (Bayesian
 * information criterion).
 */

import { refine } from './fit-cascade.ts';
import { type FitContext, residualVariance } from './fit-context.ts';
import { fitOneLump, fitTwoLumps, type LumpFit } from './fit-lumps.ts';
import { ALL_FREE, addFreeLump, around, type LineModel, lumpDistanceM, removeLump } from './line-model.ts';
import { evaluateCost } from './linearise.ts';
import { localEcho } from './local-echo.ts';
import { lumpedTypeOf, lumpReturnLossDb } from './probe.ts';
import type { SearchSettings } from './residual-floor.ts';

/** How far apart two that merge may stand, and how near at least, in 6 dB widths of an echo. */
const FARTHEST = 1.1;
const NEAREST = 0.12;

/** What a second discontinuity must bring beyond the information criterion, in −2 ln likelihood. */
const MARGIN = 25;

/** A neighbour this much weaker, dB, is what a strong echo's own imperfection looks like. */
const MOST_UNEQUAL_DB = 15;

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
  evaluateCost(context, model, ALL_FREE, 1);
  const variance = residualVariance(context);
  const echo = localEcho(context, model, centreM, { lumps: members.map(({ id }) => id), boundary: null });
  const apartM = [NEAREST * settings.resolutionM, FARTHEST * settings.resolutionM] as const;
  const pair = fitTwoLumps(echo, reachM, apartM, variance).find((fit) => !isUnequal(context, fit));
  const one = fitOneLump(echo, reachM, variance)[0];
  const points = context.weight.reduce((sum, w) => sum + w, 0);
  const worth = 2 * Math.log(2 * points) + MARGIN;
  if (!pair || (one && pair.cost > one.cost - worth)) {
    evaluateCost(context, model, ALL_FREE, 1);
    return false;
  }
  for (const member of members) removeLump(model, member.id);
  for (const { type, strength, distanceM: at } of pair.lumps)
    addFreeLump(model, { type: lumpedTypeOf(type), strength, distanceM: at });
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, around(model, centreM - reachM, centreM + reachM), {
    variance: residualVariance(context),
    maxIterations: 6,
  });
  return true;
}

function isUnequal(context: FitContext, fit: LumpFit): boolean {
  const levels = fit.lumps.map((lump) => lumpReturnLossDb(context.frequencyHz, lump));
  return Math.max(...levels) - Math.min(...levels) > MOST_UNEQUAL_DB;
}
