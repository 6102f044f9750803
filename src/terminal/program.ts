/** The store around `update`: takes events, keeps the state, has effects performed, and tells the view. */
import type { Effect } from './effects.ts';
import type { Event } from './events.ts';
import type { State } from './state.ts';
import type { Step } from './step.ts';

export type Program = {
  readonly dispatch: (event: Event) => void;
  /** Calls back after changes; several changes in one turn are one call. Gives back how to stop. */
  readonly subscribe: (listener: () => void) => () => void;
  readonly snapshot: () => State;
};

/**
 * Builds the store.
 *
 * @param parts.perform Does an effect; its answers come back through `dispatch`.
 * @param parts.defer Runs a job after what is now at hand, for example `setImmediate`: keys that arrive together
 *   are drawn once.
 */
export function createProgram(parts: {
  readonly initial: State;
  readonly update: (state: State, event: Event) => Step;
  readonly perform: (effect: Effect, dispatch: (event: Event) => void) => void;
  readonly defer: (job: () => void) => void;
}): Program {
  let state = parts.initial;
  let telling = false;
  const listeners = new Set<() => void>();

  const dispatch = (event: Event): void => {
    const [next, effects] = parts.update(state, event);
    const changed = next !== state;
    state = next;
    for (const effect of effects) parts.perform(effect, dispatch);
    if (changed && !telling) {
      telling = true;
      parts.defer(() => {
        telling = false;
        for (const listener of listeners) listener();
      });
    }
  };

  return {
    dispatch,
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    snapshot: () => state,
  };
}
