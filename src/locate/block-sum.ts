/** The sum over frequencies at evenly spaced distances of one section by chirp-z transforms, block by block. */
import type { MediumRun } from '../line/medium-run.ts';
import { createChirpZ } from '../numerics/chirp-z.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { nextPowerOfTwo } from '../numerics/fft.ts';
import {
  type DistanceGrid,
  factorAt,
  type LossHandling,
  type Piece,
  type PieceTransform,
  signOf,
} from './path-factor.ts';
import { planPlainSum } from './plain-sum.ts';

/** Error of the expansion against the sum of the inputs' sizes: −120 dB. */
const EXPANSION_ERROR = 1e-6;
/** The series of the expansion's coefficients loses digits beyond this argument; such blocks are cut further. */
const LARGEST_ARGUMENT = 5;
const MOST_BLOCKS = 256;
/** Cost of one frequency at one distance in the plain sum, ns, and of size·log₂ size in a chirp-z. Timed here. */
const PLAIN_SUM_COST = 1.8;
const CHIRP_Z_COST = 4;

type BlockPlan = { readonly points: number; readonly terms: number };

/**
 * Plans the cheapest way through one piece: so many blocks of so many terms, or the plain sum.
 *
 * Inside a block the part of the phase that is linear over the frequency index is left to one chirp-z transform, and
 * the rest, small, is expanded in Chebyshev polynomials of distance, one transform a term (half the terms of a Taylor
 * series for the same error).
 *
 * @source Block and expansion: standard practice of non-uniform transforms; see `termsFor` for the error bound.
 */
export function planFastest(
  run: MediumRun,
  grid: DistanceGrid,
  loss: LossHandling,
  piece: Piece,
): PieceTransform {
  const rest = restOf(run, loss, piece.section);
  const n = run.alpha[piece.section]!.length;
  let cheapest: BlockPlan | null = null;
  let leastCost = PLAIN_SUM_COST * n * piece.count;
  for (let blocks = 1; blocks <= MOST_BLOCKS; blocks *= 2) {
    const points = Math.ceil(piece.count / blocks);
    if (points < 2) break;
    const terms = termsFor(rest.largest * halfWidth(points) * grid.stepM);
    if (terms === null) continue;
    const size = nextPowerOfTwo(n + points - 1);
    const cost = blocks * terms * CHIRP_Z_COST * size * Math.log2(size);
    if (cost < leastCost) {
      leastCost = cost;
      cheapest = { points, terms };
    }
  }
  return cheapest === null
    ? planPlainSum(run, grid, loss, piece)
    : planBlocks(run, grid, loss, piece, rest, cheapest);
}

/** Distance steps from the middle of a block to its edge. */
function halfWidth(points: number): number {
  return (points - 1) / 2;
}

/**
 * Chebyshev terms that bring the error of e^{z·t}, |t| ≤ 1, below the limit: the first coefficient left out is at
 * most 2·(|z|/2)^K/K!·e^{|z|²/(4(K+1))}.
 *
 * @returns Null when z is too large for one block.
 * @source J. C. Mason, D. C. Handscomb, Chebyshev Polynomials, 2003, section 5.3 (expansion of the exponential); NIST
 *   Digital Library of Mathematical Functions 10.25.2 (series of its coefficients).
 */
function termsFor(largestArgument: number): number | null {
  if (!(largestArgument <= LARGEST_ARGUMENT)) return null;
  let coefficient = 2;
  for (let terms = 1; terms <= 40; terms++) {
    coefficient *= largestArgument / 2 / terms;
    const bound = coefficient * Math.exp((largestArgument * largestArgument) / (4 * (terms + 1)));
    if (bound < EXPANSION_ERROR) return terms;
  }
  return null;
}

/** Rate of the exponent per metre, split into what a chirp-z does and a small rest. */
type Rest = {
  /** Common part, 1/m: mean loss, and phase at index 0 of the straight line. */
  readonly commonLoss: number;
  readonly commonPhase: number;
  /** Slope of the phase over the frequency index, rad/m. */
  readonly phasePerIndex: number;
  /** What is left per frequency, 1/m. */
  readonly re: Float64Array;
  readonly im: Float64Array;
  /** Largest size of what is left, 1/m. */
  readonly largest: number;
};

function restOf(run: MediumRun, loss: LossHandling, section: number): Rest {
  const sign = signOf(loss);
  const alpha = run.alpha[section]!;
  const beta = run.beta[section]!;
  const n = alpha.length;
  const line = straightLine(beta);
  const commonLoss = 2 * sign * middleOfRange(alpha);
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  let largest = 0;
  for (let k = 0; k < n; k++) {
    re[k] = 2 * sign * alpha[k]! - commonLoss;
    im[k] = 2 * (beta[k]! - line.intercept - line.slope * k);
    largest = Math.max(largest, Math.hypot(re[k]!, im[k]!));
  }
  return { commonLoss, commonPhase: 2 * line.intercept, phasePerIndex: 2 * line.slope, re, im, largest };
}

function middleOfRange(values: Float64Array): number {
  let low = values[0]!;
  let high = low;
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return (low + high) / 2;
}

/** Least-squares line over the index, then lifted so that it misses by as much above as below. */
function straightLine(values: Float64Array): { readonly intercept: number; readonly slope: number } {
  const n = values.length;
  const middle = (n - 1) / 2;
  let moment = 0;
  let spread = 0;
  for (let k = 0; k < n; k++) {
    moment += (k - middle) * values[k]!;
    spread += (k - middle) * (k - middle);
  }
  const slope = spread > 0 ? moment / spread : 0;
  return { intercept: middleOfRange(values.map((value, k) => value - slope * k)), slope };
}

