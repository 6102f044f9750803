/** Which view the state calls for. */
import { type Run, run } from '../../plot/run.ts';
import type { State } from '../state.ts';

/** The rows of the screen. */
export function screenRows(state: State): readonly (readonly Run[])[] {
  return [[run(`feedsonde ${state.solve.phase}`)]];
}
