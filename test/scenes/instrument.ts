/** What the instrument adds: residues of its calibration, noise, and carriers picked up by an antenna. */
import type { Draws } from './draws.ts';
import { emptySpectrum, type Spectrum } from './ladder.ts';

/** A sum of small terms, each a size, a phase and a round-trip delay. */
export type SmoothTerm = { readonly size: number; readonly phase: number; readonly delayS: number };

/** Three-term residue: directivity added, source match in the loop, tracking multiplied. */
export type Residue = {
  readonly directivity: readonly SmoothTerm[];
  readonly sourceMatch: readonly SmoothTerm[];
  readonly tracking: readonly SmoothTerm[];
};

export const NO_RESIDUE: Residue = { directivity: [], sourceMatch: [], tracking: [] };

/** Draws residues of −40 to −46 dB (source match −36 to −44 dB), delays within 0–1.2 ns. */
export function drawResidue(draws: Draws): Residue {
  return {
    directivity: drawTerms(draws, -draws.uniform(40, 46)),
    sourceMatch: drawTerms(draws, -draws.uniform(36, 44)),
    tracking: drawTerms(draws, -draws.uniform(40, 46)),
  };
}

/** Two to four terms whose RMS over a wide band is the given level. */
function drawTerms(draws: Draws, levelDb: number): SmoothTerm[] {
  const weights = Array.from({ length: draws.integer(2, 4) }, () => draws.uniform(0.3, 1));
  const total = Math.sqrt(weights.reduce((sum, w) => sum + w * w, 0));
  return weights.map((weight) => ({
    size: (10 ** (levelDb / 20) * weight) / total,
    phase: draws.uniform(0, 2 * Math.PI),
    delayS: draws.uniform(0, 1.2e-9),
  }));
}

/**
 * Measured reflection D + (1 + T)·Γ/(1 − M·Γ).
 *
 * @source One-port three-term error model; common practice.
 */
export function addResidue(gamma: Spectrum, residue: Residue, frequencyHz: Float64Array): Spectrum {
  const measured = emptySpectrum(frequencyHz.length);
  const directivity = sumTerms(residue.directivity, frequencyHz);
  const match = sumTerms(residue.sourceMatch, frequencyHz);
  const tracking = sumTerms(residue.tracking, frequencyHz);
  for (let k = 0; k < frequencyHz.length; k++) {
    const g0 = gamma.re[k]!;
    const g1 = gamma.im[k]!;
    const topRe = (1 + tracking.re[k]!) * g0 - tracking.im[k]! * g1;
    const topIm = (1 + tracking.re[k]!) * g1 + tracking.im[k]! * g0;
    const loopRe = 1 - (match.re[k]! * g0 - match.im[k]! * g1);
    const loopIm = -(match.re[k]! * g1 + match.im[k]! * g0);
    const size = loopRe * loopRe + loopIm * loopIm;
    measured.re[k] = directivity.re[k]! + (topRe * loopRe + topIm * loopIm) / size;
    measured.im[k] = directivity.im[k]! + (topIm * loopRe - topRe * loopIm) / size;
  }
  return measured;
}

/** The sum of the terms at each frequency. */
export function sumTerms(terms: readonly SmoothTerm[], frequencyHz: Float64Array): Spectrum {
  const sum = emptySpectrum(frequencyHz.length);
  for (const { size, phase, delayS } of terms) {
    for (let k = 0; k < frequencyHz.length; k++) {
      const angle = phase - 2 * Math.PI * frequencyHz[k]! * delayS;
      sum.re[k]! += size * Math.cos(angle);
      sum.im[k]! += size * Math.sin(angle);
    }
  }
  return sum;
}

/** Adds white complex noise, `noiseDb` its RMS per point. */
export function addNoise(gamma: Spectrum, noiseDb: number, draws: Draws): void {
  const deviation = 10 ** (noiseDb / 20) / Math.SQRT2;
  for (let k = 0; k < gamma.re.length; k++) {
    gamma.re[k]! += deviation * draws.normal();
    gamma.im[k]! += deviation * draws.normal();
  }
}

/** Lets one to three carriers hit one to four neighbouring points each; returns the points hit. */
export function addCarriers(gamma: Spectrum, draws: Draws): number[] {
  const hit = new Set<number>();
  const carriers = draws.integer(1, 3);
  for (let i = 0; i < carriers; i++) {
    const first = draws.integer(0, gamma.re.length - 5);
    const width = draws.integer(1, 4);
    const size = 10 ** (-draws.uniform(6, 26) / 20);
    for (let k = first; k < first + width; k++) {
      const phase = draws.uniform(0, 2 * Math.PI);
      const drawn = size * draws.uniform(0.4, 1);
      gamma.re[k]! += drawn * Math.cos(phase);
      gamma.im[k]! += drawn * Math.sin(phase);
      hit.add(k);
    }
  }
  return [...hit].sort((a, b) => a - b);
}
