/** The noise of a sweep, estimated from the sweep itself. */
import type { ComplexArray } from '../numerics/complex.ts';
import { createFft, nextPowerOfTwo } from '../numerics/fft.ts';
import { median } from '../numerics/statistics.ts';
import { createWindow } from '../numerics/window.ts';
import { longestEvenStretch } from './spacing.ts';

/** What a level of nothing at all is given as, dB. */
export const LOWEST_LEVEL_DB = -300;

/** Fewest evenly spaced points for which a transform has an empty part worth looking at. */
const FEWEST_FOR_TRANSFORM = 64;

/** Parts of the transform among which the quietest is sought. */
const BLOCKS = 8;

/** Side lobes some −125 dB near an echo and falling: a full reflection does not pass for noise far from it. */
const QUIET_WINDOW = { kind: 'kaiser', beta: 16 } as const;

/** Median of |x|² over its mean, for complex normal noise: ln 2. */
const MEDIAN_OF_EXPONENTIAL = Math.LN2;

/**
 * Noise of one point, complex RMS, dB against a full reflection.
 *
 * An evenly spaced sweep (or the longest even part of it) is transformed with a window of very low side lobes; echoes
 * crowd into the delays of the line, noise lies everywhere, so the quietest eighth of all delays holds noise alone if
 * anything does. Where echoes fill the whole unambiguous range the figure is an upper bound. An uneven sweep is
 * judged by how far each point lies from the cubic through its neighbours: an upper bound too, close where the
 * sweep's phase turns little between points.
 *
 * @param frequencyHz Rising, length n ≥ 2.
 * @returns dB, −300 at the least; below 5 points, where there is nothing to estimate from, −300.
 */
export function noiseFloorDb(frequencyHz: Float64Array, gamma: ComplexArray): number {
  const { from, to } = longestEvenStretch(frequencyHz);
  const power =
    to - from >= FEWEST_FOR_TRANSFORM
      ? quietestPower(gamma.re.subarray(from, to), gamma.im.subarray(from, to))
      : misfitPower(frequencyHz, gamma);
  return power > 0 ? Math.max(LOWEST_LEVEL_DB, 10 * Math.log10(power)) : LOWEST_LEVEL_DB;
}

/** Noise power of a point from the quietest block of the windowed transform. */
function quietestPower(re: Float64Array, im: Float64Array): number {
  const n = re.length;
  const { values, enbwBins } = createWindow(QUIET_WINDOW, n);
  const size = nextPowerOfTwo(n);
  const input = new Float64Array(2 * size);
  const output = new Float64Array(2 * size);
  let windowEnergy = 0;
  for (let i = 0; i < n; i++) {
    input[2 * i] = values[i]! * re[i]!;
    input[2 * i + 1] = values[i]! * im[i]!;
    windowEnergy += values[i]! * values[i]!;
  }
  createFft(size).inverse(input, output);
  const blockLength = Math.floor(size / BLOCKS);
  const power = new Float64Array(blockLength);
  let quietest = Number.POSITIVE_INFINITY;
  for (let block = 0; block < BLOCKS; block++) {
    for (let i = 0; i < blockLength; i++) {
      const at = 2 * (block * blockLength + i);
      power[i] = output[at]! * output[at]! + output[at + 1]! * output[at + 1]!;
    }
    quietest = Math.min(quietest, median(power));
  }
  // The inverse transform divides by its size; undo that, then refer the bin's noise to one point.
  const perPoint = (quietest * size * size) / (MEDIAN_OF_EXPONENTIAL * windowEnergy);
  return perPoint / expectedLeast(n / BLOCKS / enbwBins);
}

/**
 * Mean of the least of 8 block medians over their own mean, when all blocks hold the same noise.
 *
 * @param independent Independent values in a block.
 * @source The median of m exponential values scatters by 1/(ln 2·√m) of itself; the least of 8 normal values lies
 *   1.4236 standard deviations below the mean (Harter, Biometrika 48, 1961; from memory).
 */
function expectedLeast(independent: number): number {
  return Math.max(0.3, 1 - 1.4236 / (Math.LN2 * Math.sqrt(independent)));
}

/** Noise power of a point from the misfit of each point to the cubic through two neighbours on each side. */
function misfitPower(frequencyHz: Float64Array, gamma: ComplexArray): number {
  const n = frequencyHz.length;
  if (n < 5) return 0;
  const power = new Float64Array(n - 4);
  const weight = [0, 0, 0, 0];
  for (let i = 2; i < n - 2; i++) {
    const neighbours = [i - 2, i - 1, i + 1, i + 2];
    lagrangeWeights(
      neighbours.map((k) => frequencyHz[k]!),
      frequencyHz[i]!,
      weight,
    );
    let re = gamma.re[i]!;
    let im = gamma.im[i]!;
    let gain = 1;
    for (const [j, k] of neighbours.entries()) {
      re -= weight[j]! * gamma.re[k]!;
      im -= weight[j]! * gamma.im[k]!;
      gain += weight[j]! * weight[j]!;
    }
    power[i - 2] = (re * re + im * im) / gain;
  }
  return median(power) / MEDIAN_OF_EXPONENTIAL;
}

/** Weights of the values at `at` in the cubic through them, read at `x`. @source Lagrange's interpolation formula. */
function lagrangeWeights(at: readonly number[], x: number, weight: number[]): void {
  for (let j = 0; j < at.length; j++) {
    let product = 1;
    for (let k = 0; k < at.length; k++) if (k !== j) product *= (x - at[k]!) / (at[j]! - at[k]!);
    weight[j] = product;
  }
}
