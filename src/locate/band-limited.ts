/**
 * Values of a reflection between and below the points of a sweep, for a line of known length: its reflection is then
 * smooth in frequency, and a few neighbours say what lies between them, and what lies at 0 Hz.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { factorSymmetric, solveFactored } from '../numerics/linear-solve.ts';

/** A reflection at some frequencies, and the way to the end of the line and back there. */
export type PointsOnPath = {
  /** Rising, from 0, Hz. */
  readonly frequencyHz: Float64Array;
  /** Exponent 2·(A + jB) of the way to the end and back, Np and rad; 0 at 0 Hz. */
  readonly path: ComplexArray;
};

/** A planned guess: the weights depend on frequencies and path alone. */
export type BandLimitedPlan = {
  /** Expected RMS error of each value, for a line whose end returns 1. */
  readonly error: Float64Array;
  /** @param gamma At the measured frequencies. @returns Values of the line alone at the wanted ones. */
  fill(gamma: ComplexArray): ComplexArray;
  /**
   * Imaginary part of the instrument's residue at the lowest measured frequencies: what no real line can have there.
   *
   * @param gamma At the measured frequencies.
   */
  residue(gamma: ComplexArray): number;
  /**
   * How badly the lowest points fit the picture of a line, in units of what is expected; lower is likelier.
   *
   * @param gamma At the measured frequencies.
   */
  misfit(gamma: ComplexArray): number;
};

/** Neighbours that say what a value is. */
const NEIGHBOURS = 20;

/** Least distance between two neighbours, turns of the phase of the end: closer ones say the same again. */
const LEAST_TURNS_APART = 0.2;

/**
 * Where a line reflects, as shares of the way to its end, and how much of its power comes from there: most from the
 * end, with what an antenna keeps ringing; some from the run; a little from bounces that come back later.
 */
const STRETCHES = [
  { fromShare: 0.98, toShare: 1.04, power: 1 },
  { fromShare: -0.02, toShare: 1.04, power: 0.004 },
  { fromShare: -0.02, toShare: 2, power: 3e-4 },
] as const;

/**
 * Power of what the instrument's own correction leaves, −40 dB: much the same over neighbouring points, of any phase,
 * and no part of the line. Common practice: −40 to −46 dB.
 */
const RESIDUE_SHARE = 4e-4;

/** Power of noise and of what the picture leaves out, against the line's. */
const NOISE_SHARE = 1e-5;

/**
 * The likeliest reflection at other frequencies, 0 included.
 *
 * The line is taken as a row of small real reflectors, as likely at one place as at another, each seen through the
 * loss and phase of the way to it: the best linear guess from the nearest points is then the one with the least
 * expected error. In a lossy line skin effect bends the reflection sharply toward 0 Hz; the path knows of it.
 *
 * @param measured Frequencies above 0, not falling, length n ≥ 1.
 * @param wanted At most the highest measured frequency.
 * @source Best linear prediction of a stationary process: N. Wiener, Extrapolation, Interpolation and Smoothing of
 *   Stationary Time Series, 1949; here over distance, with the path as a complex frequency.
 */
export function planBandLimited(measured: PointsOnPath, wanted: PointsOnPath): BandLimitedPlan {
  const places = Array.from(measured.frequencyHz, (_, k) => placeOf(measured, k));
  const guesses = Array.from(wanted.frequencyHz, (wantedHz, i) => {
    const chosen = neighboursOf(measured, wantedHz);
    return {
      chosen,
      ...guessFrom(
        chosen.map((k) => places[k]!),
        placeOf(wanted, i),
      ),
    };
  });
  const lowest = neighboursOf(measured, 0);
  const factor = factorOf(lowest.map((k) => places[k]!));
  const residue = residueWeights(factor, lowest.length);
  const seenLowest = (gamma: ComplexArray): Float64Array =>
    Float64Array.from([...lowest.map((k) => gamma.re[k]!), ...lowest.map((k) => gamma.im[k]!)]);
  return {
    error: Float64Array.from(guesses, ({ variance }) => Math.sqrt(variance)),
    residue: (gamma) => product(residue, seenLowest(gamma)),
    misfit(gamma) {
      const seen = seenLowest(gamma);
      const solved = seen.slice();
      solveFactored(factor, seen.length, solved);
      return product(seen, solved);
    },
    fill(gamma) {
      const value = complexZeros(guesses.length);
      guesses.forEach(({ chosen, toRe, toIm }, i) => {
        const n = chosen.length;
        let re = 0;
        let im = 0;
        for (let j = 0; j < n; j++) {
          const seenRe = gamma.re[chosen[j]!]!;
          const seenIm = gamma.im[chosen[j]!]!;
          re += toRe[j]! * seenRe + toRe[n + j]! * seenIm;
          im += toIm[j]! * seenRe + toIm[n + j]! * seenIm;
        }
        value.re[i] = re;
        value.im[i] = im;
      });
      return value;
    },
  };
}

/** One point as the correlations need it: exponent p, and e^{−p·x} at the ends of the stretches in question. */
type Place = { readonly re: number; readonly im: number; readonly ends: readonly ComplexNumber[] };
type ComplexNumber = { readonly re: number; readonly im: number };

function placeOf(points: PointsOnPath, k: number): Place {
  const re = points.path.re[k]!;
  const im = points.path.im[k]!;
  const ends = STRETCHES.flatMap(({ fromShare, toShare }) =>
    [fromShare, toShare].map((share) => {
      const size = Math.exp(-re * share);
      return { re: size * Math.cos(im * share), im: -size * Math.sin(im * share) };
    }),
  );
  return { re, im, ends };
}

