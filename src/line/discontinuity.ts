/**
 * The two-ports that reflect: lumped elements and impedance steps, as S-parameters over the sweep.
 *
 * Strengths are normalised to the line they sit in and signed, so that one number runs smoothly from one type to its
 * dual. In a guide they are normalised to its own wave impedance, whatever that is taken to be. A resistive strength r > 0 is a series resistance r·z0, r < 0 a shunt conductance |r|/z0; a reactive strength
 * τ > 0 (seconds) is a series inductance τ·z0, τ < 0 a shunt capacitance |τ|/z0.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import type { Medium } from './medium.ts';

/** S-parameters of a reciprocal two-port over frequency, and their derivatives by its strength. */
export type TwoPort = {
  readonly s11: ComplexArray;
  /** S21·S12. */
  readonly through: ComplexArray;
  /** S22 = `mirror`·S11: 1 for lumped elements, −1 for a step. */
  mirror: 1 | -1;
  readonly s11PerStrength: ComplexArray;
  readonly throughPerStrength: ComplexArray;
};

export type LumpedType = 'resistive' | 'reactive';

/** Buffers for one two-port at `length` frequencies. */
export function createTwoPort(length: number): TwoPort {
  return {
    s11: complexZeros(length),
    through: complexZeros(length),
    mirror: 1,
    s11PerStrength: complexZeros(length),
    throughPerStrength: complexZeros(length),
  };
}

/**
 * Writes a lumped element into `out`.
 *
 * With u = Z/Zc for a series and Y·Zc for a shunt element: w = u/(2 + u), S11 = S22 = ±w, S21 = S12 = 1 − w.
 *
 * @source Pozar, 4th ed., section 4.3 and Table 4.2.
 */
export function writeLumped(
  out: TwoPort,
  element: { readonly type: LumpedType; readonly strength: number },
  medium: Medium,
  frequencyHz: Float64Array,
): void {
  const series = element.strength >= 0;
  const sign = series ? 1 : -1;
  const size = Math.abs(element.strength);
  const reactive = element.type === 'reactive';
  const { re: zRe, im: zIm } = medium.impedance;
  const z0 = medium.z0Ohm;
  out.mirror = 1;
  for (let i = 0; i < frequencyHz.length; i++) {
    // κ = z0/Zc for a series element, Zc/z0 for a shunt one: the frequency law of the line itself.
    let kRe: number;
    let kIm: number;
    if (series) {
      const scale = z0 / (zRe[i]! * zRe[i]! + zIm[i]! * zIm[i]!);
      kRe = zRe[i]! * scale;
      kIm = -zIm[i]! * scale;
    } else {
      kRe = zRe[i]! / z0;
      kIm = zIm[i]! / z0;
    }
    if (reactive) {
      const omega = 2 * Math.PI * frequencyHz[i]!;
      const swapped = kRe * omega;
      kRe = -kIm * omega;
      kIm = swapped;
    }
    const dRe = 2 + size * kRe;
    const dIm = size * kIm;
    const inverse = 1 / (dRe * dRe + dIm * dIm);
    // 1 − w = 2/(2 + u)
    const pRe = 2 * dRe * inverse;
    const pIm = -2 * dIm * inverse;
    out.s11.re[i] = sign * (1 - pRe);
    out.s11.im[i] = -sign * pIm;
    const p2Re = pRe * pRe - pIm * pIm;
    const p2Im = 2 * pRe * pIm;
    out.through.re[i] = p2Re;
    out.through.im[i] = p2Im;
    // dw/du = (1 − w)²/2
    const wRe = 0.5 * (p2Re * kRe - p2Im * kIm);
    const wIm = 0.5 * (p2Re * kIm + p2Im * kRe);
    out.s11PerStrength.re[i] = wRe;
    out.s11PerStrength.im[i] = wIm;
    out.throughPerStrength.re[i] = -2 * sign * (pRe * wRe - pIm * wIm);
    out.throughPerStrength.im[i] = -2 * sign * (pRe * wIm + pIm * wRe);
  }
}

