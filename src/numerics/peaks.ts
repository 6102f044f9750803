/** Local maxima of a sampled curve, with how far each stands out and where its tip lies between samples. */

/** One local maximum. */
export type Peak = {
  /** Sample it sits at; the middle one of a flat top. */
  readonly index: number;
  readonly value: number;
  /** Height over the higher of the two lowest points on the way to higher ground (or to the ends). */
  readonly prominence: number;
};

/**
 * Local maxima in order of position, with prominence.
 *
 * A flat top counts once; the first and last sample are never maxima. Prominences of all maxima come from two
 * passes with a stack, cost n.
 *
 * @param values Any length.
 * @param leastProminence Maxima below it are left out; default 0.
 * @source Topographic prominence; same meaning as scipy.signal.peak_prominences without a window.
 */
export function findPeaks(values: Float64Array, leastProminence = 0): Peak[] {
  const tops = localMaxima(values);
  const leftBase = basesOneWay(values, tops, false);
  const rightBase = basesOneWay(values, tops, true);
  const peaks: Peak[] = [];
  for (let t = 0; t < tops.length; t++) {
    const index = tops[t]!;
    const value = values[index]!;
    const prominence = value - Math.max(leftBase[t]!, rightBase[t]!);
    if (prominence >= leastProminence) peaks.push({ index, value, prominence });
  }
  return peaks;
}

/** Place and height of a tip between samples. */
export type Tip = { readonly position: number; readonly value: number };

/**
 * Tip of the parabola through a maximum and its two neighbours.
 *
 * @param index Sample of a local maximum; at the ends, or where the three samples don't bend downward, the
 *   sample itself is given back.
 * @source J. O. Smith, Spectral Audio Signal Processing, "Quadratic interpolation of spectral peaks" (from memory).
 */
export function refineTip(values: Float64Array, index: number): Tip {
  const centre = values[index];
  if (centre === undefined) throw new RangeError(`no sample ${index} among ${values.length}`);
  const before = values[index - 1];
  const after = values[index + 1];
  if (before === undefined || after === undefined) return { position: index, value: centre };
  const bend = before - 2 * centre + after;
  if (!(bend < 0)) return { position: index, value: centre };
  const shift = Math.max(-1, Math.min(1, (0.5 * (before - after)) / bend));
  return { position: index + shift, value: centre - 0.25 * (before - after) * shift };
}

function localMaxima(values: Float64Array): number[] {
  const tops: number[] = [];
  let i = 1;
  while (i < values.length - 1) {
    if (values[i - 1]! < values[i]!) {
      let end = i;
      while (end < values.length - 1 && values[end + 1] === values[i]) end++;
      if (end < values.length - 1 && values[end + 1]! < values[i]!) tops.push((i + end) >> 1);
      i = end + 1;
    } else i++;
  }
  return tops;
}

/** Lowest value between each top and the next higher sample on one side (or that end). */
function basesOneWay(values: Float64Array, tops: readonly number[], fromRight: boolean): Float64Array {
  const bases = new Float64Array(tops.length);
  // Stack of [height, lowest value since the next higher entry]; heights fall from bottom to top.
  const heights: number[] = [];
  const lowest: number[] = [];
  const n = values.length;
  let next = 0;
  for (let step = 0; step < n; step++) {
    const i = fromRight ? n - 1 - step : step;
    const value = values[i]!;
    let low = value;
    while (heights.length > 0 && heights[heights.length - 1]! <= value) {
      heights.pop();
      low = Math.min(low, lowest.pop()!);
    }
    const t = fromRight ? tops.length - 1 - next : next;
    if (next < tops.length && tops[t] === i) {
      bases[t] = low;
      next++;
    }
    heights.push(value);
    lowest.push(low);
  }
  return bases;
}
