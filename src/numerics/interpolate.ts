/** Values between the points of a table: straight lines, or a smooth curve that never overshoots. */

/**
 * Straight-line value between the points of a table.
 *
 * @param x Rising, length n ≥ 1; of equal neighbours the later one counts.
 * @param y Length n.
 * @param at Where; outside the table the end value holds.
 * @throws RangeError When the lengths differ or the table is empty.
 */
export function interpolateLinear(x: ArrayLike<number>, y: ArrayLike<number>, at: number): number {
  requireTable(x, y);
  const last = x.length - 1;
  if (at <= x[0]!) return y[0]!;
  if (at >= x[last]!) return y[last]!;
  const i = intervalOf(x, at);
  return y[i]! + ((at - x[i]!) / (x[i + 1]! - x[i]!)) * (y[i + 1]! - y[i]!);
}

/**
 * Smooth value between the points of a table: a cubic per interval that keeps rises rising and falls falling.
 *
 * @param x Strictly rising, length n ≥ 2.
 * @param y Length n.
 * @returns A function of place; outside the table the end value holds.
 * @throws RangeError When the lengths differ, n < 2, or x does not rise strictly.
 * @source F. N. Fritsch, J. Butland, A method for constructing local monotone piecewise cubic interpolants, SIAM J.
 *   Sci. Stat. Comput. 5(2), 1984 (slopes by the weighted harmonic mean).
 */
export function createMonotoneCubic(x: ArrayLike<number>, y: ArrayLike<number>): (at: number) => number {
  requireTable(x, y);
  const n = x.length;
  if (n < 2) throw new RangeError('a curve needs at least two points');
  for (let i = 1; i < n; i++)
    if (!(x[i]! > x[i - 1]!)) throw new RangeError(`x must rise: ${x[i - 1]} then ${x[i]}`);
  const slopes = monotoneSlopes(x, y);
  return (at) => {
    if (at <= x[0]!) return y[0]!;
    if (at >= x[n - 1]!) return y[n - 1]!;
    const i = intervalOf(x, at);
    const width = x[i + 1]! - x[i]!;
    const t = (at - x[i]!) / width;
    const u = 1 - t;
    return (
      y[i]! * (1 + 2 * t) * u * u +
      y[i + 1]! * (3 - 2 * t) * t * t +
      width * (slopes[i]! * t * u * u - slopes[i + 1]! * t * t * u)
    );
  };
}

/** Index i with x[i] ≤ at < x[i+1], for `at` inside the table. */
function intervalOf(x: ArrayLike<number>, at: number): number {
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >>> 1;
    if (x[middle]! <= at) low = middle;
    else high = middle;
  }
  return low;
}

function monotoneSlopes(x: ArrayLike<number>, y: ArrayLike<number>): Float64Array {
  const n = x.length;
  const secant = (i: number) => (y[i + 1]! - y[i]!) / (x[i + 1]! - x[i]!);
  const width = (i: number) => x[i + 1]! - x[i]!;
  const slopes = new Float64Array(n);
  if (n === 2) return slopes.fill(secant(0));
  for (let i = 1; i < n - 1; i++) {
    const before = secant(i - 1);
    const after = secant(i);
    if (before * after <= 0) continue;
    const weightBefore = 2 * width(i) + width(i - 1);
    const weightAfter = width(i) + 2 * width(i - 1);
    slopes[i] = (weightBefore + weightAfter) / (weightBefore / before + weightAfter / after);
  }
  slopes[0] = endSlope(width(0), width(1), secant(0), secant(1));
  slopes[n - 1] = endSlope(width(n - 2), width(n - 3), secant(n - 2), secant(n - 3));
  return slopes;
}

/** Three-point slope at an end, held back where it would break monotony. */
function endSlope(width: number, nextWidth: number, secant: number, nextSecant: number): number {
  const slope = ((2 * width + nextWidth) * secant - width * nextSecant) / (width + nextWidth);
  if (slope * secant <= 0) return 0;
  if (secant * nextSecant <= 0 && Math.abs(slope) > 3 * Math.abs(secant)) return 3 * secant;
  return slope;
}

function requireTable(x: ArrayLike<number>, y: ArrayLike<number>): void {
  if (x.length === 0 || x.length !== y.length)
    throw new RangeError(`a table needs equal lengths from 1 up, not ${x.length} and ${y.length}`);
}