/**
 * Writes an impedance step into `out`; its strength is the relative impedance of the far side, ln(Z2/Z1) shifted.
 *
 * Γ = (Z2 − Z1)/(Z2 + Z1), S22 = −Γ, S21·S12 = 1 − Γ². `ratio` multiplies the far side's impedance against the near
 * side's, for samples of a cable that differ from their type; the derivative is by ln(ratio).
 *
 * @source Pozar, 4th ed., section 2.3.
 */
export function writeStep(out: TwoPort, before: Medium, after: Medium, ratio: number): void {
  out.mirror = -1;
  const { re: aRe, im: aIm } = before.impedance;
  const { re: bRe, im: bIm } = after.impedance;
  for (let i = 0; i < aRe.length; i++) {
    const farRe = bRe[i]! * ratio;
    const farIm = bIm[i]! * ratio;
    const sumRe = farRe + aRe[i]!;
    const sumIm = farIm + aIm[i]!;
    const inverse = 1 / (sumRe * sumRe + sumIm * sumIm);
    const difRe = farRe - aRe[i]!;
    const difIm = farIm - aIm[i]!;
    const gRe = (difRe * sumRe + difIm * sumIm) * inverse;
    const gIm = (difIm * sumRe - difRe * sumIm) * inverse;
    out.s11.re[i] = gRe;
    out.s11.im[i] = gIm;
    const tRe = 1 - (gRe * gRe - gIm * gIm);
    const tIm = -2 * gRe * gIm;
    out.through.re[i] = tRe;
    out.through.im[i] = tIm;
    // ∂Γ/∂ln(ratio) = 2·Z1·Z2/(Z1 + Z2)² = (1 − Γ²)/2
    out.s11PerStrength.re[i] = tRe / 2;
    out.s11PerStrength.im[i] = tIm / 2;
    out.throughPerStrength.re[i] = -(gRe * tRe - gIm * tIm);
    out.throughPerStrength.im[i] = -(gRe * tIm + gIm * tRe);
  }
}

export type LumpedKind = 'series-resistance' | 'shunt-leakage' | 'series-inductance' | 'shunt-capacitance';

/** Strength of a lumped element from its value in Ω, S⁻¹, H or F terms. */
export function strengthOf(
  kind: LumpedKind,
  value: number,
  z0Ohm: number,
): { readonly type: LumpedType; readonly strength: number } {
  switch (kind) {
    case 'series-resistance':
      return { type: 'resistive', strength: value / z0Ohm };
    case 'shunt-leakage':
      return { type: 'resistive', strength: -z0Ohm / value };
    case 'series-inductance':
      return { type: 'reactive', strength: value / z0Ohm };
    case 'shunt-capacitance':
      return { type: 'reactive', strength: -value * z0Ohm };
  }
}

/**
 * Strength of a lumped element from its size relative to the line it sits in: r, g, x or b by kind.
 *
 * A resistance or conductance is the same over the band. A reactance or susceptance is taken in proportion to
 * frequency, and `value` is what it has at `frequencyHz`: in a cable that is what an inductance or capacitance does, in a
 * guide (where its law is that of its shape, and lies between f and β) a first approximation of a gap or a dent.
 *
 * @param value Above 0. @param frequencyHz Above 0; without meaning for r and g.
 */
export function strengthOfNormalised(
  kind: LumpedKind,
  value: number,
  frequencyHz: number,
): { readonly type: LumpedType; readonly strength: number } {
  const sign = kind === 'series-resistance' || kind === 'series-inductance' ? 1 : -1;
  const reactive = kind === 'series-inductance' || kind === 'shunt-capacitance';
  return reactive
    ? { type: 'reactive', strength: (sign * value) / (2 * Math.PI * frequencyHz) }
    : { type: 'resistive', strength: sign * value };
}

/**
 * Size of a lumped element relative to the line it sits in, the inverse of `strengthOfNormalised`: above 0 for r and x,
 * below 0 for g and b.
 */
export function normalisedOf(
  element: { readonly type: LumpedType; readonly strength: number },
  frequencyHz: number,
): number {
  return element.type === 'reactive' ? element.strength * 2 * Math.PI * frequencyHz : element.strength;
}
