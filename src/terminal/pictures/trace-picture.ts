/** Size of reflection against distance. */
import type { Analysis } from '../../app/analysis.ts';
import type { DistanceTrace } from '../../locate/distance-trace.ts';
import type { ChartMark, ChartSpec } from '../../plot/chart.ts';
import { decibelText, fixedText, lengthPerMetre, lengthText } from '../../plot/quantity-text.ts';
import { type Run, run } from '../../plot/run.ts';
import { DOTS_ACROSS, type Domain } from '../../plot/scale.ts';
import { highestAt, highestPerDot, traceDepth } from '../../report/trace-curve.ts';
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

/** The trace of the described line, before anything is known to be on it. */
export function lookChart(state: State, trace: DistanceTrace): ChartSpec {
  const span: Domain = [trace.distanceM[0]!, trace.distanceM.at(-1)!];
  const curve = highestPerDot(trace, span, layoutOf(state).plotWidth * DOTS_ACROSS);
  return {
    x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
    y: { domain: traceDepth(trace, curve.y), unit: 'dB' },
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
  const curve = highestPerDot(trace, span, plotWidth * DOTS_ACROSS);
  const limitDb = trace.corrected ? analysis.line.limits.jointReturnLossDb : null;
  return {
    chart: {
      x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
      y: { domain: traceDepth(analysis.trace, curve.y), unit: 'dB' },
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
