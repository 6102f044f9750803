/**
 * Values of a reflection between and below the points of a sweep, for a line whose echoes all come back within a known
 * time: its reflection is then smooth in frequency, and a few neighbours say what lies between them.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { factorSymmetric, solveFactored } from '../numerics/linear-solve.ts';

/** When the echoes of a line come back, round trip, s. */
export type DelaySupport = { readonly fromS: number; readonly toS: number };

export type BandLimitedValues = {
  readonly value: ComplexArray;
  /** Expected error of each value against the RMS of the sweep, by the sweep's points alone. */
  readonly error: Float64Array;
};

/** Neighbours that say what a value is. */
const NEIGHBOURS = 24;

/** Power of re-reflections that come back later, up to twice the time, against that within it. */
const LATE_SHARE = 1e-3;

/** Power of noise and of what the model leaves out, against the sweep's own. */
const NOISE_SHARE = 1e-5;

/**
 * The likeliest values at other frequencies, 0 included.
 *
 * An echo is as likely at any delay within the support; the best linear guess from the nearest points is then the
 * value with the least expected error. Since the answer of a line is real in time, each point also stands at its
 * negative frequency with its conjugate, which is what carries the guess down to 0. Phase is kept: nothing is averaged
 * over neighbours that turn against each other.
 *
 * @param frequencyHz Of the sweep, above 0, not falling, length n ≥ 2.
 * @param wantedHz Rising, each from 0 to the sweep's highest.
 * @source Best linear prediction of a stationary process (Wiener, Extrapolation, Interpolation and Smoothing of
 *   Stationary Time Series, 1949); spectrum flat over the support.
 */
export function bandLimitedValues(
  frequencyHz: Float64Array,
  gamma: ComplexArray,
  support: DelaySupport,
  wantedHz: Float64Array,
): BandLimitedValues {
  const value = complexZeros(wantedHz.length);
  const error = new Float64Array(wantedHz.length);
  const middleS = (support.fromS + support.toS) / 2;
  const widthS = support.toS - support.fromS;
  const count = Math.min(NEIGHBOURS, 2 * frequencyHz.length);
  let known: Guess | null = null;
  for (let i = 0; i < wantedHz.length; i++) {
    const wanted = wantedHz[i]!;
    const nearest = nearestSigned(frequencyHz, wanted, count);
    const offsets = nearest.map((k) => signedFrequency(frequencyHz, k) - wanted);
    if (known === null || !sameOffsets(known.offsets, offsets, widthS)) known = guessFrom(offsets, widthS);
    let re = 0;
    let im = 0;
    nearest.forEach((k, j) => {
      const at = k >= 0 ? k : -1 - k;
      const sign = k >= 0 ? 1 : -1;
      // With the mean delay taken out the correlation is real.
      const angle = 2 * Math.PI * offsets[j]! * middleS;
      const pointRe = gamma.re[at]!;
      const pointIm = sign * gamma.im[at]!;
      re += known!.weights[j]! * (pointRe * Math.cos(angle) - pointIm * Math.sin(angle));
      im += known!.weights[j]! * (pointRe * Math.sin(angle) + pointIm * Math.cos(angle));
    });
    value.re[i] = re;
    value.im[i] = wanted === 0 ? 0 : im;
    error[i] = known.error;
  }
  return { value, error };
}

/** Weights of neighbours for one pattern of offsets. */
type Guess = {
  readonly offsets: readonly number[];
  readonly weights: Float64Array;
  readonly error: number;
};

function guessFrom(offsets: readonly number[], widthS: number): Guess {
  const n = offsets.length;
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) matrix[i * n + j] = correlation((offsets[i]! - offsets[j]!) * widthS);
    matrix[i * n + i] = 1 + NOISE_SHARE;
  }
  const wanted = Float64Array.from(offsets, (offset) => correlation(offset * widthS));
  const weights = wanted.slice();
  if (!factorSymmetric(matrix, n, matrix)) throw new RangeError('frequencies too close to tell apart');
  solveFactored(matrix, n, weights);
  let explained = 0;
  for (let j = 0; j < n; j++) explained += weights[j]! * wanted[j]!;
  return { offsets, weights, error: Math.sqrt(Math.max(0, 1 - explained)) };
}

/** Correlation of two frequencies, `turns` = their distance times the width of the support. */
function correlation(turns: number): number {
  return (1 - LATE_SHARE) * sinc(turns) + LATE_SHARE * sinc(2 * turns);
}

function sinc(turns: number): number {
  const x = Math.PI * turns;
  return Math.abs(x) < 1e-8 ? 1 : Math.sin(x) / x;
}

/** Offsets whose phases agree to this many turns count as the same pattern. */
const SAME_TURNS = 1e-7;

function sameOffsets(known: readonly number[], offsets: readonly number[], widthS: number): boolean {
  return known.every((offset, j) => Math.abs(offset - offsets[j]!) * widthS < SAME_TURNS);
}

/** Frequency of a signed index: k ≥ 0 is point k, −1 − k its mirror at the negative frequency. */
function signedFrequency(frequencyHz: Float64Array, k: number): number {
  return k >= 0 ? frequencyHz[k]! : -frequencyHz[-1 - k]!;
}

/** Signed indices of the points nearest to a frequency, in order of frequency. */
function nearestSigned(frequencyHz: Float64Array, wantedHz: number, count: number): number[] {
  const n = frequencyHz.length;
  let above = 0;
  let high = n;
  while (above < high) {
    const middle = (above + high) >>> 1;
    if (frequencyHz[middle]! < wantedHz) above = middle + 1;
    else high = middle;
  }
  let below = above - 1;
  const chosen: number[] = [];
  while (chosen.length < count) {
    const up = above < n ? frequencyHz[above]! - wantedHz : Number.POSITIVE_INFINITY;
    const down = below >= -n ? wantedHz - signedFrequency(frequencyHz, below) : Number.POSITIVE_INFINITY;
    if (up <= down) chosen.push(above++);
    else chosen.unshift(below--);
  }
  return chosen;
}
