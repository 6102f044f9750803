/** Traces of differences along a line, in sizes as the port sees them: white noise is alike everywhere on them. */
import { type MediumRun, pathTo } from '../line/medium-run.ts';
import { planCorrectedTrace } from '../locate/distance-trace.ts';
import { traceWeights } from '../locate/grid-weights.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import type { WindowSpec } from '../numerics/window.ts';

/** Taper of comparisons: side lobes of the end stay under what changes beside it. */
export const COMPARE_WINDOW: WindowSpec = { kind: 'kaiser', beta: 7 };

/** Distances per 6 dB width of an echo, and the most of them. */
const POINTS_PER_RESOLUTION = 4;
const MOST_POINTS = 12_000;

/** Where along the line the traces are worked out, and what scales them. */
export type SeenTracer = {
  readonly fromM: number;
  readonly stepM: number;
  readonly points: number;
  /** RMS noise of the trace over that of one frequency point. */
  readonly noiseGain: number;
  /** Complex trace whose size is the apparent RMS level of a lone echo at each distance. */
  trace(gamma: ComplexArray): ComplexArray;
};

/** Plans traces from the port to `toM`. */
export function planSeenTrace(
  frequencyHz: Float64Array,
  run: MediumRun,
  toM: number,
  resolutionM: number,
): SeenTracer {
  const points = Math.max(16, Math.min(MOST_POINTS, Math.ceil((POINTS_PER_RESOLUTION * toM) / resolutionM)));
  const stepM = toM / (points - 1);
  const plan = planCorrectedTrace({ frequencyHz, run, window: COMPARE_WINDOW, fromM: 0, toM, points });
  const weights = traceWeights(frequencyHz, COMPARE_WINDOW);
  const seen = throughputAlong(run, weights, { stepM, points }).map(Math.sqrt);
  return {
    fromM: 0,
    stepM,
    points,
    noiseGain: Math.sqrt(weights.reduce((sum, weight) => sum + weight * weight, 0)),
    trace(gamma) {
      const { value } = plan.trace(gamma);
      const out = complexZeros(points);
      for (let k = 0; k < points; k++) {
        out.re[k] = value.re[k]! * seen[k]!;
        out.im[k] = value.im[k]! * seen[k]!;
      }
      return out;
    },
  };
}

/** Knots per section; the logarithm of the throughput is nearly straight between them. */
const KNOTS = 10;

/** Σ W·e^{−4A(d)} on the grid, Σ W = 1. */
function throughputAlong(
  run: MediumRun,
  weights: Float64Array,
  grid: { readonly stepM: number; readonly points: number },
): Float64Array {
  const toM = grid.stepM * (grid.points - 1);
  const knots = new Set<number>([0, toM]);
  for (let section = 0; section < run.alpha.length; section++) {
    const startM = run.startM[section]!;
    const endM = section + 1 < run.alpha.length ? run.startM[section + 1]! : Math.max(toM, startM);
    for (let k = 0; k < KNOTS; k++) knots.add(startM + ((endM - startM) * k) / KNOTS);
  }
  const places = [...knots].filter((m) => m <= toM).sort((a, b) => a - b);
  const logs = places.map((distanceM) => {
    const { attenuation } = pathTo(run, distanceM);
    let sum = 0;
    for (let i = 0; i < weights.length; i++) sum += weights[i]! * Math.exp(-4 * attenuation[i]!);
    return Math.log(Math.max(sum, 1e-300));
  });
  let knot = 0;
  return Float64Array.from({ length: grid.points }, (_, k) => {
    const distanceM = k * grid.stepM;
    while (knot + 2 < places.length && places[knot + 1]! < distanceM) knot++;
    const low = places[knot]!;
    const high = places[knot + 1] ?? low;
    const share = high > low ? Math.min(1, (distanceM - low) / (high - low)) : 0;
    return Math.exp(logs[knot]! + share * ((logs[knot + 1] ?? logs[knot]!) - logs[knot]!));
  });
}

/** Size of a complex trace, point by point. */
export function sizesOf(trace: ComplexArray): Float64Array {
  return Float64Array.from(trace.re, (re, k) => Math.hypot(re, trace.im[k]!));
}
