/**
 * The loss of a run from what comes back of its open or shorted end.
 *
 * Everything that the end sends back has passed the whole run twice. What its size can be taken for beside the loss is
 * the tracking residue of the instrument's correction: a few small reflections within the first nanosecond. Loss
 * follows a law in frequency that vanishes toward 0, the residue wanders about 1 over the band: told apart as far as
 * the band allows, and by what is known of either beforehand.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { factorSymmetric, invertSymmetric, solveFactored } from '../numerics/linear-solve.ts';

/** The run to the end and what is known of its loss; arrays of length n over the sweep's frequencies. */
export type EndPath = {
  readonly frequencyHz: Float64Array;
  readonly measured: ComplexArray;
  /** Γ of the end itself: 1 for an open, −1 for a short. */
  readonly sign: 1 | -1;
  /** γ·length of the run as described, one way: Np and rad. */
  readonly path: ComplexArray;
  /** What a relative change of conductor and of dielectric loss adds to it. */
  readonly perConductor: ComplexArray;
  readonly perDielectric: ComplexArray;
  /** Loss of amplitude by mismatches and resistances on the way, both ways together, Np. */
  readonly passedNp: Float64Array;
  /** Discontinuities nearby: one-way path of each and its |Γ|. */
  readonly neighbours: readonly Neighbour[];
  readonly priors: LossPriors;
};

/** Something that reflects before the end. */
export type Neighbour = { readonly path: ComplexArray; readonly gamma: number };

/** Standard deviations of what is known of the loss beforehand. */
export type LossPriors = {
  /** Of the loss as a whole, and of the conductor's alone (temperature); relative. */
  readonly common: number;
  readonly conductor: number;
  /** Of what the dielectric has beyond that, in sound cable; relative. */
  readonly dielectric: number;
};

export type EndLoss = {
  readonly conductor: number;
  readonly dielectric: number;
  /** Covariance: conductor, both, dielectric. */
  readonly covariance: readonly [number, number, number];
};

/** Round-trip delays within which the residue's reflections lie, s. Common practice: test lead and adaptor. */
const RESIDUE_SPAN_S = 1.2e-9;

/** RMS of the tracking residue: −42 dB. Common practice for a correction made in the field. */
const TRACKING = 0.0075;

/** How far the end may stand off its place, as a round-trip delay, s, and what a connector adds that grows as f³. */
const DELAY_SIGMA_S = 0.3e-9;
const CUBIC_SIGMA = 0.3;

/** Neighbours nearer than this many resolutions mix with the end; those farther average out. */
const NEAR_RESOLUTIONS = 25;

/** Steps of the fit; it is nearly linear. */
const STEPS = 6;

/**
 * Fits the loss of the run to the echo of its end.
 *
 * Gauss–Newton with Gaussian priors on the reading near the end: Γ = ±e^{−2γℓ}·(1 + T) and what stands close by.
 */