function planBlocks(
  run: MediumRun,
  grid: DistanceGrid,
  loss: LossHandling,
  piece: Piece,
  rest: Rest,
  plan: BlockPlan,
): PieceTransform {
  const n = rest.re.length;
  const middle = halfWidth(plan.points);
  const halfM = Math.max(middle, 0.5) * grid.stepM;
  const chirpZ = createChirpZ({
    n,
    m: plan.points,
    startRad: -middle * grid.stepM * rest.phasePerIndex,
    stepRad: grid.stepM * rest.phasePerIndex,
  });
  const coefficients = expansionCoefficients(rest, halfM, plan.terms);
  const common = commonFactors(rest, grid.stepM, plan.points);
  const starts: number[] = [];
  for (let at = 0; at < piece.count; at += plan.points) starts.push(at);
  const centres = starts.map((at) =>
    factorAt(run, grid.fromM + (piece.first + at + middle) * grid.stepM, loss),
  );
  const turned = complexZeros(n);
  const term = complexZeros(n);
  const sums = Array.from({ length: plan.terms }, () => complexZeros(plan.points));

  return (input, output) => {
    starts.forEach((at, block) => {
      multiply(input, centres[block]!, turned);
      coefficients.forEach((coefficient, q) => {
        multiply(turned, coefficient, term);
        chirpZ.transform(term, sums[q]!);
      });
      const count = Math.min(plan.points, piece.count - at);
      addUpTerms(sums, common, middle, count, output, piece.first + at);
    });
  };
}

/** Σ_q T_q(t)·sum_q at each distance of a block (Clenshaw's recurrence), times the common factor. */
function addUpTerms(
  sums: readonly ComplexArray[],
  common: ComplexArray,
  middle: number,
  count: number,
  output: ComplexArray,
  at: number,
): void {
  for (let j = 0; j < count; j++) {
    const t = middle > 0 ? (j - middle) / middle : 0;
    let re = 0;
    let im = 0;
    let beforeRe = 0;
    let beforeIm = 0;
    for (let q = sums.length - 1; q >= 1; q--) {
      const nextRe = 2 * t * re - beforeRe + sums[q]!.re[j]!;
      const nextIm = 2 * t * im - beforeIm + sums[q]!.im[j]!;
      beforeRe = re;
      beforeIm = im;
      re = nextRe;
      im = nextIm;
    }
    const sumRe = t * re - beforeRe + sums[0]!.re[j]!;
    const sumIm = t * im - beforeIm + sums[0]!.im[j]!;
    output.re[at + j] = sumRe * common.re[j]! - sumIm * common.im[j]!;
    output.im[at + j] = sumRe * common.im[j]! + sumIm * common.re[j]!;
  }
}

/** Coefficients of e^{z·t} = Σ c_q·T_q(t) with z = rest·half width: c_0 = I_0(z), c_q = 2·I_q(z). */
function expansionCoefficients(rest: Rest, halfM: number, terms: number): ComplexArray[] {
  const n = rest.re.length;
  const coefficients = Array.from({ length: terms }, () => complexZeros(n));
  for (let k = 0; k < n; k++) {
    const zRe = (rest.re[k]! * halfM) / 2;
    const zIm = (rest.im[k]! * halfM) / 2;
    const squareRe = zRe * zRe - zIm * zIm;
    const squareIm = 2 * zRe * zIm;
    // (z/2)^q / q!
    let leadRe = 1;
    let leadIm = 0;
    for (let q = 0; q < terms; q++) {
      let termRe = leadRe;
      let termIm = leadIm;
      let sumRe = termRe;
      let sumIm = termIm;
      for (let m = 1; m < 30; m++) {
        const scale = 1 / (m * (m + q));
        const next = (termRe * squareRe - termIm * squareIm) * scale;
        termIm = (termRe * squareIm + termIm * squareRe) * scale;
        termRe = next;
        sumRe += termRe;
        sumIm += termIm;
        if (Math.abs(termRe) + Math.abs(termIm) < 1e-12) break;
      }
      const twice = q === 0 ? 1 : 2;
      coefficients[q]!.re[k] = twice * sumRe;
      coefficients[q]!.im[k] = twice * sumIm;
      const next = (leadRe * zRe - leadIm * zIm) / (q + 1);
      leadIm = (leadRe * zIm + leadIm * zRe) / (q + 1);
      leadRe = next;
    }
  }
  return coefficients;
}

function commonFactors(rest: Rest, stepM: number, points: number): ComplexArray {
  const factors = complexZeros(points);
  for (let j = 0; j < points; j++) {
    const offsetM = (j - halfWidth(points)) * stepM;
    const size = Math.exp(rest.commonLoss * offsetM);
    factors.re[j] = size * Math.cos(rest.commonPhase * offsetM);
    factors.im[j] = size * Math.sin(rest.commonPhase * offsetM);
  }
  return factors;
}

function multiply(a: ComplexArray, b: ComplexArray, product: ComplexArray): void {
  for (let k = 0; k < a.re.length; k++) {
    const re = a.re[k]!;
    const im = a.im[k]!;
    product.re[k] = re * b.re[k]! - im * b.im[k]!;
    product.im[k] = re * b.im[k]! + im * b.re[k]!;
  }
}
