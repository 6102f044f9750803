/** What terminates the line, as Γ(f) with few parameters and their derivatives. */
import type { ComplexArray } from '../numerics/complex.ts';
import { assertNever } from '../outcome.ts';

/**
 * One model of an end. Parameters by type:
 * - `open`: [τ] with fringe capacitance τ/z0, s; `short`: [τ] with inductance τ·z0, s;
 * - `load`: [r, τ]: resistance r·z0 with series inductance τ·z0 (τ > 0) or shunt capacitance |τ|/z0 (τ < 0);
 * - `antenna`: [g, h, then a, b, Q, f0 (Hz) per resonance]: Γ = g + jh + Σ (a + jb)/(1 + jQ(f/f0 − f0/f)), which a load
 *   behind one tuned circuit satisfies exactly with g = ±1 and h = 0; g + jh also stands for resonances far out of band.
 */
export type EndModel = {
  readonly type: 'open' | 'short' | 'load' | 'antenna';
  readonly parameters: readonly number[];
};

/**
 * Writes Γ of an end, and on demand its derivative by each parameter.
 *
 * @param out Γ, length n. @param derivatives One complex array of length n per parameter, or null.
 * @source Pozar, 4th ed., section 2.3 (Γ of a load); the tuned circuit by partial fractions.
 */
export function writeEnd(
  end: EndModel,
  frequencyHz: Float64Array,
  out: ComplexArray,
  derivatives: readonly ComplexArray[] | null,
): void {
  switch (end.type) {
    case 'open':
      writeFull(1, end.parameters[0]!, frequencyHz, out, derivatives);
      break;
    case 'short':
      writeFull(-1, end.parameters[0]!, frequencyHz, out, derivatives);
      break;
    case 'load':
      writeLoad(end.parameters[0]!, end.parameters[1]!, frequencyHz, out, derivatives);
      break;
    case 'antenna':
      writeAntenna(end.parameters, frequencyHz, out, derivatives);
      break;
    default:
      assertNever(end.type);
  }
}

/** Γ = ±(1 − jωτ)/(1 + jωτ): a full reflection a little beyond the plane. */
function writeFull(
  sign: 1 | -1,
  tau: number,
  frequencyHz: Float64Array,
  out: ComplexArray,
  derivatives: readonly ComplexArray[] | null,
): void {
  for (let i = 0; i < frequencyHz.length; i++) {
    const omega = 2 * Math.PI * frequencyHz[i]!;
    const x = omega * tau;
    const inverse = 1 / (1 + x * x);
    const re = (1 - x * x) * inverse;
    const im = -2 * x * inverse;
    out.re[i] = sign * re;
    out.im[i] = sign * im;
    if (derivatives) {
      // dΓ/dx = −2j/(1 + jx)² = −2j·Γ'/(1 + x²) with Γ' = (1 − jx)²/(1 + x²)
      derivatives[0]!.re[i] = sign * 2 * im * inverse * omega;
      derivatives[0]!.im[i] = -sign * 2 * re * inverse * omega;
    }
  }
}

function writeLoad(
  resistance: number,
  tau: number,
  frequencyHz: Float64Array,
  out: ComplexArray,
  derivatives: readonly ComplexArray[] | null,
): void {
  const series = tau >= 0;
  // A series load by its impedance, a shunt one by its admittance: Γ = ±(q − 1)/(q + 1).
  const real = series ? resistance : 1 / resistance;
  const sign = series ? 1 : -1;
  for (let i = 0; i < frequencyHz.length; i++) {
    const omega = 2 * Math.PI * frequencyHz[i]!;
    const x = omega * Math.abs(tau);
    const inverse = 1 / ((real + 1) * (real + 1) + x * x);
    out.re[i] = sign * (real * real - 1 + x * x) * inverse;
    out.im[i] = sign * 2 * x * inverse;
    if (derivatives) {
      // dΓ/dq = ±2/(q + 1)²
      const dRe = 2 * ((real + 1) * (real + 1) - x * x) * inverse * inverse;
      const dIm = -4 * (real + 1) * x * inverse * inverse;
      const perReal = series ? 1 : 1 / (resistance * resistance);
      derivatives[0]!.re[i] = dRe * perReal;
      derivatives[0]!.im[i] = dIm * perReal;
      derivatives[1]!.re[i] = -dIm * omega;
      derivatives[1]!.im[i] = dRe * omega;
    }
  }
}

function writeAntenna(
  parameters: readonly number[],
  frequencyHz: Float64Array,
  out: ComplexArray,
  derivatives: readonly ComplexArray[] | null,
): void {
  out.re.fill(parameters[0]!);
  out.im.fill(parameters[1]!);
  if (derivatives) {
    derivatives[0]!.re.fill(1);
    derivatives[0]!.im.fill(0);
    derivatives[1]!.re.fill(0);
    derivatives[1]!.im.fill(1);
  }
  for (let k = 2; k + 3 < parameters.length; k += 4) {
    const a = parameters[k]!;
    const b = parameters[k + 1]!;
    const q = parameters[k + 2]!;
    const f0 = parameters[k + 3]!;
    for (let i = 0; i < frequencyHz.length; i++) {
      const f = frequencyHz[i]!;
      const detuning = f / f0 - f0 / f;
      const x = q * detuning;
      const pRe = 1 / (1 + x * x);
      const pIm = -x * pRe;
      out.re[i] = out.re[i]! + a * pRe - b * pIm;
      out.im[i] = out.im[i]! + a * pIm + b * pRe;
      if (!derivatives) continue;
      derivatives[k]!.re[i] = pRe;
      derivatives[k]!.im[i] = pIm;
      derivatives[k + 1]!.re[i] = -pIm;
      derivatives[k + 1]!.im[i] = pRe;
      // d/dx of 1/(1 + jx) = −j/(1 + jx)²
      const p2Re = pRe * pRe - pIm * pIm;
      const p2Im = 2 * pRe * pIm;
      const cRe = a * p2Im + b * p2Re;
      const cIm = -a * p2Re + b * p2Im;
      derivatives[k + 2]!.re[i] = cRe * detuning;
      derivatives[k + 2]!.im[i] = cIm * detuning;
      const perF0 = q * (-f / (f0 * f0) - 1 / f);
      derivatives[k + 3]!.re[i] = cRe * perF0;
      derivatives[k + 3]!.im[i] = cIm * perF0;
    }
  }
}
