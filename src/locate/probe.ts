/**
 * Matched search for one more discontinuity of a pure physical type, through the whole solved cascade.
 *
 * At a distance x inside a stretch, a small series element adds S(x)·(1 − Γ(x))²·u/2 to the port reflection and a
 * small shunt element S(x)·(1 + Γ(x))²·u/2, where S is the sensitivity of the port to the reflection at x and Γ what
 * comes back from behind. Everything that couples the new element with the rest, ghosts included, is in the template.
 */
import type { Stage } from '../line/cascade.ts';
import type { LumpedType } from '../line/discontinuity.ts';
import type { FitContext } from './fit-cascade.ts';

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

/**
 * Best candidate of every pure type within a stretch of the line.
 *
 * @param stages Stages of the last `linearise`, whose states and sensitivities the cascade still holds.
 * @param stageIndex A stage of type `line`.
 * @param stageFromM Model distance at which that stage begins.
 * @param range Distances to search, clipped to the stage; `stepM` well under a quarter wavelength at the top.
 */
export function probeStage(
  context: FitContext,
  stages: readonly Stage[],
  place: { readonly stageIndex: number; readonly stageFromM: number },
  range: { readonly fromM: number; readonly toM: number; readonly stepM: number },
): Candidate[] {
  const stage = stages[place.stageIndex]!;
  if (stage.type !== 'line') throw new TypeError(`stage ${place.stageIndex} is no stretch of line`);
  const from = Math.max(range.fromM, place.stageFromM);
  const to = Math.min(range.toM, place.stageFromM + stage.lengthM);
  if (!(to >= from)) return [];
  const points = Math.max(1, Math.floor((to - from) / range.stepM) + 1);
  // Per distance and family (0 series, 1 shunt): Re Σ t*r, Σ|t|², Re Σ (jωt)*r, Σ ω²|t|².
  const sums = new Float64Array(points * 8);
  const before = context.cascade.sensitivity(place.stageIndex);
  const behind = context.cascade.behind(place.stageIndex);
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = stage.medium;
  const { residual, weight, frequencyHz } = context;
  for (let i = 0; i < frequencyHz.length; i++) {
    if (weight[i] === 0) continue;
    const omega = 2 * Math.PI * frequencyHz[i]!;
    const alpha = gamma.re[i]! + stage.conductor * c.re[i]! + stage.dielectric * d.re[i]!;
    const beta = gamma.im[i]! + stage.conductor * c.im[i]! + stage.dielectric * d.im[i]!;
    const offset = from - place.stageFromM;
    const rRe = residual.re[i]!;
    const rIm = residual.im[i]!;
    // q = e^{−2γ·offset}: S(x) = S·q, Γ(x) = Γ(start)/q.
    const shrink = Math.exp(-2 * alpha * offset);
    const qRe = shrink * Math.cos(2 * beta * offset);
    const qIm = -shrink * Math.sin(2 * beta * offset);
    let sRe = before.re[i]! * qRe - before.im[i]! * qIm;
    let sIm = before.re[i]! * qIm + before.im[i]! * qRe;
    const inverse = 1 / (qRe * qRe + qIm * qIm);
    let gRe = (behind.re[i]! * qRe + behind.im[i]! * qIm) * inverse;
    let gIm = (behind.im[i]! * qRe - behind.re[i]! * qIm) * inverse;
    const stepShrink = Math.exp(-2 * alpha * range.stepM);
    const stepRe = stepShrink * Math.cos(2 * beta * range.stepM);
    const stepIm = -stepShrink * Math.sin(2 * beta * range.stepM);
    const back = 1 / (stepShrink * stepShrink);
    const backRe = stepRe * back;
    const backIm = -stepIm * back;
    for (let k = 0; k < points; k++) {
      const base = k * 8;
      for (let family = 0; family < 2; family++) {
        const hRe = family === 0 ? 1 - gRe : 1 + gRe;
        const hIm = family === 0 ? -gIm : gIm;
        const h2Re = hRe * hRe - hIm * hIm;
        const h2Im = 2 * hRe * hIm;
        const tRe = 0.5 * (sRe * h2Re - sIm * h2Im);
        const tIm = 0.5 * (sRe * h2Im + sIm * h2Re);
        const at = base + family * 4;
        const power = tRe * tRe + tIm * tIm;
        sums[at] = sums[at]! + tRe * rRe + tIm * rIm;
        sums[at + 1] = sums[at + 1]! + power;
        sums[at + 2] = sums[at + 2]! + omega * (tRe * rIm - tIm * rRe);
        sums[at + 3] = sums[at + 3]! + omega * omega * power;
      }
      const nextRe = sRe * stepRe - sIm * stepIm;
      sIm = sRe * stepIm + sIm * stepRe;
      sRe = nextRe;
      const nextG = gRe * backRe - gIm * backIm;
      gIm = gRe * backIm + gIm * backRe;
      gRe = nextG;
    }
  }
  return PURE_TYPES.flatMap((type) => bestOf(type, sums, points, from, range.stepM));
}

function bestOf(
  type: PureType,
  sums: Float64Array,
  points: number,
  fromM: number,
  stepM: number,
): Candidate[] {
  const shunt = type === 'shunt-leakage' || type === 'shunt-capacitance';
  const part = (shunt ? 4 : 0) + (lumpedTypeOf(type) === 'reactive' ? 2 : 0);
  let best: Candidate | null = null;
  for (let k = 0; k < points; k++) {
    const norm = sums[k * 8 + part + 1]!;
    if (norm <= 0) continue;
    const strength = sums[k * 8 + part]! / norm;
    if (shunt ? strength >= 0 : strength <= 0) continue;
    const gain = strength * strength * norm;
    if (!best || gain > best.gain) best = { type, distanceM: fromM + k * stepM, strength, gain };
  }
  return best ? [best] : [];
}