export function fitEndLoss(given: EndPath): EndLoss | null {
  const { frequencyHz: f } = given;
  const n = f.length;
  const bandHz = f[n - 1]! - f[0]!;
  const echo = endEcho(given);
  const delays = delayGrid(0, RESIDUE_SPAN_S, bandHz);
  const near = nearby(given, bandHz);
  const columns: ComplexArray[] = Array.from({ length: 4 + 2 * delays.length + near.length }, () =>
    complexZeros(n),
  );
  const p = columns.length;
  const precision = new Float64Array(p);
  const { common, conductor, dielectric } = given.priors;
  // The two laws as parameters: their joint prior has a common part.
  const [cc, cd, dd] = [common ** 2 + conductor ** 2, common ** 2, common ** 2 + dielectric ** 2];
  const det = cc * dd - cd * cd;
  precision[2] = 1 / DELAY_SIGMA_S ** 2;
  precision[3] = 1 / CUBIC_SIGMA ** 2;
  const tracking = (2 * delays.length) / TRACKING ** 2;
  for (let k = 0; k < delays.length * 2; k++) precision[4 + k] = tracking;
  near.forEach(({ precision: own }, k) => {
    precision[4 + 2 * delays.length + k] = own;
  });
  const values = new Float64Array(p);
  values[2] = delayOf(given, echo);
  let covariance: Float64Array | null = null;
  let variance = 0;
  const residual = complexZeros(n);
  for (let step = 0; step <= STEPS; step++) {
    linearise(given, echo, delays, near, values, columns, residual);
    let energy = 0;
    for (let i = 0; i < n; i++) energy += residual.re[i]! ** 2 + residual.im[i]! ** 2;
    variance = Math.max(energy / (2 * n), 1e-14);
    const curvature = new Float64Array(p * p);
    const gradient = new Float64Array(p);
    for (let a = 0; a < p; a++) {
      gradient[a] = dot(columns[a]!, residual) / variance - precision[a]! * values[a]!;
      for (let b = 0; b <= a; b++) {
        const value = dot(columns[a]!, columns[b]!) / variance;
        curvature[a * p + b] = value;
        curvature[b * p + a] = value;
      }
      curvature[a * p + a] = curvature[a * p + a]! + precision[a]!;
    }
    curvature[0] = curvature[0]! + dd / det;
    curvature[1] = curvature[1]! - cd / det;
    curvature[p] = curvature[p]! - cd / det;
    curvature[p + 1] = curvature[p + 1]! + cc / det;
    gradient[0] = gradient[0]! - (dd * values[0]! - cd * values[1]!) / det;
    gradient[1] = gradient[1]! - (cc * values[1]! - cd * values[0]!) / det;
    if (step === STEPS) {
      covariance = invertSymmetric(curvature, p);
      break;
    }
    if (!factorSymmetric(curvature, p, curvature)) return null;
    solveFactored(curvature, p, gradient);
    for (let a = 0; a < p; a++) values[a] = values[a]! + gradient[a]!;
  }
  if (covariance === null) return null;
  return {
    conductor: values[0]!,
    dielectric: values[1]!,
    covariance: [covariance[0]!, covariance[1]!, covariance[p + 1]!],
  };
}

/** What the end would send back were the run as described: ±e^{−2γℓ} less what is lost on the way. */
function endEcho({ path, sign, passedNp }: EndPath): ComplexArray {
  const echo = complexZeros(passedNp.length);
  for (let i = 0; i < passedNp.length; i++) {
    const size = sign * Math.exp(-2 * path.re[i]! - passedNp[i]!);
    echo.re[i] = size * Math.cos(2 * path.im[i]!);
    echo.im[i] = -size * Math.sin(2 * path.im[i]!);
  }
  return echo;
}

/** Delays that stand for any between two, no farther apart than the band can tell. */
function delayGrid(fromS: number, toS: number, bandHz: number): number[] {
  const count = Math.max(2, 2 + Math.floor((toS - fromS) * bandHz));
  return Array.from({ length: count }, (_, k) => fromS + ((toS - fromS) * k) / (count - 1));
}

/** Where the end stands, as a round-trip delay beyond its described place: the strongest of a fine grid. */
function delayOf({ frequencyHz: f, measured }: EndPath, echo: ComplexArray): number {
  const stepS = 1 / (16 * f[f.length - 1]!);
  let best = 0;
  let strongest = Number.NEGATIVE_INFINITY;
  for (let k = -Math.ceil((3 * DELAY_SIGMA_S) / stepS); k * stepS <= 3 * DELAY_SIGMA_S; k++) {
    let re = 0;
    for (let i = 0; i < f.length; i++) {
      const angle = 2 * Math.PI * f[i]! * k * stepS;
      const [c, s] = [Math.cos(angle), Math.sin(angle)];
      // Re measured·conj(echo·e^{−jωτ})
      const eRe = echo.re[i]! * c + echo.im[i]! * s;
      const eIm = echo.im[i]! * c - echo.re[i]! * s;
      re += measured.re[i]! * eRe + measured.im[i]! * eIm;
    }
    if (re > strongest) {
      strongest = re;
      best = k * stepS;
    }
  }
  return best;
}

type NearColumn = { readonly value: ComplexArray; readonly precision: number };