/** E[Γ(a)·Γ(b)], or with `mirrored` E[Γ(a)·Γ(b)*]: ∫ e^{−(a+b)x} dx over each stretch, by its power per length. */
function correlation(a: Place, b: Place, mirrored: boolean): ComplexNumber {
  const sign = mirrored ? -1 : 1;
  const qRe = a.re + b.re;
  const qIm = a.im + sign * b.im;
  const size = qRe * qRe + qIm * qIm;
  let re = 0;
  let im = 0;
  for (let s = 0; s < STRETCHES.length; s++) {
    const { fromShare, toShare, power } = STRETCHES[s]!;
    const width = toShare - fromShare;
    if (size < 1e-10) {
      const middle = (fromShare + toShare) / 2;
      re += power * (1 - qRe * middle);
      im -= power * qIm * middle;
      continue;
    }
    let dRe = 0;
    let dIm = 0;
    for (const [end, share] of [
      [2 * s, 1],
      [2 * s + 1, -1],
    ] as const) {
      const x = a.ends[end]!;
      const y = b.ends[end]!;
      dRe += share * (x.re * y.re - sign * x.im * y.im);
      dIm += share * (sign * x.re * y.im + x.im * y.re);
    }
    const scale = power / (width * size);
    re += scale * (dRe * qRe + dIm * qIm);
    im += scale * (dIm * qRe - dRe * qIm);
  }
  return { re, im };
}

/** Weights for the real and the imaginary part: first on the neighbours' real parts, then on their imaginary ones. */
type Guess = { readonly toRe: Float64Array; readonly toIm: Float64Array; readonly variance: number };

function guessFrom(places: readonly Place[], target: Place): Guess {
  const n = places.length;
  const size = 2 * n;
  const factor = factorOf(places);
  const wantedRe = new Float64Array(size);
  const wantedIm = new Float64Array(size);
  for (let i = 0; i < n; i++) {
    const own = parts(target, places[i]!);
    wantedRe[i] = own.reRe;
    wantedRe[n + i] = own.reIm;
    wantedIm[i] = own.imRe;
    wantedIm[n + i] = own.imIm;
  }
  const toRe = wantedRe.slice();
  const toIm = wantedIm.slice();
  solveFactored(factor, size, toRe);
  solveFactored(factor, size, toIm);
  const prior = parts(target, target);
  const variance = prior.reRe + prior.imIm - product(toRe, wantedRe) - product(toIm, wantedIm);
  return { toRe, toIm, variance: Math.max(0, variance) };
}

/** Weights for the residue's imaginary part, which goes along with the imaginary parts of all points alike. */
function residueWeights(factor: Float64Array, points: number): Float64Array {
  const weights = new Float64Array(2 * points).fill(RESIDUE_SHARE / 2, points);
  solveFactored(factor, weights.length, weights);
  return weights;
}

/** Correlations of what the points read, real parts before imaginary ones, factored. */
function factorOf(places: readonly Place[]): Float64Array {
  const n = places.length;
  const size = 2 * n;
  const factor = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      const { reRe, reIm, imRe, imIm } = parts(places[i]!, places[j]!);
      factor[i * size + j] = reRe + RESIDUE_SHARE / 2;
      factor[(n + i) * size + n + j] = imIm + RESIDUE_SHARE / 2;
      // Below the diagonal stand imaginary rows against real columns.
      factor[(n + i) * size + j] = imRe;
      factor[(n + j) * size + i] = reIm;
    }
  }
  for (let i = 0; i < size; i++) factor[i * size + i] = factor[i * size + i]! + NOISE_SHARE;
  if (!factorSymmetric(factor, size, factor)) throw new RangeError('a correlation is not positive');
  return factor;
}

function product(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

/** Correlations of the real and imaginary parts of two reflections; `reIm` is E[Re Γ(a)·Im Γ(b)]. */
function parts(a: Place, b: Place) {
  const plain = correlation(a, b, false);
  const mirrored = correlation(a, b, true);
  return {
    reRe: (mirrored.re + plain.re) / 2,
    imIm: (mirrored.re - plain.re) / 2,
    reIm: (plain.im - mirrored.im) / 2,
    imRe: (plain.im + mirrored.im) / 2,
  };
}

/** Indices of the points nearest to a frequency, none closer to the next than needed, in order. */
function neighboursOf(measured: PointsOnPath, wantedHz: number): number[] {
  const { frequencyHz, path } = measured;
  const apartRad = 2 * Math.PI * LEAST_TURNS_APART;
  let up = lowerBound(frequencyHz, wantedHz);
  let down = up - 1;
  const chosen: number[] = [];
  const skip = (k: number, step: 1 | -1, fromRad: number): number => {
    let next = k + step;
    while (next >= 0 && next < frequencyHz.length && Math.abs(path.im[next]! - fromRad) < apartRad)
      next += step;
    return next;
  };
  while (chosen.length < NEIGHBOURS) {
    const above = up < frequencyHz.length ? frequencyHz[up]! - wantedHz : Number.POSITIVE_INFINITY;
    const below = down >= 0 ? wantedHz - frequencyHz[down]! : Number.POSITIVE_INFINITY;
    if (above === Number.POSITIVE_INFINITY && below === Number.POSITIVE_INFINITY) break;
    if (above <= below) {
      chosen.push(up);
      up = skip(up, 1, path.im[up]!);
    } else {
      chosen.unshift(down);
      down = skip(down, -1, path.im[down]!);
    }
  }
  return chosen;
}

function lowerBound(values: Float64Array, wanted: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (values[middle]! < wanted) low = middle + 1;
    else high = middle;
  }
  return low;
}
