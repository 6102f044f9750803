/**
 * What a field correction leaves over: three small error terms, each a sum of reflections with short delays.
 *
 * The instrument reads D + (1 + T)·Γ/(1 − M·Γ) with directivity D, tracking T and source match M. M alone makes a second
 * trip of the end that folds back into the line, and T a halo behind every strong echo.
 *
 * @source Three-term one-port error model (from memory: Rytting, "Network analyzer error models and calibration methods",
 *   1998); references.md section 5.3.
 */
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';

export type ResidueFamily = 'directivity' | 'tracking' | 'match';

export type ResidueTerm = { readonly family: ResidueFamily; readonly delayS: number; re: number; im: number };

/** Delay within which residual terms lie, s. Common practice: test lead and adaptor. */
const SPAN_S = 1.2e-9;

/** Most terms of one family: wider sweeps tell more delays apart. */
const MOST_TERMS = 5;

/**
 * Standard deviation of each part of each term: the terms of one family together stand for −34 to −38 dB, some dB over
 * what a correction made in the field leaves (common practice: −40 to −46 dB), so that none is held back.
 */
export const RESIDUE_SIGMA = 0.006;

/** Terms of all families, at rest. */
export function residueTerms(frequencyHz: Float64Array): ResidueTerm[] {
  const bandHz = frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
  const count = Math.max(2, Math.min(MOST_TERMS, 2 + Math.floor(SPAN_S * bandHz)));
  return (['directivity', 'tracking', 'match'] as const).flatMap((family) =>
    Array.from({ length: count }, (_, k) => ({ family, delayS: (k * SPAN_S) / (count - 1), re: 0, im: 0 })),
  );
}

/** Evaluator with buffers for one frequency grid. */
export type ResidueModel = {
  /** Turns Γ of the line into what the instrument reads, in place. */
  apply(terms: readonly ResidueTerm[], gamma: ComplexArray): void;
  /** Multiplies a derivative of Γ into one of the reading; after `apply`. */
  carry(column: ComplexArray): void;
  /** Derivatives of the reading by both parts of a term; after `apply`. */
  derivatives(term: ResidueTerm, perRe: ComplexArray, perIm: ComplexArray): void;
};

export function createResidueModel(frequencyHz: Float64Array): ResidueModel {
  const n = frequencyHz.length;
  const phasors = new Map<number, ComplexArray>();
  const sums: Record<ResidueFamily, ComplexArray> = {
    directivity: complexZeros(n),
    tracking: complexZeros(n),
    match: complexZeros(n),
  };
  let summed: readonly ResidueTerm[] = [];
  /** Γ/(1 − M·Γ), its square times (1 + T), and ∂reading/∂Γ = (1 + T)/(1 − M·Γ)². */
  const loop = complexZeros(n);
  const square = complexZeros(n);
  const chain = complexZeros(n);

  function phasorOf(delayS: number): ComplexArray {
    let phasor = phasors.get(delayS);
    if (!phasor) {
      phasor = complexZeros(n);
      for (let i = 0; i < n; i++) {
        const angle = -2 * Math.PI * frequencyHz[i]! * delayS;
        phasor.re[i] = Math.cos(angle);
        phasor.im[i] = Math.sin(angle);
      }
      phasors.set(delayS, phasor);
    }
    return phasor;
  }

  /** Sums of each family, worked out anew only when a term has changed. */
  function sumUp(terms: readonly ResidueTerm[]): void {
    if (
      terms.length === summed.length &&
      terms.every((t, k) => t.re === summed[k]!.re && t.im === summed[k]!.im)
    )
      return;
    summed = terms.map((term) => ({ ...term }));
    for (const sum of Object.values(sums)) {
      sum.re.fill(0);
      sum.im.fill(0);
    }
    for (const term of terms) {
      if (term.re === 0 && term.im === 0) continue;
      const phasor = phasorOf(term.delayS);
      const sum = sums[term.family];
      for (let i = 0; i < n; i++) {
        sum.re[i] = sum.re[i]! + term.re * phasor.re[i]! - term.im * phasor.im[i]!;
        sum.im[i] = sum.im[i]! + term.re * phasor.im[i]! + term.im * phasor.re[i]!;
      }
    }
  }

  return {
    apply(terms, gamma) {
      sumUp(terms);
      const { directivity: d, tracking: t, match: m } = sums;
      for (let i = 0; i < n; i++) {
        const gRe = gamma.re[i]!;
        const gIm = gamma.im[i]!;
        const bRe = 1 - (m.re[i]! * gRe - m.im[i]! * gIm);
        const bIm = -(m.re[i]! * gIm + m.im[i]! * gRe);
        const inverse = 1 / (bRe * bRe + bIm * bIm);
        const lRe = (gRe * bRe + gIm * bIm) * inverse;
        const lIm = (gIm * bRe - gRe * bIm) * inverse;
        const aRe = 1 + t.re[i]!;
        const aIm = t.im[i]!;
        loop.re[i] = lRe;
        loop.im[i] = lIm;
        // (1 + T)·L², and (1 + T)/(1 − MΓ)²
        const qRe = aRe * lRe - aIm * lIm;
        const qIm = aRe * lIm + aIm * lRe;
        square.re[i] = qRe * lRe - qIm * lIm;
        square.im[i] = qRe * lIm + qIm * lRe;
        const iRe = bRe * inverse;
        const iIm = -bIm * inverse;
        const i2Re = iRe * iRe - iIm * iIm;
        const i2Im = 2 * iRe * iIm;
        chain.re[i] = aRe * i2Re - aIm * i2Im;
        chain.im[i] = aRe * i2Im + aIm * i2Re;
        gamma.re[i] = d.re[i]! + qRe;
        gamma.im[i] = d.im[i]! + qIm;
      }
    },
    carry(column) {
      for (let i = 0; i < n; i++) {
        const re = column.re[i]! * chain.re[i]! - column.im[i]! * chain.im[i]!;
        column.im[i] = column.re[i]! * chain.im[i]! + column.im[i]! * chain.re[i]!;
        column.re[i] = re;
      }
    },
    derivatives(term, perRe, perIm) {
      const phasor = phasorOf(term.delayS);
      const through = term.family === 'tracking' ? loop : square;
      for (let i = 0; i < n; i++) {
        let re = phasor.re[i]!;
        let im = phasor.im[i]!;
        if (term.family !== 'directivity') {
          const turned = re * through.re[i]! - im * through.im[i]!;
          im = re * through.im[i]! + im * through.re[i]!;
          re = turned;
        }
        perRe.re[i] = re;
        perRe.im[i] = im;
        perIm.re[i] = -im;
        perIm.im[i] = re;
      }
    },
  };
}
