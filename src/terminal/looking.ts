/** Where one looks: the chosen row, the cursor, and the piece of the line in view. */
import { cellScale, type Domain } from '../plot/scale.ts';
import { chosenOf, outerSpan, spanOf } from './derived.ts';
import { foundIn } from './found.ts';
import { layoutOf } from './layout.ts';
import { analysisOf, type State } from './state.ts';

/** The next or an earlier row of the list; the cursor goes there. */
export function choose(state: State, by: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const last = foundIn(analysis).length - 1;
  const chosen = Math.max(0, Math.min(last, state.chosen + by));
  const next = { ...state, chosen };
  return inView({ ...next, cursorM: chosenOf(next)?.distanceM ?? state.cursorM });
}

/** Moves by cells of the plot; at the edge the view goes along. */
export function moveCursor(state: State, cells: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const span = spanOf(state, analysis);
  const scale = cellScale(span, layoutOf(state).plotWidth);
  const dot = Math.round(scale.toDot(state.cursorM)) + 2 * cells;
  const [low, high] = outerSpan(analysis);
  const cursorM = Math.max(low, Math.min(high, scale.toValue(dot)));
  return followed({ ...state, cursorM });
}

/** Puts the cursor at the port or at the end. */
export function cursorTo(state: State, place: 'port' | 'end'): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  return inView({ ...state, cursorM: place === 'port' ? 0 : analysis.solution.lengthM });
}

/** Zooms about the cursor: what is under it stays where it is. */
export function zoom(state: State, factor: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const [from, to] = spanOf(state, analysis);
  const outer = outerSpan(analysis);
  const wanted = (to - from) / factor;
  const width = Math.min(outer[1] - outer[0], Math.max(smallestSpan(analysis.reach.resolutionM), wanted));
  const share = (state.cursorM - from) / (to - from);
  const start = state.cursorM - width * Math.max(0, Math.min(1, share));
  return { ...state, span: insideOf([start, start + width], outer) };
}

/** Closest view: two widths of an echo, but never under 10 cm. */
function smallestSpan(resolutionM: number): number {
  return Math.max(0.1, 2 * resolutionM);
}

/** Moves the view; the cursor keeps its place on the screen. */
export function pan(state: State, screens: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const [from, to] = spanOf(state, analysis);
  const shift = screens * (to - from);
  const span = insideOf([from + shift, to + shift], outerSpan(analysis));
  return { ...state, span, cursorM: state.cursorM + span[0] - from };
}

/** The view moved just so far that the cursor is in it. */
function followed(state: State): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const [from, to] = spanOf(state, analysis);
  const shift = state.cursorM < from ? state.cursorM - from : Math.max(0, state.cursorM - to);
  return shift === 0 ? state : { ...state, span: insideOf([from + shift, to + shift], outerSpan(analysis)) };
}

/** The view moved so that the cursor is in its middle, if it was out of it. */
export function inView(state: State): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const [from, to] = spanOf(state, analysis);
  if (state.cursorM >= from && state.cursorM <= to) return state;
  const half = (to - from) / 2;
  return {
    ...state,
    span: insideOf([state.cursorM - half, state.cursorM + half], outerSpan(analysis)),
  };
}

/** A span of the same width pushed inside another one, or that one where it is wider. */
export function insideOf(span: Domain, outer: Domain): Domain {
  const width = span[1] - span[0];
  if (width >= outer[1] - outer[0]) return outer;
  const start = Math.max(outer[0], Math.min(outer[1] - width, span[0]));
  return [start, start + width];
}
