/** Size of reflection against distance. */
import type { Analysis } from '../../app/analysis.ts';
import type { DistanceTrace } from '../../locate/distance-trace.ts';
import { quantile } from '../../numerics/statistics.ts';
import type { ChartMark } from '../../plot/chart.ts';
import { decibelText, fixedText, lengthPerMetre, lengthText } from '../../plot/quantity-text.ts';
import { type Run, run } from '../../plot/run.ts';
import { cellScale, type Domain } from '../../plot/scale.ts';
import { chosenOf, resolutionInUse, spanOf, traceInUse, windowInUse } from '../derived.ts';
import { foundIn } from '../found.ts';
import { layoutOf } from '../layout.ts';
import type { State } from '../state.ts';
import { windowName } from '../window-choices.ts';
import { findingMark } from './finding-mark.ts';
import type { Picture } from './picture.ts';

/** Sign of a ghost: a letter, so that it is not taken for something found. */
const GHOST_GLYPH = 'g';

/** The axis reaches down to where all but this share of the whole trace lies above, with room below it. */
const LOWEST_SHARE = 0.02;
const ROOM_BELOW_DB = 4;
/** The axis spans at least and at most this much below 0 dB. */
const LEAST_DEPTH_DB = 40;
const MOST_DEPTH_DB = 120;
const STEP_DB = 10;

/** The trace with what was found on it. */
export function tracePicture(state: State, analysis: Analysis): Picture {
  const trace = traceInUse(state, analysis);
  const levelDb = levelsOf(trace);
  const span = spanOf(state, analysis);
  const limitDb = trace.corrected ? analysis.line.limits.jointReturnLossDb : null;
  return {
    chart: {
      x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
      y: { domain: depthOf(analysis, levelDb), unit: 'dB' },
      series: [{ x: trace.distanceM, y: levelDb, role: 'trace' }],
      levels: limitDb === null ? [] : [{ y: -limitDb, role: 'guide' }],
      marks: marksOf(state, analysis),
      cursor: state.cursorM,
    },
    instead: [],
    atCursor: decibelText(highestNear(trace, levelDb, state.cursorM, span, layoutOf(state).plotWidth)),
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
    ...(limitDb === null ? [] : [[run(`dotted: joint limit ${fixedText(-limitDb, 0)} dB`)]]),
    ...(analysis.solution.ghosts.length === 0 ? [] : [[run(`${GHOST_GLYPH}: ghost`)]]),
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
function depthOf(analysis: Analysis, levelDb: Float64Array): Domain {
  const whole = levelsOf(analysis.trace).filter(Number.isFinite);
  const lowest = whole.length > 0 ? quantile(whole, LOWEST_SHARE) - ROOM_BELOW_DB : -LEAST_DEPTH_DB;
  let highest = 0;
  for (const value of levelDb) if (value > highest && Number.isFinite(value)) highest = value;
  const down = Math.max(-MOST_DEPTH_DB, Math.min(-LEAST_DEPTH_DB, lowest));
  return [STEP_DB * Math.floor(down / STEP_DB), STEP_DB * Math.ceil(highest / STEP_DB)];
}

/** Ghosts first, then what was found from sound to fault, so that the worst lies on top. */
function marksOf(state: State, analysis: Analysis): readonly ChartMark[] {
  const ghosts = analysis.solution.ghosts.map(
    (ghost): ChartMark => ({ x: ghost.distanceM, y: null, glyph: GHOST_GLYPH, role: 'dim' }),
  );
  const chosen = chosenOf(state);
  const found = foundIn(analysis)
    .filter((row) => row.severity !== 'sound' || row === chosen)
    .map(findingMark);
  return [...ghosts, ...found.reverse()];
}

/** Highest level within half a cell of a place: what the eye sees there. */
function highestNear(
  trace: DistanceTrace,
  levelDb: Float64Array,
  atM: number,
  span: Domain,
  plotWidth: number,
): number {
  const scale = cellScale(span, plotWidth);
  const reachM = Math.abs(scale.toValue(1) - scale.toValue(0));
  let highest = Number.NaN;
  for (let i = 0; i < levelDb.length; i++) {
    if (Math.abs(trace.distanceM[i]! - atM) > reachM) continue;
    if (!(levelDb[i]! <= highest)) highest = levelDb[i]!;
  }
  return highest;
}
