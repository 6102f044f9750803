/** What the reading of an open or shorted end depends on: the terms of its fit, with their derivatives. */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { delayedEcho, delayGrid, mirrored, quarterTurn } from './delay-grid.ts';

/** The run to the end; arrays of length n over the sweep's frequencies, one way unless said. */
export type EndPath = {
  readonly frequencyHz: Float64Array;
  /** What was measured at the port. */
  readonly measured: ComplexArray;
  /** Γ of the end itself: 1 for an open, −1 for a short. */
  readonly sign: 1 | -1;
  /** Loss and phase of the run as described: Np and rad. */
  readonly path: ComplexArray;
  /** What a relative change of the conductor's and of the dielectric's loss adds to it. */
  readonly perConductor: ComplexArray;
  readonly perDielectric: ComplexArray;
  /** What lossless discontinuities on the way take off, both ways together, Np. */
  readonly passedNp: Float64Array;
  /** What resistances and leaks on the way take off, one way, Np. */
  readonly faultsNp: Float64Array;
  /** What reflects before the end: the path to each and its |Γ|. */
  readonly neighbours: readonly { readonly path: ComplexArray; readonly gamma: number }[];
};

export type EndTerms = {
  readonly count: number;
  readonly points: number;
  /** 1/σ² of each term around 0; those of the losses are set by their own prior. */
  readonly precision: Float64Array;
  /** Values from which a few steps reach the answer. */
  start(): Float64Array;
  /** Writes the derivatives of the reading by each term, and what is left over of the measured. */
  linearise(values: Float64Array, columns: readonly ComplexArray[], residual: ComplexArray): void;
};

/**
 * Conductor and dielectric loss come first, then the share of the faults' loss that is real, then laws of phase: the
 * delay, what grows as f³, as √f and as f·ln f, and the run's own.
 */
export const FIXED_TERMS = { faults: 2, delay: 3, phases: 4, count: 8 } as const;

/** Round-trip delays within which the residue's reflections lie, s. Common practice: test lead and adaptor. */
const RESIDUE_SPAN_S = 1.2e-9;

/** The residue's delays stand so much closer than the band tells apart: what lies between two is then theirs to show. */
const FINER = 2;

/** RMS of the tracking residue: −44 dB. Common practice for a correction made in the field. */
const TRACKING = 0.0065;

/** How far the end may stand off its place, as a round-trip delay, s: tape, fringe and what the fit left in doubt. */
const DELAY_SIGMA_S = 0.3e-9;
/**
 * Phase that the laws beside the delay add at the top of the band, rad: the last connector, the sample's dispersion, a
 * guide's width. Wide, so that only the size of the echo tells the loss: small errors of phase would tell it wrong.
 */
const PHASE_SIGMA_RAD = 0.3;
/** How far the loss of faults on the way is trusted, as a share of it: a joint's halves can pass for a resistance. */
const FAULTS_SIGMA = 0.5;

/** Neighbours within this many resolutions mix with the end; those farther off average out over the band. */
const NEAR_RESOLUTIONS = 25;
/** Two halves of a connector, and what its place is off by, as round-trip delays either way, s. */
const NEIGHBOUR_SPAN_S = 0.2e-9;

/** A term that adds to the reading whatever the others are. */
type Addition = { readonly value: ComplexArray; readonly precision: number };

