/** Size of reflection against distance, as measured (apparent) or with the line's own loss undone (corrected). */
import { groupDelaySPerM, type MediumRun, pathTo, sectionAt } from '../line/medium-run.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import type { WindowSpec } from '../numerics/window.ts';
import { traceWeights } from './grid-weights.ts';
import type { DistanceGrid, LossHandling } from './path-factor.ts';
import { createRunTransform } from './run-transform.ts';

/** Size of reflection against distance: one complex value per distance. */
export type DistanceTrace = {
  /** Evenly spaced distances from the reference plane, m. */
  readonly distanceM: Float64Array;
  /** Complex trace; |value| = 1 is a full reflection. */
  readonly value: ComplexArray;
  /** True when loss and dispersion of the described sections are undone. */
  readonly corrected: boolean;
};

export type TraceOptions = {
  /** Of the sweep: rising, even or not, repeats allowed; length n ≥ 2. */
  readonly frequencyHz: Float64Array;
  /** Media along the line at these frequencies. */
  readonly run: MediumRun;
  readonly window: WindowSpec;
  /** First and last distance, m; a little below 0 and beyond the end are allowed. */
  readonly fromM: number;
  readonly toM: number;
  /** Number of distances, ≥ 2. */
  readonly points: number;
  /** 'fast' (default) or the plain sum, against which the fast way is tested. */
  readonly method?: 'fast' | 'exact';
};

/** A planned trace: one sweep after another over the same frequencies, line, window and distances. */
export type TracePlan = {
  readonly distanceM: Float64Array;
  /** @param gamma Reflection at the plan's frequencies, length n. @throws RangeError When its length differs. */
  trace(gamma: ComplexArray): DistanceTrace;
};

/**
 * Plans the trace of a sweep as measured: nothing undone but the window's gain, so that a full reflection at the
 * reference plane reads 0 dB and one at the end of a lossy line reads lower by its loss.
 *
 * Distance follows each section's mean group delay over the band. On an even grid this costs one chirp-z transform a
 * section, else a plain sum.
 *
 * @throws RangeError When there are fewer than 2 distances or frequencies, or `toM` is not beyond `fromM`.
 */
export function planApparentTrace(options: TraceOptions): TracePlan {
  const delays = groupDelaySPerM(options.run, options.frequencyHz);
  const straight: MediumRun = {
    startM: options.run.startM,
    alpha: options.run.alpha.map((alpha) => new Float64Array(alpha.length)),
    beta: Array.from(delays, (delay) => options.frequencyHz.map((f) => 2 * Math.PI * f * delay)),
  };
  return planTrace({ ...options, run: straight }, 'leave');
}

/**
 * Plans the trace with loss and dispersion of the described line undone: at each distance the reflection that a lone
 * discontinuity there would need to explain the sweep best, Â(d) = Σ W·e^{−2A+2jB}·Γ / Σ W·e^{−4A}.
 *
 * Least squares weighs each frequency by what the line lets through, so noise is not amplified where the line is
 * opaque to part of the band. `fast` agrees with the plain sum to better than −80 dB of the trace's highest value.
 *
 * @throws RangeError When there are fewer than 2 distances or frequencies, or `toM` is not beyond `fromM`.
 * @source Least squares for a lone reflector (a matched filter, normalised).
 */
export function planCorrectedTrace(options: TraceOptions): TracePlan {
  return planTrace(options, 'weigh');
}

function planTrace(options: TraceOptions, loss: LossHandling): TracePlan {
  const { frequencyHz, run, window, method = 'fast' } = options;
  const grid = gridOf(options);
  const weights = traceWeights(frequencyHz, window);
  const transform = createRunTransform({ run, grid, loss, method });
  const norm = loss === 'weigh' ? throughputAlong(run, weights, grid) : null;
  const weighted = complexZeros(weights.length);
  const distanceM = Float64Array.from({ length: grid.points }, (_, j) => grid.fromM + j * grid.stepM);
  return {
    distanceM,
    trace(gamma) {
      if (gamma.re.length !== weights.length)
        throw new RangeError(`the plan is for ${weights.length} points, the sweep has ${gamma.re.length}`);
      for (let k = 0; k < weights.length; k++) {
        weighted.re[k] = weights[k]! * gamma.re[k]!;
        weighted.im[k] = weights[k]! * gamma.im[k]!;
      }
      const value = complexZeros(grid.points);
      transform.transform(() => weighted, value);
      if (norm !== null) {
        for (let j = 0; j < grid.points; j++) {
          value.re[j] = value.re[j]! / (norm[j]! + FADING_THROUGHPUT);
          value.im[j] = value.im[j]! / (norm[j]! + FADING_THROUGHPUT);
        }
      }
      return { distanceM, value, corrected: norm !== null };
    },
  };
}

