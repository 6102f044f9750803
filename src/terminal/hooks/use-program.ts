/** The program's state for React. */
import { useSyncExternalStore } from 'react';
import type { Program } from '../program.ts';
import type { State } from '../state.ts';

/** The present state; the component draws again when it changes. */
export function useProgram(program: Program): State {
  return useSyncExternalStore(program.subscribe, program.snapshot);
}
