/** The size of reflection against distance as a curve: what the workspace and the report draw alike. */
import type { DistanceTrace } from '../locate/distance-trace.ts';
import { median } from '../numerics/statistics.ts';
import { type Domain, linearScale } from '../plot/scale.ts';

/** Samples of a curve: `x` rising, both of one length. */
export type Curve = { readonly x: Float64Array; readonly y: Float64Array };

/** The axis reaches this far below the middle of the whole trace: deep enough for the ripple that is not a finding. */
const ROOM_BELOW_DB = 14;
/** The axis spans at least and at most this much below 0 dB. */
const LEAST_DEPTH_DB = 40;
const MOST_DEPTH_DB = 120;
const STEP_DB = 10;
/** A peak less than this above 0 dB is drawn at the top: a full reflection and its noise. */
const ROOM_ABOVE_DB = 2;

const known = new WeakMap<DistanceTrace, Float64Array>();

/** |trace| in dB; −∞ where it is nothing. */
export function traceLevelsDb(trace: DistanceTrace): Float64Array {
  const there = known.get(trace);
  if (there) return there;
  const { re, im } = trace.value;
  const levelDb = Float64Array.from(re, (x, i) => 10 * Math.log10(x * x + im[i]! * im[i]!));
  known.set(trace, levelDb);
  return levelDb;
}

/**
 * The axis of levels: from the depth of the whole trace, so that it stands still while one zooms and pans.
 *
 * @param levelDb What is drawn, which may rise above 0 dB.
 */
export function traceDepth(whole: DistanceTrace, levelDb: Float64Array): Domain {
  const levels = traceLevelsDb(whole).filter(Number.isFinite);
  const lowest = levels.length > 0 ? median(levels) - ROOM_BELOW_DB : -LEAST_DEPTH_DB;
  let highest = 0;
  for (const value of levelDb) if (value > highest) highest = value;
  if (highest < ROOM_ABOVE_DB) highest = 0;
  const down = Math.max(-MOST_DEPTH_DB, Math.min(-LEAST_DEPTH_DB, lowest));
  return [STEP_DB * Math.floor(down / STEP_DB), STEP_DB * Math.ceil(highest / STEP_DB)];
}

/**
 * The highest level in each column of dots: every peak at its height, without the nulls between them.
 *
 * @param dots Columns that the span is drawn on, at least 2.
 */
export function highestPerDot(trace: DistanceTrace, span: Domain, dots: number): Curve {
  const scale = linearScale(span, dots);
  const levelDb = traceLevelsDb(trace);
  const y = new Float64Array(dots).fill(Number.NaN);
  for (let i = 0; i < levelDb.length; i++) {
    const dot = Math.round(scale.toDot(trace.distanceM[i]!));
    const level = levelDb[i]!;
    if (dot >= 0 && dot < dots && Number.isFinite(level) && !(level <= y[dot]!)) y[dot] = level;
  }
  const filled = Array.from(y.keys()).filter((dot) => !Number.isNaN(y[dot]!));
  return {
    x: Float64Array.from(filled, (dot) => scale.toValue(dot)),
    y: Float64Array.from(filled, (dot) => y[dot]!),
  };
}

/** What the curve shows at a distance: the higher of the samples to both sides of it within a dot. */
export function highestAt({ x, y }: Curve, atM: number): number {
  const dotM = x.length > 1 ? x[1]! - x[0]! : 0;
  let highest = Number.NaN;
  for (let i = 0; i < x.length; i++)
    if (Math.abs(x[i]! - atM) <= dotM && !(y[i]! <= highest)) highest = y[i]!;
  return highest;
}
