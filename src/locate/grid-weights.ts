/** How much of the band each point of a sweep stands for, and where in the band: even, uneven and repeated points. */
import { createWindow, type WindowSpec, windowSampler } from '../numerics/window.ts';

/** Shares of the band. */
export type GridShares = {
  /** Width of the band that each point stands for, Hz; repeated points share theirs. Length n. */
  readonly widthHz: Float64Array;
  /** Middle of that share as a place in the band, 0..1. Length n. */
  readonly place: Float64Array;
};

/** A cell never reaches further into a gap than this many of the steps before the gap: nothing is known of a gap. */
const LONGEST_REACH_STEPS = 4;

/**
 * Shares of a rising frequency grid: each point has the cell between the middles to its neighbours, the outermost
 * cells are symmetric. On an even grid all shares are equal and point k sits at (k + ½)/n.
 *
 * @param frequencyHz Rising, repeats allowed, length n ≥ 2 with at least two different values.
 * @throws RangeError When the frequencies fall or are all the same.
 * @source The trapezoid rule; cells cut at gaps by rule of this program.
 */
export function gridShares(frequencyHz: Float64Array): GridShares {
  const { distinct, count } = distinctValues(frequencyHz);
  const last = distinct.length - 1;
  if (last < 1) throw new RangeError('a sweep needs at least two different frequencies');
  const step = (i: number) => distinct[i + 1]! - distinct[i]!;
  const halfCell = (stepHere: number, stepBefore: number | null) =>
    stepBefore === null ? stepHere / 2 : Math.min(stepHere / 2, LONGEST_REACH_STEPS * stepBefore);
  const left = new Float64Array(distinct.length);
  const right = new Float64Array(distinct.length);
  for (let i = 0; i <= last; i++) {
    const before = i > 0 ? step(i - 1) : null;
    const after = i < last ? step(i) : null;
    left[i] = before === null ? after! / 2 : halfCell(before, after);
    right[i] = after === null ? before! / 2 : halfCell(after, before);
  }
  const low = distinct[0]! - left[0]!;
  const high = distinct[last]! + right[last]!;
  const widthHz = new Float64Array(frequencyHz.length);
  const place = new Float64Array(frequencyHz.length);
  let at = 0;
  for (let i = 0; i <= last; i++) {
    for (let c = 0; c < count[i]!; c++, at++) {
      widthHz[at] = (left[i]! + right[i]!) / count[i]!;
      place[at] = (distinct[i]! - low) / (high - low);
    }
  }
  return { widthHz, place };
}

/**
 * Window values times shares, summing to 1: what every trace weighs its points with.
 *
 * @param frequencyHz As for `gridShares`.
 */
export function traceWeights(frequencyHz: Float64Array, window: WindowSpec): Float64Array {
  const { widthHz, place } = gridShares(frequencyHz);
  const weights = isEven(widthHz) ? createWindow(window, widthHz.length).values : sampled(window, place);
  for (let k = 0; k < weights.length; k++) weights[k] = weights[k]! * widthHz[k]!;
  const sum = weights.reduce((total, weight) => total + weight, 0);
  return weights.map((weight) => weight / sum);
}

/** Shares may differ by this much for the grid to count as even: rounding of frequencies in files. */
const EVEN_TOLERANCE = 1e-3;

function isEven(widthHz: Float64Array): boolean {
  return widthHz.every((width) => Math.abs(width / widthHz[0]! - 1) < EVEN_TOLERANCE);
}

function sampled(window: WindowSpec, place: Float64Array): Float64Array {
  return place.map(windowSampler(window));
}

function distinctValues(frequencyHz: Float64Array): {
  readonly distinct: number[];
  readonly count: number[];
} {
  const distinct: number[] = [];
  const count: number[] = [];
  for (const f of frequencyHz) {
    const previous = distinct[distinct.length - 1];
    if (previous !== undefined && !(f >= previous))
      throw new RangeError(`frequencies must rise: ${previous} then ${f}`);
    if (f === previous) count[count.length - 1]!++;
    else {
      distinct.push(f);
      count.push(1);
    }
  }
  return { distinct, count };
}

/** Middle step between different frequencies, Hz. */
export function medianStepHz(frequencyHz: Float64Array): number {
  const { distinct } = distinctValues(frequencyHz);
  const steps = distinct.slice(1).map((f, i) => f - distinct[i]!);
  if (steps.length === 0) throw new RangeError('a sweep needs at least two different frequencies');
  steps.sort((a, b) => a - b);
  return steps[steps.length >> 1]!;
}