/** Terms of a reading. */
export function createEndTerms(given: EndPath): EndTerms {
  const { frequencyHz: f, path, perConductor: gc, perDielectric: gd } = given;
  const n = f.length;
  const bandHz = f[n - 1]! - f[0]!;
  const echo = describedEcho(given);
  const residue = delayGrid(0, RESIDUE_SPAN_S, FINER * bandHz).map((delayS) => phasor(f, delayS));
  const additions = neighbourTerms(given, bandHz);
  const firstAddition = FIXED_TERMS.count + 2 * residue.length;
  const count = firstAddition + additions.length;
  const phases = [
    f.map((hz) => (hz / f[n - 1]!) ** 3),
    f.map((hz) => Math.sqrt(hz / f[n - 1]!)),
    f.map((hz) => (hz / f[n - 1]!) * Math.log(hz / f[n - 1]!)),
    f.map((_, i) => path.im[i]! / path.im[n - 1]!),
  ];
  const { faultsNp } = given;

  const precision = new Float64Array(count);
  precision[FIXED_TERMS.delay] = 1 / DELAY_SIGMA_S ** 2;
  precision[FIXED_TERMS.faults] = 1 / FAULTS_SIGMA ** 2;
  precision.fill(1 / PHASE_SIGMA_RAD ** 2, FIXED_TERMS.phases, FIXED_TERMS.count);
  precision.fill((2 * residue.length) / TRACKING ** 2, FIXED_TERMS.count, firstAddition);
  additions.forEach((addition, k) => {
    precision[firstAddition + k] = addition.precision;
  });

  return {
    count,
    points: n,
    precision,
    start() {
      const values = new Float64Array(count);
      values[FIXED_TERMS.delay] = startingDelayS(given, echo);
      return values;
    },
    linearise(values, columns, residual) {
      const c = values[0]!;
      const d = values[1]!;
      const faults = values[FIXED_TERMS.faults]!;
      const delayS = values[FIXED_TERMS.delay]!;
      for (let i = 0; i < n; i++) {
        const omega = 2 * Math.PI * f[i]!;
        const size = Math.exp(-2 * (gc.re[i]! * c + gd.re[i]! * d + faultsNp[i]! * faults));
        let angle = -2 * (gc.im[i]! * c + gd.im[i]! * d) - omega * delayS;
        for (let k = 0; k < phases.length; k++) angle -= phases[k]![i]! * values[FIXED_TERMS.phases + k]!;
        const pRe = size * Math.cos(angle);
        const pIm = size * Math.sin(angle);
        const eRe = echo.re[i]! * pRe - echo.im[i]! * pIm;
        const eIm = echo.re[i]! * pIm + echo.im[i]! * pRe;
        let tRe = 1;
        let tIm = 0;
        for (let k = 0; k < residue.length; k++) {
          const cos = residue[k]!.re[i]!;
          const sin = residue[k]!.im[i]!;
          const at = FIXED_TERMS.count + 2 * k;
          const re = eRe * cos - eIm * sin;
          const im = eRe * sin + eIm * cos;
          put(columns[at]!, i, re, im);
          put(columns[at + 1]!, i, -im, re);
          tRe += values[at]! * cos - values[at + 1]! * sin;
          tIm += values[at]! * sin + values[at + 1]! * cos;
        }
        const mRe = eRe * tRe - eIm * tIm;
        const mIm = eRe * tIm + eIm * tRe;
        put(
          columns[0]!,
          i,
          -2 * (mRe * gc.re[i]! - mIm * gc.im[i]!),
          -2 * (mRe * gc.im[i]! + mIm * gc.re[i]!),
        );
        put(
          columns[1]!,
          i,
          -2 * (mRe * gd.re[i]! - mIm * gd.im[i]!),
          -2 * (mRe * gd.im[i]! + mIm * gd.re[i]!),
        );
        put(columns[FIXED_TERMS.delay]!, i, omega * mIm, -omega * mRe);
        put(columns[FIXED_TERMS.faults]!, i, -2 * faultsNp[i]! * mRe, -2 * faultsNp[i]! * mIm);
        for (let k = 0; k < phases.length; k++) {
          const law = phases[k]![i]!;
          put(columns[FIXED_TERMS.phases + k]!, i, law * mIm, -law * mRe);
        }
        let rRe = given.measured.re[i]! - mRe;
        let rIm = given.measured.im[i]! - mIm;
        for (let k = 0; k < additions.length; k++) {
          const { value } = additions[k]!;
          put(columns[firstAddition + k]!, i, value.re[i]!, value.im[i]!);
          rRe -= values[firstAddition + k]! * value.re[i]!;
          rIm -= values[firstAddition + k]! * value.im[i]!;
        }
        put(residual, i, rRe, rIm);
      }
    },
  };
}

function put(to: ComplexArray, i: number, re: number, im: number): void {
  to.re[i] = re;
  to.im[i] = im;
}

/** What the end would send back were the run as described: ±e^{−2γℓ} less what is lost on the way. */
function describedEcho({ path, sign, passedNp, faultsNp }: EndPath): ComplexArray {
  const echo = complexZeros(passedNp.length);
  for (let i = 0; i < passedNp.length; i++) {
    const size = sign * Math.exp(-2 * (path.re[i]! + faultsNp[i]!) - passedNp[i]!);
    put(echo, i, size * Math.cos(2 * path.im[i]!), -size * Math.sin(2 * path.im[i]!));
  }
  return echo;
}

function phasor(frequencyHz: Float64Array, delayS: number): ComplexArray {
  const angles = frequencyHz.map((f) => -2 * Math.PI * f * delayS);
  return { re: angles.map(Math.cos), im: angles.map(Math.sin) };
}

/** Where the end stands, as a round-trip delay beyond its place: the strongest of a fine grid. */
function startingDelayS({ frequencyHz: f, measured }: EndPath, echo: ComplexArray): number {
  const stepS = 1 / (16 * f[f.length - 1]!);
  let best = 0;
  let strongest = Number.NEGATIVE_INFINITY;
  const most = Math.ceil((3 * DELAY_SIGMA_S) / stepS);
  // The product of each point is turned on by one step of delay at a time.
  const product = f.map((_, i) => echo.re[i]! * measured.re[i]! + echo.im[i]! * measured.im[i]!);
  const across = f.map((_, i) => echo.re[i]! * measured.im[i]! - echo.im[i]! * measured.re[i]!);
  for (let k = -most; k <= most; k++) {
    let sum = 0;
    for (let i = 0; i < f.length; i++) {
      const angle = 2 * Math.PI * f[i]! * k * stepS;
      // Re measured·conj(echo·e^{−jωτ})
      sum += product[i]! * Math.cos(angle) - across[i]! * Math.sin(angle);
    }
    if (sum > strongest) {
      strongest = sum;
      best = k * stepS;
    }
  }
  return best;
}

/** What stands within a few resolutions before the end, and the bounces between it and the end, seen behind it. */
function neighbourTerms({ frequencyHz: f, path, neighbours }: EndPath, bandHz: number): Addition[] {
  const last = f.length - 1;
  return neighbours.flatMap(({ path: own, gamma }): Addition[] => {
    const resolutions = Math.abs(path.im[last]! - own.im[last]! - path.im[0]! + own.im[0]!) / Math.PI;
    if (resolutions > NEAR_RESOLUTIONS) return [];
    const shifts = delayGrid(-NEIGHBOUR_SPAN_S, NEIGHBOUR_SPAN_S, bandHz);
    const precision = (2 * shifts.length) / gamma ** 2;
    return shifts.flatMap((shiftS) =>
      [own, mirrored(own, path)].flatMap((to) => {
        const value = delayedEcho(f, to, shiftS);
        return [
          { value, precision },
          { value: quarterTurn(value), precision },
        ];
      }),
    );
  });
}
