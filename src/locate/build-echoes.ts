/** From the fitted model to echoes: distance scaled to what is known, level, kind, value and uncertainty. */
import { normalisedOf } from '../line/discontinuity.ts';
import type { Line } from '../line/line.ts';
import { jointName } from '../line/line.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexRms, complexZeros } from '../numerics/complex.ts';
import type { DistanceScale } from './distance-scale.ts';
import type { Echo, EchoKind, EchoValue } from './echo.ts';
import type { FitContext } from './fit-context.ts';
import type { EndJointVerdict } from './judge-end-joint.ts';
import { type JointVerdict, reactiveStrength, resistiveStrength } from './judge-joints.ts';
import { ALL_FREE, boundaryAt, type LineModel, type Lump, lumpDistanceM, sectionAt } from './line-model.ts';
import { fitCovariance, linearise } from './linearise.ts';
import { lumpedTypeOf, lumpReturnLossDb, type PureType, pureTypeOf } from './probe.ts';

/** What the type competition said of one free lump. */
export type LumpVerdict = { readonly id: number; readonly confidence: number; readonly resolved: boolean };

export type EchoParts = {
  readonly line: Line;
  readonly joints: readonly JointVerdict[];
  /** A fault at the joint before a load; null where there is none. */
  readonly endJoint: EndJointVerdict | null;
  readonly lumps: readonly LumpVerdict[];
  readonly endKind: 'open' | 'short' | 'load' | 'antenna';
  readonly endConfidence: number;
  /** True when the line stops before its description does: its end is no joint then. */
  readonly endsEarly: boolean;
  readonly scale: DistanceScale;
  /** Noise variance per real component, local floor included, at a model distance. */
  readonly varianceAt: (distanceM: number) => number;
};

/** Confidence of a joint that nothing speaks against. */
const SOUND_CONFIDENCE = 0.98;

/** Lead in nats that names the kind of a fault before a load, and how much of its size the load leaves in doubt. */
const KIND_LEAD = 1.5;
const LOAD_DOUBT = 0.2;

/** A sound joint is listed when its own reflection stands above this level, dB. */
const LISTED_JOINT_DB = 55;

/**
 * Echoes in order of distance: joints that can be seen, everything found between them, and the end.
 *
 * @param context Its cascade is linearised at the model here; levels are read from its sensitivities.
 */
