/**
 * Is a joint bad, and in what way?
 *
 * A bad joint is the commonest fault of all and must be told from a merely ordinary one. Size alone is a poor judge:
 * each joint is fitted as sound (two small reactances a few centimetres apart, and the mismatch of two cables), with a
 * resistive part of any size, and with a reactive part of any size, and the fits compete by likelihood.
 */

import { refine } from './fit-cascade.ts';
import { type FitContext, residualEnergy, residualVariance } from './fit-context.ts';
import { STIFFNESS } from './fit-priors.ts';
import { ALL_FREE, addLump, around, boundaryAt, type LineModel, removeLump } from './line-model.ts';
import { evaluateCost } from './linearise.ts';
import {
  fitLocal,
  fitTables,
  type LocalEcho,
  type LocalPart,
  localEcho,
  matchTables,
  reflectionDb,
  type TableColumn,
} from './local-echo.ts';
import { expectBoundary } from './place-joints.ts';
import { lumpedTypeOf, lumpReturnLossDb, PURE_TYPES, pureTypeOf } from './probe.ts';
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
const HALF_GAP_M = 0.02;
/** Where in a joint its fault sits, about the middle: either half. */
const FAULT_SPREAD_M = 0.02;
const GAP_SPREAD_M = 0.007;

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

/** Judges one joint, leaving the best fit in the model. */
export function judgeJoint(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  boundary: number,
): JointVerdict {
  evaluateCost(context, model, ALL_FREE, 1);
  const atM = boundaryAt(model, boundary);
  const mean = residualVariance(context);
  const variance = localVariance(traceResidual(context, settings), atM, settings.resolutionM, mean);
  const place = placeOf(context, model, settings, boundary);
  const faults = PURE_TYPES.flatMap((state) => bestTrial(place, state, variance) ?? [])
    .filter(keepsItsKind)
    .sort((a, b) => a.cost - b.cost);
  const sound = bestTrial(place, 'sound', variance, [BARE, ...faults.map(soundStart)])!;
  const likeliest = faults[0]?.cost ?? 0;
  const best = faults.find((trial) => isBeyondSound(trial) && trial.cost < likeliest + 2 * KIND_ODDS);
  const advantage = best ? (sound.cost - best.cost) / 2 : 0;
  // A fit by the name of sound that needs more reactance than a sound joint has is none.
  const odds = sound.ownDb < REACTIVE_FAULT_RETURN_LOSS_DB ? Math.max(advantage, FAULT_ODDS) : advantage;
  if (!best || odds < (boundary === 0 ? PORT_ODDS : FAULT_ODDS)) {
    dress(model, boundary, place, sound);
    settle(context, model, settings, atM);
    return quietJoint(boundary);
  }
  dress(model, boundary, place, best);
  settle(context, model, settings, atM);
  const rival = faults.find((trial) => trial.state !== best.state);
  const lead = rival ? Math.abs(rival.cost - best.cost) / 2 : Number.POSITIVE_INFINITY;
  return { boundary, state: best.state, clear: lead >= KIND_ODDS, odds, lead };
}

/**
 * Takes back the verdicts that the last fit has not borne out: a resistance that has shrunk to what sound joints show.
 *
 * @param model Its lumps at those joints are removed.
 */
export function confirmJoints(model: LineModel, verdicts: readonly JointVerdict[]): JointVerdict[] {
  return verdicts.map((verdict) => {
    const { boundary, state } = verdict;
    if (state === 'sound' || lumpedTypeOf(state) !== 'resistive') return verdict;
    const strength = resistiveStrength(model, boundary);
    if (Math.abs(strength) >= STILL_A_FAULT * MIMIC_STRENGTH && pureTypeOf('resistive', strength) === state)
      return verdict;
    for (const lump of model.lumps.filter((l) => l.boundary === boundary && l.strengthSigma === null))
      removeLump(model, lump.id);
    return quietJoint(boundary);
  });
}

/** Share of what sound joints can mimic to which the last fit may shrink a fault. */
const STILL_A_FAULT = 0.8;

