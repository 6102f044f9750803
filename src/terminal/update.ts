/** What each event does to the state, and what it asks of the world. Pure: the whole workspace can be run without a terminal. */
import type { AnalyseRequest } from '../app/solver.ts';
import { assertNever, type Notice } from '../outcome.ts';
import { cellScale, type Domain } from '../plot/scale.ts';
import { longestCoax, withCable } from './change-cable.ts';
import { chosenOf, outerSpan, spanOf, traceWish } from './derived.ts';
import type { Effect } from './effects.ts';
import type { Event } from './events.ts';
import { foundIn } from './found.ts';
import { layoutOf } from './layout.ts';
import { mostScroll } from './pages/page.ts';
import { picksOf, presentPick } from './picks.ts';
import { analysisOf, type Choice, type Panel, type State } from './state.ts';
import { VIEW_IDS } from './view-ids.ts';

/** The state after an event, and the effects it calls for. */
export type Step = readonly [State, readonly Effect[]];

/** Applies an event; asks for a new trace whenever what is in view has changed. */
export function update(state: State, event: Event): Step {
  const [next, effects] = apply(withoutRemark(state, event), event);
  return withTrace(state, next, effects);
}

function apply(state: State, event: Event): Step {
  switch (event.type) {
    case 'started':
      return state.request && state.solve.phase === 'running'
        ? [state, [{ type: 'solve', id: state.solve.id, request: state.request }]]
        : [state, []];
    case 'resized':
      return [{ ...state, columns: event.columns, rows: event.rows }, [{ type: 'redraw' }]];
    case 'progress':
      return state.solve.phase === 'running' && state.solve.id === event.id
        ? [{ ...state, solve: { ...state.solve, stage: event.stage, fraction: event.fraction } }, []]
        : [state, []];
    case 'solved':
      return state.solve.phase === 'running' && state.solve.id === event.id
        ? [solved(state, event), []]
        : [state, []];
    case 'sweepRead':
      return state.solve.phase === 'running' && state.solve.id === event.id
        ? sweepRead(state, event)
        : [state, []];
    case 'traced':
      return event.id === state.lastTraceId
        ? [{ ...state, trace: { id: event.id, trace: event.trace } }, []]
        : [state, []];
    case 'choose':
      return [choose(state, event.by), []];
    case 'moveCursor':
      return [moveCursor(state, event.cells), []];
    case 'cursorTo':
      return [cursorTo(state, event.place), []];
    case 'zoom':
      return [zoom(state, event.factor), []];
    case 'pan':
      return [pan(state, event.screens), []];
    case 'wholeLine':
      return [{ ...state, span: null }, []];
    case 'view':
      return [{ ...state, view: event.view }, []];
    case 'nextView': {
      const at = VIEW_IDS.indexOf(state.view) + event.by + VIEW_IDS.length;
      return [{ ...state, view: VIEW_IDS[at % VIEW_IDS.length] ?? state.view }, []];
    }
    case 'toggleUnits':
      return [{ ...state, units: state.units === 'm' ? 'ft' : 'm' }, []];
    case 'toggleCorrected':
      return [{ ...state, corrected: !state.corrected }, []];
    case 'openPage':
      return [openPage(state, event.page), []];
    case 'scroll':
      return [scroll(state, event.lines), []];
    case 'openPicker':
      return [openPicker(state, event.what), []];
    case 'pickMove':
      return [pickMove(state, event.by), []];
    case 'pickType':
      return [pickFilter(state, (filter) => filter + event.text), []];
    case 'pickErase':
      return [pickFilter(state, (filter) => [...filter].slice(0, -1).join('')), []];
    case 'pickTake':
      return pickTake(state);
    case 'closePanel':
      return [closePanel(state), []];
    case 'readAgain':
      return readAgain(state);
    case 'redraw':
      return [state, [{ type: 'redraw' }]];
    case 'suspend':
      return [state, [{ type: 'suspend' }]];
    case 'quit':
      return [state, [{ type: 'stopSolving' }, { type: 'quit' }]];
    default:
      return assertNever(event);
  }
}

/** A remark stands until the next key. */
function withoutRemark(state: State, event: Event): State {
  const answers = ['started', 'resized', 'progress', 'solved', 'sweepRead', 'traced'];
  return state.remark === null || answers.includes(event.type) ? state : { ...state, remark: null };
}

/** Asks for the trace that the new state wants, when it is not what the old one wanted. */
function withTrace(before: State, after: State, effects: readonly Effect[]): Step {
  const analysis = analysisOf(after);
  const wish = traceWish(after);
  const changed =
    analysis !== analysisOf(before) || JSON.stringify(wish) !== JSON.stringify(traceWish(before));
  if (!changed) return [after, effects];
  const id = after.lastTraceId + 1;
  const next = { ...after, lastTraceId: id, trace: analysis === analysisOf(before) ? after.trace : null };
  return [next, analysis && wish ? [...effects, { type: 'trace', id, analysis, view: wish }] : effects];
}

/** Puts a question in place of the present one; the answer on the screen goes at once. */
function ask(state: State, request: AnalyseRequest, stage: string): readonly [State, number] {
  const id = state.lastId + 1;
  return [{ ...state, request, lastId: id, solve: { phase: 'running', id, stage, fraction: 0 } }, id];
}

function solved(state: State, event: Extract<Event, { type: 'solved' }>): State {
  if (!event.outcome.ok)
    return { ...state, solve: { phase: 'failed', id: event.id, problems: event.outcome.problems } };
  const analysis = event.outcome.value;
  const notices = uniqueNotices([...event.outcome.notices, ...analysis.notices]);
  const first = foundIn(analysis)[0];
  const ready: State = {
    ...state,
    solve: { phase: 'ready', id: event.id, analysis, notices },
    chosen: 0,
    cursorM: first?.distanceM ?? analysis.solution.lengthM,
  };
  return state.span === null ? ready : inView({ ...ready, span: insideOf(state.span, outerSpan(analysis)) });
}