function gridOf(options: TraceOptions): DistanceGrid {
  const { fromM, toM, points } = options;
  if (!(Number.isInteger(points) && points >= 2 && toM > fromM && Number.isFinite(toM - fromM)))
    throw new RangeError(`no distances: from ${fromM} to ${toM}, ${points} points`);
  return { fromM, stepM: (toM - fromM) / (points - 1), points };
}

/** Knots at which the throughput is summed exactly within each section; in between its logarithm is a cubic. */
const KNOT_LOSS_NP = 0.5;
const FEWEST_KNOTS = 4;

/**
 * Where the way there and back takes 80 dB the corrected trace fades instead of showing amplified noise: no sweep sees
 * that deep. Added to the throughput Σ W·e^{−4A}; at 40 dB it takes 0.001 dB off.
 */
const FADING_THROUGHPUT = 1e-8;

/** Below this the logarithm of the throughput is cut off. */
const LEAST_THROUGHPUT = 1e-250;

/**
 * Σ W·e^{−4A(d)} at every distance of the grid.
 *
 * Its logarithm is smooth and nearly straight within a section, so it is summed exactly at a few knots, with its slope
 * −4·Σ W·α·e^{−4A}/Σ W·e^{−4A}, and read from the cubic between two knots.
 */
function throughputAlong(run: MediumRun, weights: Float64Array, grid: DistanceGrid): Float64Array {
  const throughput = new Float64Array(grid.points);
  let first = 0;
  while (first < grid.points) {
    const section = sectionAt(run, grid.fromM + first * grid.stepM);
    let last = first;
    while (last + 1 < grid.points && sectionAt(run, grid.fromM + (last + 1) * grid.stepM) === section) last++;
    fillThroughput(run, weights, grid, section, first, last, throughput);
    first = last + 1;
  }
  return throughput;
}

function fillThroughput(
  run: MediumRun,
  weights: Float64Array,
  grid: DistanceGrid,
  section: number,
  first: number,
  last: number,
  throughput: Float64Array,
): void {
  const alpha = run.alpha[section]!;
  const lengthM = (last - first) * grid.stepM;
  const spreadNp = 4 * lengthM * spreadOf(alpha);
  const intervals = Math.max(FEWEST_KNOTS, Math.ceil(spreadNp / KNOT_LOSS_NP));
  const knotStepM = lengthM / intervals;
  const knotAt = (i: number) =>
    logThroughput(run, weights, alpha, grid.fromM + first * grid.stepM + i * knotStepM);
  let low = knotAt(0);
  let high = low;
  let interval = -1;
  for (let j = first; j <= last; j++) {
    const position = lengthM > 0 ? Math.min(((j - first) / (last - first)) * intervals, intervals) : 0;
    const wanted = Math.min(Math.floor(position), intervals - 1);
    while (interval < wanted) {
      interval++;
      low = high;
      high = knotAt(interval + 1);
    }
    const t = position - interval;
    const u = 1 - t;
    const log =
      low.log * (1 + 2 * t) * u * u +
      high.log * (3 - 2 * t) * t * t +
      knotStepM * (low.slope * t * u * u - high.slope * t * t * u);
    throughput[j] = Math.max(Math.exp(log), LEAST_THROUGHPUT);
  }
}

type LogThroughput = { readonly log: number; readonly slope: number };

function logThroughput(
  run: MediumRun,
  weights: Float64Array,
  alpha: Float64Array,
  distanceM: number,
): LogThroughput {
  const { attenuation } = pathTo(run, distanceM);
  let sum = 0;
  let slope = 0;
  for (let k = 0; k < weights.length; k++) {
    const through = weights[k]! * Math.exp(-4 * attenuation[k]!);
    sum += through;
    slope -= 4 * alpha[k]! * through;
  }
  return sum > LEAST_THROUGHPUT
    ? { log: Math.log(sum), slope: slope / sum }
    : { log: Math.log(LEAST_THROUGHPUT), slope: 0 };
}

function spreadOf(values: Float64Array): number {
  let low = values[0]!;
  let high = low;
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return high - low;
}