/** Lets the line behind a joint follow what was decided about it. */
function settle(context: FitContext, model: LineModel, settings: SearchSettings, atM: number): void {
  evaluateCost(context, model, ALL_FREE, 1);
  const freedom = around(model, atM - settings.resolutionM, atM + settings.resolutionM);
  refine(context, model, freedom, { variance: residualVariance(context), maxIterations: 5 });
}

/** A joint by itself, and what is expected of it. */
type JointPlace = {
  readonly echo: LocalEcho;
  /** Where the joint is expected on the echo's scale, m from its plane, and how sure that is. */
  readonly expectedM: number;
  readonly sigmaM: number;
  readonly reachM: number;
  /** Offsets of the two faces from the joint, m. */
  readonly facesM: readonly [number, number];
  readonly faceSigma: number;
  /** Step of impedance by the description, ln, and the spread of what samples add to it. */
  readonly step: number;
  readonly stepSigma: number;
};

function placeOf(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  boundary: number,
): JointPlace {
  const atM = boundaryAt(model, boundary);
  const others = new Set(model.boundaryM.keys());
  const expected =
    boundary === 0 ? { meanM: 0, sigmaM: PORT_SIGMA_M } : expectBoundary(model, others, boundary - 1);
  const mine = model.lumps.filter((lump) => lump.boundary === boundary);
  const echo = localEcho(context, model, atM, { lumps: mine.map((lump) => lump.id), boundary });
  const faces = mine.filter((lump) => lump.strengthSigma !== null).map((lump) => lump.offsetMeanM);
  const before = boundary === 0 ? model.port : model.media[boundary - 1]!;
  const after = model.media[boundary]!;
  const sigmas = [boundary - 1, boundary].map((section) => model.priors.impedanceSigma[section] ?? 0);
  return {
    echo,
    expectedM: expected.meanM - atM,
    sigmaM: expected.sigmaM,
    reachM: boundary === 0 ? 0 : Math.max(settings.resolutionM, 2.5 * expected.sigmaM),
    facesM: [faces[0] ?? -HALF_GAP_M, faces[1] ?? HALF_GAP_M],
    faceSigma: soundStrength(model.frequencyHz[model.frequencyHz.length - 1]!),
    step: Math.log(after.z0Ohm / before.z0Ohm),
    stepSigma: Math.hypot(...sigmas),
  };
}

/** The port's own joint does not move. */
const PORT_SIGMA_M = 1e-3;

/** One hypothesis about a joint, fitted. */
type Trial = {
  readonly state: JointState;
  readonly cost: number;
  /** Offset of the joint from the plane, m. */
  readonly offsetM: number;
  readonly faces: readonly [number, number];
  /** Where the faces stand, m from the joint. */
  readonly facesM: readonly [number, number];
  /** What samples add to the described step, ln. */
  readonly step: number;
  readonly fault: { readonly strength: number; readonly offsetM: number } | null;
  /** Return loss over the band of the joint's reactance and of what samples add to its step, dB. */
  readonly ownDb: number;
};

/** Places tried per hypothesis. */
const MOST_STARTS = 3;

function bestTrial(
  place: JointPlace,
  state: JointState,
  variance: number,
  more: readonly Start[] = [],
): Trial | null {
  const starts = [...startsFor(place, state, variance), ...more];
  const trials = starts.map((start) => fitState(place, state, start, variance));
  return trials.reduce<Trial | null>((a, b) => (a === null || b.cost < a.cost ? b : a), null);
}

/** A sound joint gets its chance from every place that a fault was tried at, too. */
function soundStart({ state, offsetM, faces, step, fault }: Trial): Start {
  const own = fault !== null && state !== 'sound' && lumpedTypeOf(state) === 'reactive' ? fault.strength : 0;
  const share = Math.max(-Math.abs(own), Math.min(Math.abs(own), own / 2));
  return { offsetM, faces: [faces[0] + share, faces[1] + share], step, strength: 0, faultOffsetM: 0 };
}

/** Where a fit begins: everything but the spread of the faces. */
type Start = {
  readonly offsetM: number;
  readonly faces: readonly [number, number];
  readonly step: number;
  readonly strength: number;
  readonly faultOffsetM: number;
};

