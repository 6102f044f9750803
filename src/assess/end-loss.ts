/**
 * The loss of a run from what comes back of its open or shorted end.
 *
 * Everything that the end sends back has passed the whole run twice. Beside the loss, its size can only be taken for
 * what the instrument's correction leaves over of its tracking: a few small reflections within the first nanosecond.
 * Loss follows laws in frequency that vanish toward 0, the residue wanders about 1 over the band; they are told apart as
 * far as the band allows, and by what is known of either beforehand.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { factorSymmetric, invertSymmetric, solveFactored } from '../numerics/linear-solve.ts';
import { createEndTerms, type EndPath, type EndTerms, FIXED_TERMS } from './end-terms.ts';

/** Standard deviations of what is known of the loss beforehand, relative. */
export type LossPriors = {
  /** Of the loss as a whole: sample against type. */
  readonly common: number;
  /** Of the conductor's alone: the temperature. */
  readonly conductor: number;
  /** Of what the dielectric has beyond that, in sound cable. */
  readonly dielectric: number;
};

export type EndLoss = {
  /** Relative changes of conductor and dielectric loss. */
  readonly conductor: number;
  readonly dielectric: number;
  /** Covariance: conductor, both, dielectric. */
  readonly covariance: readonly [number, number, number];
  /** Loss of the faults on the way, as a factor on what their sizes say. */
  readonly faults: number;
  /** True where loss that grows with frequency is clearly more than sound cable has: water, as a rule. */
  readonly growing: boolean;
};

/** Prior of the loss that water adds, one way at the middle of the band, dB. Common practice: some tenths to some dB. */
const WATER_DB = 1;

/** Lead, −2 ln of the odds, that water must have over sound cable; most lines are dry. */
const WATER_LEAD = 9;
/** Less than this is not called water, dB one way at the middle of the band. Chosen on seeded scenes, wet and dry. */
const LEAST_WATER_DB = 0.2;

const NEPER_PER_DB = Math.LN10 / 20;

/** Steps of the fit, which is nearly linear. */
const STEPS = 5;

/**
 * Fits the loss of the run to the echo of its end: Gauss–Newton with Gaussian priors on the complex reading.
 *
 * @returns Null when the reading does not determine it.
 * @source Bayesian linear regression with Gaussian priors; evidence by Laplace's method (from memory: Bishop, Pattern
 *   Recognition and Machine Learning, 2006, sections 3.3 and 4.4).
 */
export function fitEndLoss(given: EndPath, priors: LossPriors): EndLoss | null {
  const terms = createEndTerms(given);
  const sound = fitWith(terms, priors);
  const middle = given.frequencyHz.length >> 1;
  const perDielectric = given.perDielectric.re[middle]!;
  if (!(perDielectric > 0)) return sound && resultOf(sound, false);
  const water = (WATER_DB * NEPER_PER_DB) / perDielectric;
  const wet = fitWith(terms, { ...priors, dielectric: water }, sound?.variance);
  if (sound === null || wet === null) return sound && resultOf(sound, false);
  const beyondNp = (wet.values[1]! - wet.values[0]!) * perDielectric;
  const growing = beyondNp > LEAST_WATER_DB * NEPER_PER_DB && sound.evidence - wet.evidence > WATER_LEAD;
  return resultOf(growing ? wet : sound, growing);
}

type Fitted = {
  readonly values: Float64Array;
  readonly covariance: readonly [number, number, number];
  readonly variance: number;
  /** −2 ln of the evidence, up to a constant. */
  readonly evidence: number;
};

function resultOf({ values, covariance }: Fitted, growing: boolean): EndLoss {
  return {
    conductor: values[0]!,
    dielectric: values[1]!,
    faults: Math.max(0, 1 + values[FIXED_TERMS.faults]!),
    covariance,
    growing,
  };
}

/** @param variance Per real part of a point; what is left over, where it is not given. */
function fitWith(terms: EndTerms, priors: LossPriors, variance?: number): Fitted | null {
  const { count: p, points: n } = terms;
  const columns: ComplexArray[] = Array.from({ length: p }, () => complexZeros(n));
  const residual = complexZeros(n);
  const values = terms.start();
  const prior = priorPrecision(terms, priors);
  const curvature = new Float64Array(p * p);
  const gradient = new Float64Array(p);
  for (let step = 0; ; step++) {
    terms.linearise(values, columns, residual);
    const energy = dot(residual, residual);
    const perPart = variance ?? Math.max(energy / (2 * n), QUIETEST);
    let cost = energy / perPart;
    for (let a = 0; a < p; a++) {
      let pull = 0;
      for (let b = 0; b < p; b++) pull += prior[a * p + b]! * values[b]!;
      cost += pull * values[a]!;
      gradient[a] = dot(columns[a]!, residual) / perPart - pull;
      for (let b = 0; b <= a; b++) {
        const product = dot(columns[a]!, columns[b]!) / perPart + prior[a * p + b]!;
        curvature[a * p + b] = product;
        curvature[b * p + a] = product;
      }
    }
    if (step === STEPS) {
      const covariance = invertSymmetric(curvature, p);
      if (covariance === null || !factorSymmetric(curvature, p, curvature)) return null;
      let evidence = cost - Math.log(prior[0]! * prior[p + 1]! - prior[1]! * prior[p]!);
      for (let a = 0; a < p; a++) evidence += 2 * Math.log(curvature[a * p + a]!);
      return {
        values,
        covariance: [covariance[0]!, covariance[1]!, covariance[p + 1]!],
        variance: perPart,
        evidence,
      };
    }
    if (!factorSymmetric(curvature, p, curvature)) return null;
    solveFactored(curvature, p, gradient);
    for (let a = 0; a < p; a++) values[a] = values[a]! + gradient[a]!;
  }
}

/** Least variance of a point, per real part: −87 dB, below which no instrument reads; terms stay apart in it. */
const QUIETEST = 1e-9;

/** Inverse covariance of everything known beforehand; the two losses have a part in common. */
function priorPrecision(terms: EndTerms, { common, conductor, dielectric }: LossPriors): Float64Array {
  const p = terms.count;
  const precision = new Float64Array(p * p);
  for (let k = FIXED_TERMS.faults; k < p; k++) precision[k * p + k] = terms.precision[k]!;
  const cc = common * common + conductor * conductor;
  const cd = common * common;
  const dd = common * common + dielectric * dielectric;
  const determinant = cc * dd - cd * cd;
  precision[0] = dd / determinant;
  precision[1] = -cd / determinant;
  precision[p] = -cd / determinant;
  precision[p + 1] = cc / determinant;
  return precision;
}

/** Re Σ conj(a)·b. */
function dot(a: ComplexArray, b: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < a.re.length; i++) sum += a.re[i]! * b.re[i]! + a.im[i]! * b.im[i]!;
  return sum;
}
