/** What a window does to a lone line in the transform: width of its main lobe, height of its side lobes. */
import { complexZeros } from './complex.ts';
import { createFft, nextPowerOfTwo } from './fft.ts';

/** Figures of a window, in bins of a transform as long as the window. */
export type WindowFigures = {
  readonly width3DbBins: number;
  readonly width6DbBins: number;
  readonly sideLobeDb: number;
};

/**
 * Measures a window's main lobe and side lobes.
 *
 * Widths come from bisection on the direct sum, side lobes from a transform padded sixteenfold and
 * a search around its highest sample.
 *
 * @param values The window, length n ≥ 1.
 * @source Definitions of Harris 1978, section IV.
 */
export function windowFigures(values: Float64Array): WindowFigures {
  return {
    width3DbBins: 2 * halfWidth(values, Math.SQRT1_2),
    width6DbBins: 2 * halfWidth(values, 0.5),
    sideLobeDb: highestSideLobeDb(values),
  };
}

/** Bins from the middle of the main lobe to where it has fallen to `share` of its height. */
function halfWidth(values: Float64Array, share: number): number {
  const target = share * spectrumSize(values, 0);
  let inside = 0;
  let outside = 0.25;
  while (outside < values.length && spectrumSize(values, outside) > target) {
    inside = outside;
    outside += 0.25;
  }
  for (let step = 0; step < 40; step++) {
    const middle = (inside + outside) / 2;
    if (spectrumSize(values, middle) > target) inside = middle;
    else outside = middle;
  }
  return (inside + outside) / 2;
}

/** |Σ w·e^{−2πi·bins·k/n}|, the rotation carried along by recurrence. */
function spectrumSize(values: Float64Array, bins: number): number {
  const angle = (2 * Math.PI * bins) / values.length;
  const stepRe = Math.cos(angle);
  const stepIm = Math.sin(angle);
  let turnRe = 1;
  let turnIm = 0;
  let sumRe = 0;
  let sumIm = 0;
  for (const value of values) {
    sumRe += value * turnRe;
    sumIm += value * turnIm;
    const next = turnRe * stepRe - turnIm * stepIm;
    turnIm = turnRe * stepIm + turnIm * stepRe;
    turnRe = next;
  }
  return Math.hypot(sumRe, sumIm);
}

function highestSideLobeDb(values: Float64Array): number {
  const size = nextPowerOfTwo(16 * values.length);
  const input = new Float64Array(2 * size);
  for (let k = 0; k < values.length; k++) input[2 * k] = values[k]!;
  const output = new Float64Array(2 * size);
  createFft(size).forward(input, output);
  const spectrum = complexZeros(size / 2).re;
  for (let i = 0; i < spectrum.length; i++) spectrum[i] = Math.hypot(output[2 * i]!, output[2 * i + 1]!);

  let firstMinimum = 1;
  while (firstMinimum < spectrum.length && spectrum[firstMinimum]! < spectrum[firstMinimum - 1]!)
    firstMinimum++;
  let highest = 0;
  let place = 0;
  for (let i = firstMinimum + 1; i < spectrum.length - 1; i++) {
    if (spectrum[i]! <= highest || spectrum[i]! < spectrum[i + 1]!) continue;
    highest = spectrum[i]!;
    place = i;
  }
  if (place === 0) return Number.NEGATIVE_INFINITY;
  const binsPerSample = values.length / size;
  const tip = highestBetween(values, (place - 1) * binsPerSample, (place + 1) * binsPerSample);
  return 20 * Math.log10(tip / spectrum[0]!);
}

/** Greatest spectrum size between two places with one top between them, by ternary search. */
function highestBetween(values: Float64Array, low: number, high: number): number {
  for (let step = 0; step < 25; step++) {
    const third = (high - low) / 3;
    if (spectrumSize(values, low + third) < spectrumSize(values, high - third)) low += third;
    else high -= third;
  }
  return spectrumSize(values, (low + high) / 2);
}
