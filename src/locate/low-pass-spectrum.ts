/** A sweep brought down to 0 Hz on even steps, against the line's own impedance: what a low-pass response is made of. */
import type { Line, Section } from '../line/line.ts';
import { type Medium, sectionMedium } from '../line/medium.ts';
import { groupDelaySPerM, type MediumRun } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { bandLimitedValues, type DelaySupport } from './band-limited.ts';
import { medianStepHz } from './grid-weights.ts';

export type LowPassSpectrum = {
  /** Even steps from 0 on, Hz. */
  readonly frequencyHz: Float64Array;
  /** Reflection against the reference's impedance, same length; real at 0. */
  readonly gamma: ComplexArray;
};

/** Share of the unambiguous delay that echoes may fill; the rest shows where the line has ended. */
export const FULLEST_SUPPORT = 0.9;

/** Where points are to spare, so much of the unambiguous delay is filled: twice the line fits, with its bounces. */
const SPARE_SUPPORT = 0.45;

/** The port's reflection begins before 0 by the width of the pulse, and the last one ends after its delay. */
const MARGIN_OF_DELAY = 0.02;
const MARGIN_OF_BAND = 2;

/**
 * Delays within which a line's echoes come back.
 *
 * @param roundTripS To the end and back, at its slowest.
 */
export function delaySupport(frequencyHz: Float64Array, roundTripS: number): DelaySupport {
  const marginS = MARGIN_OF_DELAY * roundTripS + MARGIN_OF_BAND / frequencyHz[frequencyHz.length - 1]!;
  return { fromS: -marginS, toS: roundTripS + marginS };
}

/**
 * Mean round-trip group delay to the end of the run over the sweep's band, s.
 *
 * @param frequencyHz Frequencies of the run, rising, length n ≥ 2.
 */
export function roundTripS(run: MediumRun, frequencyHz: Float64Array): number {
  const delays = groupDelaySPerM(run, frequencyHz);
  return 2 * delays.reduce((sum, delay, i) => sum + delay * (run.startM[i + 1]! - run.startM[i]!), 0);
}

/** Expected error at 0 Hz, against the sweep's RMS, up to which it counts as known. Chosen by the tests of profiles. */
const LARGEST_ERROR_AT_ZERO = 0.12;

/** Steps seen at the low end of a sweep, which is the end that counts here. */
const LOW_STEPS = 8;

/**
 * Whether a sweep starts low enough, and has steps fine enough, to say what lies at 0 Hz: f1 at the first or second
 * harmonic where the line fills the unambiguous distance, some steps more where it is shorter.
 *
 * @param frequencyHz Rising, above 0.
 * @param roundTripS To the end of the line and back.
 */
export function reachesZero(frequencyHz: Float64Array, roundTripS: number): boolean {
  const support = delaySupport(frequencyHz, roundTripS);
  const lowStepHz = medianStepHz(frequencyHz.subarray(0, Math.min(frequencyHz.length, LOW_STEPS)));
  if (lowStepHz * (support.toS - support.fromS) > FULLEST_SUPPORT) return false;
  const none = complexZeros(frequencyHz.length);
  return (
    bandLimitedValues(frequencyHz, none, support, new Float64Array(1)).error[0]! <= LARGEST_ERROR_AT_ZERO
  );
}

/** A grid counts as harmonic when its first frequency is this close to a whole number of steps. */
const HARMONIC_TOLERANCE = 1e-6;

/**
 * The sweep on even steps from 0, against the impedance of one medium.
 *
 * Measured points that stand on the steps are used as they are; the rest, 0 Hz among them, is filled in from the
 * neighbours by `bandLimitedValues`. Taking the reflection against the line's own complex impedance instead of the
 * port's keeps the slow rise that skin effect gives to every long line out of the profile.
 *
 * @param sweep Its point at 0 Hz, if any, is not used.
 * @param reference Section whose impedance counts as no reflection.
 * @param roundTripS To the end of the line and back.
 */
export function lowPassSpectrum(
  sweep: Sweep,
  line: Line,
  reference: Section,
  roundTripS: number,
): LowPassSpectrum {
  const first = sweep.frequencyHz[0]! > 0 ? 0 : 1;
  const measuredHz = sweep.frequencyHz.subarray(first);
  const medium = sectionMedium(reference, measuredHz, {
    temperatureC: line.temperatureC,
    z0Ohm: sweep.portOhm,
  });
  const seen = { re: sweep.gamma.re.subarray(first), im: sweep.gamma.im.subarray(first) };
  const own = againstMedium(seen, sweep.portOhm, medium);
  const support = delaySupport(measuredHz, roundTripS);
  const stepHz = harmonicStepHz(measuredHz, support.toS - support.fromS);
  const highestHz = measuredHz[measuredHz.length - 1]!;
  const count = Math.floor(highestHz / stepHz + HARMONIC_TOLERANCE);
  const wantedHz = Float64Array.from({ length: count + 1 }, (_, k) => Math.min(k * stepHz, highestHz));
  return { frequencyHz: wantedHz, gamma: onSteps(measuredHz, own, support, wantedHz, stepHz) };
}

/** The measured step, taken so many times as the line's delay leaves points to spare. */
function harmonicStepHz(frequencyHz: Float64Array, widthS: number): number {
  const measuredHz = medianStepHz(frequencyHz);
  return measuredHz * Math.max(1, Math.floor(SPARE_SUPPORT / (widthS * measuredHz)));
}

function onSteps(
  measuredHz: Float64Array,
  own: ComplexArray,
  support: DelaySupport,
  wantedHz: Float64Array,
  stepHz: number,
): ComplexArray {
  const value = complexZeros(wantedHz.length);
  const missing: number[] = [];
  let at = 0;
  wantedHz.forEach((wanted, k) => {
    while (at < measuredHz.length && measuredHz[at]! < wanted - HARMONIC_TOLERANCE * stepHz) at++;
    if (at < measuredHz.length && measuredHz[at]! <= wanted + HARMONIC_TOLERANCE * stepHz) {
      value.re[k] = own.re[at]!;
      value.im[k] = own.im[at]!;
    } else missing.push(k);
  });
  const filled = bandLimitedValues(
    measuredHz,
    own,
    support,
    Float64Array.from(missing, (k) => wantedHz[k]!),
  ).value;
  missing.forEach((k, i) => {
    value.re[k] = filled.re[i]!;
    value.im[k] = filled.im[i]!;
  });
  return value;
}

/** Γ seen from the port turned into Γ seen from a medium: (Γ − g)/(1 − g·Γ), g = (Zc − R)/(Zc + R). */
function againstMedium(gamma: ComplexArray, portOhm: number, medium: Medium): ComplexArray {
  const own = complexZeros(gamma.re.length);
  for (let k = 0; k < own.re.length; k++) {
    const [gRe, gIm] = quotient(
      medium.impedance.re[k]! - portOhm,
      medium.impedance.im[k]!,
      medium.impedance.re[k]! + portOhm,
      medium.impedance.im[k]!,
    );
    const re = gamma.re[k]!;
    const im = gamma.im[k]!;
    const [ownRe, ownIm] = quotient(re - gRe, im - gIm, 1 - (gRe * re - gIm * im), -(gRe * im + gIm * re));
    own.re[k] = ownRe;
    own.im[k] = ownIm;
  }
  return own;
}

function quotient(aRe: number, aIm: number, bRe: number, bIm: number): readonly [number, number] {
  const size = bRe * bRe + bIm * bIm;
  return [(aRe * bRe + aIm * bIm) / size, (aIm * bRe - aRe * bIm) / size];
}
