/** What each event does to the state, and what it asks of the world. Pure: the whole workspace can be run without a terminal. */
import { COLOUR_SETS } from '../app/settings.ts';
import { assertNever } from '../outcome.ts';
import { readAgain, solved, solveEffects, sweepRead } from './asking.ts';
import { chosenOf, traceWish } from './derived.ts';
import type { Effect } from './effects.ts';
import type { Event } from './events.ts';
import { choose, cursorTo, moveCursor, pan, zoom } from './looking.ts';
import { mostScroll } from './pages/pages.ts';
import { PALETTE_WORDS } from './palettes.ts';
import { openPicker, pickFilter, pickMove, pickTake } from './picking.ts';
import { analysisOf, type Panel, type State } from './state.ts';
import type { Step } from './step.ts';
import { VIEW_IDS } from './view-ids.ts';

/** Applies an event; asks for a new trace whenever what is in view has changed. */
export function update(state: State, event: Event): Step {
  const [next, effects] = apply(withoutRemark(state, event), event);
  return withTrace(state, next, effects);
}

function apply(state: State, event: Event): Step {
  switch (event.type) {
    case 'started':
      return state.request && state.solve.phase === 'running'
        ? [state, solveEffects(state, state.solve.id, state.request)]
        : [state, []];
    case 'resized':
      return [{ ...state, columns: event.columns, rows: event.rows }, [{ type: 'redraw' }]];
    case 'progress':
      return state.solve.phase === 'running' && state.solve.id === event.id
        ? [{ ...state, solve: { ...state.solve, stage: event.stage, fraction: event.fraction } }, []]
        : [state, []];
    case 'looked':
      return state.solve.phase === 'running' && state.solve.id === event.id
        ? [{ ...state, solve: { ...state.solve, look: event.trace } }, []]
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
    case 'nextColours':
      return [nextColours(state), []];
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
  const answers = ['started', 'resized', 'progress', 'looked', 'solved', 'sweepRead', 'traced'];
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

/** The next set of colours, and its name. */
function nextColours(state: State): State {
  if (!state.hasColour)
    return { ...state, remark: 'there is no colour here: NO_COLOR is set, or TERM is dumb' };
  const colours = COLOUR_SETS[(COLOUR_SETS.indexOf(state.colours) + 1) % COLOUR_SETS.length]!;
  return { ...state, colours, remark: `colours ${PALETTE_WORDS[colours]}` };
}

function closePanel(state: State): State {
  const cautionsRead =
    state.cautionsRead || (state.panel?.type === 'page' && state.panel.page === 'cautions');
  return { ...state, panel: null, cautionsRead };
}
