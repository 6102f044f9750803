/**
 * Matched search for one more discontinuity of a pure physical type, seen through the solved cascade.
 *
 * At a distance x inside a stretch, a small element adds S(x)·u/2 to the port reflection, where S is the sensitivity of
 * the port to the reflection at x: loss, dispersion and every mismatch on the way are in it. What the element does to
 * echoes behind it is left out here, though the cascade has it: the loss, the end and the instrument's residue, fitted
 * before, have taken part of that for their own and would hide the rest.
 */

import type { Stage } from '../line/cascade.ts';
import type { LumpedType } from '../line/discontinuity.ts';

import type { ComplexArray } from '../numerics/complex.ts';
import type { FitContext } from './fit-context.ts';
import { type LineModel, NOTHING_FREE } from './line-model.ts';
import { linearise } from './linearise.ts';

/** The pure types: signed strengths tell series from shunt. */
export type PureType = 'series-resistance' | 'shunt-leakage' | 'series-inductance' | 'shunt-capacitance';

export const PURE_TYPES: readonly PureType[] = [
  'series-resistance',
  'shunt-leakage',
  'series-inductance',
  'shunt-capacitance',
];

export type Candidate = {
  readonly type: PureType;
  readonly distanceM: number;
  /** Signed strength as `Lump` takes it. */
  readonly strength: number;
  /** Fall of the residual's energy Σ|r|² if this element alone is added. */
  readonly gain: number;
};

/** Lumped type of a pure type. */
export function lumpedTypeOf(type: PureType): LumpedType {
  return type === 'series-resistance' || type === 'shunt-leakage' ? 'resistive' : 'reactive';
}

/** Pure type of a lump by its sign. */
export function pureTypeOf(type: LumpedType, strength: number): PureType {
  if (type === 'resistive') return strength >= 0 ? 'series-resistance' : 'shunt-leakage';
  return strength >= 0 ? 'series-inductance' : 'shunt-capacitance';
}

/** Matched sums of a search at evenly spaced distances. */
export type Probe = {
  readonly fromM: number;
  readonly stepM: number;
  readonly points: number;
  /** Per distance: Re Σ t*r, Σ|t|², Re Σ (jωt)*r, Σ ω²|t|², with t = S/2. */
  readonly sums: Float64Array;
};

/**
 * Sums of every pure type between two distances, in all stretches that the range touches.
 *
 * @param without Lumps whose own echoes are put back into the residual, as if they had not been found yet; what they do
 *   to everything behind them stays explained.
 */
export function probeAcross(
  context: FitContext,
  model: LineModel,
  fromM: number,
  toM: number,
  without: readonly number[] = [],
): Probe[] {
  const { stages, stageOfLump } = linearise(context, model, NOTHING_FREE, 1).translation;
  for (const id of without) putBack(context, stageOfLump.get(id)!);
  const top = context.frequencyHz.length - 1;
  const probes: Probe[] = [];
  // Stretches that only a lump parts belong to one probe's range; each is searched from its own start.
  let atM = 0;
  stages.forEach((stage, stageIndex) => {
    if (stage.type !== 'line') return;
    const stepM = Math.PI / stage.medium.gamma.im[top]! / POINTS_PER_HALF_WAVE;
    if (atM + stage.lengthM >= fromM && atM <= toM && stage.lengthM > 0) {
      const probe = probeStage(context, stages, { stageIndex, stageFromM: atM }, { fromM, toM, stepM });
      if (probe) probes.push(probe);
    }
    atM += stage.lengthM;
  });
  return probes;
}

/** Adds a lump's own echo to the residual. */
export function putBack(context: FitContext, stage: number): void {
  addEcho(context, context.cascade.reflection(stage), stage);
}

/** Adds the end's echo to the residual. @param stages Number of stages of the last `linearise`. */
export function putBackEnd(context: FitContext, stages: number): void {
  addEcho(context, context.cascade.behind(stages), stages);
}

/** Adds what reflects at a stage to the residual, as it arrives at the port. */
export function addEcho(context: FitContext, own: ComplexArray, stage: number): void {
  const through = context.cascade.sensitivity(stage);
  const { residual, weight } = context;
  for (let i = 0; i < weight.length; i++) {
    const w = weight[i]!;
    residual.re[i] = residual.re[i]! + w * (own.re[i]! * through.re[i]! - own.im[i]! * through.im[i]!);
    residual.im[i] = residual.im[i]! + w * (own.re[i]! * through.im[i]! + own.im[i]! * through.re[i]!);
  }
}

const POINTS_PER_HALF_WAVE = 12;

/** A stage of type `line` and the model distance at which it begins. */
export type StagePlace = { readonly stageIndex: number; readonly stageFromM: number };

/** Distances to search; `stepM` well under a quarter wavelength at the top. */
export type ProbeRange = { readonly fromM: number; readonly toM: number; readonly stepM: number };

