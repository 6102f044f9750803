/** Sums of rotating terms on any even grid of angles (Bluestein), planned once and run often. */
import { type ComplexArray, complexZeros } from './complex.ts';
import { createFft, nextPowerOfTwo } from './fft.ts';

/** What to plan: n terms in, m sums out, over angles start, start + step, … */
export type ChirpZOptions = {
  /** Number of inputs, ≥ 1. */
  readonly n: number;
  /** Number of outputs, ≥ 1. */
  readonly m: number;
  /** Angle per input at output 0, radians; default 0. */
  readonly startRad?: number;
  /** How much that angle grows from output to output, radians. */
  readonly stepRad: number;
};

/** A planned transform; its buffers are reused, so one plan serves one caller at a time. */
export type ChirpZPlan = {
  readonly n: number;
  readonly m: number;
  /**
   * output[j] = Σ_k input[k]·e^{+i·k·(startRad + j·stepRad)}.
   *
   * @param input Length n.
   * @param output Length ≥ m, from index `at` on; may be the input itself. A new one when left out.
   * @throws RangeError When a length does not fit.
   */
  transform(input: ComplexArray, output?: ComplexArray, at?: number): ComplexArray;
};

/**
 * Plans a chirp-z transform on the unit circle: n inputs, m evenly spaced angles.
 *
 * The cross term k·j is written (k² + j² − (j − k)²)/2, which turns the sum into a convolution with a chirp, done
 * by two power-of-two transforms of length ≥ n + m − 1. Relative error about 1e-13 for n + m up to 10⁵, growing
 * slowly with the square of the lengths beyond.
 *
 * @throws RangeError When n or m is not a whole number ≥ 1 or an angle is not finite.
 * @source L. I. Bluestein, A linear filtering approach to the computation of the discrete Fourier transform, IEEE
 *   Trans. Audio Electroacoust. AU-18(4), 1970; L. R. Rabiner, R. W. Schafer, C. M. Rader, The chirp z-transform
 *   algorithm, same journal AU-17(2), 1969.
 */
export function createChirpZ(options: ChirpZOptions): ChirpZPlan {
  const { n, m, startRad = 0, stepRad } = options;
  if (!(Number.isInteger(n) && n >= 1 && Number.isInteger(m) && m >= 1))
    throw new RangeError(`a chirp-z needs whole n, m from 1 up, not ${n}, ${m}`);
  if (!(Number.isFinite(startRad) && Number.isFinite(stepRad)))
    throw new RangeError(`a chirp-z needs finite angles, not ${startRad}, ${stepRad}`);
  const size = nextPowerOfTwo(n + m - 1);
  const fft = createFft(size);
  const chirp = halfSquareChirp(Math.max(n, m), stepRad);
  const entry = entryFactors(n, startRad, chirp);
  const kernel = kernelSpectrum();
  const work = new Float64Array(2 * size);
  const spectrum = new Float64Array(2 * size);

  /** Spectrum of e^{−i·stepRad·l²/2}, l = −(n−1) … m−1, wrapped; the inverse transform's 1/size included. */
  function kernelSpectrum(): Float64Array {
    const wrapped = new Float64Array(2 * size);
    const put = (slot: number, l: number) => {
      wrapped[2 * slot] = chirp.re[l]! / size;
      wrapped[2 * slot + 1] = -chirp.im[l]! / size;
    };
    for (let l = 0; l < m; l++) put(l, l);
    for (let l = 1; l < n; l++) put(size - l, l);
    const transformed = new Float64Array(2 * size);
    fft.forward(wrapped, transformed);
    return transformed;
  }

  function transform(input: ComplexArray, output = complexZeros(m), at = 0): ComplexArray {
    if (input.re.length !== n || output.re.length < at + m)
      throw new RangeError(`lengths ${input.re.length}, ${output.re.length} do not fit ${n}, ${at} + ${m}`);
    for (let k = 0; k < n; k++) {
      const re = input.re[k]!;
      const im = input.im[k]!;
      const c = entry.re[k]!;
      const s = entry.im[k]!;
      work[2 * k] = re * c - im * s;
      work[2 * k + 1] = re * s + im * c;
    }
    work.fill(0, 2 * n);
    fft.forward(work, spectrum);
    for (let i = 0; i < 2 * size; i += 2) {
      const re = spectrum[i]!;
      const im = spectrum[i + 1]!;
      const c = kernel[i]!;
      const s = kernel[i + 1]!;
      work[i] = re * c - im * s;
      work[i + 1] = re * s + im * c;
    }
    // A second forward transform gives the inverse in reverse order: cheaper than scaling and conjugating.
    fft.forward(work, spectrum);
    for (let j = 0; j < m; j++) {
      const slot = j === 0 ? 0 : 2 * (size - j);
      const re = spectrum[slot]!;
      const im = spectrum[slot + 1]!;
      const c = chirp.re[j]!;
      const s = chirp.im[j]!;
      output.re[at + j] = re * c - im * s;
      output.im[at + j] = re * s + im * c;
    }
    return output;
  }

  return { n, m, transform };
}

/** e^{i·stepRad·l²/2} for l = 0 … length−1; whole turns are taken off first so that large l keep their digits. */
function halfSquareChirp(length: number, stepRad: number): ComplexArray {
  const chirp = complexZeros(length);
  const halfTurns = stepRad / (4 * Math.PI);
  for (let l = 0; l < length; l++) {
    const turns = halfTurns * (l * l);
    const angle = 2 * Math.PI * (turns - Math.round(turns));
    chirp.re[l] = Math.cos(angle);
    chirp.im[l] = Math.sin(angle);
  }
  return chirp;
}

/** e^{i·k·startRad} times the chirp, k = 0 … n−1. */
function entryFactors(n: number, startRad: number, chirp: ComplexArray): ComplexArray {
  const factors = complexZeros(n);
  const startTurns = startRad / (2 * Math.PI);
  for (let k = 0; k < n; k++) {
    const turns = startTurns * k;
    const angle = 2 * Math.PI * (turns - Math.round(turns));
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    factors.re[k] = c * chirp.re[k]! - s * chirp.im[k]!;
    factors.im[k] = c * chirp.im[k]! + s * chirp.re[k]!;
  }
  return factors;
}