/** A joint that shows nothing. */
const BARE: Start = { offsetM: 0, faces: [0, 0], step: 0, strength: 0, faultOffsetM: 0 };

/** Grid of the first look, as a share of half a wavelength at the top of the band. */
const GRID_SHARE = 1 / 16;

/**
 * The likeliest starts under one hypothesis: at every place of a grid the faces, the step and the fault are fitted
 * together by linear least squares, which is exact for small reflections; the best few places are the starts.
 */
function startsFor(place: JointPlace, state: JointState, variance: number): Start[] {
  const { echo, expectedM, sigmaM, reachM, facesM, faceSigma, step, stepSigma } = place;
  const gridM = (Math.PI / echo.beta[echo.beta.length - 1]!) * GRID_SHARE;
  const count = Math.ceil(reachM / gridM);
  const toGrid = (m: number): number => Math.round(m / gridM);
  const faces = [toGrid(facesM[0]), toGrid(facesM[1])] as const;
  const margin = Math.max(Math.abs(faces[0]), Math.abs(faces[1]), toGrid(HALF_GAP_M)) + 1;
  const tables = matchTables(echo, step, gridM, count + margin, 2 * margin);
  const faulty = state === 'sound' ? null : lumpedTypeOf(state);
  const faultOffsets = faulty ? [...new Set([faces[0], 0, faces[1]])] : [0];
  const wanted = state === 'shunt-leakage' || state === 'shunt-capacitance' ? -1 : 1;
  const found: (Start & { readonly score: number })[] = [];
  for (let k = -count; k <= count; k++) {
    const off = (k * gridM - expectedM) / sigmaM;
    let best: (Start & { readonly score: number }) | null = null;
    for (const faultOffset of faultOffsets) {
      const columns: TableColumn[] = [
        { reactive: true, at: k + faces[0], sigma: faceSigma },
        { reactive: true, at: k + faces[1], sigma: faceSigma },
        { reactive: false, at: k, sigma: stepSigma },
      ];
      if (faulty)
        columns.push({
          reactive: faulty === 'reactive',
          at: k + faultOffset,
          sigma: Number.POSITIVE_INFINITY,
        });
      const fit = fitTables(tables, columns, variance);
      if (fit === null) continue;
      const [first = 0, second = 0, samples = 0, strength = 0] = fit.strengths;
      if (faulty && strength * wanted <= 0) continue;
      const score = fit.gain - off * off;
      if (best !== null && best.score >= score) continue;
      best = {
        offsetM: k * gridM,
        faces: [first, second],
        step: samples,
        strength,
        faultOffsetM: faultOffset * gridM,
        score,
      };
    }
    if (best !== null) found.push(best);
  }
  const peaks = found.filter(
    ({ score }, i) => score >= (found[i - 1]?.score ?? score) && score >= (found[i + 1]?.score ?? score),
  );
  return peaks.sort((a, b) => b.score - a.score).slice(0, MOST_STARTS);
}

