/** Size of reflection against distance. */
import type { Analysis } from '../../app/analysis.ts';
import type { DistanceTrace } from '../../locate/distance-trace.ts';
import { median } from '../../numerics/statistics.ts';
import type { ChartMark, ChartSpec } from '../../plot/chart.ts';
import { decibelText, fixedText, lengthPerMetre, lengthText } from '../../plot/quantity-text.ts';
import { type Run, run } from '../../plot/run.ts';
import { cellScale, type Domain } from '../../plot/scale.ts';
import { chosenOf, resolutionInUse, spanOf, traceInUse, windowInUse } from '../derived.ts';
import { foundIn } from '../found.ts';
import { layoutOf } from '../layout.ts';
import type { State } from '../state.ts';
import { windowName } from '../window-choices.ts';
import { findingMark } from './finding-mark.ts';
import { levelLabel } from './level-label.ts';
import type { Picture } from './picture.ts';

/** Sign of a ghost: a letter, so that it is not taken for something found. */
const GHOST_GLYPH = 'g';

/** The axis reaches this far below the middle of the whole trace: deep enough for the ripple that is not a finding. */
const ROOM_BELOW_DB = 14;
/** The axis spans at least and at most this much below 0 dB. */
const LEAST_DEPTH_DB = 40;
const MOST_DEPTH_DB = 120;
const STEP_DB = 10;
/** A peak less than this above 0 dB is drawn at the top: a full reflection and its noise. */
const ROOM_ABOVE_DB = 2;

/** The trace of the described line, before anything is known to be on it. */
export function lookChart(state: State, trace: DistanceTrace): ChartSpec {
  const span: Domain = [trace.distanceM[0]!, trace.distanceM.at(-1)!];
  const curve = highestPerDot(trace, span, layoutOf(state).plotWidth);
  return {
    x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
    y: { domain: depthOf(trace, curve.y), unit: 'dB' },
    series: [{ ...curve, role: 'trace' }],
    levels: [],
    marks: [],
    cursor: null,
  };
}

/** The trace with what was found on it. */
export function tracePicture(state: State, analysis: Analysis): Picture {
  const trace = traceInUse(state, analysis);
  const span = spanOf(state, analysis);
  const { plotWidth } = layoutOf(state);
  const curve = highestPerDot(trace, span, plotWidth);
  const limitDb = trace.corrected ? analysis.line.limits.jointReturnLossDb : null;
  return {
    chart: {
      x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
      y: { domain: depthOf(analysis.trace, curve.y), unit: 'dB' },
      series: [{ ...curve, role: 'trace' }],
      levels: limitDb === null ? [] : [{ y: -limitDb, role: 'guide' }],
      marks: [
        ...(limitDb === null ? [] : levelLabel('limit', -limitDb, span, plotWidth)),
        ...marksOf(state, analysis),
      ],
      cursor: state.cursorM,
    },
    instead: [],
    atCursor: decibelText(highestAt(curve, state.cursorM)),
    legend: legendOf(state, analysis, trace, limitDb),
  };
}

function legendOf(
  state: State,
  analysis: Analysis,
  trace: DistanceTrace,
  limitDb: number | null,
): readonly (readonly Run[])[] {
  const resolution = lengthText(resolutionInUse(state, analysis), state.units, 2);
  return [
    [run(trace.corrected ? 'line loss undone' : 'as measured')],
    [run(`${windowName(windowInUse(state))}, resolves ${resolution}`)],
    ...(limitDb === null ? [] : [[run(`limit of a joint ${fixedText(-limitDb, 0)} dB`)]]),
    ...(analysis.solution.ghosts.length === 0 ? [] : [[run(`${GHOST_GLYPH} a ghost`)]]),
  ];
}

const known = new WeakMap<DistanceTrace, Float64Array>();

/** |trace| in dB; −∞ where it is nothing. */
function levelsOf(trace: DistanceTrace): Float64Array {
  const there = known.get(trace);
  if (there) return there;
  const { re, im } = trace.value;
  const levelDb = Float64Array.from(re, (x, i) => 10 * Math.log10(x * x + im[i]! * im[i]!));
  known.set(trace, levelDb);
  return levelDb;
}

/** From the depth of the whole trace, so that the axis stands still while one zooms and pans. */
function depthOf(whole: DistanceTrace, levelDb: Float64Array): Domain {
  const levels = levelsOf(whole).filter(Number.isFinite);
  const lowest = levels.length > 0 ? median(levels) - ROOM_BELOW_DB : -LEAST_DEPTH_DB;
  let highest = 0;
  for (const value of levelDb) if (value > highest) highest = value;
  if (highest < ROOM_ABOVE_DB) highest = 0;
  const down = Math.max(-MOST_DEPTH_DB, Math.min(-LEAST_DEPTH_DB, lowest));
  return [STEP_DB * Math.floor(down / STEP_DB), STEP_DB * Math.ceil(highest / STEP_DB)];
}

/** Ghosts first, then what was found from sound to fault, so that the worst lies on top. */
function marksOf(state: State, analysis: Analysis): readonly ChartMark[] {
  const ghosts = analysis.solution.ghosts.map(
    (ghost): ChartMark => ({ x: ghost.distanceM, y: null, glyph: GHOST_GLYPH, role: 'dim' }),
  );
  const chosen = chosenOf(state);
  const found = foundIn(analysis, state.units)
    .filter((row) => row.severity !== 'sound' || row === chosen)
    .map(findingMark);
  return [...ghosts, ...found.reverse()];
}

type Curve = { readonly x: Float64Array; readonly y: Float64Array };

/** The highest level in each column of dots: every peak at its height, without the nulls between them. */
function highestPerDot(trace: DistanceTrace, span: Domain, plotWidth: number): Curve {
  const scale = cellScale(span, plotWidth);
  const levelDb = levelsOf(trace);
  const y = new Float64Array(scale.dots).fill(Number.NaN);
  for (let i = 0; i < levelDb.length; i++) {
    const dot = Math.round(scale.toDot(trace.distanceM[i]!));
    const level = levelDb[i]!;
    if (dot >= 0 && dot < scale.dots && Number.isFinite(level) && !(level <= y[dot]!)) y[dot] = level;
  }
  const filled = Array.from(y.keys()).filter((dot) => !Number.isNaN(y[dot]!));
  return {
    x: Float64Array.from(filled, (dot) => scale.toValue(dot)),
    y: Float64Array.from(filled, (dot) => y[dot]!),
  };
}

/** What the curve shows at a distance: the higher of the samples to both sides of it within a cell. */
function highestAt({ x, y }: Curve, atM: number): number {
  const dotM = x.length > 1 ? x[1]! - x[0]! : 0;
  let highest = Number.NaN;
  for (let i = 0; i < x.length; i++)
    if (Math.abs(x[i]! - atM) <= dotM && !(y[i]! <= highest)) highest = y[i]!;
  return highest;
}
