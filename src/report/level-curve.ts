/** A trace as a curve of levels. */
import type { DistanceTrace } from '../locate/distance-trace.ts';

/** A curve in the units of its axes. */
export type Curve = { readonly x: Float64Array; readonly y: Float64Array };

const known = new WeakMap<DistanceTrace, Curve>();

/** |trace| in dB against distance in m; −∞ where it is nothing. */
export function levelCurve(trace: DistanceTrace): Curve {
  const there = known.get(trace);
  if (there) return there;
  const { re, im } = trace.value;
  const y = Float64Array.from(re, (x, i) => 10 * Math.log10(x * x + im[i]! * im[i]!));
  const curve = { x: trace.distanceM, y };
  known.set(trace, curve);
  return curve;
}
