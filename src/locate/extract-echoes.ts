/**
 * The search: take the strongest thing that the cascade does not explain yet, insert it, refine everything, repeat.
 *
 * Working on the whole cascade instead of a sum of echoes means that ghosts are explained, never found.
 */

import { refine } from './fit-cascade.ts';
import { type FitContext, residualVariance } from './fit-context.ts';
import { fitOneLump, type LumpFit } from './fit-lumps.ts';
import { joinStretches } from './join-stretches.ts';
import { type JointVerdict, judgeJoint } from './judge-joints.ts';
import {
  ALL_FREE,
  addFreeLump,
  around,
  boundaryAt,
  type Freedom,
  type LineModel,
  type Lump,
  lumpDistanceM,
  removeLump,
} from './line-model.ts';
import { evaluateCost } from './linearise.ts';
import { type LocalEcho, localEcho } from './local-echo.ts';
import { expectBoundary, placeJoints } from './place-joints.ts';
import { lumpedTypeOf, lumpReturnLossDb, pureTypeOf } from './probe.ts';
import { floorAt, localVariance, type SearchSettings, traceResidual } from './residual-floor.ts';
import type { ResidualTrace } from './residual-trace.ts';
import { resolvePair } from './resolve-pair.ts';
import { translate } from './translate-model.ts';

/** Most lumps that the search inserts beside the described joints. */
export const MOST_FREE_LUMPS = 12;

/**
 * A flaw in the cable must stand this far above the upper quantile of the trace around it; a weak one, such as cable as
 * sold may show by itself, farther. Chosen on seeded scenes with sparse and with dense ripple.
 */
const OVER_FLOOR = { strong: 3.6, strongDb: -36, weak: 8, weakDb: -40 };
const OVER_FLOOR_AT_JOINT = 1.8;

function thresholdOverFloor(level: number): number {
  const { strong, strongDb, weak, weakDb } = OVER_FLOOR;
  const share = (strongDb - 20 * Math.log10(level)) / (strongDb - weakDb);
  return strong * (weak / strong) ** Math.max(0, Math.min(1, share));
}

/**
 * Flaws inside a cable that return less than this over the band are what cable as sold may show here and there, dB.
 * Common practice: structural return loss of 35 to 45 dB over a whole run, single spots well below that.
 */
export const WEAKEST_FLAW_DB = 46;

/** The trace may show a flaw this much lower than it is, by taper and noise, dB. */
const TRACE_SLACK_DB = 3;

/** How far from a boundary, in resolutions, an echo still belongs to the joint there. */
const JOINT_CELL = 0.75;

/** A reflection above this level distorts everything fitted beside it, and is seen to first. −26 dB. */
const STRONG_LEVEL = 0.05;

/** Rounds of the search. */
const MOST_ROUNDS = 24;

/** A joint that was judged because something stood out there, or that looks worse than sound by itself. */
export type Extracted = { readonly verdicts: ReadonlyMap<number, JointVerdict> };

/**
 * Explains what stands above the floor, the strongest first: a joint is judged, anything else becomes a free lump.
 *
 * As long as something strong is unexplained only its surroundings are fitted; the small freedoms of a sound line would
 * lean over to fill its place.
 */
export function extractEchoes(context: FitContext, model: LineModel, settings: SearchSettings): Extracted {
  const verdicts = new Map<number, JointVerdict>();
  const refused: number[] = [];
  let trace = traceResidual(context, settings);
  let calm = false;
  for (let round = 0; round < MOST_ROUNDS; round++) {
    settings.onRound?.(round, MOST_ROUNDS);
    const peak = strongestAboveFloor(model, trace, settings, refused, verdicts);
    if (!calm && (peak === null || peak.level < STRONG_LEVEL)) {
      calm = true;
      settings.onCalm?.(round > 0);
      placeJoints(context, model, verdicts);
      refineAll(context, model);
      trace = traceResidual(context, settings);
      continue;
    }
    if (peak === null) break;
    if (peak.boundary !== null) {
      verdicts.set(peak.boundary, judgeJoint(context, model, settings, peak.boundary));
    } else {
      const free = model.lumps.filter((lump) => lump.boundary === null).length;
      if (free >= MOST_FREE_LUMPS) break;
      const explained = hasFreeLumpNear(model, peak.distanceM, MERGING * settings.resolutionM)
        ? resolvePair(context, model, settings, peak.distanceM)
        : insertLump(context, model, settings, peak.distanceM);
      if (!explained) {
        refused.push(peak.distanceM);
        continue;
      }
      joinStretches(context, model, settings);
    }
    if (calm) refine(context, model, NO_RESIDUE, { variance: residualVariance(context), maxIterations: 5 });
    else evaluateCost(context, model, ALL_FREE, 1);
    trace = traceResidual(context, settings);
  }
  if (!calm) refineAll(context, model);
  mergeIntoJoints(context, model, settings, verdicts);
  joinStretches(context, model, settings);
  retestTypes(context, model, settings);
  dropCompanions(context, model, settings);
  pruneLumps(context, model, settings);
  evaluateCost(context, model, ALL_FREE, 1);
  return { verdicts };
}

