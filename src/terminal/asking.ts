/** Questions to the solver, and its answers. */
import { analysisNotices } from '../app/analysis-notices.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import { STANDARD_INPUT } from '../app/standard-input.ts';
import type { Notice } from '../outcome.ts';
import { lookWish, outerSpan } from './derived.ts';
import type { Effect } from './effects.ts';
import type { Event } from './events.ts';
import { foundIn } from './found.ts';
import { insideOf, inView } from './looking.ts';
import type { State } from './state.ts';
import type { Step } from './step.ts';

/** Puts a question in place of the present one; the answer on the screen goes at once. */
export function ask(state: State, request: AnalyseRequest, stage: string): readonly [State, number] {
  const id = state.lastId + 1;
  return [
    { ...state, request, lastId: id, solve: { phase: 'running', id, stage, fraction: 0, look: null } },
    id,
  ];
}

/** Solves, and has a first look at the described line meanwhile. */
export function solveEffects(state: State, id: number, request: AnalyseRequest): readonly Effect[] {
  const view = lookWish(state, request);
  return [{ type: 'solve', id, request }, ...(view ? [{ type: 'look', id, request, view } as const] : [])];
}

/** Takes the answer: the first of what was found is chosen, a zoomed view stays as far as it can. */
export function solved(state: State, event: Extract<Event, { type: 'solved' }>): State {
  if (!event.outcome.ok)
    return { ...state, solve: { phase: 'failed', id: event.id, problems: event.outcome.problems } };
  const analysis = event.outcome.value;
  const notices = uniqueNotices([
    ...state.openingNotices,
    ...event.outcome.notices,
    ...analysisNotices(analysis),
  ]);
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

/** Asks for the sweep file anew. */
export function readAgain(state: State): Step {
  if (!state.request) return [state, []];
  if (state.request.sweepFile === STANDARD_INPUT)
    return [{ ...state, remark: 'this sweep came on standard input and cannot be read again' }, []];
  const [next, id] = ask(state, state.request, 'reading the sweep');
  return [next, [{ type: 'stopSolving' }, { type: 'readSweep', id, file: state.request.sweepFile }]];
}

/** Solves with the bytes just read. */
export function sweepRead(state: State, event: Extract<Event, { type: 'sweepRead' }>): Step {
  if (!event.outcome.ok)
    return [{ ...state, solve: { phase: 'failed', id: event.id, problems: event.outcome.problems } }, []];
  if (!state.request) return [state, []];
  const request = { ...state.request, sweepBytes: event.outcome.value, windowSpec: state.windowSpec };
  const next = { ...state, request };
  return [next, solveEffects(next, event.id, request)];
}
