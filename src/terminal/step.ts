/** What an event leads to. */
import type { Effect } from './effects.ts';
import type { State } from './state.ts';

/** The state after an event, and the effects it calls for. */
export type Step = readonly [State, readonly Effect[]];
