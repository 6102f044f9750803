/** Order statistics, and noise floors that a few strong echoes can't lift and a quiet stretch can't hide. */

/**
 * Value below which the share `p` of the values lies.
 *
 * Linear interpolation between order statistics; the input is not changed. Cost n·log n.
 *
 * @param values Any order, finite, length ≥ 1.
 * @param p Share, 0..1.
 * @throws RangeError When `values` is empty or p is outside 0..1.
 * @source R. J. Hyndman, Y. Fan, Sample quantiles in statistical packages, The American Statistician 50(4),
 *   1996, definition 7.
 */
export function quantile(values: ArrayLike<number>, p: number): number {
  return quantileOfSorted(sorted(values), p);
}

/**
 * The same as `quantile` for values already in rising order; cost 1.
 *
 * @throws RangeError When `values` is empty or p is outside 0..1.
 */
export function quantileOfSorted(values: ArrayLike<number>, p: number): number {
  if (values.length === 0) throw new RangeError('a quantile needs at least one value');
  if (!(p >= 0 && p <= 1)) throw new RangeError(`a quantile's share must be 0..1, not ${p}`);
  const position = p * (values.length - 1);
  const below = Math.floor(position);
  const above = Math.min(below + 1, values.length - 1);
  const low = values[below]!;
  return low + (position - below) * (values[above]! - low);
}

/** Middle value; of an even count the mean of the two middle ones. @throws RangeError When empty. */
export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5);
}

/** Arithmetic mean. @throws RangeError When empty. */
export function mean(values: ArrayLike<number>): number {
  if (values.length === 0) throw new RangeError('a mean needs at least one value');
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return sum / values.length;
}

/** Median of |value − median|, unscaled. @throws RangeError When empty. */
export function medianAbsoluteDeviation(values: ArrayLike<number>): number {
  const centre = median(values);
  const deviations = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++) deviations[i] = Math.abs(values[i]! - centre);
  return median(deviations);
}

/** 1 / Φ⁻¹(3/4): turns the median absolute deviation of normal values into their standard deviation. */
const NORMAL_SIGMA_PER_MAD = 1.482_602_218_505_602;

/**
 * Standard deviation of the bulk of the values, blind to up to half of them being outliers.
 *
 * @throws RangeError When empty.
 * @source F. R. Hampel, The influence curve and its role in robust estimation, JASA 69, 1974.
 */
export function robustSigma(values: ArrayLike<number>): number {
  return NORMAL_SIGMA_PER_MAD * medianAbsoluteDeviation(values);
}

/** Settings of `robustUpperFloor`. */
export type UpperFloorOptions = {
  /** Share of the levels that the floor lies above; default 0.95. */
  readonly share?: number;
  /** Levels above this many floors are echoes and are left out before the next pass; default 3. */
  readonly clipRatio?: number;
  /** Most passes of leaving out; default 8. */
  readonly passes?: number;
};

/**
 * One upper noise floor for a whole trace: the level that the share of the echo-free levels stays below.
 *
 * A median lies far under the tips of sparse, heavy-tailed ripple and would turn those into echoes; an upper
 * quantile taken plainly is lifted by real echoes. So levels over `clipRatio` floors are left out and the
 * quantile is taken again until nothing changes.
 *
 * @param levels Magnitudes, ≥ 0, any order.
 * @throws RangeError When empty.
 */
export function robustUpperFloor(levels: ArrayLike<number>, options: UpperFloorOptions = {}): number {
  const { share = 0.95, clipRatio = 3, passes = 8 } = options;
  let kept = sorted(levels);
  let floor = quantileOfSorted(kept, share);
  for (let pass = 0; pass < passes; pass++) {
    const count = countNotAbove(kept, clipRatio * floor);
    if (count === kept.length || count === 0) return floor;
    kept = kept.subarray(0, count);
    floor = quantileOfSorted(kept, share);
  }
  return floor;
}

/** Settings of `localUpperFloor`, in cells of the trace. */
export type LocalFloorOptions = {
  /** Cells looked at on each side, beyond the guard cells; ≥ 1. */
  readonly reachCells: number;
  /** Cells on each side of the one judged that are left out, so that an echo can't lift its own floor. */
  readonly guardCells: number;
  /** Share of the neighbours that the floor lies above; default 0.75. */
  readonly share?: number;
};

/**
 * Upper noise floor cell by cell: an upper quantile of each cell's neighbours, its guard cells left out.
 *
 * Follows a floor that changes along the line; stays low beside an echo as long as echoes fill less than
 * 1 − share of the neighbours. At the ends the neighbours of one side serve. The sorted neighbours slide along,
 * cost about n·reachCells moves.
 *
 * @param levels Magnitudes, length n ≥ 2.
 * @returns Floor for each cell, length n.
 * @throws RangeError When the settings leave some cell without a neighbour.
 * @source H. Rohling, Radar CFAR thresholding in clutter and multiple target situations, IEEE Trans. AES-19(4),
 *   1983 (order-statistic floor with guard cells).
 */
export function localUpperFloor(levels: Float64Array, options: LocalFloorOptions): Float64Array {
  const { reachCells, guardCells, share = 0.75 } = options;
  const n = levels.length;
  if (!(reachCells >= 1 && guardCells >= 0 && guardCells + 1 < n))
    throw new RangeError(`no neighbours: reach ${reachCells}, guard ${guardCells}, length ${n}`);
  const window = createSortedWindow(2 * reachCells);
  const floor = new Float64Array(n);
  for (let right = guardCells + 1; right <= Math.min(guardCells + reachCells, n - 1); right++)
    window.insert(levels[right]!);
  for (let cell = 0; cell < n; cell++) {
    floor[cell] =
      window.size() > 0 ? quantileOfSorted(window.values(), share) : floorOfNearest(floor, cell, levels);
    const next = cell + 1;
    const leavesLeft = next - guardCells - reachCells - 1;
    const joinsLeft = next - guardCells - 1;
    const leavesRight = next + guardCells;
    const joinsRight = next + guardCells + reachCells;
    if (leavesLeft >= 0) window.remove(levels[leavesLeft]!);
    if (joinsLeft >= 0) window.insert(levels[joinsLeft]!);
    if (leavesRight < n) window.remove(levels[leavesRight]!);
    if (joinsRight < n) window.insert(levels[joinsRight]!);
  }
  return floor;
}

function floorOfNearest(floor: Float64Array, cell: number, levels: Float64Array): number {
  return cell > 0 ? floor[cell - 1]! : median(levels);
}

type SortedWindow = {
  insert(value: number): void;
  remove(value: number): void;
  size(): number;
  values(): Float64Array;
};

function createSortedWindow(capacity: number): SortedWindow {
  const store = new Float64Array(capacity);
  let count = 0;
  return {
    insert(value) {
      const at = countBelow(store, count, value);
      store.copyWithin(at + 1, at, count);
      store[at] = value;
      count++;
    },
    remove(value) {
      const at = countBelow(store, count, value);
      store.copyWithin(at, at + 1, count);
      count--;
    },
    size: () => count,
    values: () => store.subarray(0, count),
  };
}

function sorted(values: ArrayLike<number>): Float64Array {
  return Float64Array.from(values).sort();
}

function countBelow(rising: Float64Array, length: number, limit: number): number {
  let low = 0;
  let high = length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (rising[middle]! < limit) low = middle + 1;
    else high = middle;
  }
  return low;
}

function countNotAbove(rising: Float64Array, limit: number): number {
  let low = 0;
  let high = rising.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (rising[middle]! <= limit) low = middle + 1;
    else high = middle;
  }
  return low;
}