/** Fits one hypothesis: the joint's place, two faces, a step, and for a fault its strength and place in the joint. */
function fitState(place: JointPlace, state: JointState, start: Start, variance: number): Trial {
  const { echo, expectedM, sigmaM, facesM, faceSigma, step, stepSigma } = place;
  const faulty = state === 'sound' ? null : lumpedTypeOf(state);
  const strengthStep = faulty === 'resistive' ? 1e-5 : 1e-5 / echo.omega[echo.omega.length - 1]!;
  const begin = [start.offsetM, start.faces[0], start.faces[1], start.step, 0];
  const steps = [1e-6, faceSigma * 1e-4, faceSigma * 1e-4, 1e-6, 1e-6];
  const partsOf = (p: Float64Array): LocalPart[] => {
    const parts: LocalPart[] = [
      { type: 'reactive', strength: p[1]!, offsetM: p[0]! + facesM[0] - p[4]! },
      { type: 'step', strength: step + p[3]!, offsetM: p[0]! },
      { type: 'reactive', strength: p[2]!, offsetM: p[0]! + facesM[1] + p[4]! },
    ];
    if (faulty) parts.push({ type: faulty, strength: p[5]!, offsetM: p[0]! + p[6]! });
    return parts.sort((a, b) => a.offsetM - b.offsetM);
  };
  const fit = fitLocal(
    echo,
    {
      start: faulty ? [...begin, start.strength, start.faultOffsetM] : begin,
      steps: faulty ? [...steps, strengthStep, 1e-6] : steps,
      parts: partsOf,
      priors: (p) => [
        (p[0]! - expectedM) / sigmaM,
        stiff(p[1]! / faceSigma),
        stiff(p[2]! / faceSigma),
        stiff(p[3]! / stepSigma),
        stiff(p[4]! / GAP_SPREAD_M),
        ...(faulty ? [p[6]! / FAULT_SPREAD_M] : []),
      ],
    },
    variance,
  );
  const [offsetM = 0, first = 0, second = 0, samples = 0, widerM = 0, strength = 0, faultOffsetM = 0] =
    fit.parameters;
  return {
    state,
    cost: fit.cost,
    offsetM,
    faces: [first, second],
    facesM: [facesM[0] - widerM, facesM[1] + widerM],
    step: samples,
    fault: faulty ? { strength, offsetM: faultOffsetM } : null,
    ownDb: reflectionDb(echo, reactivePartsOf(partsOf(fit.parameters), step)),
  };
}

/** What reflects at a joint beside its described step and its resistance: that is judged by itself. */
function reactivePartsOf(parts: readonly LocalPart[], step: number): LocalPart[] {
  return parts
    .filter((part) => part.type !== 'resistive')
    .map((part) => (part.type === 'step' ? { ...part, strength: part.strength - step } : part));
}

/** Row of a prior that stiffens beyond two standard deviations, as the cascade's own. */
function stiff(u: number): number {
  return u * Math.sqrt(1 + STIFFNESS * u * u);
}

/** Whether a fitted fault is still of the kind it began as; the fit may have turned it into its dual. */
function keepsItsKind({ state, fault }: Trial): boolean {
  return state !== 'sound' && fault !== null && pureTypeOf(lumpedTypeOf(state), fault.strength) === state;
}

/** Whether a fitted fault is larger than what a sound joint may show. */
function isBeyondSound({ state, fault, ownDb }: Trial): boolean {
  if (state === 'sound' || fault === null) return false;
  if (lumpedTypeOf(state) === 'resistive') return Math.abs(fault.strength) >= MIMIC_STRENGTH;
  return ownDb < REACTIVE_FAULT_RETURN_LOSS_DB;
}

/** Puts a fitted hypothesis into the model. */
function dress(model: LineModel, boundary: number, place: JointPlace, trial: Trial): void {
  const mine = model.lumps.filter((lump) => lump.boundary === boundary);
  for (const lump of mine) if (lump.strengthSigma === null) removeLump(model, lump.id);
  const faces = mine.filter((lump) => lump.strengthSigma !== null);
  faces.forEach((face, i) => {
    face.strengthSigma = place.faceSigma;
    face.strength = trial.faces[i as 0 | 1];
    face.offsetM = trial.facesM[i as 0 | 1];
  });
  if (boundary > 0) {
    const low = boundaryAt(model, boundary - 1) + LEAST_SECTION_M;
    const high =
      (boundary < model.boundaryM.length ? boundaryAt(model, boundary + 1) : Infinity) - LEAST_SECTION_M;
    model.boundaryM[boundary - 1] = Math.max(low, Math.min(high, place.echo.planeM + trial.offsetM));
  }
  if (trial.state === 'sound' || trial.fault === null) return;
  addLump(model, {
    type: lumpedTypeOf(trial.state),
    strength: trial.fault.strength,
    strengthSigma: null,
    section: boundary === 0 ? 0 : boundary - 1,
    boundary,
    offsetM: trial.fault.offsetM,
    offsetSigmaM: FAULT_SPREAD_M,
    offsetMeanM: 0,
  });
}

/** A joint stays this far from its neighbours, m. */
const LEAST_SECTION_M = 0.1;

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
