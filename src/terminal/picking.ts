/** Choosing a window or a cable from a list. */
import { ask, solveEffects } from './asking.ts';
import { longestCoax, withCable } from './change-cable.ts';
import { picksOf, presentPick } from './picks.ts';
import { analysisOf, type Choice, type State } from './state.ts';
import type { Step } from './step.ts';

/** Opens a list with the present choice in it chosen. */
export function openPicker(state: State, what: Choice): State {
  if (what === 'window' && !analysisOf(state)) return state;
  const longest = state.request ? longestCoax(state.request.line) : null;
  if (what === 'cable' && !longest)
    return state.request ? { ...state, remark: 'this line has no coax section to change' } : state;
  if (what === 'cable' && state.cables.length === 0) return { ...state, remark: 'the cable table is empty' };
  const open: State = { ...state, panel: { type: 'pick', what, filter: '', row: 0 } };
  const present = what === 'window' ? state.windowSpec : (longest?.cable.id ?? null);
  return pickMove(open, presentPick(picksOf(open), present));
}

/** Moves within the list, no farther than its ends. */
export function pickMove(state: State, by: number): State {
  if (state.panel?.type !== 'pick') return state;
  const last = Math.max(0, picksOf(state).length - 1);
  const row = Math.max(0, Math.min(last, state.panel.row + by));
  return { ...state, panel: { ...state.panel, row } };
}

/** Narrows or widens the list. */
export function pickFilter(state: State, change: (filter: string) => string): State {
  if (state.panel?.type !== 'pick') return state;
  const filter = change(state.panel.filter).slice(0, LONGEST_FILTER);
  return { ...state, panel: { ...state.panel, filter, row: 0 } };
}

/** Longer filters would not fit their line. */
const LONGEST_FILTER = 40;

/** Takes the chosen one: a window is used at once, a cable asks for another answer. */
export function pickTake(state: State): Step {
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
  return [next, solveEffects(next, id, request)];
}
