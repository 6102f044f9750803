/**
 * Puts every joint where the sweep shows it.
 *
 * Tape and velocity leave a joint uncertain by many half wavelengths, while a fit of phases finds its way over an eighth
 * of one. So each joint is searched for first: at every distance that the description allows, how much of what is left
 * over would a joint there explain?
 */
import { invertSymmetric, solveSymmetric } from '../numerics/linear-solve.ts';
import { type FitContext, residualVariance } from './fit-context.ts';
import { boundaryAt, type LineModel } from './line-model.ts';
import { lumpedTypeOf, matchAt, type Probe, PURE_TYPES, type PureType, probeAcross } from './probe.ts';

/** Where a boundary is expected, given the boundaries that are known already, m. */
export type Expectation = { readonly meanM: number; readonly sigmaM: number };

/** Standard deviations that a joint is searched over. */
const SEARCH_SIGMAS = 3.5;

/**
 * Places every joint between port and end, from the port on.
 *
 * @param known Joints, counted as boundaries from the port's 0, that stay where they are; the end does anyway.
 */
export function placeJoints(
  context: FitContext,
  model: LineModel,
  known: { has(boundary: number): boolean } = new Set<number>(),
): void {
  const last = model.boundaryM.length - 1;
  const placed = new Set([last]);
  for (let joint = 0; joint < last; joint++) if (known.has(joint + 1)) placed.add(joint);
  for (let joint = 0; joint < last; joint++) {
    if (known.has(joint + 1)) continue;
    for (let later = joint; later < last; later++)
      if (!placed.has(later))
        model.boundaryM[later] = clampInside(model, later, expectBoundary(model, placed, later).meanM);
    const expected = expectBoundary(model, placed, joint);
    const best = mostLikelyPlace(context, model, joint + 1, expected);
    if (best !== null) model.boundaryM[joint] = best;
    placed.add(joint);
  }
}

/** Mean and spread of one boundary's prior, given others where they stand now. */
export function expectBoundary(model: LineModel, known: ReadonlySet<number>, index: number): Expectation {
  const { boundaryMeanM: mean, boundaryCovariance: c } = model.priors;
  const n = mean.length;
  const others = [...known].filter((i) => i !== index);
  const own = c[index * n + index]!;
  if (others.length === 0) return { meanM: mean[index]!, sigmaM: Math.sqrt(own) };
  const matrix = Float64Array.from({ length: others.length ** 2 }, (_, k) => {
    const a = others[Math.floor(k / others.length)]!;
    const b = others[k % others.length]!;
    return c[a * n + b]! + (a === b ? 1e-10 : 0);
  });
  const cross = Float64Array.from(others, (i) => c[index * n + i]!);
  const off = Float64Array.from(others, (i) => model.boundaryM[i]! - mean[i]!);
  const weights = solveSymmetric(matrix.slice(), cross.slice());
  const inverse = invertSymmetric(matrix, others.length);
  if (!weights || !inverse) return { meanM: mean[index]!, sigmaM: Math.sqrt(own) };
  let meanM = mean[index]!;
  let variance = own;
  for (let i = 0; i < others.length; i++) {
    meanM += weights[i]! * off[i]!;
    variance -= weights[i]! * cross[i]!;
  }
  return { meanM, sigmaM: Math.sqrt(Math.max(variance, 1e-8)) };
}

/** A place for a joint, and what would explain most there. */
export type JointPlace = {
  readonly distanceM: number;
  /** Gain in −2 ln likelihood, the place's own prior counted. */
  readonly score: number;
  readonly resistive: number;
  readonly reactive: number;
};

/**
 * Distance at which the given types explain most; null when there is none.
 *
 * A resistive and a reactive part in one place don't hide each other: their templates stand at right angles.
 */
export function bestPlaceOf(
  probes: readonly Probe[],
  types: readonly PureType[],
  expected: Expectation,
  variance: number,
): JointPlace | null {
  let best: JointPlace | null = null;
  for (const probe of probes) {
    for (let k = 0; k < probe.points; k++) {
      const distanceM = probe.fromM + k * probe.stepM;
      const off = (distanceM - expected.meanM) / expected.sigmaM;
      let score = -off * off;
      let resistive = 0;
      let reactive = 0;
      for (const type of types) {
        const { strength, gain } = matchAt(probe, type, k);
        score += gain / variance;
        if (lumpedTypeOf(type) === 'resistive') resistive += strength;
        else reactive += strength;
      }
      if (best === null || score > best.score) best = { distanceM, score, resistive, reactive };
    }
  }
  return best;
}

/** A joint that shows less than this, in −2 ln likelihood, stays where it is expected: ripple shows as much. */
const LEAST_EVIDENCE = 30;

function mostLikelyPlace(
  context: FitContext,
  model: LineModel,
  boundary: number,
  expected: Expectation,
): number | null {
  const reachM = SEARCH_SIGMAS * expected.sigmaM;
  const low = (boundaryAt(model, boundary - 1) + expected.meanM) / 2;
  const high = (boundaryAt(model, boundary + 1) + expected.meanM) / 2;
  const fromM = Math.max(low, expected.meanM - reachM);
  const toM = Math.min(high, expected.meanM + reachM);
  const probes = probeAcross(context, model, fromM, toM);
  const best = bestPlaceOf(probes, PURE_TYPES, expected, residualVariance(context));
  return best !== null && best.score > LEAST_EVIDENCE ? best.distanceM : null;
}

function clampInside(model: LineModel, index: number, distanceM: number): number {
  const n = model.boundaryM.length;
  return Math.max(boundaryAt(model, index) + 0.01, Math.min(boundaryAt(model, n) - 0.01, distanceM));
}
