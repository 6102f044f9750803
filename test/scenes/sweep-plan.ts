/** How a scene's line is swept: band, number of points, even or uneven steps. */
import type { CableFigures } from './coax-medium.ts';
import { unambiguousM } from './coax-medium.ts';
import type { Draws } from './draws.ts';

export type PlanName = 'wide' | 'band-limited' | 'narrow-high' | 'narrow-low';

export type SweepPlan = {
  readonly name: PlanName;
  readonly frequencyHz: Float64Array;
  readonly even: boolean;
};

/** The bands of the plans, Hz. */
export const PLAN_BANDS: Record<PlanName, readonly [number, number]> = {
  wide: [2e6, 2700e6],
  'band-limited': [600e6, 2700e6],
  'narrow-high': [1700e6, 2200e6],
  'narrow-low': [824e6, 960e6],
};

/** Points that instruments offer. */
const POINT_COUNTS = [201, 401, 801, 1001, 1601, 2001, 4001];
/** Points of a wide sweep whose start and step are the same, so that it reaches down to DC. */
const WIDE_COUNTS = [1350, 2700];
/** Reach kept over the line's length, so that its own second trip shows. Common practice, references.md section 8. */
const REACH_MARGIN = 1.2;

/** True when the plan can see a line of this length without folding. */
export function planReaches(name: PlanName, cable: CableFigures, lengthM: number): boolean {
  const counts = name === 'wide' ? WIDE_COUNTS : POINT_COUNTS;
  return unambiguousM(cable, evenGrid(name, counts.at(-1)!)) >= REACH_MARGIN * lengthM;
}

/** Draws a sweep of the band with enough points for the line, seldom more than the next choice up. */
export function drawPlan(
  name: PlanName,
  draws: Draws,
  slowest: CableFigures,
  lengthM: number,
  unevenShare: number,
): SweepPlan {
  const counts = name === 'wide' ? WIDE_COUNTS : POINT_COUNTS;
  const margin = unevenShare > 0 ? REACH_MARGIN * 1.5 : REACH_MARGIN;
  const enough = counts.filter((count) => unambiguousM(slowest, evenGrid(name, count)) >= margin * lengthM);
  const count = enough.length > 0 ? draws.pick(enough.slice(0, 3)) : counts.at(-1)!;
  const even = evenGrid(name, count);
  if (enough.length === 0 || !draws.chance(unevenShare)) return { name, frequencyHz: even, even: true };
  return { name, frequencyHz: unevenGrid(even, draws), even: false };
}

/** Evenly spaced points over the plan's band, rounded to whole hertz. */
export function evenGrid(name: PlanName, count: number): Float64Array {
  const [from, to] = PLAN_BANDS[name];
  const start = name === 'wide' ? to / count : from;
  return Float64Array.from({ length: count }, (_, k) => Math.round(start + ((to - start) * k) / (count - 1)));
}

/** Steps that wander by a third, or half the points on the lower third of the band. */
function unevenGrid(even: Float64Array, draws: Draws): Float64Array {
  const step = even[1]! - even[0]!;
  const last = even.length - 1;
  if (draws.chance(0.5))
    return even.map((f, k) =>
      k === 0 || k === last ? f : Math.round(f + step * draws.uniform(-0.33, 0.33)),
    );
  const bend = Math.round(last / 2);
  const lower = (even[last]! - even[0]!) * 0.4;
  return even.map((_, k) =>
    Math.round(
      k <= bend
        ? even[0]! + (lower * k) / bend
        : even[0]! + lower + ((even[last]! - even[0]! - lower) * (k - bend)) / (last - bend),
    ),
  );
}
