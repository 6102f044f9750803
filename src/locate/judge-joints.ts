/**
 * Is a joint bad, and in what way?
 *
 * A bad joint is the commonest fault of all and must be told from a merely ordinary one. Size alone is a poor judge:
 * each joint is fitted as sound (two small reactances a few centimetres apart, and the mismatch of two cables), with a
 * resistive part of any size, and with a reactive part of any size, and the fits compete by likelihood.
 */

import { evaluateCost, type FitContext, refine, residualEnergy, residualVariance } from './fit-cascade.ts';
import {
  ALL_FREE,
  addLump,
  around,
  boundaryAt,
  cloneModel,
  type LineModel,
  removeLump,
  restoreModel,
} from './line-model.ts';
import { bestPlaceOf, expectBoundary } from './place-joints.ts';
import { lumpedTypeOf, lumpReturnLossDb, PURE_TYPES, probeAcross, pureTypeOf } from './probe.ts';
import { localVariance, type SearchSettings, traceResidual } from './residual-floor.ts';

export type JointState =
  | 'sound'
  | 'series-resistance'
  | 'shunt-leakage'
  | 'series-inductance'
  | 'shunt-capacitance';

export type JointVerdict = {
  readonly boundary: number;
  readonly state: JointState;
  /** False when another faulty state explains the sweep about as well. */
  readonly clear: boolean;
  /** Nats by which the chosen fault beats a sound joint; 0 for a sound one. */
  readonly odds: number;
  /** Nats by which it beats the next faulty state. */
  readonly lead: number;
};

/** Nats that a fault must have over a sound joint. */
const FAULT_ODDS = 9;

/** The same at the port, where the residue of the correction looks like anything. */
const PORT_ODDS = 1000;

/** Nats between two kinds of fault below which it is a coin toss. */
const KIND_ODDS = 2;

/** Half the distance between the two faces of a connector, and its spread, m. From memory: a few centimetres. */
const HALF_GAP_M = 0.018;
const HALF_GAP_SIGMA_M = 0.01;

/** Return loss of a sound joint at the top of the band, one standard deviation, dB. Common practice: 28 to 45 dB. */
const SOUND_RETURN_LOSS_DB = 32;

/** Return loss of a joint over the band below which its reactance is a fault, dB. Common practice. */
export const REACTIVE_FAULT_RETURN_LOSS_DB = 25;

/** Series resistance that a sound connector can mimic, relative to the line: 2 to 3 Ω in 50 Ω. */
const MIMIC_STRENGTH = 0.06;

/** Adds the two small reactances of a sound connector to every joint before the end. */
export function addSoundJoints(model: LineModel): void {
  const sigma = soundStrength(model.frequencyHz[model.frequencyHz.length - 1]!);
  for (let boundary = 0; boundary < model.boundaryM.length; boundary++) {
    // The first joint starts at the reference plane: both its faces lie on the line's side.
    const faces = boundary === 0 ? [HALF_GAP_M, 3 * HALF_GAP_M] : [-HALF_GAP_M, HALF_GAP_M];
    for (const offsetM of faces) {
      addLump(model, {
        type: 'reactive',
        strength: 0,
        strengthSigma: sigma,
        section: offsetM < 0 ? boundary - 1 : boundary,
        boundary,
        offsetM,
        offsetSigmaM: 0,
        offsetMeanM: offsetM,
      });
    }
  }
}

function soundStrength(topHz: number): number {
  return (2 * 10 ** (-SOUND_RETURN_LOSS_DB / 20)) / (2 * Math.PI * topHz);
}

/** Own reactance of a joint that is not worth a judgement, as return loss over the band, dB. */
const QUIET_JOINT_DB = 34;

/** The verdict of a joint at which nothing stood out. */
export function quietJoint(boundary: number): JointVerdict {
  return { boundary, state: 'sound', clear: true, odds: 0, lead: Number.POSITIVE_INFINITY };
}