export function buildEchoes(context: FitContext, model: LineModel, parts: EchoParts): Echo[] {
  const meanVariance = parts.varianceAt(0);
  const linear = linearise(context, model, ALL_FREE, meanVariance);
  const covariance = fitCovariance(linear);
  const { parameters, stageOfLump, stages, stageOfBoundary } = linear.translation;
  // The floor where an echo lies stands for the noise that its own parameters saw.
  const inflationAt = (distanceM: number): number => Math.max(1, parts.varianceAt(distanceM) / meanVariance);
  /** Standard deviation of a sum of parameters, given as factors by column. */
  const sigmaOf = (factors: ReadonlyMap<number, number>, distanceM: number): number | null => {
    if (!covariance) return null;
    const p = parameters.length;
    let variance = 0;
    for (const [k, a] of factors) for (const [j, b] of factors) variance += a * b * covariance[k * p + j]!;
    return Math.sqrt(Math.max(0, variance * inflationAt(distanceM)));
  };
  const columnNamed = (name: string): number => parameters.findIndex((parameter) => parameter.name === name);
  const columnOfBoundary = (index: number): number =>
    parameters.findIndex((parameter) => parameter.boundary === index);
  // What a fit does not determine may lie anywhere on the line.
  const lineM = boundaryAt(model, model.boundaryM.length);
  /** @param lump Set for what stands free in its section. @param boundary Set for what stands at a joint. */
  const place = (
    distanceM: number,
    { lump = null, boundary = null }: { readonly lump?: number | null; readonly boundary?: number | null },
  ): Pick<Echo, 'distanceM' | 'distanceSigmaM'> => {
    const physical = parts.scale.place(distanceM, boundary);
    const factors = new Map<number, number>();
    const add = (column: number, factor: number): void => {
      if (column >= 0) factors.set(column, (factors.get(column) ?? 0) + factor);
    };
    if (lump !== null) add(columnNamed(`place of lump ${lump}`), physical.perM);
    for (const [index, factor] of physical.perBoundary) add(columnOfBoundary(index), factor);
    return {
      distanceM: physical.distanceM,
      distanceSigmaM: Math.hypot(sigmaOf(factors, distanceM) ?? lineM, physical.sigmaM, LEAST_SIGMA_M),
    };
  };
  const strengthSigmaOf = (id: number, distanceM: number): number | null => {
    const column = columnNamed(`strength of lump ${id}`);
    return column < 0 ? null : sigmaOf(new Map([[column, 1]]), distanceM);
  };
  const echoes: Echo[] = [];
  for (const lump of model.lumps.filter((l) => l.boundary === null)) {
    const distanceM = lumpDistanceM(model, lump);
    const verdict = parts.lumps.find((v) => v.id === lump.id);
    const own = lumpReflection(context, model, [lump]);
    const pure = pureTypeOf(lump.type, lump.strength);
    const strengthSigma = strengthSigmaOf(lump.id, distanceM);
    echoes.push({
      ...place(distanceM, { lump: lump.id }),
      returnLossDb: levelDb(seenFromPort(context, own, stageOfLump.get(lump.id)!)),
      correctedReturnLossDb: levelDb(own),
      kind: verdict && !verdict.resolved ? 'unresolved' : pure,
      confidence: verdict?.confidence ?? 0.5,
      value: valueIn(lump.section, pure, lump.strength, strengthSigma),
      joint: null,
      section: sectionAt(model, distanceM),
    });
  }
  for (const verdict of parts.joints) {
    const echo = jointEcho(verdict);
    if (echo) echoes.push(echo);
  }
  const end = endEcho();
  if (parts.endJoint) echoes.push(endJointEcho(parts.endJoint, end));
  // The end comes last, also after a fault at its own joint.
  return [...echoes.sort((a, b) => a.distanceM - b.distanceM), end];

  function endJointEcho(verdict: EndJointVerdict, at: Echo): Echo {
    const type = lumpedTypeOf(verdict.state);
    const level = lumpReturnLossDb(context.frequencyHz, { type, strength: verdict.strength });
    return {
      ...at,
      correctedReturnLossDb: level,
      returnLossDb: level + at.returnLossDb - at.correctedReturnLossDb,
      kind: verdict.lead >= KIND_LEAD ? verdict.state : 'unresolved',
      confidence: oddsToConfidence(verdict.odds, verdict.lead),
      value: valueIn(
        parts.line.sections.length - 1,
        verdict.state,
        verdict.strength,
        LOAD_DOUBT * Math.abs(verdict.strength),
      ),
    };
  }

  function valueIn(section: number, kind: PureType, strength: number, sigma: number | null): EchoValue {
    if (parts.line.sections[section]?.type !== 'guide')
      return lumpValue(kind, strength, sigma, model.media[section]!.z0Ohm);
    const f = context.frequencyHz;
    const middleHz = (f[0]! + f[f.length - 1]!) / 2;
    const type = lumpedTypeOf(kind);
    return {
      quantity: 'normalised',
      value: Math.abs(normalisedOf({ type, strength }, middleHz)),
      sigma: sigma === null ? null : normalisedOf({ type, strength: sigma }, middleHz),
      unit: 'z0',
    };
  }

  function jointEcho(verdict: JointVerdict): Echo | null {
    const { boundary } = verdict;
    const mine = model.lumps.filter((lump) => lump.boundary === boundary);
    const own = lumpReflection(context, model, mine);
    addStep(own, model, boundary);
    const corrected = levelDb(own);
    if (verdict.state === 'sound' && corrected > LISTED_JOINT_DB) return null;
    const distanceM = boundaryAt(model, boundary);
    const joint = { index: boundary + 1, name: jointName(parts.line, boundary + 1) };
    const section = Math.min(boundary, model.media.length - 1);
    const base = {
      ...place(distanceM, { boundary }),
      returnLossDb: levelDb(seenFromPort(context, own, stageOfBoundary[boundary]!)),
      correctedReturnLossDb: corrected,
      joint,
      section: Math.max(0, boundary - 1),
    };
    if (verdict.state === 'sound') {
      return { ...base, kind: 'joint', confidence: SOUND_CONFIDENCE, value: returnLossValue(corrected) };
    }
    const resistive = verdict.state === 'series-resistance' || verdict.state === 'shunt-leakage';
    const strength = resistive ? resistiveStrength(model, boundary) : reactiveStrength(model, boundary);
    const main = mine.find((lump) => lump.type === (resistive ? 'resistive' : 'reactive'));
    const sigma = main ? strengthSigmaOf(main.id, distanceM) : null;
    return {
      ...base,
      kind: verdict.clear ? verdict.state : 'unresolved',
      confidence: oddsToConfidence(verdict.odds, verdict.lead),
      value: valueIn(section, verdict.state, strength, sigma),
    };
  }

  function endEcho(): Echo {
    const n = model.boundaryM.length;
    const distanceM = boundaryAt(model, n);
    const own = context.cascade.behind(stages.length);
    const copy = { re: own.re.slice(), im: own.im.slice() };
    const full = parts.endKind === 'open' || parts.endKind === 'short';
    const kind: EchoKind =
      parts.endKind === 'open' ? 'open' : parts.endKind === 'short' ? 'short' : 'termination';
    const corrected = levelDb(copy);
    return {
      ...place(distanceM, { boundary: n }),
      returnLossDb: levelDb(seenFromPort(context, copy, stages.length)),
      correctedReturnLossDb: corrected,
      kind,
      confidence: parts.endConfidence,
      value: full ? null : returnLossValue(corrected),
      joint: parts.endsEarly ? null : { index: n + 1, name: jointName(parts.line, n + 1) },
      section: n - 1,
    };
  }
}

