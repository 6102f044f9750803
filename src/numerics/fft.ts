/** Power-of-two Fourier transform as a plan with buffers owned by the caller. */
import FFT from 'fft.js';

/** A transform of one size; complex values interleaved (re, im, re, im …), arrays of length 2·size. */
export type FftPlan = {
  readonly size: number;
  /** output[k] = Σ input[n]·e^{−2πi·n·k/size}; input and output must differ. */
  forward(input: Float64Array, output: Float64Array): void;
  /** output[n] = (1/size)·Σ input[k]·e^{+2πi·n·k/size}; input and output must differ. */
  inverse(input: Float64Array, output: Float64Array): void;
};

/**
 * Plans a transform; build once, run often.
 *
 * @param size A power of two, ≥ 2.
 * @throws RangeError When the size is not a power of two ≥ 2.
 */
export function createFft(size: number): FftPlan {
  if (!(Number.isInteger(size) && size >= 2 && size <= 2 ** 26 && (size & (size - 1)) === 0))
    throw new RangeError(`a transform's size must be a power of two from 2 up, not ${size}`);
  const engine = new FFT(size);
  return {
    size,
    forward: (input, output) => engine.transform(output, input),
    inverse: (input, output) => engine.inverseTransform(output, input),
  };
}

/** Smallest power of two that is ≥ n and ≥ 2. */
export function nextPowerOfTwo(n: number): number {
  let size = 2;
  while (size < n) size *= 2;
  return size;
}