/** Judges every joint before the end that is suspect or not quiet, leaving the best fit in the model. */
export function judgeJoints(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  suspects: { has(boundary: number): boolean },
): JointVerdict[] {
  const verdicts: JointVerdict[] = [];
  for (let boundary = 0; boundary < model.boundaryM.length; boundary++) {
    const loud = suspects.has(boundary) || ownReturnLossDb(model, boundary) < QUIET_JOINT_DB;
    verdicts.push(loud ? judgeJoint(context, model, settings, boundary) : quietJoint(boundary));
  }
  return verdicts;
}

/** Return loss over the band of what a joint's lumps and the step of impedances there may add up to, dB. */
function ownReturnLossDb(model: LineModel, boundary: number): number {
  const faces = model.lumps.filter((lump) => lump.boundary === boundary);
  const reactive = faces.reduce(
    (sum, face) => sum + (face.type === 'reactive' ? Math.abs(face.strength) : 0),
    0,
  );
  const before = boundary > 0 ? model.impedanceRatio[boundary - 1]! : 0;
  const step = Math.abs(model.impedanceRatio[boundary]! - before) / 2;
  const reactiveDb = lumpReturnLossDb(model.frequencyHz, { type: 'reactive', strength: reactive });
  return -20 * Math.log10(10 ** (-reactiveDb / 20) + step + 1e-12);
}

type Trial = {
  readonly state: JointState;
  readonly model: LineModel;
  readonly cost: number;
};

/** Judges one joint, leaving the best fit in the model. */
export function judgeJoint(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  boundary: number,
): JointVerdict {
  evaluateCost(context, model, ALL_FREE, 1);
  const mean = residualVariance(context);
  const trace = traceResidual(context, model, settings);
  const atM = boundaryAt(model, boundary);
  const variance = localVariance(trace, atM, settings.resolutionM, mean);
  const bare = cloneModel(model);
  dress(bare, boundary, 'bare');
  const others = new Set(model.boundaryM.keys());
  const expected = boundary === 0 ? null : expectBoundary(model, others, boundary - 1);
  const reachM = Math.max(settings.resolutionM, 2.5 * (expected?.sigmaM ?? 0));
  const mine = model.lumps.filter((lump) => lump.boundary === boundary).map((lump) => lump.id);
  const probes = boundary === 0 ? [] : probeAcross(context, model, atM - reachM, atM + reachM, mine);
  const settle = (state: JointState, trial: LineModel): Trial => {
    const near = around(trial, atM - reachM, atM + reachM);
    if (state !== 'sound') {
      // The fault first, and what it does to everything behind it: the rest would lean over to fill its place.
      const fault = trial.lumps.filter((lump) => lump.boundary === boundary && lump.strengthSigma === null);
      const first = { ...near, impedances: new Set<number>(), lumps: new Set(fault.map((lump) => lump.id)) };
      refine(context, trial, first, { variance, maxIterations: 6 });
    }
    refine(context, trial, near, { variance, maxIterations: 14 });
    return { state, model: trial, cost: evaluateCost(context, trial, ALL_FREE, variance) };
  };
  const tryOut = (state: JointState): Trial => {
    const place =
      expected && bestPlaceOf(probes, state === 'sound' ? PURE_TYPES : [state], expected, variance);
    const trial = cloneModel(bare);
    if (place) trial.boundaryM[boundary - 1] = place.distanceM;
    dress(trial, boundary, state, place);
    return settle(state, trial);
  };
  const faults = PURE_TYPES.map(tryOut).sort((a, b) => a.cost - b.cost);
  // A sound joint gets its chance from every place that a fault was tried at, too.
  const sound = [
    tryOut('sound'),
    ...faults.map(({ model: from }) => settle('sound', withoutFault(from, boundary))),
  ].reduce((a, b) => (b.cost < a.cost ? b : a));
  const bad = faults.filter((trial) => isBeyondSound(trial, boundary));
  const best = bad[0];
  const advantage = best ? (sound.cost - best.cost) / 2 : 0;
  // A fit by the name of sound that needs more reactance than a sound joint has is none.
  const odds = needsTooMuch(sound.model, boundary) ? Math.max(advantage, FAULT_ODDS) : advantage;
  if (!best || odds < (boundary === 0 ? PORT_ODDS : FAULT_ODDS)) {
    restoreModel(model, sound.model);
    return { boundary, state: 'sound', clear: true, odds: 0, lead: Number.POSITIVE_INFINITY };
  }
  restoreModel(model, best.model);
  const rival = faults.find((trial) => trial.state !== best.state);
  const lead = rival ? Math.abs(rival.cost - best.cost) / 2 : Number.POSITIVE_INFINITY;
  return { boundary, state: best.state, clear: lead >= KIND_ODDS, odds, lead };
}

