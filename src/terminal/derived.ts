/** What follows from the state: spans, the chosen row, the trace that is wanted. Pure and cheap. */
import type { Analysis } from '../app/analysis.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import { describedLengthM } from '../line/line.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import { DOTS_ACROSS, type Domain } from '../plot/scale.ts';
import { lineSpan } from '../report/line-sections.ts';
import type { LookView, TraceView } from './config.ts';
import { type Found, foundIn } from './found.ts';
import { layoutOf, tooSmall } from './layout.ts';
import { picksOf } from './picks.ts';
import { analysisOf, type State } from './state.ts';
import { resolutionWith } from './window-choices.ts';

/** Samples per width of an echo, so that its peak is met within half a dB. */
const SAMPLES_PER_WIDTH = 4;
/** More samples than this per dot are never asked for. */
const MOST_SAMPLES_PER_DOT = 32;

/** From a little before the port to a little behind the end and everything found. */
export function wholeSpan(analysis: Analysis): Domain {
  const found = foundIn(analysis).map((row) => row.distanceM);
  const lengthM = Math.max(
    analysis.solution.lengthM,
    describedLengthM(analysis.line) ?? 0,
    ...found,
    analysis.reach.resolutionM,
  );
  return lineSpan(lengthM);
}

/** The farthest out that zooming goes: as far as the sweep can see without folding. */
export function outerSpan(analysis: Analysis): Domain {
  const whole = wholeSpan(analysis);
  return [whole[0], Math.max(whole[1], analysis.reach.unambiguousM)];
}

/** Distances in view, m. */
export function spanOf(state: State, analysis: Analysis): Domain {
  return state.span ?? wholeSpan(analysis);
}

/** The row chosen in the list; null when nothing was found at all. */
export function chosenOf(state: State): Found | null {
  const analysis = analysisOf(state);
  return analysis ? (foundIn(analysis, state.units)[state.chosen] ?? null) : null;
}

/** The window in use; while windows are being chosen, the one under the pointer. */
export function windowInUse(state: State): string {
  if (state.panel?.type === 'pick' && state.panel.what === 'window')
    return picksOf(state)[state.panel.row]?.id ?? state.windowSpec;
  return state.windowSpec;
}

/** Width of one echo with the window in use, m. */
export function resolutionInUse(state: State, analysis: Analysis): number {
  return resolutionWith(analysis, state.request?.windowSpec ?? state.windowSpec, windowInUse(state));
}

/** The piece of trace that the screen needs now: at least one sample per dot, and several per echo width. */
export function traceWish(state: State): TraceView | null {
  const analysis = analysisOf(state);
  if (!analysis || tooSmall(state)) return null;
  const [fromM, toM] = spanOf(state, analysis);
  const dots = layoutOf(state).plotWidth * DOTS_ACROSS;
  const perWidth = (SAMPLES_PER_WIDTH * (toM - fromM)) / resolutionInUse(state, analysis);
  const perDot = Math.min(MOST_SAMPLES_PER_DOT, Math.max(1, Math.ceil(perWidth / dots) || 1));
  return {
    fromM,
    toM,
    points: dots * perDot,
    windowSpec: windowInUse(state),
    corrected: state.corrected,
  };
}

/** Samples per dot of the first look: the width of an echo is not known yet. */
const LOOK_SAMPLES_PER_DOT = 6;

/** The piece of trace for a first look at the described line; null when its length is not described. */
export function lookWish(state: State, request: AnalyseRequest): LookView | null {
  const lengthM = describedLengthM(request.line);
  if (lengthM === null || !(lengthM > 0) || tooSmall(state)) return null;
  const [fromM, toM] = lineSpan(lengthM);
  return { fromM, toM, points: layoutOf(state).plotWidth * DOTS_ACROSS * LOOK_SAMPLES_PER_DOT };
}

/** The trace to draw: the one computed for this view, or the analysis' own until it is there. */
export function traceInUse(state: State, analysis: Analysis): DistanceTrace {
  return state.trace?.trace ?? analysis.trace;
}