/** Columns of what stands within a few resolutions of the end, and of its bounces off the end behind it. */
function nearby({ frequencyHz: f, path, sign, neighbours }: EndPath, bandHz: number): NearColumn[] {
  const n = f.length;
  const out: NearColumn[] = [];
  for (const { path: own, gamma } of neighbours) {
    const apart = Math.abs(path.im[n - 1]! - own.im[n - 1]! - (path.im[0]! - own.im[0]!)) / Math.PI;
    if (apart > NEAR_RESOLUTIONS) continue;
    const shifts = delayGrid(-0.2e-9, 0.2e-9, bandHz);
    const precision = (2 * shifts.length) / gamma ** 2;
    for (const shiftS of shifts)
      for (const behind of [false, true])
        for (const turn of [0, -Math.PI / 2]) {
          const value = complexZeros(n);
          for (let i = 0; i < n; i++) {
            const np = behind ? 2 * path.re[i]! - own.re[i]! : own.re[i]!;
            const rad = behind ? 2 * path.im[i]! - own.im[i]! : own.im[i]!;
            const size = Math.exp(-2 * np);
            const angle = -2 * rad - 2 * Math.PI * f[i]! * shiftS + turn;
            value.re[i] = size * Math.cos(angle);
            value.im[i] = size * Math.sin(angle);
          }
          out.push({ value, precision });
        }
  }
  void sign;
  return out;
}

function linearise(
  given: EndPath,
  echo: ComplexArray,
  delays: readonly number[],
  near: readonly NearColumn[],
  values: Float64Array,
  columns: readonly ComplexArray[],
  residual: ComplexArray,
): void {
  const { frequencyHz: f, measured, perConductor: gc, perDielectric: gd } = given;
  const top = 2 * Math.PI * f[f.length - 1]!;
  const first = 4 + 2 * delays.length;
  for (let i = 0; i < f.length; i++) {
    const omega = 2 * Math.PI * f[i]!;
    const cubic = (omega / top) ** 3;
    const [c, d] = [values[0]!, values[1]!];
    const size = Math.exp(-2 * (gc.re[i]! * c + gd.re[i]! * d));
    const angle = -2 * (gc.im[i]! * c + gd.im[i]! * d) - omega * values[2]! - cubic * values[3]!;
    const pRe = size * Math.cos(angle);
    const pIm = size * Math.sin(angle);
    const eRe = echo.re[i]! * pRe - echo.im[i]! * pIm;
    const eIm = echo.re[i]! * pIm + echo.im[i]! * pRe;
    let tRe = 1;
    let tIm = 0;
    for (let k = 0; k < delays.length; k++) {
      const turn = -omega * delays[k]!;
      const [cos, sin] = [Math.cos(turn), Math.sin(turn)];
      const re = columns[4 + 2 * k]!;
      const im = columns[5 + 2 * k]!;
      re.re[i] = eRe * cos - eIm * sin;
      re.im[i] = eRe * sin + eIm * cos;
      im.re[i] = -re.im[i]!;
      im.im[i] = re.re[i]!;
      tRe += values[4 + 2 * k]! * cos - values[5 + 2 * k]! * sin;
      tIm += values[4 + 2 * k]! * sin + values[5 + 2 * k]! * cos;
    }
    const mRe = eRe * tRe - eIm * tIm;
    const mIm = eRe * tIm + eIm * tRe;
    columns[0]!.re[i] = -2 * (mRe * gc.re[i]! - mIm * gc.im[i]!);
    columns[0]!.im[i] = -2 * (mRe * gc.im[i]! + mIm * gc.re[i]!);
    columns[1]!.re[i] = -2 * (mRe * gd.re[i]! - mIm * gd.im[i]!);
    columns[1]!.im[i] = -2 * (mRe * gd.im[i]! + mIm * gd.re[i]!);
    columns[2]!.re[i] = omega * mIm;
    columns[2]!.im[i] = -omega * mRe;
    columns[3]!.re[i] = cubic * mIm;
    columns[3]!.im[i] = -cubic * mRe;
    let rRe = measured.re[i]! - mRe;
    let rIm = measured.im[i]! - mIm;
    near.forEach(({ value }, k) => {
      columns[first + k]!.re[i] = value.re[i]!;
      columns[first + k]!.im[i] = value.im[i]!;
      rRe -= values[first + k]! * value.re[i]!;
      rIm -= values[first + k]! * value.im[i]!;
    });
    residual.re[i] = rRe;
    residual.im[i] = rIm;
  }
}

/** Re Σ conj(a)·b. */
function dot(a: ComplexArray, b: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < a.re.length; i++) sum += a.re[i]! * b.re[i]! + a.im[i]! * b.im[i]!;
  return sum;
}