function needsTooMuch(model: LineModel, boundary: number): boolean {
  const strength = reactiveStrength(model, boundary);
  return lumpReturnLossDb(model.frequencyHz, { type: 'reactive', strength }) < REACTIVE_FAULT_RETURN_LOSS_DB;
}

/** A copy of the model in which a joint is sound, its faces taking over what they may of the fault's reactance. */
function withoutFault(model: LineModel, boundary: number): LineModel {
  const copy = cloneModel(model);
  dress(copy, boundary, 'sound', { resistive: 0, reactive: reactiveStrength(model, boundary) });
  return copy;
}

/** Whether a fitted fault is of its own kind and larger than what a sound joint may show. */
function isBeyondSound({ model, state }: Trial, boundary: number): boolean {
  if (state === 'sound') return false;
  const type = lumpedTypeOf(state);
  const strength = (type === 'resistive' ? resistiveStrength : reactiveStrength)(model, boundary);
  if (strength === 0 || pureTypeOf(type, strength) !== state) return false;
  return type === 'resistive'
    ? Math.abs(strength) >= MIMIC_STRENGTH
    : lumpReturnLossDb(model.frequencyHz, { type, strength }) < REACTIVE_FAULT_RETURN_LOSS_DB;
}

/**
 * Gives a joint the lumps of one hypothesis: faces that lie within what is sound, and the fault itself.
 *
 * @param start Strengths that the sweep suggests; a fault takes them, for a fit would hand it only what the faces leave.
 */
function dress(
  model: LineModel,
  boundary: number,
  state: JointState | 'bare',
  start: { readonly resistive: number; readonly reactive: number } | null = null,
): void {
  const mine = model.lumps.filter((lump) => lump.boundary === boundary);
  const sigma = soundStrength(model.frequencyHz[model.frequencyHz.length - 1]!);
  const share = state === 'sound' ? (start?.reactive ?? 0) / 2 : 0;
  for (const lump of mine) {
    if (lump.strengthSigma === null) removeLump(model, lump.id);
    else {
      lump.strengthSigma = sigma;
      lump.strength = Math.max(-sigma, Math.min(sigma, share));
    }
  }
  if (state === 'bare' || state === 'sound') return;
  const type = lumpedTypeOf(state);
  const sign = state === 'shunt-leakage' || state === 'shunt-capacitance' ? -1 : 1;
  addLump(model, {
    type,
    strength: start?.[type] || sign * (type === 'resistive' ? 0.01 : 0.1 * sigma),
    strengthSigma: null,
    section: boundary === 0 ? 0 : boundary - 1,
    boundary,
    offsetM: 0,
    offsetSigmaM: HALF_GAP_SIGMA_M,
    offsetMeanM: 0,
  });
}

/** Net resistive strength of a joint. */
export function resistiveStrength(model: LineModel, boundary: number): number {
  return model.lumps
    .filter((lump) => lump.boundary === boundary && lump.type === 'resistive')
    .reduce((sum, lump) => sum + lump.strength, 0);
}

/** Net reactive strength of a joint, s. */
export function reactiveStrength(model: LineModel, boundary: number): number {
  return model.lumps
    .filter((lump) => lump.boundary === boundary && lump.type === 'reactive')
    .reduce((sum, lump) => sum + lump.strength, 0);
}

/** Energy of the residual per point that the last evaluation left, dB; −Infinity never occurs. */
export function residualDb(context: FitContext): number {
  let points = 0;
  for (const w of context.weight) points += w;
  return 10 * Math.log10(Math.max(residualEnergy(context) / points, 1e-15));
}