function uniqueNotices(notices: readonly Notice[]): readonly Notice[] {
  return [...new Map(notices.map((notice) => [`${notice.code} ${notice.what}`, notice])).values()];
}

function choose(state: State, by: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const last = foundIn(analysis).length - 1;
  const chosen = Math.max(0, Math.min(last, state.chosen + by));
  const next = { ...state, chosen };
  return inView({ ...next, cursorM: chosenOf(next)?.distanceM ?? state.cursorM });
}

/** Moves by cells of the plot; at the edge the view goes along. */
function moveCursor(state: State, cells: number): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  const span = spanOf(state, analysis);
  const scale = cellScale(span, layoutOf(state).plotWidth);
  const dot = Math.round(scale.toDot(state.cursorM)) + 2 * cells;
  const [low, high] = outerSpan(analysis);
  const cursorM = Math.max(low, Math.min(high, scale.toValue(dot)));
  return followed({ ...state, cursorM });
}

function cursorTo(state: State, place: 'port' | 'end'): State {
  const analysis = analysisOf(state);
  if (!analysis) return state;
  return inView({ ...state, cursorM: place === 'port' ? 0 : analysis.solution.lengthM });
}

/** Zooms about the cursor: what is under it stays where it is. */
function zoom(state: State, factor: number): State {
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
function pan(state: State, screens: number): State {
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
function inView(state: State): State {
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
function insideOf(span: Domain, outer: Domain): Domain {
  const width = span[1] - span[0];
  if (width >= outer[1] - outer[0]) return outer;
  const start = Math.max(outer[0], Math.min(outer[1] - width, span[0]));
  return [start, start + width];
}

function openPage(state: State, page: Extract<Panel, { type: 'page' }>['page']): State {
  if (page === 'finding' && chosenOf(state) === null) return state;
  return { ...state, panel: { type: 'page', page, scroll: 0 } };
}

/** Scrolls a page, no farther than to its last line. */
function scroll(state: State, lines: number): State {
  if (state.panel?.type !== 'page') return state;
  const { page } = state.panel;
  const wanted = Math.min(mostScroll(state, page), state.panel.scroll + lines);
  return { ...state, panel: { ...state.panel, scroll: Math.max(0, wanted) } };
}

function closePanel(state: State): State {
  const cautionsRead =
    state.cautionsRead || (state.panel?.type === 'page' && state.panel.page === 'cautions');
  return { ...state, panel: null, cautionsRead };
}

function openPicker(state: State, what: Choice): State {
  if (what === 'window' && !analysisOf(state)) return state;
  const longest = state.request ? longestCoax(state.request.line) : null;
  if (what === 'cable' && !longest)
    return state.request ? { ...state, remark: 'this line has no coax section to change' } : state;
  if (what === 'cable' && state.cables.length === 0) return { ...state, remark: 'the cable table is empty' };
  const open: State = { ...state, panel: { type: 'pick', what, filter: '', row: 0 } };
  const present = what === 'window' ? state.windowSpec : (longest?.cable.id ?? null);
  return pickMove(open, presentPick(picksOf(open), present));
}

function pickMove(state: State, by: number): State {
  if (state.panel?.type !== 'pick') return state;
  const last = Math.max(0, picksOf(state).length - 1);
  const row = Math.max(0, Math.min(last, state.panel.row + by));
  return { ...state, panel: { ...state.panel, row } };
}

function pickFilter(state: State, change: (filter: string) => string): State {
  if (state.panel?.type !== 'pick') return state;
  const filter = change(state.panel.filter).slice(0, LONGEST_FILTER);
  return { ...state, panel: { ...state.panel, filter, row: 0 } };
}

/** Longer filters would not fit their line. */
const LONGEST_FILTER = 40;

function pickTake(state: State): Step {
  if (state.panel?.type !== 'pick') return [state, []];
  const pick = picksOf(state)[state.panel.row];
  const closed = { ...state, panel: null };
  if (!pick) return [state, []];
  if (state.panel.what === 'window') return [{ ...closed, windowSpec: pick.id }, []];
  return takeCable(closed, pick.id);
}

function takeCable(state: State, cableId: string): Step {
  const cable = state.cables.find((entry) => entry.id === cableId);
  const line = cable && state.request ? withCable(state.request.line, cable) : null;
  if (!cable || !line || !state.request) return [state, []];
  const request = { ...state.request, line, windowSpec: state.windowSpec };
  const [next, id] = ask(state, request, `solving with ${cable.name}`);
  return [next, [{ type: 'solve', id, request }]];
}

function readAgain(state: State): Step {
  if (!state.request) return [state, []];
  if (state.request.sweepFile === '-')
    return [{ ...state, remark: 'this sweep came on standard input and cannot be read again' }, []];
  const [next, id] = ask(state, state.request, 'reading the sweep');
  return [next, [{ type: 'stopSolving' }, { type: 'readSweep', id, file: state.request.sweepFile }]];
}

function sweepRead(state: State, event: Extract<Event, { type: 'sweepRead' }>): Step {
  if (!event.outcome.ok)
    return [{ ...state, solve: { phase: 'failed', id: event.id, problems: event.outcome.problems } }, []];
  if (!state.request) return [state, []];
  const request = { ...state.request, sweepBytes: event.outcome.value, windowSpec: state.windowSpec };
  return [{ ...state, request }, [{ type: 'solve', id: event.id, request }]];
}