/** What is left over this near to a lump, in 6 dB widths, belongs to it: two may have merged. */
const MERGING = 0.95;

function hasFreeLumpNear(model: LineModel, distanceM: number, withinM: number): boolean {
  return model.lumps.some(
    (lump) => lump.boundary === null && Math.abs(lumpDistanceM(model, lump) - distanceM) < withinM,
  );
}

/** Everything but the instrument, which was fitted once and hardly changes with what is found on the line. */
const NO_RESIDUE: Freedom = { ...ALL_FREE, residue: false };

/** Refines everything against the residual as it stands. */
function refineAll(context: FitContext, model: LineModel): void {
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 8 });
}

type FloorPeak = { readonly distanceM: number; readonly boundary: number | null; readonly level: number };

function strongestAboveFloor(
  model: LineModel,
  trace: ResidualTrace,
  settings: SearchSettings,
  refused: readonly number[],
  judged: ReadonlyMap<number, JointVerdict>,
): FloorPeak | null {
  const { resolutionM } = settings;
  const n = model.boundaryM.length;
  const endM = boundaryAt(model, n);
  const cells = jointCells(model, resolutionM);
  let best: FloorPeak | null = null;
  let bestRatio = 0;
  for (let k = 1; k < trace.level.length - 1; k++) {
    const level = trace.level[k]!;
    if (level < trace.level[k - 1]! || level < trace.level[k + 1]!) continue;
    const distanceM = trace.fromM + k * trace.stepM;
    if (refused.some((d) => Math.abs(d - distanceM) < resolutionM)) continue;
    const boundary = nearestBoundary(model, cells, distanceM);
    // What the end leaves over is not an echo before it; the search stops a cell short.
    if (distanceM > endM - resolutionM * JOINT_CELL) continue;
    if (boundary !== null && (judged.has(boundary) || boundary === n)) continue;
    if (boundary === null && level < 10 ** (-(WEAKEST_FLAW_DB + TRACE_SLACK_DB) / 20)) continue;
    const ratio = level / floorAt(trace, model, k, resolutionM);
    // On a line of few cells a strong echo is the floor; that strong, nothing else is needed.
    const threshold =
      level > STRONG_LEVEL ? 0.1 : boundary === null ? thresholdOverFloor(level) : OVER_FLOOR_AT_JOINT;
    if (ratio / threshold > Math.max(1, bestRatio)) {
      bestRatio = ratio / threshold;
      best = { distanceM, boundary, level };
    }
  }
  return best;
}

/**
 * Half the width of each boundary's cell, m: what lies within it belongs to the joint. Where a joint itself is not seen,
 * its cell is as wide as its place is uncertain.
 */
export function jointCells(model: LineModel, resolutionM: number): number[] {
  const n = model.boundaryM.length;
  const others = new Set(model.boundaryM.keys());
  return Array.from({ length: n + 1 }, (_, boundary) => {
    const own = JOINT_CELL * resolutionM + 0.03;
    if (boundary === 0) return own + PORT_RESIDUE_M;
    if (boundary === n) return own;
    const { sigmaM } = expectBoundary(model, others, boundary - 1);
    return own + PLACE_SIGMAS * sigmaM;
  });
}

/** How far into the line the residue of the instrument's correction reaches, m: 1.2 ns there and back. */
const PORT_RESIDUE_M = 0.15;

/** Standard deviations of a joint's own place that its cell is widened by. */
const PLACE_SIGMAS = 2;

/** The joint whose cell a distance lies in, or null. */
export function nearestBoundary(
  model: LineModel,
  cells: readonly number[],
  distanceM: number,
): number | null {
  let best: number | null = null;
  let nearest = Number.POSITIVE_INFINITY;
  for (let b = 0; b <= model.boundaryM.length; b++) {
    const off = Math.abs(distanceM - boundaryAt(model, b));
    if (off < cells[b]! && off < nearest) {
      nearest = off;
      best = b;
    }
  }
  return best;
}

/** Hands what stands in a joint's cell over to the joint, which is judged anew. */
function mergeIntoJoints(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  verdicts: Map<number, JointVerdict>,
): void {
  const cells = jointCells(model, settings.resolutionM);
  const merged = new Set<number>();
  for (const lump of model.lumps.filter((l) => l.boundary === null)) {
    const boundary = nearestBoundary(model, cells, lumpDistanceM(model, lump));
    if (boundary === null) continue;
    removeLump(model, lump.id);
    // Port and end are fitted as they are: what stands in their cells is theirs.
    if (boundary === 0 || boundary === model.boundaryM.length)
      settle(context, model, settings, lumpDistanceM(model, lump));
    else merged.add(boundary);
  }
  for (const boundary of merged) verdicts.set(boundary, judgeJoint(context, model, settings, boundary));
}

/** Inserts the pure kind that explains most around a distance; false when none helps. */
function insertLump(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  distanceM: number,
): boolean {
  const variance = residualVariance(context);
  const echo = localEcho(context, model, distanceM, { lumps: [], boundary: null });
  const [best] = fitOneLump(echo, LUMP_REACH * settings.resolutionM, variance);
  const lump = best?.lumps[0];
  if (!lump || lumpReturnLossDb(context.frequencyHz, lump) > WEAKEST_FLAW_DB) {
    evaluateCost(context, model, ALL_FREE, 1);
    return false;
  }
  addFreeLump(model, { ...lump, type: lumpedTypeOf(lump.type) });
  settle(context, model, settings, lump.distanceM);
  return true;
}

