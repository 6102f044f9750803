/** How the frequencies of a sweep are spaced. */

/**
 * Largest departure from an even grid, in steps, at which the grid still counts as even. At the far end of the
 * unambiguous range it turns the phase by 2π times this (0.4°); analyzers that round frequencies to 1 Hz stay below.
 */
export const EVEN_TOLERANCE = 1e-3;

export type Spacing = {
  readonly even: boolean;
  /** Of an even grid the step, of an uneven one the smallest step, Hz. */
  readonly stepHz: number;
};

/** A part of a grid: indices `from` up to, not including, `to`. */
export type Stretch = { readonly from: number; readonly to: number };

/**
 * Spacing of a whole grid.
 *
 * @param frequencyHz Rising, length n ≥ 2.
 */
export function spacingOf(frequencyHz: Float64Array): Spacing {
  const n = frequencyHz.length;
  const first = frequencyHz[0]!;
  const meanStep = (frequencyHz[n - 1]! - first) / (n - 1);
  let smallest = Number.POSITIVE_INFINITY;
  let even = true;
  for (let i = 1; i < n; i++) {
    smallest = Math.min(smallest, frequencyHz[i]! - frequencyHz[i - 1]!);
    if (Math.abs(frequencyHz[i]! - first - i * meanStep) > EVEN_TOLERANCE * meanStep) even = false;
  }
  return { even, stepHz: even ? meanStep : smallest };
}

/** Share of a step by which steps of one stretch may differ: rounded frequencies stay one stretch, segments part. */
const STEP_TOLERANCE = 0.01;

/**
 * The longest part whose steps are all like its first; at least two points.
 *
 * @param frequencyHz Rising, length n ≥ 2.
 */
export function longestEvenStretch(frequencyHz: Float64Array): Stretch {
  let best: Stretch = { from: 0, to: 2 };
  let from = 0;
  for (let to = 2; to <= frequencyHz.length; to++) {
    const wanted = frequencyHz[from + 1]! - frequencyHz[from]!;
    const step = frequencyHz[to - 1]! - frequencyHz[to - 2]!;
    if (Math.abs(step - wanted) > STEP_TOLERANCE * wanted) from = to - 2;
    if (to - from > best.to - best.from) best = { from, to };
  }
  return best;
}
