/** A first estimate of how much a line has grown between two sweeps, from their traces alone. */
import type { ComplexArray } from '../numerics/complex.ts';
import type { SeenTracer } from './compare-trace.ts';

/** Growth of delay that is looked for: weather gives some hundreds of parts per million. */
const MOST_STRETCH = 1500e-6;

/** Turn of the end's echo from one trial to the next, rad. */
const TRIAL_TURN = 0.5;

/**
 * The stretch at which Σ |after(d) − before(d − s·d)| is least.
 *
 * Every echo of a line that has grown by s stands at d + s·d, with the same phase there; sums of sizes, not of squares,
 * leave a change at a place without say.
 *
 * @param before Trace of the earlier sweep. @param after Of the later one.
 * @param carrier Phase constant at the middle of the band, rad/m, by which both traces turn with distance.
 */
export function coarseStretch(
  tracer: SeenTracer,
  before: ComplexArray,
  after: ComplexArray,
  carrier: number,
): number {
  const { stepM, points } = tracer;
  const slow = turned(before, -2 * carrier * stepM);
  const lengthM = stepM * (points - 1);
  const trial = TRIAL_TURN / (2 * carrier * lengthM);
  const count = Math.min(400, Math.ceil(MOST_STRETCH / trial));
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let k = -count; k <= count; k++) {
    const stretch = (k * MOST_STRETCH) / count;
    let sum = 0;
    for (let i = 0; i < points; i++) {
      const at = i * (1 - stretch);
      const low = Math.min(points - 2, Math.floor(at));
      const share = at - low;
      const re = slow.re[low]! + share * (slow.re[low + 1]! - slow.re[low]!);
      const im = slow.im[low]! + share * (slow.im[low + 1]! - slow.im[low]!);
      const angle = 2 * carrier * stepM * at;
      const cos = Math.cos(angle);
      const sin = Math.sin(angle);
      sum += Math.hypot(after.re[i]! - re * cos + im * sin, after.im[i]! - re * sin - im * cos);
    }
    if (sum < least) {
      least = sum;
      best = stretch;
    }
  }
  return best;
}

/** Multiplies point k by e^{jk·angle}. */
function turned(trace: ComplexArray, angle: number): ComplexArray {
  const re = new Float64Array(trace.re.length);
  const im = new Float64Array(trace.re.length);
  for (let k = 0; k < re.length; k++) {
    const cos = Math.cos(k * angle);
    const sin = Math.sin(k * angle);
    re[k] = trace.re[k]! * cos - trace.im[k]! * sin;
    im[k] = trace.re[k]! * sin + trace.im[k]! * cos;
  }
  return { re, im };
}
