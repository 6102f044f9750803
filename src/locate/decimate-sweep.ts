/**
 * A sweep with far more points than its line needs, thinned without loss: what comes back from the line is kept, with all
 * the points' noise averaged, and only what would come from far beyond the line is let go.
 */
import { besselI0 } from '../numerics/bessel.ts';
import { complexZeros } from '../numerics/complex.ts';
import { spacingOf } from '../sweep/spacing.ts';
import type { Sweep } from '../sweep/sweep.ts';

/** Sweeps of no more points than this are used as they are. */
const MANY_POINTS = 4200;

/** Points that are kept at least. */
const LEAST_POINTS = 2500;

/**
 * The thinned sweep's unambiguous delay over the delay of the line: everything up to the end's second trip is kept, with
 * room for the filter's slope.
 */
const ROOM = 3;

/**
 * Half length of the filter in thinned points, and its Kaiser window: ripple and stop band under −80 dB, flat up to 0.4 of
 * the thinned sweep's delays on each side.
 */
const HALF_LENGTH = 12;
const KAISER_BETA = 8;

/**
 * Thins an even sweep by a whole factor, or gives it back as it is.
 *
 * The spectrum of delays is shifted to its middle, low-pass filtered along frequency and every M-th point is taken; a few
 * points at both ends, where the filter would reach outside, are lost.
 *
 * @param roundTripS Delay of the end, there and back.
 * @source Decimation by a windowed-sinc filter: Oppenheim, Schafer, Discrete-Time Signal Processing, 3rd ed., chapters 4
 *   and 7 (from memory).
 */
export function decimateSweep(sweep: Sweep, roundTripS: number): Sweep {
  const { frequencyHz, gamma } = sweep;
  const n = frequencyHz.length;
  const { even, stepHz } = spacingOf(frequencyHz);
  const factor = Math.min(Math.floor(1 / (stepHz * roundTripS * ROOM)), Math.floor(n / LEAST_POINTS));
  if (!even || n <= MANY_POINTS || !(factor >= 2)) return sweep;
  const taps = lowPass(factor);
  const half = (taps.length - 1) / 2;
  const count = Math.floor((n - 1 - 2 * half) / factor) + 1;
  // Delays run from 0 to the end's second trip: their middle goes to 0.
  const middleS = roundTripS;
  const thinHz = new Float64Array(count);
  const thin = complexZeros(count);
  for (let k = 0; k < count; k++) {
    const centre = half + k * factor;
    let re = 0;
    let im = 0;
    for (let t = -half; t <= half; t++) {
      const angle = 2 * Math.PI * stepHz * t * middleS;
      const weight = taps[t + half]!;
      const cos = Math.cos(angle);
      const sin = Math.sin(angle);
      const gRe = gamma.re[centre + t]!;
      const gIm = gamma.im[centre + t]!;
      re += weight * (gRe * cos - gIm * sin);
      im += weight * (gRe * sin + gIm * cos);
    }
    thinHz[k] = frequencyHz[centre]!;
    thin.re[k] = re;
    thin.im[k] = im;
  }
  return { ...sweep, frequencyHz: thinHz, gamma: thin };
}

/** Windowed sinc with its edge at the thinned Nyquist delay; sums to 1. */
function lowPass(factor: number): Float64Array {
  const half = HALF_LENGTH * factor;
  const taps = new Float64Array(2 * half + 1);
  let sum = 0;
  for (let t = -half; t <= half; t++) {
    const x = t / factor;
    const sinc = x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
    const u = t / (half + 1);
    taps[t + half] = (sinc * besselI0(KAISER_BETA * Math.sqrt(1 - u * u))) / besselI0(KAISER_BETA);
    sum += taps[t + half]!;
  }
  for (let k = 0; k < taps.length; k++) taps[k] = taps[k]! / sum;
  return taps;
}