/** How far around a peak of the trace its cause is looked for, in 6 dB widths of an echo. */
const LUMP_REACH = 0.8;

/** Lets the line around a place and behind it follow what was put there. */
function settle(context: FitContext, model: LineModel, settings: SearchSettings, atM: number): void {
  evaluateCost(context, model, ALL_FREE, 1);
  const freedom = around(model, atM - settings.resolutionM, atM + settings.resolutionM);
  refine(context, model, freedom, { variance: residualVariance(context), maxIterations: 6 });
}

/** Every pure kind in the place of one lump, best first. */
export function rankTypes(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  lump: Lump,
  variance: number,
): LumpFit[] {
  const echo = localEcho(context, model, lumpDistanceM(model, lump), { lumps: [lump.id], boundary: null });
  return fitOneLump(echo, LUMP_REACH * settings.resolutionM, variance);
}

/** Puts every other pure kind in the place of each free lump where it explains more. */
function retestTypes(context: FitContext, model: LineModel, settings: SearchSettings): void {
  for (const lump of model.lumps.filter((l) => l.boundary === null)) {
    evaluateCost(context, model, ALL_FREE, 1);
    const [best] = rankTypes(context, model, settings, lump, residualVariance(context));
    const other = best?.lumps[0];
    if (!other || other.type === pureTypeOf(lump.type, lump.strength)) continue;
    removeLump(model, lump.id);
    addFreeLump(model, { ...other, type: lumpedTypeOf(other.type) });
    settle(context, model, settings, other.distanceM);
  }
}

/** Evidence below which a free lump is dropped, in −2 ln likelihood against the local floor. */
const PRUNE_COST = 30;

/** Drops lumps without which the sweep is explained as well. */
function pruneLumps(context: FitContext, model: LineModel, settings: SearchSettings): void {
  const trace = traceResidual(context, settings);
  for (const lump of model.lumps.filter((l) => l.boundary === null)) {
    evaluateCost(context, model, ALL_FREE, 1);
    const mean = residualVariance(context);
    const distanceM = lumpDistanceM(model, lump);
    const variance = localVariance(trace, distanceM, settings.resolutionM, mean);
    const echo = localEcho(context, model, distanceM, { lumps: [lump.id], boundary: null });
    const [best] = fitOneLump(echo, LUMP_REACH * settings.resolutionM, variance);
    if (best && localEnergy(echo) / variance - best.cost > PRUNE_COST) continue;
    removeLump(model, lump.id);
    settle(context, model, settings, distanceM);
  }
}

/** Σ w·|q|²: what a place costs when nothing stands there. */
function localEnergy({ re, im, weight }: LocalEcho): number {
  let sum = 0;
  for (let b = 0; b < weight.length; b++) sum += weight[b]! * (re[b]! ** 2 + im[b]! ** 2);
  return sum;
}

/** How near, in 6 dB widths, and how much weaker, dB, a lump is the companion of a stronger one. */
const COMPANION = 1.4;
const COMPANION_DB = 15;

/** Drops what stands within a cell of something far stronger: that one's own imperfection. */
function dropCompanions(context: FitContext, model: LineModel, settings: SearchSettings): void {
  const free = model.lumps
    .filter((lump) => lump.boundary === null)
    .map((lump) => ({ lump, levelDb: lumpReturnLossDb(context.frequencyHz, lump) }));
  for (const { lump, levelDb } of free) {
    const overshadowed = free.some(
      (other) =>
        levelDb - other.levelDb > COMPANION_DB &&
        Math.abs(lumpDistanceM(model, other.lump) - lumpDistanceM(model, lump)) <
          COMPANION * settings.resolutionM,
    );
    if (overshadowed) removeLump(model, lump.id);
  }
}

/**
 * Drops what the last fit has shown to be nothing: companions of stronger lumps, lumps without evidence, and lumps that
 * have shrunk to what cable as sold may show.
 *
 * @returns True when something was dropped.
 */
export function dropNothings(context: FitContext, model: LineModel, settings: SearchSettings): boolean {
  const before = model.lumps.length;
  for (const lump of model.lumps.filter((l) => l.boundary === null))
    if (lumpReturnLossDb(context.frequencyHz, lump) > WEAKEST_FLAW_DB + 1) removeLump(model, lump.id);
  dropCompanions(context, model, settings);
  if (model.lumps.length < before) evaluateCost(context, model, ALL_FREE, 1);
  pruneLumps(context, model, settings);
  return model.lumps.length < before;
}

/** Number of stages and parameters, for reports. */
export function modelSize(model: LineModel): { readonly elements: number; readonly parameters: number } {
  const translation = translate(model, ALL_FREE);
  return {
    elements: model.lumps.length + model.boundaryM.length + 1,
    parameters: translation.parameters.length,
  };
}
