/** A workspace without a terminal: a state with an answer in it, and a way to play events on it. */
import type { Analysis } from '../../src/app/analysis.ts';
import type { AnalyseRequest } from '../../src/app/solver.ts';
import { traceWindow } from '../../src/app/trace-view.ts';
import { succeed } from '../../src/outcome.ts';
import { CAUTIONS } from '../../src/report/cautions.ts';
import type { Effect } from '../../src/terminal/effects.ts';
import type { Event } from '../../src/terminal/events.ts';
import { eventFor } from '../../src/terminal/keys.ts';
import { initialState, type State } from '../../src/terminal/state.ts';
import { update } from '../../src/terminal/update.ts';
import { MADE_CABLE, makeAnalysis } from '../app/made-analysis.ts';

/** A second cable to choose. */
export const OTHER_CABLE = {
  ...MADE_CABLE,
  id: 'other',
  name: 'another cable',
  z0Ohm: 75,
  velocityFactor: 0.66,
};

/** The question that goes with an analysis. */
export function requestFor(analysis: Analysis, fields: Partial<AnalyseRequest> = {}): AnalyseRequest {
  return {
    sweepFile: 'folder/made.s1p',
    sweepBytes: new Uint8Array(),
    line: analysis.line,
    lineDescribed: analysis.lineDescribed,
    windowSpec: 'kaiser:6',
    port: null,
    offsetM: 0,
    standards: null,
    ...fields,
  };
}

/** The state at the start, the first question running. */
export function startedState(
  size: { readonly columns: number; readonly rows: number },
  request: AnalyseRequest | null = requestFor(makeAnalysis()),
): State {
  return initialState({
    ...size,
    request,
    units: 'm',
    cables: [MADE_CABLE, OTHER_CABLE],
    cautions: CAUTIONS,
  });
}

/** Plays events; wishes for a trace are answered at once, all other effects are collected. */
export function play(
  state: State,
  ...events: readonly Event[]
): { readonly state: State; readonly effects: readonly Effect[] } {
  const collected: Effect[] = [];
  const queue = [...events];
  while (queue.length > 0) {
    const [next, effects] = update(state, queue.shift()!);
    state = next;
    for (const effect of effects) {
      if (effect.type === 'trace')
        queue.unshift({ type: 'traced', id: effect.id, trace: traceWindow(effect.analysis, effect.view) });
      else collected.push(effect);
    }
  }
  return { state, effects: collected };
}

/** The state with the answer to its question on the screen. */
export function readyState(
  size: { readonly columns: number; readonly rows: number },
  analysis: Analysis = makeAnalysis(),
): State {
  const started = startedState(size, requestFor(analysis));
  return play(started, { type: 'solved', id: started.lastId, outcome: succeed(analysis) }).state;
}

/** Presses keys by their strokes. @throws Error When a stroke means nothing. */
export function press(
  state: State,
  ...strokes: readonly string[]
): { readonly state: State; readonly effects: readonly Effect[] } {
  const collected: Effect[] = [];
  for (const stroke of strokes) {
    const event = eventFor(state, stroke);
    if (!event) throw new Error(`the stroke "${stroke}" means nothing here`);
    const { state: next, effects } = play(state, event);
    state = next;
    collected.push(...effects);
  }
  return { state, effects: collected };
}