/**
 * Matched sums of all pure types within a stretch of the line.
 *
 * @param stages Stages of the last `linearise`, whose states and sensitivities the cascade still holds.
 * @param range Clipped to the stage.
 * @returns Null when the range and the stage don't meet.
 */
export function probeStage(
  context: FitContext,
  stages: readonly Stage[],
  place: StagePlace,
  range: ProbeRange,
): Probe | null {
  const stage = stages[place.stageIndex]!;
  if (stage.type !== 'line') throw new TypeError(`stage ${place.stageIndex} is no stretch of line`);
  const from = Math.max(range.fromM, place.stageFromM);
  const to = Math.min(range.toM, place.stageFromM + stage.lengthM);
  if (!(to >= from)) return null;
  const points = Math.max(1, Math.floor((to - from) / range.stepM) + 1);
  const sums = new Float64Array(points * 4);
  const before = context.cascade.sensitivity(place.stageIndex);
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = stage.medium;
  const { residual, weight, frequencyHz } = context;
  const offset = from - place.stageFromM;
  for (let i = 0; i < frequencyHz.length; i++) {
    if (weight[i] === 0) continue;
    const omega = 2 * Math.PI * frequencyHz[i]!;
    const alpha = gamma.re[i]! + stage.conductor * c.re[i]! + stage.dielectric * d.re[i]!;
    const beta = gamma.im[i]! + stage.conductor * c.im[i]! + stage.dielectric * d.im[i]!;
    const half = 0.5 * Math.exp(-2 * alpha * offset);
    const qRe = half * Math.cos(2 * beta * offset);
    const qIm = -half * Math.sin(2 * beta * offset);
    const tRe = before.re[i]! * qRe - before.im[i]! * qIm;
    const tIm = before.re[i]! * qIm + before.im[i]! * qRe;
    // t*·r, which turns and shrinks from one distance to the next.
    let mRe = tRe * residual.re[i]! + tIm * residual.im[i]!;
    let mIm = tRe * residual.im[i]! - tIm * residual.re[i]!;
    let power = tRe * tRe + tIm * tIm;
    const shrink = Math.exp(-2 * alpha * range.stepM);
    const turnRe = shrink * Math.cos(2 * beta * range.stepM);
    const turnIm = shrink * Math.sin(2 * beta * range.stepM);
    const fade = shrink * shrink;
    for (let k = 0; k < points; k++) {
      const at = k * 4;
      sums[at] = sums[at]! + mRe;
      sums[at + 1] = sums[at + 1]! + power;
      sums[at + 2] = sums[at + 2]! + omega * mIm;
      sums[at + 3] = sums[at + 3]! + omega * omega * power;
      const next = mRe * turnRe - mIm * turnIm;
      mIm = mRe * turnIm + mIm * turnRe;
      mRe = next;
      power *= fade;
    }
  }
  return { fromM: from, stepM: range.stepM, points, sums };
}

/** Strength and gain of one pure type at one distance; no gain where the sign is the other type's. */
export function matchAt(
  probe: Probe,
  type: PureType,
  index: number,
): { readonly strength: number; readonly gain: number } {
  const shunt = type === 'shunt-leakage' || type === 'shunt-capacitance';
  const part = index * 4 + (lumpedTypeOf(type) === 'reactive' ? 2 : 0);
  const norm = probe.sums[part + 1]!;
  const strength = norm > 0 ? probe.sums[part]! / norm : 0;
  const wrongSign = shunt ? strength >= 0 : strength <= 0;
  return wrongSign ? { strength: 0, gain: 0 } : { strength, gain: strength * strength * norm };
}

/** Best candidate of every pure type in a probe. */
export function bestOfEach(probe: Probe): Candidate[] {
  return PURE_TYPES.flatMap((type) => bestOf(type, probe));
}

function bestOf(type: PureType, probe: Probe): Candidate[] {
  let best: Candidate | null = null;
  for (let k = 0; k < probe.points; k++) {
    const { strength, gain } = matchAt(probe, type, k);
    if (gain > (best?.gain ?? 0)) best = { type, distanceM: probe.fromM + k * probe.stepM, strength, gain };
  }
  return best ? [best] : [];
}

/** RMS return loss over the band of a lump by itself, dB. */
export function lumpReturnLossDb(
  frequencyHz: Float64Array,
  lump: { readonly type: LumpedType | PureType; readonly strength: number },
): number {
  const reactive =
    lump.type === 'resistive' ? false : lump.type === 'reactive' || lumpedTypeOf(lump.type) === 'reactive';
  let power = 0;
  for (const f of frequencyHz) {
    const u = Math.abs(lump.strength) * (reactive ? 2 * Math.PI * f : 1);
    power += (u * u) / (reactive ? 4 + u * u : (2 + u) ** 2);
  }
  return -10 * Math.log10(power / frequencyHz.length + 1e-30);
}