/** Least standard deviation of a distance: a reference plane is not known better, m. Common practice. */
const LEAST_SIGMA_M = 0.002;

/** Chance that a joint's fault is named right, from its odds against a sound joint and its lead over other kinds. */
function oddsToConfidence(odds: number, lead: number): number {
  return 1 / (1 + Math.exp(-Math.min(odds - 4, 30)) + Math.exp(-Math.min(Math.max(lead, 0), 30)));
}

function returnLossValue(db: number): EchoValue {
  return { quantity: 'return loss', value: db, sigma: null, unit: 'dB' };
}

function lumpValue(
  kind: Exclude<EchoKind, 'open' | 'short' | 'termination' | 'joint' | 'unresolved' | 'impedance-step'>,
  strength: number,
  sigma: number | null,
  z0Ohm: number,
): EchoValue {
  const size = Math.abs(strength);
  const times = (factor: number): number | null => (sigma === null ? null : sigma * factor);
  switch (kind) {
    case 'series-resistance':
      return { quantity: 'resistance', value: size * z0Ohm, sigma: times(z0Ohm), unit: 'ohm' };
    case 'shunt-leakage':
      return {
        quantity: 'resistance',
        value: z0Ohm / size,
        sigma: times(z0Ohm / (size * size)),
        unit: 'ohm',
      };
    case 'series-inductance':
      return { quantity: 'inductance', value: size * z0Ohm * 1e9, sigma: times(z0Ohm * 1e9), unit: 'nH' };
    case 'shunt-capacitance':
      return {
        quantity: 'capacitance',
        value: (size / z0Ohm) * 1e12,
        sigma: times(1e12 / z0Ohm),
        unit: 'pF',
      };
  }
}

/** First-order reflection of lumps that stand close together, each with its phase about the first. */
function lumpReflection(context: FitContext, model: LineModel, lumps: readonly Lump[]): ComplexArray {
  const own = complexZeros(context.frequencyHz.length);
  const first = lumps[0] ? lumpDistanceM(model, lumps[0]) : 0;
  for (const lump of lumps) {
    const away = lumpDistanceM(model, lump) - first;
    const beta = model.media[lump.section]!.gamma.im;
    for (let i = 0; i < own.re.length; i++) {
      const size = Math.abs(lump.strength);
      const sign = lump.strength >= 0 ? 1 : -1;
      let re: number;
      let im: number;
      if (lump.type === 'resistive') {
        re = (sign * size) / (2 + size);
        im = 0;
      } else {
        const x = 2 * Math.PI * context.frequencyHz[i]! * size;
        re = (sign * x * x) / (4 + x * x);
        im = (sign * 2 * x) / (4 + x * x);
      }
      const angle = -2 * beta[i]! * away;
      own.re[i] = own.re[i]! + re * Math.cos(angle) - im * Math.sin(angle);
      own.im[i] = own.im[i]! + re * Math.sin(angle) + im * Math.cos(angle);
    }
  }
  return own;
}

/** Adds the mismatch of the two cables at a joint. */
function addStep(own: ComplexArray, model: LineModel, boundary: number): void {
  const before = boundary === 0 ? model.port : model.media[boundary - 1]!;
  const after = model.media[boundary];
  if (!after) return;
  const ratio = Math.exp(
    model.impedanceRatio[boundary]! - (boundary > 0 ? model.impedanceRatio[boundary - 1]! : 0),
  );
  const far = after.z0Ohm * ratio;
  const gamma = (far - before.z0Ohm) / (far + before.z0Ohm);
  for (let i = 0; i < own.re.length; i++) own.re[i] = own.re[i]! + gamma;
}

/** A reflection at a stage as it arrives at the port. */
function seenFromPort(context: FitContext, own: ComplexArray, stage: number): ComplexArray {
  const sensitivity = context.cascade.sensitivity(stage);
  const seen = complexZeros(own.re.length);
  for (let i = 0; i < own.re.length; i++) {
    seen.re[i] = own.re[i]! * sensitivity.re[i]! - own.im[i]! * sensitivity.im[i]!;
    seen.im[i] = own.re[i]! * sensitivity.im[i]! + own.im[i]! * sensitivity.re[i]!;
  }
  return seen;
}

function levelDb(values: ComplexArray): number {
  return -20 * Math.log10(Math.max(complexRms(values), 1e-9));
}
